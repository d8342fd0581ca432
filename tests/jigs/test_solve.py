"""Solving a leg from two knowns, against scipy's root finder on constraints written with vectors."""

import itertools
import math
import random
from dataclasses import dataclass, replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import optimize

from jigs.frames import SeatFrame
from jigs.inside import Toward, edge
from jigs.knowns import SETTLES
from jigs.legs import Axis, direction_of, follow, lean_of
from jigs.outlines import d_outline, ellipse_outline, polygon_outline, rectangle_outline
from jigs.roots import Flat, bracketed, real_roots, sampled_roots
from jigs.seats import Blank
from jigs.shield import shield_outline
from jigs.solve import KNOWNS, CannotSolve, Stance, solve

MOST_SLOPE = math.tan(math.radians(60))
ANGLES = {"splay", "rake", "resultant", "sightline"}

# ---------------------------------------------------------------- the raw constraints, with vectors


@dataclass(frozen=True)
class Oval:
    """An oval or round seat, its edges by formula."""

    width: float
    depth: float
    flat = False

    def blank(self):
        return Blank(ellipse_outline(self.width, self.depth))

    def reach(self, axis, sign, station):
        """The outermost x at a y (axis 0) or y at an x (axis 1), held at the ends."""
        if axis == 0:
            return sign * self.width / 2 * self._chord((station - self.depth / 2) / (self.depth / 2))
        return self.depth / 2 * (1 + sign * self._chord(station / (self.width / 2)))

    @staticmethod
    def _chord(part):
        return math.sqrt(max(0.0, 1.0 - part * part))

    def ends(self, axis):
        return (0.0, self.depth) if axis == 0 else (-self.width / 2, self.width / 2)


@dataclass(frozen=True)
class Rectangle:
    """A rectangle with rounded corners, its edges by formula."""

    width: float
    depth: float
    radius: float
    flat = True

    def blank(self):
        return Blank(rectangle_outline(self.width, self.depth, self.radius, "mm"))

    def reach(self, axis, sign, station):
        half, length = (self.width / 2, self.depth) if axis == 0 else (self.depth / 2, self.width)
        from_end = station if axis == 0 else station + self.width / 2
        into = min(max(from_end, 0.0), length)
        near = min(into, length - into)
        lost = 0.0 if near >= self.radius else self.radius - math.sqrt(self.radius**2 - (self.radius - near) ** 2)
        return sign * (half - lost) + (0.0 if axis == 0 else half)

    def ends(self, axis):
        return (0.0, self.depth) if axis == 0 else (-self.width / 2, self.width / 2)


@dataclass(frozen=True)
class Shield:
    """A shield, its edges by numpy's roots of each cubic."""

    width: float
    depth: float
    back: float
    flat = False

    def blank(self):
        return Blank(self.curve())

    def curve(self):
        return shield_outline(self.width, self.depth, self.back, None, 0.0, "mm")

    def reach(self, axis, sign, station):
        low, high = self.ends(axis)
        station = min(max(station, low), high)
        best = -math.inf
        for cubic in self.curve():
            points = np.array([cubic.start, cubic.first, cubic.second, cubic.end])
            powers = np.array([[-1, 3, -3, 1], [3, -6, 3, 0], [-3, 3, 0, 0], [1, 0, 0, 0]]) @ points
            equation = powers[:, 1 - axis].copy()
            equation[3] -= station
            for root in np.roots(equation):
                if abs(root.imag) < 1e-9 and -1e-12 <= root.real <= 1 + 1e-12:
                    best = max(best, sign * np.polyval(powers[:, axis], root.real))
        return sign * best

    def ends(self, axis):
        return (0.0, self.depth) if axis == 0 else (-self.width / 2, self.width / 2)


