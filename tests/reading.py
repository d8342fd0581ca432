"""Reads a PDF back without the writer's help: what its pages paint by pypdf, through every form; pixels by PDFium."""

from __future__ import annotations

import io
import math
from dataclasses import dataclass, field
from typing import Any

import numpy as np
import pypdf
import pypdfium2 as pdfium
from numpy.typing import NDArray
from pypdf.generic import ContentStream

# ISO 32000-1 8.3.2.3 (subclause from memory): a unit of user space is 1/72 in; 1 in is 25.4 mm exactly.
MM = 25.4 / 72

Matrix = tuple[float, float, float, float, float, float]
XY = tuple[float, float]


@dataclass
class SeenPath:
    """A path as a viewer would paint it: points in mm on the page, with what it is painted with."""

    paint: str  # S, s, f
    points: list[XY] = field(default_factory=list)
    curves: list[tuple[XY, XY, XY, XY]] = field(default_factory=list)
    width_mm: float = 0.0
    grey: float = 0.0
    dashes_mm: tuple[float, ...] = ()
    form: str = ""


@dataclass
class SeenText:
    """A line of lettering as a viewer would set it: its start in mm on the page, the em, and where it reads to."""

    start: XY
    em_mm: float
    along: XY
    font: str


@dataclass
class SeenPage:
    paths: list[SeenPath] = field(default_factory=list)
    texts: list[SeenText] = field(default_factory=list)
    forms: list[str] = field(default_factory=list)


def _times(first: Matrix, then: Matrix) -> Matrix:
    a, b, c, d, e, f = first
    p, q, r, s, t, u = then
    return (a * p + b * r, a * q + b * s, c * p + d * r, c * q + d * s, e * p + f * r + t, e * q + f * s + u)


class _Viewer:
    """Walks a page's operators, forms included, and keeps what it would paint."""

    def __init__(self, reader: pypdf.PdfReader, seen: SeenPage) -> None:
        self.reader, self.seen = reader, seen

    def walk(self, stream: Any, resources: Any, matrix: Matrix, form: str = "") -> None:  # noqa: PLR0912 - one branch an operator
        state: dict[str, Any] = {"m": matrix, "w": 1.0, "G": 0.0, "g": 0.0, "d": (), "font": "", "size": 0.0}
        stack: list[dict[str, Any]] = []
        path, at, tm = SeenPath("", form=form), (0.0, 0.0), (1.0, 0.0, 0.0, 1.0, 0.0, 0.0)
        for operands, operator in ContentStream(stream, self.reader).operations:
            name = operator.decode()
            numbers = [float(o) for o in operands if isinstance(o, (int, float))]
            match name:
                case "q":
                    stack.append(dict(state))
                case "Q":
                    state = stack.pop()
                case "cm":
                    state["m"] = _times(tuple(numbers), state["m"])  # type: ignore[arg-type]
                case "w" | "G" | "g":
                    state[name] = numbers[0]
                case "d":
                    state["d"] = tuple(float(n) for n in operands[0])
                case "m" | "l":
                    at = self.point(numbers, state["m"])
                    path.points.append(at)
                case "c":
                    control = [self.point(numbers[k : k + 2], state["m"]) for k in (0, 2, 4)]
                    path.curves.append((at, *control))  # type: ignore[arg-type]
                    at = control[2]
                    path.points.append(at)
                case "S" | "s" | "f":
                    path.paint, path.width_mm = name, state["w"] / 72 * 25.4
                    path.grey = state["g" if name == "f" else "G"]
                    path.dashes_mm = tuple(n / 72 * 25.4 for n in state["d"])
                    self.seen.paths.append(path)
                    path = SeenPath("", form=form)
                case "n":
                    path = SeenPath("", form=form)
                case "Tm":
                    tm = tuple(numbers)  # type: ignore[assignment]
                case "Tf":
                    state["font"], state["size"] = str(operands[0]), numbers[0]
                case "Tj":
                    self.lettering(_times(tm, state["m"]), state)
                case "Do":
                    self.show(str(operands[0]), resources, state["m"])
                case "BT" | "ET" | "re" | "W" | "j" | "h":
                    pass
                case _:
                    raise AssertionError(f"an operator that this reader does not know: {name}")

    def point(self, numbers: list[float], m: Matrix) -> XY:
        x, y = numbers
        return ((m[0] * x + m[2] * y + m[4]) / 72 * 25.4, (m[1] * x + m[3] * y + m[5]) / 72 * 25.4)

    def lettering(self, m: Matrix, state: dict[str, Any]) -> None:
        start = (m[4] / 72 * 25.4, m[5] / 72 * 25.4)
        self.seen.texts.append(SeenText(start, state["size"] / 72 * 25.4, (m[0], m[1]), state["font"]))

    def show(self, name: str, resources: Any, matrix: Matrix) -> None:
        form = resources["/XObject"][name].get_object()
        self.seen.forms.append(name)
        own = tuple(float(n) for n in form.get("/Matrix", (1, 0, 0, 1, 0, 0)))
        self.walk(form, form["/Resources"], _times(own, matrix), name)  # type: ignore[arg-type]


