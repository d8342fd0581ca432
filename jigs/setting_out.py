"""The setting-out sheet: views, settings of every leg, what to cut, the order of work, cautions and warnings, as
blocks.

Each block is at most `views.WIDTH_MM` wide; the paper stacks them. Imports `assembly`, `checks`, `views`, wording of
other sheets and layout's ground.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

from jigs.advice import SAFETY, order_of_work
from jigs.assembly import Assembly
from jigs.cards import cards
from jigs.checks import cautions
from jigs.legs import Leg
from jigs.quantities import format_angle
from jigs.strips import strips
from jigs.views import HEIGHT_MM, WIDTH_MM, views
from layout.drawing import Drawing, Primitive, Role, Text, gather
from layout.geometry import Affine
from layout.lettering import shortened
from layout.operations import bounds, transform
from layout.piece import Piece
from layout.shapes import LINE_PITCH, line, paragraph

_HEAD, _BODY = 3.5, 2.5
# Rows of the table of settings in one block, so that a block never outgrows a page.
_ROWS = 24
# Where paragraphs of numbered work begin, behind their number.
_INDENT_MM = 7.0


def setting_out_pieces(assembly: Assembly) -> tuple[Piece, ...]:
    """The blocks in order: title and views, settings, what to cut, order of work, cautions, warnings."""
    drawn: list[tuple[str, Drawing]] = [("views", _views(assembly))]
    drawn += [(f"settings {k}", block) for k, block in enumerate(_settings(assembly), 1)]
    drawn += [("what to cut", _listed("What to cut", _cut_list(assembly)))]
    warned = [f"{c.text} [{c.code}]" for c in cautions(assembly)]
    drawn += [
        (f"warnings {k}", block) for k, block in enumerate(_in_parts("Look at this before you cut wood", warned), 1)
    ]
    drawn += [("order of work", _listed("Order of work", order_of_work(assembly), numbered=True))]
    drawn += [("cautions", _listed("Cautions", SAFETY))]
    notice = "work from the full-size sheets, never from this drawing"
    return tuple(Piece(name, "setting-out", "Setting-out sheet", block, "flow", notice) for name, block in drawn)


def _views(assembly: Assembly) -> Drawing:
    drawing, divisor = views(assembly)
    box = bounds(drawing)
    placed = transform(drawing, Affine.move(-box.x0, -HEIGHT_MM - box.y0 + max(0.0, HEIGHT_MM - box.height)))
    head, y = paragraph((0.0, 0.0), assembly.furniture.name, 5.0, WIDTH_MM, bold=True)
    scale = "full size" if divisor == 1 else f"1:{divisor}"
    facts, y = paragraph((0.0, y), f"{_facts(assembly)} · views at {scale}, not to measure from", _BODY, WIDTH_MM)
    top = bounds(placed).y1
    return gather([head, facts, transform(placed, Affine.move(0.0, y - 4.0 - top))])


def _facts(assembly: Assembly) -> str:
    seat = assembly.furniture.seat
    box = assembly.blank.bounds
    facts = [
        f"{seat.shape} seat {assembly.length(box.width)} × {assembly.length(box.height)}",
        f"{assembly.length(seat.thickness)} thick",
        f"{assembly.length(seat.height)} high at the front edge",
    ]
    if seat.pitch:
        facts.append(f"pitch {format_angle(abs(seat.pitch))}, {'back' if seat.pitch > 0 else 'front'} lower")
    return ", ".join([*facts, f"bored from the {assembly.drilled}"])


Column = tuple[str, str, float]
_COLUMNS: tuple[Column, ...] = (
    ("lean", "(resultant)", 19.0),
    ("sightline from", "fore-and-aft", 24.0),
    ("the same", "from across", 20.0),
    ("bevel", "", 15.0),
    ("splay, rake", "at the face", 24.0),
    ("splay, rake", "from plumb", 24.0),
    ("underside", "to floor", 20.0),
)
_NAME_MM = WIDTH_MM - sum(width for _, _, width in _COLUMNS)


def _settings(assembly: Assembly) -> Iterator[Drawing]:
    for start in range(0, len(assembly.legs), _ROWS):
        yield _settings_block(assembly, assembly.legs[start : start + _ROWS])


def _settings_block(assembly: Assembly, legs: Sequence[Leg]) -> Drawing:
    y = -_HEAD - 1.0
    parts: list[Drawing | Primitive] = [
        Text((0.0, y), f"Settings: set the bit by these, on the {assembly.drilled}", _HEAD, bold=True)
    ]
    heads = ["", *(first for first, _, _ in _COLUMNS)], ["Leg", *(second for _, second, _ in _COLUMNS)]
    for cells in heads:
        y -= _BODY * LINE_PITCH
        parts += _cells(cells, y, bold=False)
    y -= 1.6
    parts.append(line((0.0, y), (WIDTH_MM, y), Role.SET_OUT))
    for leg in legs:
        y -= 6.0
        parts += _cells(_leg_cells(assembly, leg), y, bold=True)
        parts.append(line((0.0, y - 1.8), (WIDTH_MM, y - 1.8), Role.FURNITURE))
    return gather(parts)


def _cells(cells: Sequence[str], y: float, bold: bool) -> Iterator[Text]:
    x = _NAME_MM
    yield Text((0.0, y), shortened(cells[0], _NAME_MM - 3.0, _BODY, bold), _BODY, bold=bold)
    for words, (_, _, width) in zip(cells[1:], _COLUMNS, strict=True):
        x += width
        yield Text((x - 1.0, y), words, _BODY, align="right", bold=bold)


def _leg_cells(assembly: Assembly, leg: Leg) -> list[str]:
    drill, floor = leg.drill, leg.floor
    sight = [format_angle(drill.sightline_deg), format_angle(90.0 - drill.sightline_deg)] if drill.leans else ["–", "–"]
    return [
        leg.name,
        format_angle(drill.resultant_deg),
        *sight,
        format_angle(drill.bevel_deg),
        f"{format_angle(drill.splay_deg)}, {format_angle(drill.rake_deg)}",
        f"{format_angle(floor.splay_deg)}, {format_angle(floor.rake_deg)}",
        assembly.length(leg.axis_mm),
    ]


def _listed(title: str, items: Sequence[str], numbered: bool = False) -> Drawing:
    head, y = paragraph((0.0, 0.0), title, _HEAD, WIDTH_MM, bold=True)
    parts: list[Drawing | Primitive] = [head]
    for number, words in enumerate(items, 1):
        mark = f"{number}." if numbered else "–"
        parts.append(Text((0.0, y - _BODY), mark, _BODY, bold=numbered))
        block, y = paragraph((_INDENT_MM, y), words, _BODY, WIDTH_MM - _INDENT_MM)
        parts.append(block)
    return gather(parts)


def _in_parts(title: str, items: Sequence[str]) -> Iterator[Drawing]:
    for start in range(0, len(items), _ROWS // 2):
        yield _listed(title, items[start : start + _ROWS // 2])


def _cut_list(assembly: Assembly) -> list[str]:
    standing = len(cards(assembly))
    items = [
        f"{standing} angle cards and the bevel cards, on card (160 to 250 g/m²): cut round, score and fold the lines "
        "of dashes and double dots"
    ]
    if strips(assembly):
        items.append(f"{len(strips(assembly))} sightline strips: cut round, tape the sections where there are several")
    items.append("The template's pages: cut and tape as the tile map shows, then measure the proof lengths")
    for sizes, names in _alike({leg.name: _leg_sizes(assembly, leg) for leg in assembly.legs}):
        items.append(f"{names}: {sizes}")
    return items


def _alike(sizes: Mapping[str, str]) -> Iterator[tuple[str, str]]:
    """Each different wording once, with everything that it is said of."""
    for words in dict.fromkeys(sizes.values()):
        yield words, ", ".join(name for name, said in sizes.items() if said == words)


def _leg_sizes(assembly: Assembly, leg: Leg) -> str:
    below = f"{assembly.length(leg.axis_mm)} from the underside to the floor along its middle"
    return f"{below}, {assembly.length(leg.in_seat_mm)} in the seat, {_round(assembly, leg)}"


def _round(assembly: Assembly, leg: Leg) -> str:
    seat, foot = assembly.length(leg.diameter_mm), assembly.length(leg.foot_diameter_mm)
    return f"Ø {seat}" if seat == foot else f"Ø {seat} at the seat, Ø {foot} at the foot"