@dataclass(frozen=True)
class Raw:
    """One leg's constraints, written with points, planes and a cylinder."""

    stance: Stance
    from_seat: bool
    shape: object = None

    @property
    def axes(self):
        """The seat's own axes in the floor frame: pitch p drops the back."""
        p = math.radians(self.stance.frame.pitch_deg)
        return (0.0, math.cos(p), -math.sin(p)), (0.0, math.sin(p), math.cos(p))

    def on_face(self, depth):
        (_, yy, yz), (_, ny, nz) = self.axes
        x, y = self.stance.at_mm
        return (x, y * yy - depth * ny, self.stance.frame.height_mm + y * yz - depth * nz)

    @property
    def mortise(self):
        return self.on_face(0.0 if self.stance.drilled_from_top else self.stance.thickness_mm)

    def views(self, d):
        """The direction's parts across, fore and aft, and down, in the frame of the angles."""
        if not self.from_seat:
            return d[0], d[1], -d[2]
        along, normal = self.axes
        return d[0], sum(map(float.__mul__, d, along)), -sum(map(float.__mul__, d, normal))

    def foot(self, d):
        m = self.mortise
        return (m[0] - m[2] * d[0] / d[2], m[1] - m[2] * d[1] / d[2])

    def below_seat(self, d):
        """Where the axis meets the underside's plane."""
        _, n = self.axes
        q, m = self.on_face(self.stance.thickness_mm), self.mortise
        k = sum((b - a) * c for a, b, c in zip(m, q, n, strict=True)) / sum(map(float.__mul__, d, n))
        return tuple(a + k * b for a, b in zip(m, d, strict=True))

    def outermost(self, d, axis, sign):
        """The extreme point of the cylinder's cut with the floor: two ribs square to the axis, slid along it."""
        d = np.array(d) / np.linalg.norm(d)
        first = np.cross(d, (0.3, 0.5, 0.9))
        first /= np.linalg.norm(first)
        ribs = [rib - d * rib[2] / d[2] for rib in (first, np.cross(d, first))]
        radius = self.stance.foot_diameter_mm / 2
        size = math.hypot(ribs[0][axis], ribs[1][axis])
        turn = [sign * rib[axis] / size for rib in ribs]
        foot = self.foot(tuple(d))
        return tuple(foot[k] + radius * sum(t * rib[k] for t, rib in zip(turn, ribs, strict=True)) for k in (0, 1))

    def inside(self, d, axis, sign):
        point = self.outermost(d, axis, sign)
        stretch = math.cos(math.radians(self.stance.frame.pitch_deg))
        if axis == 0:
            return sign * (self.shape.reach(0, sign, point[1] / stretch) - point[0])
        return sign * (stretch * self.shape.reach(1, sign, point[0]) - point[1])

    def beside(self, d, axis, sign):
        """Whether there is seat beside the foot."""
        station = self.outermost(d, axis, sign)[1 - axis]
        station /= math.cos(math.radians(self.stance.frame.pitch_deg)) if axis == 0 else 1.0
        low, high = self.shape.ends(axis)
        return self.shape.flat or low <= station <= high

    def value(self, name, d):
        side, end = self.stance.side, self.stance.end
        across, along, down = self.views(d)
        match name:
            case "splay":
                return math.degrees(math.atan2(side * across, down))
            case "rake":
                return math.degrees(math.atan2(end * along, down))
            case "resultant":
                return math.degrees(math.atan2(math.hypot(across, along), down))
            case "sightline":
                return math.degrees(math.atan2(side * across, end * along))
            case "foot_across":
                return side * self.foot(d)[0]
            case "foot_along":
                return self.foot(d)[1]
            case "axis":
                return math.dist(self.below_seat(d), (*self.foot(d), 0.0))
            case "inside_side":
                return self.inside(d, 0, side)
            case "inside_end":
                return self.inside(d, 1, end)

    def residual(self, name, given, d):
        """Nought where the direction has the known. A sightline's is taken across its ray, which has no jump."""
        if name == "sightline":
            across, along, _ = self.views(d)
            turn = math.radians(given)
            return 100 * (self.stance.side * across * math.cos(turn) - self.stance.end * along * math.sin(turn))
        return self.value(name, d) - given

    def is_leg(self, knowns, d):
        _, normal = self.axes
        square = -sum(map(float.__mul__, d, normal))
        if square <= 0.0 or math.hypot(d[0], d[1]) > MOST_SLOPE * (1 + 1e-9) or self.below_seat(d)[2] <= 0.0:
            return False
        if math.dist((0, 0, 0), d) > square * 2 * (1 + 1e-9):  # cos 60° = 1/2
            return False
        if "sightline" in knowns and abs((self.value("sightline", d) - knowns["sightline"] + 180) % 360 - 180) > 1e-3:
            return False
        sides = [("inside_side", 0, self.stance.side), ("inside_end", 1, self.stance.end)]
        return all(self.beside(d, axis, sign) for name, axis, sign in sides if name in knowns)


STARTS = [(0.0, 0.0)] + [
    (r * math.cos(t), r * math.sin(t))
    for r, n in ((0.2, 8), (0.8, 6))
    for t in np.linspace(0.3, 0.3 + 2 * math.pi, n, False)
]


def all_roots(raw, knowns, starts):
    """Every leg that scipy finds from any of the starts."""

    def residuals(at):
        d = (float(at[0]), float(at[1]), -1.0)
        return [raw.residual(name, given, d) for name, given in knowns.items()]

    found = []
    for start in starts:
        at, _, _, _ = optimize.fsolve(residuals, start, xtol=1e-13, full_output=True)
        d = (float(at[0]), float(at[1]), -1.0)
        hit = math.hypot(*at) < 3 and max(map(abs, residuals(at))) < 1e-8 and raw.is_leg(knowns, d)
        if hit and all(math.dist(at, other) > 1e-5 for other in found):
            found.append((d[0], d[1]))
    return found


def steepness(raw, knowns, d):
    """The least singular value of the constraints' slopes: how far they are from saying the same."""
    step = 1e-6

    def at(x, y):
        return np.array([raw.residual(name, given, (x, y, -1.0)) for name, given in knowns.items()])

    columns = [(at(d[0] + a, d[1] + b) - at(d[0] - a, d[1] - b)) / (2 * step) for a, b in ((step, 0.0), (0.0, step))]
    return float(np.linalg.svd(np.column_stack(columns), compute_uv=False)[-1])


# ---------------------------------------------------------------- random legs


