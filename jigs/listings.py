"""What is told of a whole piece in rows: stretchers and their mortises, wood to cut, finished sizes, how it stands.

Owns the wording, for the setting-out sheet and for the terminal alike. Imports `assembly` and `names`; the modules of
stretchers, wood and loads where they are used. No drawing.
"""

# ruff: noqa: PLC0415 - a stool without stretchers does without most of what is imported here

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import TYPE_CHECKING, NamedTuple

from jigs.assembly import Assembly
from jigs.legs import Leg
from jigs.names import stems
from jigs.quantities import format_angle, format_weight

if TYPE_CHECKING:
    from jigs.statics import EdgeLoad, PublishedCase
    from jigs.stretchers import Stretcher, StretcherEnd
    from jigs.wood import CutRow


class Listing(NamedTuple):
    """A table in words: heads in two lines, rows of cells; the first `names` columns are words, the others numbers."""

    title: str
    heads: tuple[tuple[str, str], ...]
    rows: tuple[Sequence[str], ...]
    names: int = 1


# Stretchers


def stretcher_lengths(assembly: Assembly) -> Listing:
    """Between axes, from shoulder to shoulder, over tenons."""
    heads = (
        ("", "Stretcher"),
        ("", "between"),
        ("", "thick"),
        ("tenons,", "across × long"),
        ("between", "axes"),
        ("shoulder to", "shoulder"),
        ("over", "tenons"),
    )
    rows = tuple(_lengths(assembly, stretcher) for stretcher in assembly.stretchers)
    return Listing("Stretchers: lengths", heads, rows, names=2)


def _lengths(assembly: Assembly, stretcher: Stretcher) -> list[str]:
    lengths = (stretcher.between_axes_mm, stretcher.shoulder_mm, stretcher.over_tenons_mm)
    return [
        stretcher.name,
        " – ".join(end.host for end in stretcher.ends),
        f"Ø {assembly.length(stretcher.diameter_mm)}",
        f"Ø {assembly.length(stretcher.tenon_diameter_mm)} × {assembly.length(stretcher.tenon_mm)}",
        *map(assembly.length, lengths),
    ]


def stretcher_mortises(assembly: Assembly) -> Listing:
    """Each mortise of a stretcher: in what, at which angle and clock, how high and how far along."""
    heads = (
        ("", "Stretcher"),
        ("", "bored in"),
        ("boring", "angle"),
        ("", "clock"),
        ("height above", "the floor"),
        ("along the", "bored part"),
    )
    ends = tuple(_mortise(assembly, stretcher, end) for stretcher in assembly.stretchers for end in stretcher.ends)
    return Listing("Stretchers: their mortises", heads, ends, names=2)


def _mortise(assembly: Assembly, stretcher: Stretcher, end: StretcherEnd) -> list[str]:
    angles = (format_angle(end.bore_deg), format_angle(end.clock_deg))
    along = _along_bare_mm(assembly, end)
    return [stretcher.name, end.host, *angles, assembly.length(end.height_mm), assembly.length(along)]


def _along_bare_mm(assembly: Assembly, end: StretcherEnd) -> float:
    """How far along its host a mortise lies: from the seat's face, or from a stretcher's shoulder at its first end."""
    hosts = {stretcher.name: stretcher for stretcher in assembly.stretchers}
    return end.along_host_mm - (hosts[end.host].ends[0].reach_mm if end.host in hosts else 0.0)


def clock_reading(assembly: Assembly) -> Iterator[str]:
    """How the numbers of the mortises are measured."""
    yield (
        "Boring angle: between the stretcher and the bored part's far end (a leg's foot, a post's upper end, a "
        "stretcher's end that is named second). 90° is square; less leans toward that end."
    )
    yield (
        "Clock: degrees clockwise round the part, looking along it away from the seat (down a leg toward its foot), "
        "from the side that it leans to, where its sightline's arrow points. A part square to the seat counts from "
        "straight out of its own end, front or back. Looking back at the foot, count counter-clockwise."
    )
    if any(end.host not in _upright(assembly) for stretcher in assembly.stretchers for end in stretcher.ends):
        yield (
            "Round a stretcher: from straight up (from the back, if it stands plumb), looking along it from the end "
            "that is named first."
        )
    yield (
        "Along the bored part: down its middle from the seat's face; along a stretcher, from its shoulder at the end "
        "that is named first."
    )


def _upright(assembly: Assembly) -> set[str]:
    return {bar.name for bar in assembly.bars if bar.upright}


def assembly_notes(assembly: Assembly) -> list[str]:
    """How stretchers and legs go together while the legs are driven as deep as their mortises in the seat."""
    if not assembly.stretchers:
        return []
    from jigs.assembly_order import assembly_note
    from jigs.bores import bored_mm

    hosts = {end.host for stretcher in assembly.stretchers for end in stretcher.ends}
    drive = max(bored_mm(leg) for leg in assembly.bored if leg.name in hosts)
    return assembly_note(assembly.stretchers, assembly.bars, drive, assembly.furniture.units)


# Wood


