"""What each known says of a leg's direction: how it is measured, and the curve of directions that have it.

Owns `Stance` and the equations of the knowns. Imports `frames`, `legs`, `inside`, `knowns`, `roots`, `seats`; no spec.

A direction is (X, Y, -1) in the floor frame, so every known is a curve in the plane of the slopes X and Y. In the seat
frame, turned by the pitch p, the same direction has the slopes X / u and (Y cos p + sin p) / u with
u = cos p - Y sin p. Hence splay, rake, sightline and both places of the foot are straight lines in either frame, and
resultant and axis are curves A(Y) X² = B(Y) with polynomials A and B: circles and other conics, or, for an axis bored
from the top of a pitched seat, one of the fourth order.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise

from jigs.frames import SeatFrame, Vector
from jigs.inside import Edge, Foot, Slopes, Toward, edge
from jigs.knowns import ANGLES, EQUAL_FEET, MOST_LEAN_DEG
from jigs.legs import Lean, lean_of
from jigs.quantities import Units
from jigs.roots import Polynomial, plus, product, real_roots, value
from jigs.seats import Blank
from jigs.starts import foot_between
from layout.geometry import Point, cos_sin

# Legs are looked for up to this slope, from plumb and from the line square to the seat.
STEEPEST = math.tan(math.radians(MOST_LEAN_DEG))
_SLACK = 1e-9


@dataclass(frozen=True)
class Stance:
    """What fixes a leg apart from its lean.

    `at_mm` is the mortise's centre on the drilled face in plan coordinates of the seat; side and end as for `legs`.
    """

    at_mm: tuple[float, float]
    frame: SeatFrame
    thickness_mm: float
    drilled_from_top: bool
    side: int
    end: int
    foot_diameter_mm: float

    @cached_property
    def mortise(self) -> Vector:
        """The mortise's centre in the floor frame."""
        return self.frame.to_floor((*self.at_mm, 0.0 if self.drilled_from_top else -self.thickness_mm))

    @cached_property
    def turn(self) -> tuple[float, float]:
        """Cosine and sine of the pitch."""
        return cos_sin(self.frame.pitch_deg)

    def below_underside_mm(self, slope_y: float) -> float:
        """Plumb height above the floor at which the axis leaves the underside."""
        if not self.drilled_from_top:
            return self.mortise[2]
        c, s = self.turn
        return self.mortise[2] - self.thickness_mm / (c - slope_y * s)


@dataclass(frozen=True)
class Case:
    """A leg to be solved: its stance, the frame that its angles are given in, the seat above it."""

    stance: Stance
    from_seat: bool
    blank: Blank
    between: tuple[Point, Point] | None = None
    units: Units = "mm"

    @cached_property
    def foot(self) -> Foot:
        """The foot's own shape."""
        return Foot(self.stance.mortise, self.stance.foot_diameter_mm / 2)

    @cached_property
    def side_edge(self) -> Edge:
        """The outline toward the leg's side."""
        return edge(self.blank.curve, self.stance.frame.pitch_deg, Toward(0, self.stance.side or 1))

    @cached_property
    def end_edge(self) -> Edge:
        """The outline toward the leg's end."""
        return edge(self.blank.curve, self.stance.frame.pitch_deg, Toward(1, self.stance.end))

    def edge(self, name: str) -> Edge:
        """The edge that `inside_side` or `inside_end` is measured to."""
        return self.side_edge if name == "inside_side" else self.end_edge

    def lean(self, slopes: Slopes) -> Lean:
        """The angles in the frame that they are given in. Raises ValueError where the leg does not run down."""
        direction = (*slopes, -1.0)
        seen = self.stance.frame.turn_to_seat(direction) if self.from_seat else direction
        return lean_of(seen, self.stance.side, self.stance.end)


def is_leg(case: Case, slopes: Slopes) -> bool:
    """Whether the direction runs down in both frames, leans no more than MOST_LEAN_DEG and starts above the floor."""
    c, s = case.stance.turn
    down = c - slopes[1] * s
    steepest = STEEPEST * (1.0 + _SLACK)
    if down <= 0.0 or math.hypot(*slopes) > steepest:
        return False
    if math.hypot(slopes[0], slopes[1] * c + s) > steepest * down:
        return False
    return case.stance.below_underside_mm(slopes[1]) > 0.0