def random_stance(rng, shape_size=(400.0, 340.0)):
    side, end = rng.choice((-1, 1)), rng.choice((-1, 1))
    width, depth = shape_size
    at = (side * rng.uniform(0.2, 0.6) * width / 2, depth / 2 + end * rng.uniform(0.2, 0.6) * depth / 2)
    pitch = rng.choice((0.0, rng.uniform(-8, 12)))
    frame = SeatFrame(pitch, rng.uniform(330, 720))
    return Stance(at, frame, rng.uniform(25, 60), rng.random() < 0.5, side, end, rng.uniform(16, 45))


def random_slopes(rng):
    lean, turn = math.tan(math.radians(rng.uniform(1, 30))), rng.uniform(0, 2 * math.pi)
    return (lean * math.cos(turn), lean * math.sin(turn), -1.0)


def random_case(rng, names, shape):
    """Knowns of a leg that there is; one in four has one of them changed, so that there may be none."""
    raw = Raw(random_stance(rng, (shape.width, shape.depth)), rng.random() < 0.5, shape)
    while True:
        d = random_slopes(rng)
        knowns = {name: raw.value(name, d) for name in names}
        if raw.is_leg(knowns, d):
            break
    if rng.random() < 0.25:
        name = rng.choice(names)
        knowns[name] += rng.gauss(0, 3) if name in ANGLES else rng.gauss(0, 20)
    if knowns.get("resultant", 1.0) < 0 or any(abs(knowns.get(name, 0.0)) > 60 for name in ANGLES - {"sightline"}):
        return random_case(rng, names, shape)
    return raw, knowns


def feeds_forward(raw, knowns, direction):
    """The leg followed by the program itself has the knowns to 1e-9."""
    stance = raw.stance
    run = follow(
        Axis(stance.at_mm, direction, stance.side, stance.end),
        stance.frame,
        stance.thickness_mm,
        stance.drilled_from_top,
    )
    lean = run.drill if raw.from_seat else run.floor
    for name, wanted in knowns.items():
        if name in ANGLES:
            off = (getattr(lean, f"{name}_deg") - wanted + 180) % 360 - 180
        else:
            values = {
                "foot_across": lambda: run.foot_mm[0] * (stance.side or 1),
                "foot_along": lambda: run.foot_mm[1],
                "axis": lambda: run.axis_mm,
                "inside_side": lambda: raw.value("inside_side", direction),
                "inside_end": lambda: raw.value("inside_end", direction),
            }
            off = values[name]() - wanted
        assert abs(off) <= 1e-9, (name, off, knowns, stance)


def outward(raw, at):
    splay, rake = (raw.stance.side or 1) * at[0], raw.stance.end * at[1]
    return (rake >= -1e-7, splay >= -1e-7, rake + splay)


def check(raw, knowns, starts=STARTS):
    """Solved as scipy solves it; returns whether there was a leg."""
    roots = all_roots(raw, knowns, starts)
    try:
        solution = solve(raw.stance, knowns, raw.from_seat, raw.shape.blank())
    except CannotSolve:
        solution = None
    if solution is None:
        assert not roots, (roots, knowns, raw)
        return False
    x, y, z = solution.direction
    assert z == -1.0
    feeds_forward(raw, knowns, solution.direction)
    roots += [at for at in all_roots(raw, knowns, [(x, y)]) if all(math.dist(at, other) > 1e-5 for other in roots)]
    # A root that is nearly double is known to scipy no better than the square root of its rounding.
    close = 1e-7 if steepness(raw, knowns, solution.direction) > 1e-3 else 1e-5
    assert min(math.dist((x, y), at) for at in roots) < close, (solution, roots, knowns, raw)
    assert len(roots) <= solution.others + 1, (solution, roots, knowns, raw)
    nearest = min(math.hypot(*at) for at in roots)
    assert math.hypot(x, y) <= nearest + close, (solution, roots, knowns, raw)
    tied = [at for at in roots if math.hypot(*at) <= nearest + 1e-8]
    best = max(tied, key=lambda at: outward(raw, at))
    assert math.dist((x, y), best) < close, (solution, tied, knowns, raw)
    assert bool(solution.note) == bool(solution.others)
    return True


FREE = [name for name in KNOWNS if not name.startswith("inside_")]
FREE_PAIRS = [pair for pair in itertools.combinations(FREE, 2) if SETTLES[pair[0]] != SETTLES[pair[1]]]
EDGE_PAIRS = [("inside_side", "inside_end")] + [
    (inside, name) for inside in ("inside_side", "inside_end") for name in FREE
]
PLAIN = Oval(400, 340)


@pytest.mark.parametrize("names", FREE_PAIRS, ids="-".join)
def test_two_knowns_give_the_leg_that_scipy_finds_nearest_to_plumb(names):
    rng = random.Random("-".join(names))
    solved = sum(check(*random_case(rng, names, PLAIN)) for _ in range(80))
    assert solved >= 60


def random_shape(rng, names):
    if SETTLES[names[0]] == SETTLES[names[1]] or rng.random() < 0.5:
        return Oval(rng.uniform(300, 520), rng.uniform(260, 480))
    return Rectangle(rng.uniform(300, 520), rng.uniform(260, 480), rng.choice((0.0, rng.uniform(5, 60))))


@pytest.mark.parametrize("names", EDGE_PAIRS, ids="-".join)
def test_a_foot_inside_the_seat_is_where_scipy_finds_it(names):
    rng = random.Random("-".join(names))
    solved = sum(check(*random_case(rng, names, random_shape(rng, names)), STARTS[:11]) for _ in range(45))
    assert solved >= 30