def wood_to_cut(assembly: Assembly) -> Listing:
    """The cut list: what to start from, with board measure and weight."""
    from jigs.cutting import cut_rows

    heads = (
        ("", "Part"),
        ("", "pieces"),
        ("blank's", "length"),
        ("section to", "start from"),
        ("board", "feet"),
        ("weight", "when done"),
    )
    cut = cut_rows(assembly)
    rows = [_cut_cells(assembly, row) for row in cut]
    if len(cut) > 1:
        rows.append(_sum_cells(assembly, cut))
    return Listing("Wood to cut, before it is worked", heads, tuple(rows))


def finished_sizes(assembly: Assembly) -> Listing:
    """What is bored into the seat when it is done, alike parts together."""
    heads = (
        ("", "Part"),
        ("outside the", "seat"),
        ("in the", "seat"),
        ("Ø at the", "seat"),
        ("Ø at foot or", "upper end"),
        ("foot's bevel", "from square"),
    )
    sizes = {leg.name: _sizes(assembly, leg) for leg in assembly.bored}
    rows = tuple((stems(names), *cells) for cells, names in _alike(sizes))
    return Listing("Finished sizes, along the middle", heads, rows)


def _cut_cells(assembly: Assembly, row: CutRow) -> list[str]:
    wide, thick = map(assembly.length, row.section_mm)
    return [
        stems(_names_in(row.name, assembly)),
        str(row.count),
        assembly.length(row.length_mm),
        f"{wide} × {thick}",
        f"{row.board_feet:.2f}",
        _weight(assembly, row.weight_kg),
    ]


def _names_in(row: str, assembly: Assembly) -> list[str]:
    """The names that a row of the cut list joins with commas, which names may hold themselves."""
    names = [*(part.name for part in assembly.bored), *(bar.name for bar in assembly.stretchers)]
    known = sorted(names, key=len, reverse=True)
    found = []
    while row:
        name = next((name for name in known if f"{row}, ".startswith(f"{name}, ")), row)
        found.append(name)
        row = row[len(name) + 2 :]
    return found


def _sum_cells(assembly: Assembly, rows: Sequence[CutRow]) -> list[str]:
    weights = [row.weight_kg for row in rows if row.weight_kg is not None]
    weight = _weight(assembly, sum(weights) if len(weights) == len(rows) else None)
    feet = f"{sum(row.board_feet for row in rows):.2f}"
    return ["all together", str(sum(row.count for row in rows)), "", "", feet, weight]


def _weight(assembly: Assembly, kg: float | None) -> str:
    return "–" if kg is None else format_weight(kg, assembly.furniture.units)


def _sizes(assembly: Assembly, leg: Leg) -> tuple[str, ...]:
    from jigs.bores import bored_mm
    from jigs.cutting import foot_bevel_deg

    lengths = (leg.axis_mm, bored_mm(leg), leg.diameter_mm, leg.foot_diameter_mm)
    bevel = format_angle(foot_bevel_deg(leg)) if leg.kind == "leg" else "–"
    return (*map(assembly.length, lengths), bevel)


def _alike(sizes: Mapping[str, tuple[str, ...]]) -> Iterator[tuple[tuple[str, ...], list[str]]]:
    """Each different set of cells once, with everything that it is said of."""
    for cells in dict.fromkeys(sizes.values()):
        yield cells, [name for name, said in sizes.items() if said == cells]


# How it stands


def tipping_loads(assembly: Assembly) -> Listing | None:
    """The load that tips it, each way; None for a piece of fewer than three legs, and for one that falls by itself."""
    from jigs.loads import LEAST_FEET, standing

    if len(assembly.legs) < LEAST_FEET or (stability := standing(assembly)).falls is not None:
        return None
    loads = stability.loads
    rows = (tuple(_newtons(load) for load in loads), tuple(_hung(assembly, load) for load in loads))
    return Listing("How it stands: the load that tips it", tuple(_two_words(load.at) for load in loads), rows, names=0)


def standing_notes(assembly: Assembly) -> list[str]:
    """What the loads are, what they were weighed by, and the published case; nothing of fewer than three legs."""
    from jigs.loads import LEAST_FEET, standing, weighed_as
    from jigs.statics import GUIDE

    if len(assembly.legs) < LEAST_FEET:
        return []
    stability = standing(assembly)
    said = [stability.falls] if stability.falls is not None else []
    said += [
        "Each is the load straight down on the seat, at its outermost point that way, at which the far feet start to "
        f"lift; {weighed_as(assembly)}" + ("; a crest rail is not counted." if _has_back(assembly) else ".")
    ]
    if stability.published is not None and assembly.furniture.use != "table":
        said.append(_published(stability.published))
    return [*said, GUIDE]


def _has_back(assembly: Assembly) -> bool:
    return bool(assembly.posts or assembly.spindles)


def _two_words(at: str) -> tuple[str, str]:
    first, _, second = at.partition(" ")
    return (first, second) if second else ("", first)


def _newtons(load: EdgeLoad) -> str:
    return "none can" if load.load_n is None else f"{load.load_n:.0f} N"


def _hung(assembly: Assembly, load: EdgeLoad) -> str:
    from jigs.loads import hung

    return "" if load.load_n is None else hung(assembly, load.load_n)


def _published(case: PublishedCase) -> str:
    from jigs.loads import published_words

    at, loads = published_words(case)
    margin = f"{abs(case.margin_nm):.1f} N m"
    ends = f"it stays down, with {margin} to spare" if case.stays_down else f"it tips, {margin} short"
    return f"The case as published (EN 1022, every way round): {loads} at its height; worst to the {at}, where {ends}."
