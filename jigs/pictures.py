"""Splay and rake off a front and a side picture of a chair, with what an error of pointing makes of them.

Owns the reading of pixels. Imports `knowns` and `quantities`; no image library: points come as numbers.

Pixels run right and down, as every viewer shows them. A picture is read against its own level line, two points on the
seat's edge or on the floor, so a camera held askew does not matter; one that stands near does.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal

from jigs.knowns import MOST_LEAN_DEG, CannotSolve, decimals
from jigs.quantities import Units, format_length

Pixel = tuple[float, float]
TakenFrom = Literal["right", "left"]

# How well a point is pointed at, one standard deviation in x and in y.
POINTING_PX = 2.0
# Lines must be this many pointing errors long: shorter ones say nothing, and their errors do not add up evenly.
SHORTEST_IN_ERRORS = 10.0
# How far to stand back: the nearer, the more a leg that comes toward the camera seems to lean outward (practice).
STAND_BACK_HEIGHTS = 10


@dataclass(frozen=True)
class Sight:
    """What was pointed at in one picture, in pixels.

    `level` are two points on the seat's edge or the floor line, `leg` two on the leg's middle; each pair in any order,
    though the camera was not upside down. `known` are two points whose distance is `known_mm`, in the leg's own plane.
    """

    level: tuple[Pixel, Pixel]
    leg: tuple[Pixel, Pixel]
    known: tuple[Pixel, Pixel] | None = None
    known_mm: float | None = None


@dataclass(frozen=True)
class PictureLean:
    """Splay and rake from plumb, and the standard deviation of each that the pointing error makes, degrees.

    `front_mm_per_px` and `side_mm_per_px` are each picture's scale, None where no length was known; `note` is for the
    maker.
    """

    splay_deg: float
    rake_deg: float
    splay_pm_deg: float
    rake_pm_deg: float
    front_mm_per_px: float | None
    side_mm_per_px: float | None
    note: str


def from_picture(
    front: Sight | None,
    side_view: Sight,
    side: int,
    end: int,
    taken_from: TakenFrom = "right",
    pointing_px: float = POINTING_PX,
    units: Units = "mm",
) -> PictureLean:
    """The leg's splay off a picture taken from the front, its rake off one from the right or the left of the chair.

    In the front picture +x of the plan is to the right. Taken from the right, the chair's front is to the left in the
    side picture; from the left, to the right. A leg on the centre line (side 0) needs no front picture. Where a length
    is known, the note says in `units` how far apart the leg's two marks lie. Raises CannotSolve for lines too short to
    say anything and for a leg along the level line.
    """
    if not (pointing_px >= 0.0 and math.isfinite(pointing_px)):
        raise CannotSolve(f"a pointing error of {pointing_px:g} px is none", "give 0 or more")
    if side and front is None:
        raise CannotSolve("splay needs a front picture", "point at the leg in one")
    to_right, splay_pm = _lean(front, pointing_px, "front") if front and side else (0.0, 0.0)
    to_right_in_side, rake_pm = _lean(side_view, pointing_px, "side")
    to_back = to_right_in_side if taken_from == "right" else -to_right_in_side
    return PictureLean(
        splay_deg=side * to_right + 0.0,
        rake_deg=end * to_back + 0.0,
        splay_pm_deg=splay_pm,
        rake_pm_deg=rake_pm,
        front_mm_per_px=mm_per_px(front) if front else None,
        side_mm_per_px=mm_per_px(side_view),
        note=_note(pointing_px, splay_pm, rake_pm, side)
        + (_scaled("front", front, units) if front else "")
        + _scaled("side", side_view, units),
    )


def mm_per_px(sight: Sight) -> float | None:
    """The picture's scale in the plane of the known length, or None. Raises CannotSolve for a length without sense."""
    if sight.known is None or sight.known_mm is None:
        return None
    pixels = math.dist(*sight.known)
    if not (pixels > 0.0 and sight.known_mm > 0.0 and math.isfinite(pixels * sight.known_mm)):
        raise CannotSolve("the known length has no length, in the picture or in mm", "point at its two ends")
    return sight.known_mm / pixels