@pytest.mark.parametrize("number", range(4))
def test_a_foot_inside_a_shield_is_where_scipy_finds_it(number):
    rng = random.Random(number)
    shape = Shield(rng.uniform(380, 480), rng.uniform(340, 420), rng.uniform(250, 330))
    raw, knowns = random_case(rng, ("inside_side", "inside_end"), shape)
    check(raw, knowns, STARTS[:4])


# ---------------------------------------------------------------- legs by hand

HEIGHT, THICK = 450.0, 45.0
RIGHT_FRONT = Stance((125.0, 70.0), SeatFrame(0.0, HEIGHT), THICK, False, 1, -1, 30.0)
BACK_CENTRE = Stance((0.0, 250.0), SeatFrame(0.0, HEIGHT), THICK, False, 0, 1, 30.0)
PITCHED = replace(RIGHT_FRONT, frame=SeatFrame(6.0, HEIGHT), drilled_from_top=True)
SHARP = Blank(rectangle_outline(400, 300, 0, "mm"))
ROUND = Blank(ellipse_outline(340, 340))
TAN = {deg: math.tan(math.radians(deg)) for deg in (5, 8, 9, 10, 12)}


def refusal(stance, knowns, from_seat=False, blank=SHARP, **more):
    with pytest.raises(CannotSolve) as told:
        solve(stance, knowns, from_seat, blank, **more)
    assert str(told.value) == (f"{told.value.rule}; {told.value.cure}" if told.value.cure else told.value.rule)
    return told.value.rule, told.value.cure


def test_splay_and_rake_are_the_direction_itself():
    assert solve(RIGHT_FRONT, {"splay": 12.0, "rake": 9.0}, False, SHARP).direction == pytest.approx(
        direction_of(12.0, 9.0, 1, -1), abs=1e-15
    )


@given(st.floats(-59, 59), st.sampled_from((RIGHT_FRONT, PITCHED)), st.booleans())
@settings(max_examples=80)
def test_a_leg_whose_splay_is_its_whole_lean_has_no_rake(splay, stance, from_seat):
    knowns = {"splay": splay, "resultant": abs(splay)}
    try:
        solution = solve(stance, knowns, from_seat, SHARP)
    except CannotSolve:
        # On a pitched seat the leg may lean too far in the other frame.
        assert stance is PITCHED
        assert abs(splay) > 50
        return
    assert solution.others == 0
    feeds_forward(Raw(stance, from_seat), knowns, solution.direction)
    seen = stance.frame.turn_to_seat(solution.direction) if from_seat else solution.direction
    assert abs(lean_of(seen, stance.side, stance.end).rake_deg) < 1e-5


def test_two_legs_as_near_to_plumb_are_told_and_the_outward_one_is_taken():
    solution = solve(RIGHT_FRONT, {"splay": 12.0, "resultant": 15.0}, False, SHARP)
    rake = math.degrees(math.atan(math.sqrt(math.tan(math.radians(15)) ** 2 - TAN[12] ** 2)))
    assert solution.others == 1
    assert lean_of(solution.direction, 1, -1).rake_deg == pytest.approx(rake, abs=1e-12)
    assert solution.note == (
        "Two leans have this. Taken is of two that are as near to plumb, the one that rakes outward: "
        "splay 12°, rake 9.266°; the other is splay 12°, rake -9.266°."
    )


def test_of_two_legs_the_one_nearest_to_plumb_is_taken_and_said_so():
    solution = solve(PITCHED, {"splay": 12.0, "axis": 430.0}, False, SHARP)
    assert solution.others == 1
    assert solution.note == (
        "Two leans have this. Taken is the one nearest to plumb: splay 12°, rake 18.826°; "
        "the other is splay 12°, rake -20.26°."
    )


def test_a_leg_that_leans_inward_can_be_given():
    solution = solve(RIGHT_FRONT, {"splay": -5.0, "foot_along": 70.0 + 405.0 * TAN[8]}, False, SHARP)
    assert solution.direction == pytest.approx((-TAN[5], TAN[8], -1.0), abs=1e-15)


def test_the_sightline_is_a_ray_and_not_a_line():
    out = solve(RIGHT_FRONT, {"sightline": 40.0, "resultant": 12.0}, False, SHARP)
    back = solve(RIGHT_FRONT, {"sightline": 220.0, "resultant": 12.0}, False, SHARP)
    assert out.others == back.others == 0
    assert back.direction[:2] == pytest.approx((-out.direction[0], -out.direction[1]), abs=1e-15)
    assert solve(RIGHT_FRONT, {"sightline": -320.0, "resultant": 12.0}, False, SHARP).direction == pytest.approx(
        out.direction, abs=1e-13
    )


@pytest.mark.parametrize("from_seat", [False, True])
@pytest.mark.parametrize("names", [*FREE_PAIRS[::3], *EDGE_PAIRS[::4]], ids="-".join)
def test_the_left_twin_is_the_right_leg_mirrored(names, from_seat):
    shape = Oval(400, 340)
    knowns = {name: Raw(PITCHED, from_seat, shape).value(name, (0.08, -0.07, -1.0)) for name in names}
    right = solve(PITCHED, knowns, from_seat, shape.blank())
    left = solve(replace(PITCHED, at_mm=(-125.0, 70.0), side=-1), knowns, from_seat, shape.blank())
    x, y, z = right.direction
    assert left.direction == pytest.approx((-x, y, z), abs=1e-12)
    assert (left.others, left.note) == (right.others, right.note)


