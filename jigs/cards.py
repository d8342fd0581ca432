"""Angle cards: nets that are cut, folded and stood on the sightline so that one edge leans with the bit; and bevel
cards.

Owns the nets as geometry, apart from how they are drawn. Imports `assembly`, `template`'s wording and layout's ground.

A net in its own mm: the wall's foot is the fold y = 0, from x = 0 to x = FOOT_MM; x = 0 is the fold between wall and
buttress; the tab hangs below y = 0. Both folds go back by 90°, the printed side out: then wall and buttress stand
square to the face and to each other on the straight line that was y = 0, and the tab lies on the face behind the wall.
The leaning edge runs from (FOOT_MM, 0) up and, for a positive lean, to the right.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from typing import NamedTuple

from jigs.assembly import Assembly, Face
from jigs.legs import Leg
from jigs.names import stems
from jigs.quantities import format_angle
from layout.drawing import Drawing, Role, Text, gather
from layout.geometry import Point, along
from layout.lettering import shortened, text_width_mm, wrap
from layout.piece import Piece
from layout.shapes import arrow, arrow_head, line, paragraph, polyline

# Angles nearer than this share a card; a foot 500 mm away moves by less than 0.1 mm.
SAME_ANGLE_DEG = 0.01
# Spindles are whittled to fit and flex: within this spread they share a card, which says so (practice).
SPINDLE_ANGLE_DEG = 0.5
# The wall's foot and height, the buttress's depth and the tab's: a card that stands, and small enough for two on a
# page.
FOOT_MM, HEIGHT_MM, BUTTRESS_MM, TAB_MM = 56.0, 100.0, 40.0, 15.0
# The least that is left of the wall's top edge where it leans back over its own foot: room for the words.
_TOP_MM = 48.0
# A bevel card's base line and blade line.
BASE_MM, BLADE_MM = 110.0, 96.0


class Net(NamedTuple):
    """A card as an object: its panels and folds, flat, in mm (axes in the module's docstring).

    `lean_deg` is signed: positive where the edge leans to the right as printed.
    """

    lean_deg: float
    wall: tuple[Point, ...]
    buttress: tuple[Point, ...]
    tab: tuple[Point, ...]
    leaning_edge: tuple[Point, Point]
    wall_tab_fold: tuple[Point, Point]
    wall_buttress_fold: tuple[Point, Point]


def net(lean_deg: float) -> Net:
    """The net of a card whose edge leans by `lean_deg` from square, between about -60 and 60.

    A wall that leans back is made longer at the foot so that its top edge keeps some width.
    """
    run = HEIGHT_MM * math.tan(math.radians(lean_deg))
    foot = foot_mm(lean_deg)
    base, top = (foot, 0.0), (foot + run, HEIGHT_MM)
    return Net(
        lean_deg=lean_deg,
        wall=((0.0, 0.0), base, top, (0.0, HEIGHT_MM)),
        buttress=((0.0, 0.0), (0.0, HEIGHT_MM), (-BUTTRESS_MM, 0.0)),
        tab=((0.0, 0.0), (4.0, -TAB_MM), (foot - 4.0, -TAB_MM), (foot, 0.0)),
        leaning_edge=(base, top),
        wall_tab_fold=((0.0, 0.0), base),
        wall_buttress_fold=((0.0, 0.0), (0.0, HEIGHT_MM)),
    )


def foot_mm(lean_deg: float) -> float:
    """How long a card's wall is at its foot, which is what it needs of the seat."""
    return max(FOOT_MM, _TOP_MM - HEIGHT_MM * math.tan(math.radians(lean_deg)))


class Card(NamedTuple):
    """One card to be made: which angle, for which legs, on which line it stands, and how it leans.

    A card always stands with its foot arrow to the right as printed, on the inner side of the mortise, where there is
    seat to stand on. `lean_deg` is the bit's: from the underside the bit leans with the arrow (positive for a leg that
    leans outward), from the top against it. The card of a part that stands square has no arrow: `toward` is "".
    """

    kind: str
    lean_deg: float
    legs: tuple[str, ...]
    line: str
    toward: str
    face: Face
    within_deg: float = 0.0


# A card's kind: on which line it stands, what lies to the right as printed (a post's upper end for a leg's foot).
_KINDS = (
    ("resultant", "the sightline", {"leg": "FOOT", "post": "TOP END", "spindle": "TOP END"}),
    ("splay", "the across line", dict.fromkeys(("leg", "post", "spindle"), "OWN SIDE")),
    ("rake", "the fore-and-aft line", dict.fromkeys(("leg", "post", "spindle"), "OWN END")),
)


_SQUARE_LINES = "the across line, then on the fore-and-aft line"


def cards(assembly: Assembly) -> tuple[Card, ...]:
    """One card for each different resultant, splay and rake at the face, legs first, then posts and spindles.

    Parts that stand square to the face share one card that is square.

    Spindles whose angles lie within SPINDLE_ANGLE_DEG of each other share a card at the middle of theirs.
    """
    made: list[Card] = []
    for parts, within in ((assembly.legs, SAME_ANGLE_DEG), (assembly.posts, SAME_ANGLE_DEG)):
        made += _cards_for(parts, within)
    return (*made, *_cards_for(assembly.spindles, SPINDLE_ANGLE_DEG))


def _cards_for(parts: tuple[Leg, ...], within_deg: float) -> Iterator[Card]:
    for kind, on, toward in _KINDS:
        # A part on the centre line has no side to splay to.
        sided = [leg for leg in parts if leg.drill.leans and (leg.side or kind != "splay")]
        for angle, half, legs in _shared(sided, [_angle(leg, kind) for leg in sided], within_deg):
            shank = 1.0 if legs[0].leans_with_bit else -1.0
            names = tuple(leg.name for leg in legs)
            yield Card(kind, shank * angle, names, on, toward[legs[0].kind], legs[0].drilled, half)
    square = [leg for leg in parts if not leg.drill.leans]
    if square:
        yield Card("resultant", 0.0, tuple(leg.name for leg in square), _SQUARE_LINES, "", square[0].drilled)


def _angle(leg: Leg, kind: str) -> float:
    drill = leg.drill
    return {"resultant": drill.resultant_deg, "splay": drill.splay_deg, "rake": drill.rake_deg}[kind]


Shared = tuple[float, float, list[Leg]]


def _shared(legs: Sequence[Leg], angles: list[float], within_deg: float) -> list[Shared]:
    """Legs by angle, those that lie within `within_deg` of each other together: the middle, half the spread, the legs.

    In the order of each group's first leg; a group of one has its angle to the last bit.
    """
    groups: list[list[int]] = []
    for k in sorted(range(len(legs)), key=lambda k: angles[k]):
        if groups and angles[k] - angles[groups[-1][0]] <= within_deg:
            groups[-1].append(k)
        else:
            groups.append([k])
    found: list[Shared] = []
    for group in sorted(groups, key=min):
        low, high = angles[group[0]], angles[group[-1]]
        found.append((low if low == high else (low + high) / 2, (high - low) / 2, [legs[k] for k in sorted(group)]))
    return found


def card_pieces(assembly: Assembly) -> tuple[Piece, ...]:
    """Every card of the furniture, standing ones first, then the angles to set a sliding bevel to."""
    made = cards(assembly)
    standing = [_card_piece(assembly, number, card, _number(card, made)) for number, card in enumerate(made, 1)]
    groups = [
        group
        for parts, within in (
            ((*assembly.legs, *assembly.posts), SAME_ANGLE_DEG),
            (assembly.spindles, SPINDLE_ANGLE_DEG),
        )
        for group in _shared(parts, [leg.drill.resultant_deg for leg in parts], within)
    ]
    read = [format_angle(90.0 - angle) for angle, _, _ in groups]
    finer = [2 if read.count(words) > 1 else 1 for words in read]
    flat = [
        _bevel_piece(assembly, number, angle, legs, decimals)
        for number, ((angle, _, legs), decimals) in enumerate(zip(groups, finer, strict=True), 1)
    ]
    return (*standing, *flat)


def _notice(assembly: Assembly) -> str:
    faces = assembly.drilled_faces
    return f"for boring from the {faces[0].upper()}" if len(faces) == 1 else "each card says on which face it stands"


def _number(card: Card, made: tuple[Card, ...]) -> str:
    """The card's angle as printed: to a tenth, or finer where another card of its kind would read the same."""
    alike = [other for other in made if other is not card and (other.kind, other.face) == (card.kind, card.face)]
    angle = abs(card.lean_deg)
    twin = any(format_angle(abs(other.lean_deg)) == format_angle(angle) for other in alike)
    return format_angle(angle, 2 if twin else 1)


def _card_piece(assembly: Assembly, number: int, card: Card, angle: str) -> Piece:
    shape = net(card.lean_deg)
    drawing = gather([*_net_lines(shape), *_wall_words(card, shape, angle), _tab_words(shape)])
    notice = _notice(assembly)
    return Piece(f"card {number} {card.kind}", "cards", "Angle cards", drawing, "pack", notice, stock="card")


def _net_lines(shape: Net) -> Iterator[Drawing]:
    outline = (*shape.wall[1:], *shape.buttress[2:], *shape.tab[:3])
    yield Drawing((polyline(outline, Role.CUT, closed=True),))
    yield Drawing((line(*shape.wall_tab_fold, Role.FOLD), line(*shape.wall_buttress_fold, Role.FOLD)))


def _wall_words(card: Card, shape: Net, angle: str) -> Iterator[Drawing]:
    """Words on the wall: the angle large, what it is, whose it is, the arrow that must agree with the template's."""
    left, width = 4.0, min(shape.leaning_edge[0][0], shape.leaning_edge[1][0]) - 8.0
    y = HEIGHT_MM - 15.0
    yield Drawing((Text((left, y), angle, 8.0, bold=True),))
    if card.kind == "resultant":
        yield Drawing((Text((left, y - 7.5), f"bevel {format_angle(90.0 - abs(card.lean_deg))}", 3.5),))
        y -= 7.5
    what = {"resultant": "lean of the bit", "splay": "splay of the bit", "rake": "rake of the bit"}[card.kind]
    block, y = paragraph((left, y - 4.0), what if card.toward else "square to the face", 3.5, width, bold=True)
    yield block
    names, y = paragraph((left, y - 2.0), names_within(card.legs, 2.7 * width, 2.5), 2.5, width)
    yield names
    if card.within_deg > SAME_ANGLE_DEG:
        block, y = paragraph((left, y - 1.0), f"all within {format_angle(card.within_deg, 2)}", 2.5, width)
        yield block
    leaning, leans = ("leaning edge", "leans") if card.toward else ("upright edge", "stands")
    for words in (
        f"stand the fold on {card.line}, on the {card.face}, {leaning} at the mortise",
        f"that edge, on the right, {leans} with the bit",
    ):
        block, y = paragraph((left, y - 2.0), words, 2.5, width)
        yield block
    if card.toward:
        yield _foot_arrow(card, shape)
    yield _buttress_words()


def names_within(names: Sequence[str], width_mm: float, height_mm: float, bold: bool = False) -> str:
    """Names in a row, in full where there is room, else drawn together, and cut only where even that is too long."""
    full = ", ".join(names)
    words = full if text_width_mm(full, height_mm, bold) <= width_mm else stems(names)
    return shortened(words, width_mm, height_mm, bold)


def _buttress_words() -> Drawing:
    """Up along the fold, on the buttress's own side of it."""
    return Drawing((Text((-4.0, 30.0), "fold back, square", 2.5, angle_deg=90.0),))


def _foot_arrow(card: Card, shape: Net) -> Drawing:
    """Which way the foot (or the leg's own side or end) lies when the card stands right: to the right as printed."""
    low, foot = 6.0, shape.wall_tab_fold[1][0]
    shaft = arrow((6.0, low), (foot - 6.0, low), 6.0, Role.NOTE)
    return shaft + Drawing((Text((foot / 2, low + 3.0), card.toward, 3.5, align="centre", bold=True),))


def _tab_words(shape: Net) -> Drawing:
    middle = shape.wall_tab_fold[1][0] / 2
    return Drawing((Text((middle, -9.0), "fold back, tape to the face", 2.5, align="centre"),))


def _bevel_piece(assembly: Assembly, number: int, resultant_deg: float, legs: list[Leg], decimals: int) -> Piece:
    """A plain angle: the bevel's stock along the base line, its blade along the other."""
    bevel = 90.0 - resultant_deg
    corner = (0.0, 0.0)
    blade = along(corner, bevel, BLADE_MM)
    frame = ((-8.0, -14.0), (BASE_MM + 6.0, -14.0), (BASE_MM + 6.0, BLADE_MM + 6.0), (-8.0, BLADE_MM + 6.0))
    names = names_within([leg.name for leg in legs], 4.5 * 58.0, 2.5)
    drawing = gather(
        [
            polyline(frame, Role.CUT, closed=True),
            line(corner, (BASE_MM, 0.0), Role.SET_OUT),
            line(corner, blade, Role.SET_OUT),
            Text(along(along(corner, bevel, 30.0), bevel - 90.0, 4.5), "blade along this line", 2.5, angle_deg=bevel),
            Text((BASE_MM, -6.0), "stock of the bevel along this line, which is the face", 2.5, align="right"),
            Text((50.0, 42.0), f"bevel {format_angle(bevel, decimals)}", 7.0, bold=True),
            Text((50.0, 32.0), f"lean {format_angle(resultant_deg, decimals)} from square", 3.5),
            *(Text((50.0, 24.0 - 5.0 * k), words, 2.5) for k, words in enumerate(wrap(names, 58.0, 2.5))),
            arrow_head(blade, bevel, 4.0, Role.SET_OUT),
        ]
    )
    notice = _notice(assembly)
    return Piece(f"bevel {number}", "cards", "Angle cards", drawing, "pack", notice, stock="card")