def measured(case: Case, name: str, slopes: Slopes) -> float:
    """The known as this direction has it, in degrees or mm."""
    if name in ANGLES:
        return float(getattr(case.lean(slopes), f"{name}_deg"))
    x, y, height = case.stance.mortise
    foot = (x + height * slopes[0], y + height * slopes[1])
    match name:
        case "foot_across":
            return foot[0] * (case.stance.side or 1)
        case "foot_along":
            return foot[1]
        case "axis":
            return case.stance.below_underside_mm(slopes[1]) * math.sqrt(1.0 + slopes[0] ** 2 + slopes[1] ** 2)
        case "equal_from":
            one, other = case.between or (foot, foot)
            return math.dist(foot, one) - math.dist(foot, other)
    return case.edge(name).inside_mm(case.foot, slopes)


def off_by(case: Case, name: str, given: float, slopes: Slopes) -> float:
    """How much more than given the direction has of the known; for a sightline the shorter way round."""
    more = measured(case, name, slopes) - given
    return (more + 180.0) % 360.0 - 180.0 if name == "sightline" else more


def applies(case: Case, name: str, slopes: Slopes) -> bool:
    """Whether the known can be measured at all for this direction."""
    if name == "sightline":
        return case.lean(slopes).leans
    return not name.startswith("inside_") or case.edge(name).counts(case.foot, slopes)


@dataclass(frozen=True)
class Piece:
    """A stretch of a curve of slopes, with how many samples do it justice."""

    at: Callable[[float], Slopes]
    t0: float
    t1: float
    samples: int


@dataclass(frozen=True)
class Straight:
    """a X + b Y = c, with a² + b² = 1."""

    a: float
    b: float
    c: float
    # How near to nought the residual counts as touching.
    touch = 1e-9

    def residual(self, slopes: Slopes) -> float:
        """0 on the line."""
        return self.a * slopes[0] + self.b * slopes[1] - self.c

    def at(self, s: float) -> Slopes:
        """The point at a distance along the line from its nearest to the origin."""
        return (self.a * self.c - self.b * s, self.b * self.c + self.a * s)

    def pieces(self) -> list[Piece]:
        """The line as far as legs lean."""
        return [Piece(self.at, -STEEPEST, STEEPEST, 48)]


@dataclass(frozen=True)
class Even:
    """A(Y) X² = B(Y): a curve that is the same to left and right. Coefficients are at most about 1."""

    a: Polynomial
    b: Polynomial
    touch = 1e-9

    def residual(self, slopes: Slopes) -> float:
        """0 on the curve."""
        return value(self.a, slopes[1]) * slopes[0] ** 2 - value(self.b, slopes[1])

    def across(self, y: float) -> float:
        """X, not negative, at this Y; 0 where the curve does not come there."""
        a, b = value(self.a, y), value(self.b, y)
        return math.sqrt(b / a) if b > 0.0 and a > 0.0 else 0.0

    def pieces(self) -> list[Piece]:
        """Both halves of each closed part, as far as legs lean; a part may be one point, as without any lean."""
        roots = real_roots(self.b, -STEEPEST, STEEPEST)
        spans = [(p, q) for p, q in pairwise([-STEEPEST, *roots, STEEPEST]) if value(self.b, (p + q) / 2) >= 0.0]
        spans += [(root, root) for root in roots]
        return [Piece(self._half(p, q, sign), 0.0, math.pi, 48) for p, q in spans for sign in (1.0, -1.0)]

    def _half(self, low: float, high: float, sign: float) -> Callable[[float], Slopes]:
        """X is like the sine of the angle here, smooth where the halves meet."""

        def at(angle: float) -> Slopes:
            y = (low + high) / 2 - (high - low) / 2 * math.cos(angle)
            return (sign * self.across(y), y)

        return at