def test_angles_from_the_seat_are_those_that_are_drilled():
    solution = solve(PITCHED, {"splay": 12.0, "rake": 9.0}, True, SHARP)
    run = follow(Axis(PITCHED.at_mm, solution.direction, 1, -1), PITCHED.frame, THICK, True)
    assert (run.drill.splay_deg, run.drill.rake_deg) == pytest.approx((12.0, 9.0), abs=1e-12)
    assert run.floor.rake_deg == pytest.approx(9.0 + 6.0, abs=1e-12)  # the pitch turns a front leg further forward


# ---------------------------------------------------------------- on the centre line


@pytest.mark.parametrize("from_seat", [False, True])
@pytest.mark.parametrize("name", ["rake", "resultant", "foot_along", "inside_end", "axis"])
def test_a_leg_on_the_centre_line_needs_one_known(name, from_seat):
    stance = replace(BACK_CENTRE, frame=SeatFrame(-3.0, HEIGHT), drilled_from_top=True)
    shape = Oval(400, 300)
    raw = Raw(stance, from_seat, shape)
    wanted = raw.value(name, (0.0, 0.14, -1.0))
    solution = solve(stance, {name: wanted}, from_seat, shape.blank())
    assert solution.direction[0] == 0.0
    feeds_forward(raw, {name: wanted}, solution.direction)

    def miss(y):
        return raw.value(name, (0.0, y, -1.0)) - wanted

    ys = np.linspace(-1.2, 1.2, 401)
    roots = [optimize.brentq(miss, a, b, xtol=1e-14) for a, b in itertools.pairwise(ys) if miss(a) * miss(b) < 0]
    assert solution.direction[1] == pytest.approx(min(roots, key=lambda y: (round(abs(y), 9), -y)), abs=1e-9)
    assert len(roots) == solution.others + 1


def test_the_centre_line_takes_no_sideways_knowns():
    assert refusal(BACK_CENTRE, {"sightline": 3.0, "splay": 2.0}) == (
        "a leg on the centre line leans to neither side, so sightline and splay say nothing of it",
        "leave them out and give one of rake, resultant, foot_along, inside_end or axis",
    )
    assert refusal(BACK_CENTRE, {}) == (
        "nothing says how far the leg on the centre line leans",
        "give one of rake, resultant, foot_along, inside_end or axis",
    )
    # What is true of every such leg may be said.
    assert solve(BACK_CENTRE, {"splay": 0.0, "rake": 9.0}, False, SHARP).direction == pytest.approx(
        (0.0, math.tan(math.radians(9)), -1)
    )


def test_on_the_centre_line_a_second_known_must_agree():
    assert solve(BACK_CENTRE, {"rake": -9.0, "resultant": 9.0}, False, SHARP).direction[1] < 0.0
    rule, cure = refusal(BACK_CENTRE, {"rake": 9.0, "resultant": 10.0})
    assert rule == "rake and resultant do not agree: with resultant rake comes to 10° and not 9°, 1° more"
    assert cure == "keep resultant, and leave rake out"


# ---------------------------------------------------------------- inside the seat


def test_inside_a_plain_rectangle_the_foot_ends_where_it_is_told_to():
    solution = solve(RIGHT_FRONT, {"inside_side": 10.0, "inside_end": 4.0}, False, SHARP)
    raw = Raw(RIGHT_FRONT, False)
    assert raw.outermost(solution.direction, 0, 1)[0] == pytest.approx(200.0 - 10.0, abs=1e-9)
    assert raw.outermost(solution.direction, 1, -1)[1] == pytest.approx(0.0 + 4.0, abs=1e-9)


def test_a_foot_may_stand_beyond_a_plain_rectangle():
    solution = solve(RIGHT_FRONT, {"inside_side": -20.0, "inside_end": -35.0}, False, SHARP)
    raw = Raw(RIGHT_FRONT, False)
    assert raw.outermost(solution.direction, 0, 1)[0] == pytest.approx(220.0, abs=1e-9)
    assert raw.outermost(solution.direction, 1, -1)[1] == pytest.approx(-35.0, abs=1e-9)


def test_a_thicker_foot_leaves_less_room_to_lean():
    thin, thick = (
        solve(replace(RIGHT_FRONT, foot_diameter_mm=size), {"inside_side": 10.0, "inside_end": 10.0}, False, SHARP)
        for size in (20.0, 40.0)
    )
    assert thick.direction[0] < thin.direction[0]
    assert thick.direction[1] > thin.direction[1]


def test_past_the_front_of_a_round_seat_there_is_no_side_to_measure_to():
    assert refusal(RIGHT_FRONT, {"inside_side": 10.0, "rake": 25.0}, blank=ROUND) == (
        "with rake 25° the foot has no seat at its side to be inside of, so inside_side means nothing",
        "give foot_across in place of inside_side",
    )


