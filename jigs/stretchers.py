"""Stretchers: where each meets its legs or other stretchers, how long it is, and how its mortises are bored.

Owns the placing of stretchers on their hosts and the refusal of those that cannot be made. Whether their tenons fit is
`joinery`'s, how they go together `assembly_order`'s. Imports `frames`, `problems`, `spec_problems`, `quantities`; not
the spec's models.

Everything is in the floor frame (z = 0 the floor, x right, y to the back, z up), mm and degrees.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Any, NamedTuple

from jigs.frames import Vector, dot, further, minus, unit
from jigs.problems import Problem, shown
from jigs.quantities import Units, format_length
from jigs.spec_problems import nearest

# A bar that falls less than this from end to end counts as level: a height names no point on it that one could mark.
LEVEL_MM = 1.0
# A point this near to the end of its host is on it: above rounding, below what can be marked.
ON_END_MM = 1e-6

_UP: Vector = (0.0, 0.0, 1.0)
_BACK: Vector = (0.0, 1.0, 0.0)


@dataclass(frozen=True, slots=True)
class Member:
    """A tapered round bar that stretchers may be tenoned into.

    For a leg `start` is on the underside and `end` on the floor, for a post `start` is on the seat and `end` at its
    top, for a stretcher they are its first and second axis point. Clock positions are read from `zero`, which need not
    be square to the axis but may not be parallel to it: for a leg the direction of its lean (toward the foot), for a
    plumb one straight out of its own end of the seat, for a stretcher straight up. `upright` says where fractions run
    from: up from the lower end (a leg, a post), or else from `start` (a stretcher).
    """

    name: str
    start: Vector
    end: Vector
    start_diameter_mm: float
    end_diameter_mm: float
    zero: Vector
    upright: bool = True

    @property
    def length_mm(self) -> float:
        """From start to end along the axis."""
        return math.dist(self.start, self.end)

    @property
    def along(self) -> Vector:
        """The unit direction from start to end."""
        return unit(minus(self.end, self.start))

    @property
    def widening(self) -> float:
        """Growth of the radius for each mm from start to end."""
        return (self.end_diameter_mm - self.start_diameter_mm) / 2 / self.length_mm

    def radius_mm(self, from_start_mm: float) -> float:
        """Square to the axis, at a distance along it."""
        return self.start_diameter_mm / 2 + self.widening * from_start_mm


@dataclass(frozen=True, slots=True)
class StretcherSpec:
    """What is asked for: the two hosts, and where on them by `heights_mm` or by `fractions`, one for each end.

    Heights are those of the points on the hosts' axes above the floor. Fractions are of the host's axis: on a leg or
    post 0 is its lower end and 1 its upper one (a leg: floor and underside); on a stretcher 0 is its first axis point
    and 1 its second. `tenon_mm` is the length of each tenon beyond its shoulder.
    """

    name: str
    between: tuple[str, str]
    heights_mm: tuple[float, float] | None
    fractions: tuple[float, float] | None
    diameter_mm: float
    tenon_mm: float
    tenon_diameter_mm: float


@dataclass(frozen=True, slots=True)
class StretcherEnd:
    """One joint.

    `bore_deg` (0 to 180, 90 is square) is the angle between the stretcher's axis leaving the joint and the host's axis
    toward its `end` (a leg's foot). `clock_deg` (0 up to 360) is the position round the host, clockwise as seen looking
    along its axis from `start` to `end` (down a leg), from its `zero`. `reach_mm` runs along the stretcher from the
    host's axis to its surface, `along_host_mm` along the host from its `start` to `axis_point_mm`.
    """

    host: str
    bore_deg: float
    clock_deg: float
    height_mm: float
    axis_point_mm: Vector
    reach_mm: float
    along_host_mm: float


@dataclass(frozen=True, slots=True)
class Stretcher:
    """A stretcher worked out. `shoulder_mm` runs between the points where its axis pierces its hosts' surfaces,
    `over_tenons_mm` adds a tenon at each end.
    """

    name: str
    between_axes_mm: float
    shoulder_mm: float
    over_tenons_mm: float
    ends: tuple[StretcherEnd, StretcherEnd]
    diameter_mm: float
    tenon_mm: float
    tenon_diameter_mm: float

    @property
    def member(self) -> Member:
        """The stretcher as a host, from axis point to axis point; a plumb one counts its clock from the back."""
        first, second = (end.axis_point_mm for end in self.ends)
        x, y, _ = minus(second, first)
        zero = _UP if math.hypot(x, y) > ON_END_MM else _BACK
        return Member(self.name, first, second, self.diameter_mm, self.diameter_mm, zero, upright=False)

    def data(self) -> dict[str, Any]:
        """As `angles --json` gives it."""
        return {
            "name": self.name,
            "between_axes_mm": self.between_axes_mm,
            "shoulder_mm": self.shoulder_mm,
            "over_tenons_mm": self.over_tenons_mm,
            "ends": [
                {
                    "in": end.host,
                    "bore_deg": end.bore_deg,
                    "clock_deg": end.clock_deg,
                    "height_mm": end.height_mm,
                    "axis_point_mm": list(end.axis_point_mm),
                }
                for end in self.ends
            ],
        }


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that cannot be made: which stretcher (its index), which key of it, and the parts of a `Problem`."""

    index: int
    field: str
    given: str
    rule: str
    cure: str = ""

    def problem(self) -> Problem:
        """With its place in the file."""
        return Problem(f"stretchers[{self.index}].{self.field}", self.given, self.rule, self.cure)


class StretcherError(ValueError):
    """Stretchers that cannot be made, with all that is wrong with them in the order of the file."""

    def __init__(self, faults: Sequence[Fault]) -> None:
        super().__init__("\n".join(fault.problem().text() for fault in faults))
        self.faults = tuple(faults)


class _Host(NamedTuple):
    """A member and the part of its axis, from start, where its surface is bare wood: a stretcher's is between its
    shoulders.
    """

    member: Member
    bare_from_mm: float
    bare_to_mm: float


def place(specs: Sequence[StretcherSpec], members: Sequence[Member], units: Units = "mm") -> tuple[Stretcher, ...]:
    """The stretchers worked out, in the order given; each may join members and other stretchers in any order.

    `units` are those that messages speak in. Raises StretcherError with every fault at once; a stretcher whose host is
    at fault is not reported as well.
    """
    faults = [*_bad_names(specs, members), *_bad_sizes(specs, units)]
    hosts = {member.name: _Host(member, 0.0, member.length_mm) for member in members}
    placed: dict[int, Stretcher] = {}
    at_fault = {fault.index for fault in faults}
    for index in _hosts_first(specs, at_fault, faults):
        spec = specs[index]
        if not all(name in hosts for name in spec.between):
            continue
        found = _placed(index, spec, (hosts[spec.between[0]], hosts[spec.between[1]]), units)
        if isinstance(found, Stretcher):
            placed[index] = found
            first, second = found.ends
            hosts[spec.name] = _Host(found.member, first.reach_mm, found.between_axes_mm - second.reach_mm)
        else:
            faults += found
    if faults:
        raise StretcherError(sorted(faults, key=lambda fault: fault.index))
    return tuple(placed[index] for index in range(len(specs)))


def _bad_names(specs: Sequence[StretcherSpec], members: Sequence[Member]) -> Iterator[Fault]:
    taken = {member.name for member in members}
    known = [*(member.name for member in members), *(spec.name for spec in specs)]
    for index, spec in enumerate(specs):
        if spec.name in taken:
            yield Fault(index, "name", shown(spec.name), "is the name of another part", "give it a name of its own")
        taken.add(spec.name)
        for k, name in enumerate(spec.between):
            if name == spec.name:
                rule, cure = "is this stretcher itself", "name what it is tenoned into"
                yield Fault(index, f"between[{k}]", shown(name), rule, cure)
            elif name not in known:
                cure = _meant(name, known, spec.name)
                yield Fault(index, f"between[{k}]", shown(name), "is no leg or stretcher", cure)
        if spec.between[0] == spec.between[1] != spec.name:
            yield Fault(index, "between", shown(spec.between[0]), "stands at both ends", "name two different parts")


def _meant(name: str, known: Sequence[str], own: str) -> str:
    others = [other for other in known if other != own]
    close = nearest(name, others)
    return f"did you mean {shown(close)}?" if close else "there are " + ", ".join(shown(other) for other in others)


def _bad_sizes(specs: Sequence[StretcherSpec], units: Units) -> Iterator[Fault]:
    for index, spec in enumerate(specs):
        if spec.tenon_diameter_mm > spec.diameter_mm:
            given, whole = format_length(spec.tenon_diameter_mm, units), format_length(spec.diameter_mm, units)
            yield Fault(index, "tenon_diameter", given, f"is thicker than the stretcher, {whole}", "make it thinner")
        if (spec.heights_mm is None) == (spec.fractions is None):
            given = "not given" if spec.heights_mm is None else "given beside heights"
            cure = "say heights = [first, second] above the floor, or fractions = [first, second] of the hosts"
            yield Fault(index, "fractions", given, "and one of heights and fractions is needed", cure)


def _hosts_first(specs: Sequence[StretcherSpec], at_fault: set[int], faults: list[Fault]) -> Iterator[int]:
    """The indices of sound stretchers, each after its hosts; those that rest on themselves are added to `faults`."""
    by_name = {spec.name: index for index, spec in enumerate(specs)}
    waiting = {
        index: {by_name[name] for name in spec.between if name in by_name}
        for index, spec in enumerate(specs)
        if index not in at_fault
    }
    while ready := [index for index, hosts in waiting.items() if not hosts & waiting.keys()]:
        for index in ready:
            del waiting[index]
            yield index
    for index in waiting:
        if index in _rests_on(index, waiting):
            rule = "rest in the end on this stretcher itself"
            given = " and ".join(shown(name) for name in specs[index].between)
            faults.append(Fault(index, "between", given, rule, "begin with a stretcher between two legs"))


def _rests_on(index: int, waiting: Mapping[int, set[int]]) -> set[int]:
    found: set[int] = set()
    further_on = [index]
    while further_on:
        new = waiting.get(further_on.pop(), set()) - found
        found |= new
        further_on += new
    return found


def _placed(index: int, spec: StretcherSpec, hosts: tuple[_Host, _Host], units: Units) -> Stretcher | list[Fault]:
    faults: list[Fault] = []
    along = [_position(index, spec, k, host, faults, units) for k, host in enumerate(hosts)]
    if faults:
        return faults
    points = [further(host.member.start, host.member.along, s) for host, s in zip(hosts, along, strict=True)]
    between_mm = math.dist(*points)
    if between_mm < ON_END_MM:
        return [Fault(index, "between", "", "its two ends are at one point", "move one of them")]
    way = unit(minus(points[1], points[0]))
    ways = (way, (-way[0], -way[1], -way[2]))
    ends = [_end(index, k, host, along[k], ways[k], faults) for k, host in enumerate(hosts)]
    faults += [*_too_thick(index, spec, hosts, along, units)]
    shoulder_mm = between_mm - sum(end.reach_mm for end in ends if end)
    if not faults and shoulder_mm <= 0.0:
        rule = f"leave no room between them: their surfaces overlap by {format_length(-shoulder_mm, units)}"
        faults.append(Fault(index, "between", " and ".join(map(shown, spec.between)), rule, "move the joints apart"))
    first, second = ends
    if faults or first is None or second is None:
        return faults
    return Stretcher(
        name=spec.name,
        between_axes_mm=between_mm,
        shoulder_mm=shoulder_mm,
        over_tenons_mm=shoulder_mm + 2 * spec.tenon_mm,
        ends=(first, second),
        diameter_mm=spec.diameter_mm,
        tenon_mm=spec.tenon_mm,
        tenon_diameter_mm=spec.tenon_diameter_mm,
    )


def _position(index: int, spec: StretcherSpec, k: int, host: _Host, faults: list[Fault], units: Units) -> float:
    """How far along the host's axis, from its start, end `k` sits."""
    member = host.member
    low, high = member.start[2], member.end[2]
    if spec.fractions is not None:
        from_end = member.upright and low > high
        along = member.length_mm * (1.0 - spec.fractions[k] if from_end else spec.fractions[k])
        field, given = f"fractions[{k}]", f"{spec.fractions[k]:g}"
    elif spec.heights_mm is not None and abs(high - low) > LEVEL_MM:
        along = member.length_mm * (spec.heights_mm[k] - low) / (high - low)
        field, given = f"heights[{k}]", format_length(spec.heights_mm[k], units)
    else:
        rule = f"does not fix a point on {member.name}, which is level"
        given = format_length(spec.heights_mm[k], units) if spec.heights_mm else ""
        faults.append(Fault(index, f"heights[{k}]", given, rule, "say fractions = [0.5, 0.5] for the middle of both"))
        return 0.0
    if not host.bare_from_mm - ON_END_MM <= along <= host.bare_to_mm + ON_END_MM:
        faults.append(Fault(index, field, given, _off_the_host(spec.fractions is not None, host, units)))
    return along


def _off_the_host(by_fraction: bool, host: _Host, units: Units) -> str:
    """The rule for a point beyond the ends of its host, with the bounds in the terms that it was given in."""
    member = host.member
    bounds = [s / member.length_mm for s in (host.bare_from_mm, host.bare_to_mm)]
    heights = [member.start[2] + f * (member.end[2] - member.start[2]) for f in bounds]
    if by_fraction:
        if member.upright and member.start[2] > member.end[2]:
            bounds = [1.0 - f for f in bounds]
        low, high = (f"{f:.3g}" for f in sorted(bounds))
    else:
        low, high = (format_length(z, units) for z in sorted(heights))
    return f"is not between {low} and {high}, where {member.name} can be bored"


def _end(index: int, k: int, host: _Host, along_mm: float, way: Vector, faults: list[Fault]) -> StretcherEnd | None:
    """The joint from which the stretcher leaves in the unit direction `way`.

    A ray from the axis, where the radius is r and grows by w a mm, at an angle b to the axis is t sin b from it and
    t cos b along it after t mm; it is through the surface where t sin b = r + w t cos b.
    """
    member = host.member
    axis = member.along
    cosine, sine = dot(way, axis), math.sqrt(dot(cross(axis, way), cross(axis, way)))
    opening = sine - member.widening * cosine
    reach = member.radius_mm(along_mm) / opening if opening > 0.0 else math.inf
    if not host.bare_from_mm - ON_END_MM <= along_mm + reach * cosine <= host.bare_to_mm + ON_END_MM:
        rule = "is met so steeply or so near its end that the stretcher never leaves its side"
        faults.append(Fault(index, f"between[{k}]", shown(member.name), rule, "move the joint, or set it squarer"))
        return None
    point = further(member.start, axis, along_mm)
    return StretcherEnd(
        host=member.name,
        bore_deg=math.degrees(math.atan2(sine, cosine)),
        clock_deg=clock_deg(member, way),
        height_mm=point[2],
        axis_point_mm=point,
        reach_mm=reach,
        along_host_mm=along_mm,
    )


def _too_thick(
    index: int, spec: StretcherSpec, hosts: tuple[_Host, _Host], along: Sequence[float], units: Units
) -> Iterator[Fault]:
    for host, s in zip(hosts, along, strict=True):
        there = 2 * host.member.radius_mm(s)
        if spec.tenon_diameter_mm >= there:
            rule = f"is as thick as {host.member.name} there, {format_length(there, units)}"
            cure = "make the tenon thinner or its host thicker"
            yield Fault(index, "tenon_diameter", format_length(spec.tenon_diameter_mm, units), rule, cure)


def clock_deg(member: Member, way: Vector) -> float:
    """Where round a member a direction points: clockwise from its `zero`, seen along its axis from start to end.

    From 0 up to 360. Raises ValueError for a member whose zero is parallel to its axis.
    """
    axis = member.along
    zero = further(member.zero, axis, -dot(member.zero, axis))
    if dot(zero, zero) <= ON_END_MM**2 * dot(member.zero, member.zero):
        raise ValueError(f"{member.name}: its clock cannot start along its own axis")
    # A turn that rounds to the whole circle is none.
    return math.degrees(math.atan2(dot(way, cross(axis, unit(zero))), dot(way, unit(zero)))) % 360.0 % 360.0


def cross(u: Vector, v: Vector) -> Vector:
    """The vector product."""
    return (u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0])
