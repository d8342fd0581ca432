"""Whether a piece stands: the load that tips it at each edge and corner of its seat, as a static sum.

A guide and no test: a rigid piece on a level floor that grips, loads that do not move. Owns the support polygon, the
sums and the load case as published. Imports `wood` and `quantities`; shapely when the published case is
summed. Floor frame in plan (x right, y to the back), mm; forces in newtons, moments in newton metres.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from functools import lru_cache
from typing import Any, NamedTuple

from jigs.quantities import Units, format_length
from jigs.wood import frustum_centroid, frustum_mm3, slab_mm3, weight_kg

Spot = tuple[float, float]

# Standard acceleration of free fall (3rd CGPM, 1901).
GRAVITY_M_S2 = 9.80665
# A point this near to an edge of the support polygon is on it; points of an outline as far out as each other are so
# within it.
ON_EDGE_MM = 1e-6
# Corners of the polygon that stands in for a foot's edge: it falls short of the true one by 0.5 % of its half-axis.
FOOT_CORNERS = 32

# EN 1022, forward overturning: 600 N down, 60 mm from the seat's edge at the worst point, with 20 N outward at the
# height of the seat. Summed here for every direction.
PUBLISHED_DOWN_N, PUBLISHED_OUTWARD_N, PUBLISHED_FROM_EDGE_MM = 600.0, 20.0, 60.0
GUIDE = "A static sum on the loads of EN 1022, as a guide: no test and no certificate."

# Where loads are set, with the direction in which the outline is followed to its outermost point.
_DIAGONAL = math.sqrt(0.5)
PLACES: tuple[tuple[str, Spot], ...] = (
    ("front", (0.0, -1.0)),
    ("front right", (_DIAGONAL, -_DIAGONAL)),
    ("right", (1.0, 0.0)),
    ("back right", (_DIAGONAL, _DIAGONAL)),
    ("back", (0.0, 1.0)),
    ("back left", (-_DIAGONAL, _DIAGONAL)),
    ("left", (-1.0, 0.0)),
    ("front left", (-_DIAGONAL, -_DIAGONAL)),
)


class Part(NamedTuple):
    """Something that weighs: its mass in kg and where its centre of gravity is in plan."""

    mass_kg: float
    centre_mm: Spot


def slab_part(area_mm2: float, thickness_mm: float, density: float, centroid_mm: Spot) -> Part:
    """A flat seat; `density` in kg/m³."""
    return Part(weight_kg(slab_mm3(area_mm2, thickness_mm), density), centroid_mm)


def bar_part(
    start_mm: tuple[float, float, float],
    end_mm: tuple[float, float, float],
    start_diameter_mm: float,
    end_diameter_mm: float,
    density: float,
) -> Part:
    """A round bar that tapers evenly: a leg, a post, a spindle, a stretcher; `density` in kg/m³."""
    volume = frustum_mm3(math.dist(start_mm, end_mm), start_diameter_mm, end_diameter_mm)
    f = frustum_centroid(start_diameter_mm, end_diameter_mm)
    centre = (start_mm[0] + f * (end_mm[0] - start_mm[0]), start_mm[1] + f * (end_mm[1] - start_mm[1]))
    return Part(weight_kg(volume, density), centre)


def balance(parts: Sequence[Part]) -> tuple[float, Spot]:
    """The weight in N and where its line of action meets the floor. Raises ValueError where nothing weighs."""
    mass = sum(part.mass_kg for part in parts)
    if mass <= 0.0:
        raise ValueError("the parts have no weight")
    x = sum(part.mass_kg * part.centre_mm[0] for part in parts) / mass
    y = sum(part.mass_kg * part.centre_mm[1] for part in parts) / mass
    return mass * GRAVITY_M_S2, (x, y)


def area_and_centroid(outline: Sequence[Spot]) -> tuple[float, Spot]:
    """Of a polygon that does not cross itself, its area in mm² whichever way it runs."""
    x0, y0 = outline[0]
    doubled, x, y = 0.0, 0.0, 0.0
    for a, b in _sides([(p[0] - x0, p[1] - y0) for p in outline]):
        piece = a[0] * b[1] - b[0] * a[1]
        doubled, x, y = doubled + piece, x + piece * (a[0] + b[0]), y + piece * (a[1] + b[1])
    return abs(doubled) / 2, (x0 + x / (3 * doubled), y0 + y / (3 * doubled))


def foot_contacts(centre_mm: Spot, along_mm: float, across_mm: float, bearing_deg: float) -> list[Spot]:
    """Points on the edge of a foot's ellipse: half-axis `along_mm` in the direction `bearing_deg` from +x."""
    c, s = math.cos(math.radians(bearing_deg)), math.sin(math.radians(bearing_deg))
    turns = [2 * math.pi * k / FOOT_CORNERS for k in range(FOOT_CORNERS)]
    local = [(along_mm * math.cos(turn), across_mm * math.sin(turn)) for turn in turns]
    return [(centre_mm[0] + u * c - v * s, centre_mm[1] + u * s + v * c) for u, v in local]