@pytest.mark.parametrize(
    ("curve", "toward", "station", "reach"),
    [
        (rectangle_outline(400, 300, 0, "mm"), Toward(0, 1), 120.0, 200.0),
        (rectangle_outline(400, 300, 0, "mm"), Toward(0, -1), 120.0, -200.0),
        (rectangle_outline(400, 300, 0, "mm"), Toward(1, 1), 120.0, 300.0),
        (rectangle_outline(400, 300, 0, "mm"), Toward(1, -1), 120.0, 0.0),
        (rectangle_outline(400, 300, 30, "mm"), Toward(0, 1), 30 - 18.0, 200 - 6.0),
        (rectangle_outline(400, 300, 30, "mm"), Toward(0, 1), -50.0, 170.0),
        (ellipse_outline(400, 400), Toward(0, -1), 200.0 + 120.0, -160.0),
        (ellipse_outline(400, 300), Toward(1, 1), 120.0, 150.0 + 120.0),
        (d_outline(400, 360, None, False, 0.0, "mm"), Toward(1, 1), -120.0, 160.0 + 160.0),
        # A notch in the side: the outermost of three crossings counts.
        (polygon_outline([(-100, 0), (100, 0), (60, 50), (90, 100), (-100, 100)], 0, "mm"), Toward(0, 1), 75.0, 75.0),
        (
            polygon_outline(
                [(-100, 0), (100, 0), (100, 90), (80, 90), (80, 40), (50, 40), (50, 150), (-100, 150)], 0, "mm"
            ),
            Toward(0, 1),
            60.0,
            100.0,
        ),
    ],
)
def test_the_edge_is_met_where_the_outline_is(curve, toward, station, reach):
    assert edge(curve, 0.0, toward).reach_mm(station) == pytest.approx(reach, abs=1e-9)


def test_a_pitched_seat_is_seen_foreshortened():
    seen = edge(ellipse_outline(400, 300), 10.0, Toward(1, 1))
    assert seen.reach_mm(0.0) == pytest.approx(300 * math.cos(math.radians(10)), abs=1e-9)


@given(
    st.floats(-0.6, 0.6), st.floats(-0.6, 0.6), st.floats(8, 40), st.sampled_from(((0, 1), (0, -1), (1, 1), (1, -1)))
)
@settings(max_examples=60)
def test_the_foots_outermost_point_is_that_of_a_cylinder_cut_by_the_floor(x, y, radius, toward):
    raw = Raw(replace(PITCHED, foot_diameter_mm=2 * radius), False, SHARP)
    from jigs.inside import Foot

    foot = Foot(raw.mortise, radius)
    point = foot.outermost((x, y), Toward(*toward))
    assert point == pytest.approx(raw.outermost((x, y, -1.0), *toward), abs=1e-9)
    assert foot.leaning(point, Toward(*toward)) == pytest.approx((x, y), abs=1e-12)


# ---------------------------------------------------------------- what is refused, and in which words


def test_one_known_is_told_what_to_add():
    assert refusal(RIGHT_FRONT, {"splay": 12.0}) == (
        "splay alone says how far the leg leans to its side",
        "add one of rake, resultant, sightline, foot_along, inside_end or axis",
    )
    assert refusal(RIGHT_FRONT, {"resultant": 12.0})[1] == (
        "add one of splay, rake, sightline, foot_across, foot_along, inside_side or inside_end"
    )
    assert refusal(RIGHT_FRONT, {}) == (
        "nothing says how the leg leans",
        "give two, such as splay and rake, or inside_side and inside_end",
    )


def test_a_splay_over_the_whole_lean_is_told_by_how_much_and_what_would_do():
    rule, cure = refusal(RIGHT_FRONT, {"splay": 12.0, "resultant": 11.0})
    assert rule == "no leg has both splay 12° and resultant 11°: with splay 12° the nearest resultant is 12°, 1° more"
    assert cure == "the nearest that would do is resultant 12° or splay 11°"


def test_an_axis_shorter_than_plumb_is_told_its_bounds():
    assert refusal(RIGHT_FRONT, {"splay": 12.0, "axis": 300.0}) == (
        "axis 300 mm is out of reach",
        "legs that lean no more than 60° have 405 mm to 810 mm",
    )


def test_knowns_that_both_say_how_far_to_the_side_disagree_by_a_number():
    across = 125.0 + 405.0 * TAN[12]
    rule, cure = refusal(RIGHT_FRONT, {"splay": 12.0, "foot_across": 220.0})
    assert rule == (
        f"splay 12° and foot_across 220 mm disagree by {220 - across:.3f} mm: "
        f"with splay 12° foot_across is always {across:.3f} mm"
    )
    assert cure == "keep one of them, and add one of rake, resultant, sightline, foot_along, inside_end or axis"
    rule, _ = refusal(RIGHT_FRONT, {"splay": 12.0, "foot_across": across})
    assert rule.endswith(f"foot_across {across:.3f} mm say the same of this leg, how far the leg leans to its side")


