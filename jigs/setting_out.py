"""The setting-out sheet: views, settings of every part, stretchers, what to cut, the order of work, cautions and
warnings, as blocks.

Each block is at most `views.WIDTH_MM` wide; the paper stacks them. Imports `assembly`, `checks`, `views`, `blocks`,
`parts_lists`, wording of other sheets and layout's ground.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from jigs.advice import SAFETY, order_of_work
from jigs.assembly import Assembly, Face
from jigs.blocks import BODY_MM, WIDTH_MM, Column, listed, tables
from jigs.cards import cards
from jigs.checks import cautions
from jigs.legs import Kind, Leg
from jigs.parts_lists import Named, standing_blocks, stretcher_blocks, wood_blocks
from jigs.quantities import format_angle
from jigs.strips import strips
from jigs.views import HEIGHT_MM, views
from layout.drawing import Drawing, gather
from layout.geometry import Affine
from layout.operations import bounds, transform
from layout.piece import Piece
from layout.shapes import paragraph


def setting_out_pieces(assembly: Assembly) -> tuple[Piece, ...]:
    """The blocks in order: title and views, settings, stretchers, what to cut, warnings, how it stands, order of work,
    cautions.
    """
    warned = [f"{c.text} [{c.code}]" for c in cautions(assembly)]
    drawn: list[Named] = [
        ("views", _views(assembly)),
        *_settings(assembly),
        *stretcher_blocks(assembly),
        *_lists("what to cut", "What to cut", _paper(assembly)),
        *wood_blocks(assembly),
        *_lists("warnings", "Look at this before you cut wood", warned),
        *standing_blocks(assembly),
        *_lists("order of work", "Order of work", order_of_work(assembly), numbered=True),
        *_lists("cautions", "Cautions", SAFETY),
    ]
    notice = "work from the full-size sheets, never from this drawing"
    return tuple(Piece(name, "setting-out", "Setting-out sheet", block, "flow", notice) for name, block in drawn)


def _lists(name: str, title: str, items: Sequence[str], numbered: bool = False) -> Iterator[Named]:
    for k, block in enumerate(listed(title, items, numbered), 1):
        yield f"{name} {k}", block


def _views(assembly: Assembly) -> Drawing:
    drawing, divisor = views(assembly)
    box = bounds(drawing)
    placed = transform(drawing, Affine.move(-box.x0, -HEIGHT_MM - box.y0 + max(0.0, HEIGHT_MM - box.height)))
    head, y = paragraph((0.0, 0.0), assembly.furniture.name, 5.0, WIDTH_MM, bold=True)
    scale = "full size" if divisor == 1 else f"1:{divisor}"
    facts, y = paragraph((0.0, y), f"{_facts(assembly)} · views at {scale}, not to measure from", BODY_MM, WIDTH_MM)
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


_COLUMNS = (
    Column("lean", "(resultant)", 19.0),
    Column("sightline from", "fore-and-aft", 24.0),
    Column("the same", "from across", 20.0),
    Column("bevel", "", 13.0),
    Column("splay, rake", "at the face", 25.0),
    Column("splay, rake", "from plumb", 25.0),
)
# Of each kind of part: what the table is called, what its rows are, what its last column is.
_KINDS: dict[Kind, tuple[str, str, tuple[str, str]]] = {
    "leg": ("Settings", "Leg", ("underside", "to floor")),
    "post": ("Posts", "Post", ("top face to", "upper end")),
    "spindle": ("Spindles", "Spindle", ("top face to", "upper end")),
}
_LENGTH_MM = 22.0
_NAME_MM = WIDTH_MM - _LENGTH_MM - sum(column.width_mm for column in _COLUMNS)


def _settings(assembly: Assembly) -> Iterator[Named]:
    """A table for each kind of part and face that it is bored from."""
    for kind in _KINDS:
        parts = [part for part in assembly.bored if part.kind == kind]
        found = (block for face in assembly.drilled_faces for block in _bored(assembly, kind, face, parts))
        for k, block in enumerate(found, 1):
            yield f"{'settings' if kind == 'leg' else f'{kind}s'} {k}", block


def _bored(assembly: Assembly, kind: Kind, face: Face, parts: Sequence[Leg]) -> Iterator[Drawing]:
    rows = [_leg_cells(assembly, leg) for leg in parts if leg.drilled == face]
    title, part, length = _KINDS[kind]
    columns = (Column("", part, _NAME_MM, words=True), *_COLUMNS, Column(*length, _LENGTH_MM))
    yield from tables(f"{title}: set the bit by these, on the {face}", columns, rows)


def _leg_cells(assembly: Assembly, leg: Leg) -> list[str]:
    drill, floor = leg.drill, leg.floor
    sight = [format_angle(drill.sightline_deg), format_angle(drill.complement_deg)] if drill.leans else ["–", "–"]
    return [
        leg.name,
        format_angle(drill.resultant_deg),
        *sight,
        format_angle(drill.bevel_deg),
        f"{format_angle(drill.splay_deg)}, {format_angle(drill.rake_deg)}",
        f"{format_angle(floor.splay_deg)}, {format_angle(floor.rake_deg)}",
        assembly.length(leg.axis_mm),
    ]


def _paper(assembly: Assembly) -> list[str]:
    standing = len(cards(assembly))
    items = [
        f"{standing} angle cards and the bevel cards, on card (160 to 250 g/m²): cut round, score and fold the lines "
        "of dashes and double dots"
    ]
    if strips(assembly):
        count = len(strips(assembly))
        several = "s" if count > 1 else ""
        items.append(f"{count} sightline strip{several}: cut round, tape the sections where there are several")
    items.append("The template's pages: cut and tape as the tile map shows, then measure the proof lengths")
    return items
