"""Whether stretchers fit: tenons that come through or meet, boring that is too steep, what they run into.

Owns the cautions about stretchers. Imports `stretchers`, `bores`, `frames`, `names`, `problems`, `quantities`; no
drawing. Floor frame, mm and degrees, as in `stretchers`.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import combinations
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from jigs.bores import STEEP_DEG
from jigs.frames import Vector, dot, further, minus, nearest_on_segments, unit
from jigs.names import in_words
from jigs.problems import Caution
from jigs.quantities import Units, format_angle, format_length
from jigs.stretchers import Member, Stretcher, StretcherEnd

# The generators of a tenon that are followed to the far side of its host, and how closely that finds where the first
# one comes out, for hosts up to 60 mm thick.
GENERATORS = 360
THROUGH_TOLERANCE_MM = 0.01
# How closely the overlap of two tenons is found; less than a saw's kerf says nothing.
MEET_TOLERANCE_MM = 0.1


class Slab(NamedTuple):
    """The seat as stretchers may run into it: a point of its top face, the direction square to it and up, in mm."""

    top: Vector
    normal: Vector
    thickness_mm: float


def cautions(
    stretchers: Sequence[Stretcher],
    members: Sequence[Member],
    units: Units = "mm",
    others: Sequence[Member] = (),
    seat: Slab | None = None,
) -> tuple[Caution, ...]:
    """What is unwise about stretchers that can be made, in their order.

    `others` are bars that none is tenoned into and that stand in the way all the same, such as spindles.
    """
    hosts = _hosts(stretchers, members)
    found = [*_steep(stretchers), *_wide(stretchers, hosts, units), *_through(stretchers, hosts, units)]
    found += [*_meeting(stretchers, units), *_crossing(stretchers, units)]
    found += [*_blocked(stretchers, (*members, *others), units), *_on_the_floor(stretchers, units)]
    if seat is not None:
        found += _in_the_seat(stretchers, seat, units)
    return tuple(caution for _, caution in sorted(found, key=lambda pair: pair[0]))


def _hosts(stretchers: Sequence[Stretcher], members: Sequence[Member]) -> dict[str, Member]:
    return {member.name: member for member in (*members, *(stretcher.member for stretcher in stretchers))}


# The index of a stretcher, and what is unwise about it.
_Finding = tuple[int, Caution]


def _finding(index: int, code: str, text: str) -> _Finding:
    return index, Caution(code, f"stretchers[{index}]", text)


def _steep(stretchers: Sequence[Stretcher]) -> Iterator[_Finding]:
    for index, stretcher in enumerate(stretchers):
        for end in stretcher.ends:
            lean = abs(90.0 - end.bore_deg)
            if lean > STEEP_DEG:
                text = f"{stretcher.name}: the bit leans {format_angle(lean)} from square to {end.host} and will skate"
                cure = "start the hole square, or bring the joints nearer to one height"
                yield _finding(index, "stretcher-steep", f"{text}; {cure}")


def _wide(stretchers: Sequence[Stretcher], hosts: Mapping[str, Member], units: Units) -> Iterator[_Finding]:
    for index, stretcher in enumerate(stretchers):
        for end in stretcher.ends:
            there = 2 * hosts[end.host].radius_mm(end.along_host_mm)
            if stretcher.diameter_mm > there:
                thick, thin = (format_length(mm, units) for mm in (stretcher.diameter_mm, there))
                text = f"{stretcher.name}: its shoulder of {thick} is wider than {end.host} there, {thin}"
                yield _finding(index, "shoulder-wide", f"{text}; make the stretcher thinner or its host thicker")


def _through(stretchers: Sequence[Stretcher], hosts: Mapping[str, Member], units: Units) -> Iterator[_Finding]:
    for index, stretcher in enumerate(stretchers):
        for end in stretcher.ends:
            longest = longest_blind_tenon_mm(end, hosts[end.host], stretcher.tenon_diameter_mm)
            out = stretcher.tenon_mm - longest
            if out > 0.0:
                far = f"{format_length(out, units)} at the far side of {end.host}"
                text = f"{stretcher.name}: its tenon comes out {far}"
                cure = f"{format_length(longest, units)} stays inside, if it is not meant to be wedged through"
                yield _finding(index, "tenon-through", f"{text}; {cure}")


def longest_blind_tenon_mm(end: StretcherEnd, host: Member, tenon_diameter_mm: float) -> float:
    """The longest square-ended tenon from the shoulder of which no part comes out of the host's far side.

    Each of GENERATORS lines along the tenon's surface is followed to the host's cone; within THROUGH_TOLERANCE_MM. The
    host is taken as endless. From the joint let w run square to the host's axis away from the shoulder, s along it, y
    across both. The line at turn f round a tenon of radius t, q mm beyond the host's axis, is at
    w = q sin b + t cos b cos f, y = t sin f, s = t sin b cos f - q cos b, where the host's radius is r + k s: a
    quadratic in q.
    """
    bore = math.radians(end.bore_deg)
    sine, cosine, k = math.sin(bore), math.cos(bore), host.widening
    turn = np.arange(GENERATORS) * (2 * math.pi / GENERATORS)
    across, aside = tenon_diameter_mm / 2 * np.cos(turn), tenon_diameter_mm / 2 * np.sin(turn)
    radius = host.radius_mm(end.along_host_mm) + k * across * sine
    a = sine**2 - (k * cosine) ** 2
    b = across * sine * cosine + k * cosine * radius
    c = (across * cosine) ** 2 + aside**2 - radius**2
    beyond = (-b + np.sqrt(np.maximum(b**2 - a * c, 0.0))) / a
    return end.reach_mm + float(beyond.min())


@dataclass(frozen=True, slots=True)
class Tenon:
    """A tenon as a cylinder with square ends: its axis from shoulder to end, and its radius."""

    index: int
    name: str
    shoulder: Vector
    tip: Vector
    radius_mm: float


def tenons(stretchers: Sequence[Stretcher]) -> Iterator[tuple[str, Tenon]]:
    """Each tenon with the name of the host that it is in; those of no length are none."""
    for index, stretcher in enumerate(stretchers):
        for end, other in (stretcher.ends, stretcher.ends[::-1]):
            way = unit(minus(other.axis_point_mm, end.axis_point_mm))
            shoulder = further(end.axis_point_mm, way, end.reach_mm)
            tip = further(shoulder, way, -stretcher.tenon_mm)
            if stretcher.tenon_mm > 0.0:
                yield end.host, Tenon(index, stretcher.name, shoulder, tip, stretcher.tenon_diameter_mm / 2)


def _meeting(stretchers: Sequence[Stretcher], units: Units) -> Iterator[_Finding]:
    """Tenons that run into each other inside their host."""
    for (host, one), (same, other) in combinations(tenons(stretchers), 2):
        if host != same:
            continue
        *_, apart = nearest_on_segments(one.shoulder, one.tip, other.shoulder, other.tip)
        # With rounded ends they would be larger: where those are clear, so are these.
        if apart < one.radius_mm + other.radius_mm and (overlap := -wood_between_mm(one, other)) > MEET_TOLERANCE_MM:
            text = f"{other.name}: its tenon meets that of {one.name} inside {host} by {format_length(overlap, units)}"
            yield _finding(other.index, "tenons-meet", f"{text}; set one higher, or make the tenons shorter or thinner")


def wood_between_mm(one: Tenon, other: Tenon) -> float:
    """The least wood between two tenons, or minus how far one must move to clear the other.

    It is the widest slot between parallel planes that parts them: sought over all directions, then closer about the two
    best that lie apart, within MEET_TOLERANCE_MM.
    """
    directions = _about(np.array([0.0, 0.0, 1.0]), math.pi)
    widths = _slot_mm(one, other, directions)
    first = directions[int(np.argmax(widths))]
    apart = np.where(directions @ first < _APART, widths, -np.inf)
    return max(_closer_mm(one, other, start) for start in (first, directions[int(np.argmax(apart))]))


def _closer_mm(one: Tenon, other: Tenon, best: NDArray[np.float64]) -> float:
    """The widest slot about a direction."""
    reach = math.pi
    for _ in range(_ROUNDS):
        reach /= _CLOSER
        directions = _about(best, reach)
        best = directions[int(np.argmax(_slot_mm(one, other, directions)))]
    return float(_slot_mm(one, other, best[None, :])[0])


# Directions are looked at in so many steps, each round so much closer; two are apart where their cosine is less.
_STEPS, _ROUNDS, _CLOSER, _APART = 41, 7, 4.0, 0.99


def _about(middle: NDArray[np.float64], reach: float) -> NDArray[np.float64]:
    """Directions up to `reach` (an angle) from `middle`, over the whole sphere for pi."""
    aside = np.cross(middle, np.eye(3)[np.argmin(np.abs(middle))])
    aside /= np.linalg.norm(aside)
    tilt, turn = np.meshgrid(np.linspace(0.0, reach, _STEPS), np.linspace(0.0, 2 * math.pi, 2 * _STEPS))
    round_about = np.cos(turn)[..., None] * aside + np.sin(turn)[..., None] * np.cross(middle, aside)
    found: NDArray[np.float64] = np.cos(tilt)[..., None] * middle + np.sin(tilt)[..., None] * round_about
    return found.reshape(-1, 3)


def _slot_mm(one: Tenon, other: Tenon, directions: NDArray[np.float64]) -> NDArray[np.float64]:
    return -_support_mm(one, directions) - _support_mm(other, -directions)


def _support_mm(tenon: Tenon, directions: NDArray[np.float64]) -> NDArray[np.float64]:
    """How far a tenon reaches in each direction, from the origin."""
    ends = np.maximum(directions @ np.array(tenon.shoulder), directions @ np.array(tenon.tip))
    along = directions @ np.array(unit(minus(tenon.tip, tenon.shoulder)))
    reach: NDArray[np.float64] = ends + tenon.radius_mm * np.sqrt(np.maximum(1.0 - along**2, 0.0))
    return reach


def _crossing(stretchers: Sequence[Stretcher], units: Units) -> Iterator[_Finding]:
    """Stretchers that are not joined, nor share a host, and yet run through each other."""
    for (_, one), (index, other) in combinations(enumerate(stretchers), 2):
        hosts = {end.host for end in one.ends}, {end.host for end in other.ends}
        if hosts[0] & hosts[1] or one.name in hosts[1] or other.name in hosts[0]:
            continue
        apart = nearest_on_segments(*(end.axis_point_mm for s in (one, other) for end in s.ends))[2]
        need = (one.diameter_mm + other.diameter_mm) / 2
        if apart < need:
            text = f"{other.name}: it runs into {one.name}: their axes pass {format_length(apart, units)} apart"
            cure = f"{format_length(need, units)} clears them, or halve them into each other"
            yield _finding(index, "stretchers-cross", f"{text}; {cure}")


def _between_shoulders(stretcher: Stretcher) -> tuple[Vector, Vector]:
    first, second = stretcher.ends
    way = unit(minus(second.axis_point_mm, first.axis_point_mm))
    return further(first.axis_point_mm, way, first.reach_mm), further(second.axis_point_mm, way, -second.reach_mm)


def _reach_mm(stretcher: Stretcher, square_to: Vector) -> float:
    """How far the round of a stretcher reaches from its axis in a direction."""
    way = unit(minus(*(end.axis_point_mm for end in stretcher.ends)))
    return stretcher.diameter_mm / 2 * math.sqrt(max(0.0, 1.0 - dot(way, square_to) ** 2))


def _blocked(stretchers: Sequence[Stretcher], members: Sequence[Member], units: Units) -> Iterator[_Finding]:
    """Stretchers that run through legs, posts or spindles that they are not tenoned into."""
    for index, stretcher in enumerate(stretchers):
        hosts, axis = {end.host for end in stretcher.ends}, _between_shoulders(stretcher)
        found: list[tuple[float, float, str]] = []
        for member in members:
            _, share, apart = nearest_on_segments(*axis, member.start, member.end)
            need = stretcher.diameter_mm / 2 + member.radius_mm(share * member.length_mm)
            if member.name not in hosts and apart < need:
                found.append((apart - need, need, member.name))
        if found:
            short, need, nearest = min(found)
            text = f"{stretcher.name}: it runs through {in_words([name for *_, name in found])}: its axis passes"
            far = f"{format_length(need + short, units)} from that of {nearest}"
            clear = f"{format_length(need, units)} clears it"
            yield _finding(index, "stretcher-blocked", f"{text} {far}, and {clear}; move one of them")


def _on_the_floor(stretchers: Sequence[Stretcher], units: Units) -> Iterator[_Finding]:
    for index, stretcher in enumerate(stretchers):
        lowest = min(point[2] for point in _between_shoulders(stretcher)) - _reach_mm(stretcher, (0.0, 0.0, 1.0))
        if lowest < 0.0:
            text = f"{stretcher.name}: it reaches {format_length(-lowest, units)} below the floor; set it higher"
            yield _finding(index, "stretcher-low", text)


def _in_the_seat(stretchers: Sequence[Stretcher], seat: Slab, units: Units) -> Iterator[_Finding]:
    """Stretchers that come into the seat from below or from above."""
    for index, stretcher in enumerate(stretchers):
        heights = [dot(minus(point, seat.top), seat.normal) for point in _between_shoulders(stretcher)]
        middle = sum(heights) / 2 + seat.thickness_mm / 2
        below = middle < 0.0
        clear = -seat.thickness_mm - max(heights) if below else min(heights)
        deep = _reach_mm(stretcher, seat.normal) - clear
        if deep > 0.0:
            text = f"{stretcher.name}: it comes {format_length(deep, units)} into the seat"
            yield _finding(index, "stretcher-in-seat", f"{text}; set it {'lower' if below else 'higher'}")