def distances_mm(sight: Sight, start: Pixel, end: Pixel) -> tuple[float, float]:
    """From one point of the picture to another: along its level line to the right, and square to that, upward.

    For heights and widths in the plane of the known length. Raises CannotSolve for a picture without one.
    """
    scale = mm_per_px(sight)
    if scale is None:
        raise CannotSolve(
            "the picture has no known length to scale it by", "point at two places a known distance apart"
        )
    (right_x, right_y), run = _rightward(sight.level), (end[0] - start[0], end[1] - start[1])
    along = run[0] * right_x + run[1] * right_y
    up = run[0] * right_y - run[1] * right_x
    return (scale * along, scale * up)


def _lean(sight: Sight, pointing_px: float, view: str) -> tuple[float, float]:
    """How far the leg's lower end is to the right of square to the level line, and its deviation, degrees."""
    level_px, leg_px = (_length(line, pointing_px, f"{view} picture's {name}") for line, name in _lines(sight))
    right_x, right_y = _rightward(sight.level)
    run = (sight.leg[1][0] - sight.leg[0][0], sight.leg[1][1] - sight.leg[0][1])
    along, down = run[0] * right_x + run[1] * right_y, run[1] * right_x - run[0] * right_y
    if down < 0.0:
        along, down = -along, -down
    angle = math.degrees(math.atan2(along, down))
    if abs(angle) > MOST_LEAN_DEG:
        rule = f"in the {view} picture the leg leans {decimals(abs(angle), 1)}° from square to the level line"
        raise CannotSolve(rule, "point at two places along the leg, one high and one low")
    return angle, math.degrees(_deviation(pointing_px, level_px, leg_px))


def _lines(sight: Sight) -> tuple[tuple[tuple[Pixel, Pixel], str], tuple[tuple[Pixel, Pixel], str]]:
    return (sight.level, "level line"), (sight.leg, "leg")


def _length(line: tuple[Pixel, Pixel], pointing_px: float, what: str) -> float:
    length = math.dist(*line)
    least = max(SHORTEST_IN_ERRORS * pointing_px, 1.0)
    if not least <= length < math.inf:
        rule = f"the {what} is {decimals(length, 1)} px long, and {decimals(least, 1)} px are needed"
        raise CannotSolve(rule, "point further apart, or enlarge the picture")
    return length


def _rightward(level: tuple[Pixel, Pixel]) -> Pixel:
    """The unit direction of the level line, to the right. Raises CannotSolve for an upright one."""
    start, end = sorted(level)
    length = math.dist(start, end)
    if length == 0.0:
        raise CannotSolve("the level line has no length", "point at two places far apart")
    direction = ((end[0] - start[0]) / length, (end[1] - start[1]) / length)
    if abs(direction[1]) > math.sin(math.radians(MOST_LEAN_DEG)):
        raise CannotSolve(
            "the level line stands upright in the picture", "turn the picture, or point along the seat's edge"
        )
    return direction


def _deviation(pointing_px: float, *lengths_px: float) -> float:
    """Each line turns by the difference of two errors square to it over its length; the lines err independently."""
    return pointing_px * math.sqrt(sum(2.0 / length**2 for length in lengths_px))


def _note(pointing_px: float, splay_pm: float, rake_pm: float, side: int) -> str:
    splay = f"splay by {decimals(splay_pm, 2)}° and " if side else ""
    return (
        f"Pointing {decimals(pointing_px, 1)} px wide of the mark changes {splay}rake by {decimals(rake_pm, 2)}°. "
        "A picture taken from near by falsifies both, and that is not in these figures: stand back at least "
        f"{STAND_BACK_HEIGHTS} times the chair's height, hold the camera at the seat's height, and square to the chair."
    )


def _scaled(view: str, sight: Sight, units: Units) -> str:
    """What a known length makes of the leg in a picture; nothing where none is known."""
    if mm_per_px(sight) is None:
        return ""
    across, down = (format_length(abs(mm), units) for mm in distances_mm(sight, *sight.leg))
    marks = f"the leg's two marks in the {view} picture lie {across} apart across and {down} in height"
    return f" By its known length, {marks}."