def read_pages(data: bytes) -> list[SeenPage]:
    """What every page of a PDF shows."""
    reader = pypdf.PdfReader(io.BytesIO(data), strict=True)
    pages = []
    for page in reader.pages:
        seen = SeenPage()
        _Viewer(reader, seen).walk(page["/Contents"].get_object(), page["/Resources"], (1, 0, 0, 1, 0, 0))
        pages.append(seen)
    return pages


def circles(page: SeenPage) -> NDArray[np.float64]:
    """Centres of a page's closed curved paths, shape (n, 2).

    A circle or ellipse is drawn in even steps round its centre, which is then the mean of its on-curve points.
    """
    curved = [path for path in page.paths if len(path.curves) >= 4]
    round_ones = [path for path in curved if math.dist(path.points[0], path.points[-1]) < 0.01]
    return np.array([np.mean(path.points[:-1], axis=0) for path in round_ones] or [(-1e9, -1e9)])


def pixels(data: bytes, page: int, dpi: float) -> NDArray[Any]:
    """A page as grey pixels, row 0 at the top."""
    image, _, _ = pixels_near(data, page, dpi, None)
    return image


def pixels_near(
    data: bytes, page: int, dpi: float, crop_mm: tuple[float, float, float, float] | None
) -> tuple[NDArray[Any], XY, XY]:
    """A part of a page as grey pixels, row 0 at the top; the place of its lower left corner; and a pixel's size; mm.

    PDFium draws a page on whole pixels, so a pixel is that of the page over its count, not of the dpi.
    """
    document = pdfium.PdfDocument(data)
    try:
        sheet = document[page]
        width, height = sheet.get_size()
        scale = dpi / 72
        count = (math.ceil(width * scale), math.ceil(height * scale))
        pixel = (width * MM / count[0], height * MM / count[1])
        x0, y0, x1, y1 = crop_mm or (0.0, 0.0, width * MM, height * MM)
        edges = [math.floor(x0 / pixel[0]), math.floor(y0 / pixel[1])]
        edges += [count[0] - math.ceil(x1 / pixel[0] - 1e-6), count[1] - math.ceil(y1 / pixel[1] - 1e-6)]
        # The renderer rounds a crop up to whole pixels; half a pixel less is exactly the whole number meant.
        crop = tuple(max(0.0, edge - 0.5) / scale for edge in edges)
        bitmap = sheet.render(scale=scale, crop=crop, grayscale=True)
        image = np.array(bitmap.to_numpy()).squeeze().copy()
        bitmap.close()
        sheet.close()
        return image, (edges[0] * pixel[0], edges[1] * pixel[1]), pixel
    finally:
        document.close()


def distance_between_ends_mm(data: bytes, page: int, start: XY, end: XY, dpi: float) -> float:
    """How far apart the lines are that stand square to an upright or level bar at its two ends, in a page's pixels.

    They stand on one hand of the bar: a ruler's end ticks, a square's neighbouring sides.
    """
    axis = 0 if abs(end[0] - start[0]) > abs(end[1] - start[1]) else 1
    for hand in (1.6, -1.6):
        places = [_tick_mm(data, page, point, axis, hand, dpi) for point in (start, end)]
        if places[0] is not None and places[1] is not None:
            return abs(places[1] - places[0])
    raise AssertionError(f"no ticks at the ends of the bar from {start} to {end}")


def _tick_mm(data: bytes, page: int, point: XY, axis: int, hand: float, dpi: float) -> float | None:
    reach, band = 0.7, 0.12
    centre, half = list(point), [band, band]
    centre[1 - axis] += hand
    half[axis] = reach
    crop = (centre[0] - half[0], centre[1] - half[1], centre[0] + half[0], centre[1] + half[1])
    image, origin, pixel = pixels_near(data, page, dpi, crop)
    dark = 255.0 - image.mean(axis=axis)
    if axis == 1:
        dark = dark[::-1]
    if dark.max() < 60:
        return None
    weights = np.where(dark > dark.max() / 3, dark, 0.0)
    if np.count_nonzero(weights) * pixel[axis] > reach:
        return None  # a dash that lies along the bar, no tick across it
    return origin[axis] + float((weights * (np.arange(len(dark)) + 0.5)).sum() / weights.sum()) * pixel[axis]
