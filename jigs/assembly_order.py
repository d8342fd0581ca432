"""How stretchers and legs are put together: what closes a ring of them, and what driving the legs does to each.

Owns the sentences on assembly. Imports `stretchers`, `frames`, `quantities`; no drawing. Floor frame, mm and degrees,
as in `stretchers`.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import combinations

from jigs.frames import Vector, dot, further, minus, unit
from jigs.quantities import Units, format_angle, format_length
from jigs.stretchers import Member, Stretcher, StretcherEnd, cross

# What two legs and their stretcher give without harm when they are sprung together dry (practice).
SPRING_MM = 3.0
# Tenons whose axes differ by less go home together: over a 25 mm tenon it is 0.2 mm, the play of a hand-fitted joint
# (practice).
PARALLEL_DEG = 0.5


def assembly_note(
    stretchers: Sequence[Stretcher], members: Sequence[Member], drive_mm: float, units: Units = "mm"
) -> list[str]:
    """How the stretchers and their legs can be put together, in sentences for the sheet.

    First which joints can be pushed home together, then for each stretcher what happens to its mortises while all legs
    are driven `drive_mm` into the seat along their own axes: the seat, too, closes a ring.
    """
    uprights = {member.name: member for member in members if member.upright}
    ways = joint_ways(stretchers, uprights)
    driven = (_driven(stretcher, uprights, ways[stretcher.name], drive_mm, units) for stretcher in stretchers)
    return [*_order(stretchers, tuple(uprights), units), *driven]


Ways = tuple[Vector, Vector]


def joint_ways(stretchers: Sequence[Stretcher], uprights: Mapping[str, Member]) -> dict[str, Ways]:
    """How each stretcher's two joints move for each mm that all legs are drawn out of the seat along their own axes.

    A joint in another stretcher moves as that one's ends do, each by its share.
    """
    named = {stretcher.name: stretcher for stretcher in stretchers}
    found: dict[str, Ways] = {}

    def way(end: StretcherEnd) -> Vector:
        if end.host in uprights:
            return uprights[end.host].along
        host = named[end.host]
        (first, second), share = ways(host), end.along_host_mm / host.between_axes_mm
        return further(first, minus(second, first), share)

    def ways(stretcher: Stretcher) -> Ways:
        if stretcher.name not in found:
            found[stretcher.name] = (way(stretcher.ends[0]), way(stretcher.ends[1]))
        return found[stretcher.name]

    return {stretcher.name: ways(stretcher) for stretcher in stretchers}


def change_on_driving_mm(stretcher: Stretcher, ways: Ways, drive_mm: float) -> float:
    """How much further apart (negative: nearer) the two mortises of a stretcher get than they are at home, at most,
    while the legs are drawn `drive_mm` out of the seat, or driven in; `ways` as `joint_ways` gives them.
    """
    home = minus(stretcher.ends[1].axis_point_mm, stretcher.ends[0].axis_point_mm)
    drift = minus(ways[1], ways[0])
    speed = dot(drift, drift)
    # The distance has one least value on the way, and is greatest at one of the ends.
    least = -dot(home, drift) / speed if speed > 0.0 else 0.0
    drawn = (drive_mm, min(drive_mm, max(0.0, least)))
    changes = [math.dist((0.0, 0.0, 0.0), further(home, drift, s)) - stretcher.between_axes_mm for s in drawn]
    return max(changes, key=abs)


def _driven(stretcher: Stretcher, legs: Mapping[str, Member], ways: Ways, drive_mm: float, units: Units) -> str:
    change = change_on_driving_mm(stretcher, ways, drive_mm)
    by, out = format_length(abs(change), units), format_length(drive_mm, units)
    between = [end.host for end in stretcher.ends]
    names, both = (_and(between), "both") if all(host in legs for host in between) else ("the legs", "all")
    head = f"{stretcher.name}: with {names} {out} short of home in the seat its mortises are"
    if abs(change) <= SPRING_MM:
        apart = f"{by} {'further apart' if change > 0.0 else 'nearer together'} than at home"
        return f"{head} {apart}: legs give that much, so fit it first and drive {both} together."
    if change < 0.0:
        cure = f"it holds the legs too far apart: spread them by that as they enter the seat, and drive {both} together"
        return f"{head} {by} nearer together than at home: {cure}."
    if change < 2 * stretcher.tenon_mm:
        cure = f"start its two tenons that much, in all, short of their shoulders, and let them close as {both} are"
        return f"{head} {by} further apart than at home: {cure} driven."
    tenons = f"both tenons of {format_length(stretcher.tenon_mm, units)}"
    return f"{head} {by} further apart than at home, more than {tenons} bridge: fit it when the legs are nearly home."


@dataclass(frozen=True, slots=True)
class _Joint:
    """A tenon in its mortise: its stretcher's index, stretcher and host, whether it is the stretcher's second end, and
    the stretcher's direction from its first end to its second.
    """

    index: int
    parts: tuple[str, str]
    at_second: bool
    way: Vector


def _joints(stretchers: Sequence[Stretcher]) -> list[_Joint]:
    ways = [unit(minus(s.ends[1].axis_point_mm, s.ends[0].axis_point_mm)) for s in stretchers]
    return [
        _Joint(index, (stretcher.name, end.host), end is stretcher.ends[1], ways[index])
        for index, stretcher in enumerate(stretchers)
        for end in stretcher.ends
    ]


def _order(stretchers: Sequence[Stretcher], legs: Sequence[str], units: Units) -> list[str]:
    """What closes the rings of parts, inner ones first; all other joints can be made one after another."""
    if not stretchers:
        return []
    notes: list[str] = []
    waiting = [_in_rings(_joints(stretchers))]
    while waiting:
        rings = waiting.pop()
        for parts in _bound(rings):
            held = [joint for joint in rings if joint.parts[0] in parts]
            groups, angle = _best_split(held)
            closed = {j.index for j in held if not any(set(j.parts) <= group for group in groups)}
            notes.append(_closing([stretchers[k] for k in sorted(closed)], groups, legs, angle, units))
            waiting += [_in_rings([j for j in held if set(j.parts) <= group]) for group in groups]
    alone = (
        "The stretchers and their legs make no closed ring: fit them one after another, in any order. The seat closes "
        "the rings as the legs are driven."
    )
    return notes[::-1] or [alone]


def _groups(links: Mapping[str, set[str]]) -> list[set[str]]:
    """The sets of parts in which every part leads to every other."""
    reach = {part: _reached(part, links) for part in links}
    groups: list[set[str]] = []
    for part, reached in reach.items():
        if not any(part in group for group in groups):
            groups.append({part, *(other for other in reached if part in reach[other])})
    return groups


def _reached(part: str, links: Mapping[str, set[str]]) -> set[str]:
    found, ahead = {part}, [part]
    while ahead:
        new = links[ahead.pop()] - found
        found |= new
        ahead += new
    return found


def _links(joints: Sequence[_Joint]) -> dict[str, set[str]]:
    """Each part of the joints with those that it is joined to."""
    links: dict[str, set[str]] = {}
    for joint in joints:
        for part, other in (joint.parts, joint.parts[::-1]):
            links.setdefault(part, set()).add(other)
    return links


def _bound(joints: Sequence[_Joint]) -> list[set[str]]:
    """The groups of parts that the joints bind together."""
    links = _links(joints)
    groups: list[set[str]] = []
    for part in links:
        if not any(part in group for group in groups):
            groups.append(_reached(part, links))
    return groups


def _in_rings(joints: Sequence[_Joint]) -> list[_Joint]:
    """The joints that do not, alone, hold two groups of parts together."""
    links = _links(joints)
    found = []
    for joint in joints:
        part, other = joint.parts
        without = {**links, part: links[part] - {other}, other: links[other] - {part}}
        if other in _reached(part, without):
            found.append(joint)
    return found


def _best_split(joints: Sequence[_Joint]) -> tuple[list[set[str]], float]:
    """The groups into which the parts are best divided for the last push, and the widest angle between its stretchers.

    All joints between the groups are of stretchers that are as nearly parallel as can be; of those that count as
    parallel, the ones that run across the piece, so that the groups are side frames.
    """
    ways = {joint.index: joint.way for joint in joints}
    for classes in _alike(ways):
        for alike in sorted(classes, key=lambda c: -sum(abs(ways[k][0]) for k in c) / len(c)):
            groups = _groups(_one_way(joints, alike, ways[min(alike)]))
            if len(groups) > 1:
                closed = {j.index for j in joints if not any(set(j.parts) <= group for group in groups)}
                return groups, max((between_deg(ways[j], ways[k]) for j, k in combinations(closed, 2)), default=0.0)
    return [{part} for part in _links(joints)], 90.0


def _one_way(joints: Sequence[_Joint], alike: set[int], along: Vector) -> dict[str, set[str]]:
    """What holds what: both ways for joints made before, only forward for those to be closed in the direction `along`.

    Parts that can be pushed together along a line form no ring of such links.
    """
    links: dict[str, set[str]] = {part: set() for joint in joints for part in joint.parts}
    for joint in joints:
        stretcher, host = joint.parts
        forward = (dot(joint.way, along), *joint.way) > (0.0, 0.0, 0.0, 0.0)
        before, after = (stretcher, host) if forward == joint.at_second else (host, stretcher)
        links[before].add(after)
        if joint.index not in alike:
            links[after].add(before)
    return links


def _alike(ways: Mapping[int, Vector]) -> Iterator[list[set[int]]]:
    """The stretchers in classes that count as parallel; then, as the limit widens, each class that two become."""
    pairs = sorted((between_deg(ways[j], ways[k]), j, k) for j, k in combinations(ways, 2))
    classes = {k: {k} for k in ways}

    def merge(j: int, k: int) -> set[int]:
        merged = classes[j] | classes[k]
        classes.update(dict.fromkeys(merged, merged))
        return merged

    for angle, j, k in pairs:
        if angle <= PARALLEL_DEG:
            merge(j, k)
    yield list({id(c): c for c in classes.values()}.values())
    for _, j, k in pairs:
        if classes[j] is not classes[k]:
            yield [merge(j, k)]


def between_deg(one: Vector, other: Vector) -> float:
    """The angle between two lines, 0 to 90."""
    turned = cross(one, other)
    return math.degrees(math.atan2(math.sqrt(dot(turned, turned)), abs(dot(one, other))))


def _and(words: Sequence[str]) -> str:
    return " and ".join(filter(None, [", ".join(words[:-1]), *words[-1:]]))


def _closing(
    closed: Sequence[Stretcher], groups: Sequence[set[str]], legs: Sequence[str], angle_deg: float, units: Units
) -> str:
    """How the last joints of a ring are closed."""
    names = _and([stretcher.name for stretcher in closed])
    frames = [[leg for leg in legs if leg in group] for group in groups]
    made = "; ".join(_and(frame) for frame in frames if len(frame) > 1)
    head = f"First join {made}. Then close the ring on {names}" if made else f"Close the ring on {names}"
    apart = f"their axes are {format_angle(angle_deg)} apart"
    if angle_deg <= PARALLEL_DEG:
        return f"{head}: {apart}, so they can be pushed together at once."
    tenon_mm = max(stretcher.tenon_mm for stretcher in closed)
    # Pushed along one axis by the tenon's length, the other tenon goes this far aside of its own.
    aside = tenon_mm * math.sin(math.radians(angle_deg))
    apart = f"{apart}, {format_length(aside, units)} aside over a tenon of {format_length(tenon_mm, units)}"
    if aside <= SPRING_MM:
        return f"{head}: {apart}, so start them together and spring them home."
    cure = "leave one out, or tenon it into the middle of another"
    return f"The ring that {names} close cannot be pushed together: {apart}, more than wood gives; {cure}."