class Edge(NamedTuple):
    """A side of the support polygon: a point on it and the unit direction square to it, away from the piece."""

    through: Spot
    outward: Spot

    def inside_mm(self, point: Spot) -> float:
        """How far a point is from the line of the edge, positive on the piece's side."""
        dx, dy = point[0] - self.through[0], point[1] - self.through[1]
        return -(dx * self.outward[0] + dy * self.outward[1])


def support_edges(feet: Sequence[Spot]) -> tuple[Edge, ...]:
    """The sides of the convex hull of the contact points, counter-clockwise; none where they lie in one line.

    Points within ON_EDGE_MM of a line lie in it.
    """
    return _support_edges(tuple(feet))


@lru_cache(maxsize=8)
def _support_edges(feet: tuple[Spot, ...]) -> tuple[Edge, ...]:
    corners = _hull(feet)
    if len(corners) < 3:
        return ()
    edges = []
    for a, b in _sides(corners):
        length = math.dist(a, b)
        edges.append(Edge(a, ((b[1] - a[1]) / length, (a[0] - b[0]) / length)))
    widths = (max(map(edge.inside_mm, corners)) for edge in edges)
    return tuple(edges) if min(widths) > ON_EDGE_MM else ()


def _hull(points: Sequence[Spot]) -> list[Spot]:
    """Corners counter-clockwise (monotone chain)."""
    ordered = sorted(set(points))
    if len(ordered) < 3:
        return ordered
    return _half(ordered)[:-1] + _half(ordered[::-1])[:-1]


def _half(ordered: Sequence[Spot]) -> list[Spot]:
    chain: list[Spot] = []
    for p in ordered:
        # No tolerance here: of points nearly plumb above each other it would drop one that stands beyond the others.
        while len(chain) >= 2 and not _turns_left(chain[-2], chain[-1], p):
            chain.pop()
        chain.append(p)
    return chain


def _turns_left(a: Spot, b: Spot, c: Spot) -> bool:
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]) > 0.0


def _sides(ring: Sequence[Spot]) -> Iterator[tuple[Spot, Spot]]:
    """Each pair of neighbours round a ring."""
    return zip(ring, [*ring[1:], ring[0]], strict=True)


def does_not_stand(feet: Sequence[Spot], centre: Spot, units: Units = "mm") -> str | None:
    """Why a piece falls by itself, in a sentence, or None for one that stands."""
    edges = support_edges(feet)
    if not edges:
        few = "fewer than three feet touch the floor" if len(set(feet)) < 3 else "its feet stand in one line"
        return f"It does not stand: {few}."
    outside = -min(edge.inside_mm(centre) for edge in edges)
    if outside >= -ON_EDGE_MM:
        beyond = f"{format_length(max(outside, 0.0), units)} outside the lines that join its feet"
        return f"It does not stand: its centre of gravity is {beyond}."
    return None


def tipping(feet: Sequence[Spot], weight_n: float, centre: Spot, point: Spot) -> float:
    """The least vertical load in N that, at `point`, starts to lift the piece about an edge of its support polygon.

    `feet` are points of contact, `weight_n` acts at `centre`. Infinite where no load tips it, 0 for a piece that does
    not stand by itself. About an edge the weight holds by weight × its distance inside, a load tips by load × its
    distance outside.
    """
    if does_not_stand(feet, centre):
        return 0.0
    loads = (_tipping_about(edge, weight_n, centre, point) for edge in support_edges(feet))
    return min(loads)


def _tipping_about(edge: Edge, weight_n: float, centre: Spot, point: Spot) -> float:
    outside = -edge.inside_mm(point)
    return weight_n * edge.inside_mm(centre) / outside if outside > ON_EDGE_MM else math.inf