def test_whole_lean_and_length_say_the_same_of_a_level_seat():
    length = 405.0 / math.cos(math.radians(15))
    rule, cure = refusal(RIGHT_FRONT, {"resultant": 15.0, "axis": 430.0})
    assert rule == (
        f"resultant 15° and axis 430 mm disagree by {430 - length:.3f} mm: "
        f"with resultant 15° axis is always {length:.3f} mm"
    )
    rule, cure = refusal(RIGHT_FRONT, {"resultant": 15.0, "axis": length})
    assert rule.endswith("say the same of this leg, how far the leg leans in all, not which way")
    assert cure.startswith("keep one of them, and add one of splay, rake, sightline, ")


def test_whole_lean_from_the_seat_and_length_make_a_leg_of_a_pitched_seat():
    raw = Raw(PITCHED, True, PLAIN)
    knowns = {name: raw.value(name, (0.2, -0.15, -1.0)) for name in ("resultant", "axis")}
    solution = solve(PITCHED, knowns, True, SHARP)
    assert solution.direction == pytest.approx((0.2, -0.15, -1.0), abs=1e-7)
    feeds_forward(raw, knowns, solution.direction)
    assert solution.others == 1


def test_a_straight_side_and_a_splay_say_the_same():
    rule, _ = refusal(RIGHT_FRONT, {"inside_side": 10.0, "splay": 9.0})
    assert rule == "inside_side 10 mm and splay 9° disagree by 1.978°: with inside_side 10 mm splay is always 7.022°"


def test_a_leg_out_of_its_ray_is_told_where_the_rake_would_do():
    rule, cure = refusal(RIGHT_FRONT, {"sightline": 40.0, "rake": -5.0})
    assert rule == "no leg has both sightline 40° and rake -5°: with sightline 40° the nearest rake is 0°, 5° more"
    assert cure.startswith("the nearest that would do is rake 0.001° or sightline 92.")


def test_values_that_no_leg_has_are_refused():
    assert refusal(RIGHT_FRONT, {"splay": 75.0, "rake": 5.0})[0] == "splay 75° is not between -60 and 60 degrees"
    assert refusal(RIGHT_FRONT, {"splay": 5.0, "resultant": -5.0}) == (
        "resultant -5° is not between 0 and 60 degrees",
        "a resultant is never negative",
    )
    assert refusal(RIGHT_FRONT, {"splay": math.nan, "rake": 5.0})[0] == "splay is not a number"
    assert refusal(RIGHT_FRONT, {"slant": 4.0, "rake": 5.0})[0] == "slant is nothing that a leg is known by"
    assert refusal(RIGHT_FRONT, {"foot_across": 3000.0, "rake": 5.0})[0] == "foot_across 3000 mm is out of reach"
    assert refusal(RIGHT_FRONT, {"sightline": 30.0, "resultant": 0.0}) == (
        "with resultant 0° the leg stands plumb and has no sightline",
        "leave sightline out",
    )
    low = replace(RIGHT_FRONT, frame=SeatFrame(0.0, 40.0))
    assert refusal(low, {"splay": 5.0, "rake": 5.0}) == (
        "the seat's underside stands on the floor or below it there",
        "raise the seat",
    )
    stump = replace(RIGHT_FRONT, frame=SeatFrame(0.0, 60.0))
    assert (
        refusal(stump, {"inside_side": 5.0, "rake": 5.0})[0]
        == "inside_side needs a foot that is narrower than the leg is long"
    )


def test_messages_speak_in_the_makers_units():
    rule, _ = refusal(RIGHT_FRONT, {"splay": 12.0, "foot_across": 220.0}, units="in")
    assert (
        rule == "splay 12° and foot_across 8.661 in disagree by 0.351 in: with splay 12° foot_across is always 8.31 in"
    )


MISSES = [
    ("splay", "resultant", (14.0, 11.3)),
    ("splay", "axis", (14.0, 407.0)),
    ("foot_along", "axis", (-120.0, 420.0)),
    ("foot_across", "resultant", (260.0, 12.0)),
    ("inside_side", "resultant", (60.0, 3.0)),
    ("inside_end", "axis", (-90.0, 398.0)),
    ("inside_side", "splay", (10.0, 21.0)),
    ("sightline", "foot_across", (30.0, 110.0)),
]


@pytest.mark.parametrize("from_seat", [False, True])
@pytest.mark.parametrize("units", ["mm", "in"])
@pytest.mark.parametrize(("one", "other", "values"), MISSES)
def test_what_is_said_to_do_does(one, other, values, units, from_seat):
    knowns = dict(zip((one, other), values, strict=True))
    _, cure = refusal(PITCHED, knowns, from_seat, ROUND, units=units)
    assert cure.startswith("the nearest that would do is ")
    for words in cure.removeprefix("the nearest that would do is ").split(" or "):
        name, value = words.split(" ", 1)
        size = float(value.split("°")[0].split(" ")[0]) * (25.4 if value.endswith("in") else 1.0)
        fixed = {**knowns, name: size}
        feeds_forward(Raw(PITCHED, from_seat, Oval(340, 340)), fixed, solve(PITCHED, fixed, from_seat, ROUND).direction)


# ---------------------------------------------------------------- more knowns than two


def test_three_knowns_that_agree_make_a_leg_and_choose_its_branch():
    whole = math.degrees(math.atan(math.hypot(TAN[12], TAN[9])))
    solution = solve(RIGHT_FRONT, {"splay": 12.0, "resultant": whole + 5e-7, "rake": -9.0}, False, SHARP)
    assert solution.direction == pytest.approx((TAN[12], TAN[9], -1.0), abs=1e-7)
    assert (solution.others, solution.note) == (0, "")