@dataclass(frozen=True)
class Beside:
    """Directions whose foot stands a given distance inside an edge of the seat."""

    case: Case
    name: str
    inside_mm: float
    touch = 1e-7

    def residual(self, slopes: Slopes) -> float:
        """0 on the curve."""
        return measured(self.case, self.name, slopes) - self.inside_mm

    def pieces(self) -> list[Piece]:
        """The outline, moved inward, as it is walked by the foot's outermost point; as far as legs lean."""
        edge, foot = self.case.edge(self.name), self.case.foot
        other = edge.toward.other
        far = STEEPEST * foot.mortise[2] + 2 * foot.radius_mm
        middle = foot.mortise[other]
        return [Piece(self._walk(s.point), s.t0, s.t1, s.samples) for s in edge.within(middle - far, middle + far)]

    def _walk(self, outline: Callable[[float], Point]) -> Callable[[float], Slopes]:
        toward, foot = self.case.edge(self.name).toward, self.case.foot

        def at(t: float) -> Slopes:
            point = list(outline(t))
            point[toward.axis] -= toward.sign * self.inside_mm
            return foot.leaning((point[0], point[1]), toward)

        return at


Known = Straight | Even | Beside

CENTRED = Straight(1.0, 0.0, 0.0)


def straight(a: float, b: float, c: float) -> Straight:
    """The line a X + b Y = c."""
    size = math.hypot(a, b)
    return Straight(a / size, b / size, c / size)


def _even(a: Polynomial, b: Polynomial) -> Even:
    size = max(map(abs, (*a, *b)))
    return Even(tuple(k / size for k in a), tuple(k / size for k in b))


def curve(case: Case, name: str, given: float) -> Known:
    """The directions that have this much of the known; angles in degrees short of a right angle, lengths in mm."""
    if name.startswith("inside_"):
        return Beside(case, name, given)
    if name in ("foot_across", "foot_along", EQUAL_FEET):
        return _foot_line(case, name, given)
    if name == "axis":
        return _axis(case.stance, given)
    seat = case.stance.turn if case.from_seat else (1.0, 0.0)
    if name == "sightline":
        return _sightline(case.stance, given, seat)
    tangent = math.tan(math.radians(given))
    return _resultant(tangent, seat) if name == "resultant" else _lean_line(case.stance, name, tangent, seat)


def _lean_line(stance: Stance, name: str, tangent: float, seat: tuple[float, float]) -> Straight:
    c, s = seat
    if name == "splay":
        return straight(float(stance.side or 1), tangent * s, tangent * c)
    return straight(0.0, stance.end * c + tangent * s, tangent * c - stance.end * s)


def _sightline(stance: Stance, given_deg: float, seat: tuple[float, float]) -> Straight:
    """The whole line; which ray of it is left to the measure."""
    (c, s), (toward_end, toward_side) = seat, cos_sin(given_deg)
    return straight((stance.side or 1) * toward_end, -stance.end * toward_side * c, stance.end * toward_side * s)


def _resultant(tangent: float, seat: tuple[float, float]) -> Even:
    """X² + (Y cos p + sin p)² = tan² u²."""
    c, s = seat
    lean, down = (s, c), (c, -s)
    return _even((1.0,), plus(tuple(tangent**2 * k for k in product(down, down)), product(lean, lean), -1.0))


def _axis(stance: Stance, length_mm: float) -> Even:
    """Plumb height of the underside times sqrt(1 + X² + Y²) = length."""
    c, s = stance.turn
    height = stance.mortise[2]
    run = (1.0, 0.0, 1.0)
    if not stance.drilled_from_top or s == 0.0:
        plumb = stance.below_underside_mm(0.0)
        return _even((1.0,), plus(((length_mm / plumb) ** 2,), run, -1.0))
    # The axis leaves the underside thickness / u below the mortise; both sides are multiplied by u².
    down = (c, -s)
    plumb_down = (height * c - stance.thickness_mm, -height * s)
    a = product(plumb_down, plumb_down)
    return _even(a, plus(tuple(length_mm**2 * k for k in product(down, down)), product(a, run), -1.0))


def _foot_line(case: Case, name: str, given_mm: float) -> Straight:
    x, y, height = case.stance.mortise
    side = case.stance.side or 1
    if name == "foot_across":
        return straight(side * height, 0.0, given_mm - side * x)
    if name == "foot_along":
        return straight(0.0, height, given_mm - y)
    line = foot_between(*(case.between or ((-1.0, 0.0), (1.0, 0.0))))
    return straight(height * line.a, height * line.b, line.c - line.a * x - line.b * y)