class PublishedCase(NamedTuple):
    """The load case as published at its worst point and over its worst edge.

    `margin_nm` is what the weight holds by less what the loads tip by, about that edge; positive, it stays down. The
    horizontal load is `toward`, square to the edge.
    """

    margin_nm: float
    point_mm: Spot
    toward: Spot

    @property
    def stays_down(self) -> bool:
        """Whether the sum says that no foot lifts; a guide and no test."""
        return self.margin_nm >= 0.0


def published_case(
    outline: Sequence[Spot], feet: Sequence[Spot], weight_n: float, centre: Spot, seat_height_mm: float
) -> PublishedCase:
    """EN 1022's loads, down at the worst of the points that far inside the outline and outward at the seat's height.

    `outline` is the seat's as a polygon in plan. Feet are taken not to slide. Raises ValueError for feet that enclose
    nothing.
    """
    edges = support_edges(feet)
    if not edges:
        raise ValueError("the feet enclose no area")
    loaded = _loaded(outline, PUBLISHED_FROM_EDGE_MM)
    cases = []
    for edge in edges:
        worst = min(loaded, key=edge.inside_mm)
        holds = weight_n * edge.inside_mm(centre) + PUBLISHED_DOWN_N * edge.inside_mm(worst)
        margin = (holds - PUBLISHED_OUTWARD_N * seat_height_mm) / 1000
        cases.append(PublishedCase(margin, worst, edge.outward))
    return min(cases, key=lambda case: case.margin_nm)


def _loaded(outline: Sequence[Spot], from_edge_mm: float) -> list[Spot]:
    """Where a load at least so far from the edge can stand furthest out; on a narrower seat where it is furthest in."""
    import shapely  # noqa: PLC0415 - only this case needs it

    seat = shapely.Polygon(outline)
    within = seat.buffer(-from_edge_mm)
    if within.is_empty:
        middle = shapely.maximum_inscribed_circle(seat).coords[0]
        return [(float(middle[0]), float(middle[1]))]
    return [(float(x), float(y)) for x, y in shapely.get_coordinates(within)]


class EdgeLoad(NamedTuple):
    """The load that tips the piece at one place of the seat; None where no load there can."""

    at: str
    point_mm: Spot
    load_n: float | None


class Stability(NamedTuple):
    """What the static sums say. `falls` says why a piece does not stand by itself; its loads are then 0."""

    falls: str | None
    loads: tuple[EdgeLoad, ...]
    published: PublishedCase | None

    def data(self) -> list[dict[str, Any]]:
        """The tipping loads as `angles --json` gives them."""
        return [{"at": load.at, "point_mm": list(load.point_mm), "load_n": load.load_n} for load in self.loads]


def stability(
    outline: Sequence[Spot],
    feet: Sequence[Spot],
    weight_n: float,
    centre: Spot,
    seat_height_mm: float,
    units: Units = "mm",
) -> Stability:
    """The tipping loads at the outline's outermost point on each side and in each diagonal, and the published case."""
    loads = []
    for at, direction in PLACES:
        candidates = [(tipping(feet, weight_n, centre, p), p) for p in _outermost(outline, direction)]
        load, point = min(candidates, key=lambda pair: pair[0])
        loads.append(EdgeLoad(at, point, load if math.isfinite(load) else None))
    case = published_case(outline, feet, weight_n, centre, seat_height_mm) if support_edges(feet) else None
    return Stability(does_not_stand(feet, centre, units), tuple(loads), case)


def _outermost(outline: Sequence[Spot], direction: Spot) -> list[Spot]:
    """The points furthest in a direction: the middles of sides square to it, else corners."""

    def reach(p: Spot) -> float:
        return p[0] * direction[0] + p[1] * direction[1]

    furthest = max(map(reach, outline)) - ON_EDGE_MM
    flat = [(a, b) for a, b in _sides(outline) if a != b and min(reach(a), reach(b)) >= furthest]
    if flat:
        longest = max(math.dist(a, b) for a, b in flat) - ON_EDGE_MM
        return [((a[0] + b[0]) / 2, (a[1] + b[1]) / 2) for a, b in flat if math.dist(a, b) >= longest]
    return [p for p in outline if reach(p) >= furthest]