def test_two_that_say_the_same_and_a_third_make_a_leg():
    across = 125.0 + 405.0 * TAN[12]
    solution = solve(RIGHT_FRONT, {"splay": 12.0, "foot_across": across, "rake": 9.0}, False, SHARP)
    assert solution.direction == pytest.approx((TAN[12], -TAN[9], -1.0), abs=1e-12)


def test_three_that_do_not_agree_are_told_which_two_to_keep():
    rule, cure = refusal(RIGHT_FRONT, {"splay": 12.0, "rake": 9.0, "resultant": 16.0})
    assert rule == (
        "splay, rake and resultant do not agree: "
        "with splay and rake resultant comes to 14.846° and not 16°, 1.154° less"
    )
    assert cure == "keep splay and rake, and leave resultant out"


def test_a_small_disagreement_is_shown_with_decimals_enough():
    rule, _ = refusal(RIGHT_FRONT, {"splay": 12.0, "rake": 9.0, "resultant": 14.846})
    assert "resultant comes to 14.84636° and not 14.846°, 0.00036° more" in rule


def test_only_what_disagrees_is_to_be_left_out():
    across = 125.0 + 405.0 * TAN[12]
    _, cure = refusal(RIGHT_FRONT, {"splay": 12.0, "rake": 9.0, "foot_across": across, "axis": 500.0})
    assert cure.endswith(", and leave axis out")


# ---------------------------------------------------------------- equally far from two feet


def test_a_foot_stands_equally_far_from_its_neighbours():
    feet = ((-160.0, 10.0), (150.0, 320.0))
    solution = solve(RIGHT_FRONT, {"resultant": 14.0}, False, SHARP, between=feet)
    foot = Raw(RIGHT_FRONT, False).foot(solution.direction)
    assert math.dist(foot, feet[0]) == pytest.approx(math.dist(foot, feet[1]), abs=1e-9)
    assert lean_of(solution.direction, 1, -1).resultant_deg == pytest.approx(14.0, abs=1e-9)


def test_equal_feet_alone_ask_for_one_known_more():
    rule, cure = refusal(RIGHT_FRONT, {}, between=((-160.0, 10.0), (150.0, 320.0)))
    assert rule == "equal_from alone says the foot's place between its neighbours"
    assert cure.startswith("add one of splay, rake, ")


def test_a_leg_between_twins_is_told_that_equal_feet_do_not_say_how_far():
    rule, _ = refusal(BACK_CENTRE, {}, between=((-160.0, 0.0), (160.0, 0.0)))
    assert rule == "equal_from does not say how far the leg on the centre line leans"


def test_equal_feet_out_of_reach_of_a_length_are_told():
    rule, cure = refusal(RIGHT_FRONT, {"axis": 409.0}, between=((-160.0, -200.0), (150.0, -90.0)))
    assert rule.startswith("no leg has both equal_from and axis 409 mm: with equal_from the nearest axis is ")
    assert cure.startswith("the nearest that would do is axis ")


# ---------------------------------------------------------------- roots


@given(
    st.lists(st.floats(-2.5, 2.5).map(lambda x: round(x, 2)), min_size=1, max_size=4, unique=True), st.floats(0.1, 50)
)
@settings(max_examples=60)
def test_a_polynomials_roots_are_found_in_their_interval(roots, size):
    coefficients = tuple(float(c) for c in size * np.polynomial.polynomial.polyfromroots(roots))
    expected = sorted(r for r in roots if -2.0 <= r <= 2.0)
    found = real_roots(coefficients, -2.0, 2.0)
    assert found == pytest.approx(expected, abs=1e-6) or any(abs(abs(r) - 2.0) < 1e-9 for r in roots)


def test_a_double_root_is_found_once():
    assert real_roots((0.09, -0.6, 1.0), -1.0, 1.0) == pytest.approx([0.3], abs=1e-9)


@given(st.floats(-0.9, 0.9), st.floats(0.5, 6))
@settings(max_examples=40)
def test_a_bracketed_root_is_that_of_brentq(shift, steep):
    def f(x):
        return math.atan(steep * (x - shift)) + 0.1 * math.sin(3 * x) - 0.1 * math.sin(3 * shift)

    assert bracketed(f, -1.5, 1.5, f(-1.5), f(1.5)) == pytest.approx(
        optimize.brentq(f, -1.5, 1.5, xtol=1e-15), abs=1e-12
    )


def test_two_roots_between_samples_are_both_found():
    found = sampled_roots(lambda t: (t - 0.501) * (t - 0.502), 0.0, 1.0, 8, 1e-9)
    assert found == pytest.approx([0.501, 0.502], abs=1e-12)
    at_the_end = sampled_roots(lambda t: (t - 0.001) * (t - 0.002), 0.0, 1.0, 8, 1e-9)
    assert at_the_end == pytest.approx([0.001, 0.002], abs=1e-12)


def test_a_function_that_is_nought_over_a_stretch_is_told():
    with pytest.raises(Flat):
        sampled_roots(lambda t: max(0.0, t - 0.5), 0.0, 1.0, 8, 1e-9)
