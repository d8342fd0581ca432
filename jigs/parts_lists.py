"""What the setting-out sheet says in tables of a whole piece: stretchers and their mortises, wood to cut, finished
sizes, how it stands.

Owns the wording of these tables. Imports `assembly`, `advice`, `blocks`; the modules of stretchers, wood and loads
where they are used.
"""

# ruff: noqa: PLC0415 - a stool without stretchers does without most of what is imported here

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import TYPE_CHECKING

from jigs.advice import stems
from jigs.assembly import Assembly
from jigs.blocks import WIDTH_MM, Column, listed, plain, tables
from jigs.legs import Leg
from jigs.quantities import format_angle
from layout.drawing import Drawing

if TYPE_CHECKING:
    from jigs.statics import EdgeLoad, PublishedCase
    from jigs.stretchers import Stretcher, StretcherEnd
    from jigs.wood import CutRow

Named = tuple[str, Drawing]

_LENGTHS = (
    Column("", "Stretcher", 32.0, words=True),
    Column("", "between", 38.0, words=True),
    Column("", "thick", 20.0),
    Column("tenons,", "across × long", 24.0),
    Column("between", "axes", 22.0),
    Column("shoulder to", "shoulder", 22.0),
    Column("over", "tenons", 22.0),
)
_MORTISES = (
    Column("", "Stretcher", 44.0, words=True),
    Column("", "bored in", 44.0, words=True),
    Column("boring", "angle", 19.0),
    Column("", "clock", 19.0),
    Column("height above", "the floor", 27.0),
    Column("along the", "bored part", 27.0),
)
_CUT = (
    Column("", "Part", 55.0, words=True),
    Column("", "pieces", 14.0),
    Column("blank's", "length", 24.0),
    Column("section to", "start from", 47.0),
    Column("board", "feet", 18.0),
    Column("weight", "when done", 22.0),
)
_SIZES = (
    Column("", "Part", 62.0, words=True),
    Column("outside the", "seat", 24.0),
    Column("in the", "seat", 24.0),
    Column("Ø at the", "seat", 22.0),
    Column("Ø at foot or", "upper end", 24.0),
    Column("foot's bevel", "from square", 24.0),
)


def stretcher_blocks(assembly: Assembly) -> Iterator[Named]:
    """Lengths, mortises, how the clock is read, and how the stretchers go together; nothing where there are none."""
    if not assembly.stretchers:
        return
    rows = [_lengths(assembly, stretcher) for stretcher in assembly.stretchers]
    yield from _numbered("stretchers", tables("Stretchers: lengths", _LENGTHS, rows))
    ends = [_mortise(assembly, stretcher, end) for stretcher in assembly.stretchers for end in stretcher.ends]
    yield from _numbered("stretcher mortises", tables("Stretchers: their mortises", _MORTISES, ends))
    yield "clock", plain(tuple(_reading(assembly)))
    notes = assembly_notes(assembly)
    yield from _numbered("assembly", listed("How the stretchers go together", notes, numbered=True))


def _numbered(name: str, drawn: Iterator[Drawing]) -> Iterator[Named]:
    for k, drawing in enumerate(drawn, 1):
        yield f"{name} {k}", drawing


def _lengths(assembly: Assembly, stretcher: Stretcher) -> list[str]:
    lengths = (stretcher.between_axes_mm, stretcher.shoulder_mm, stretcher.over_tenons_mm)
    return [
        stretcher.name,
        " – ".join(end.host for end in stretcher.ends),
        f"Ø {assembly.length(stretcher.diameter_mm)}",
        f"Ø {assembly.length(stretcher.tenon_diameter_mm)} × {assembly.length(stretcher.tenon_mm)}",
        *map(assembly.length, lengths),
    ]


def _mortise(assembly: Assembly, stretcher: Stretcher, end: StretcherEnd) -> list[str]:
    angles = (format_angle(end.bore_deg), format_angle(end.clock_deg))
    along = along_bare_mm(assembly, end)
    return [stretcher.name, end.host, *angles, assembly.length(end.height_mm), assembly.length(along)]


def along_bare_mm(assembly: Assembly, end: StretcherEnd) -> float:
    """How far along its host a mortise lies: from the seat's face, or from a stretcher's shoulder at its first end."""
    hosts = {stretcher.name: stretcher for stretcher in assembly.stretchers}
    return end.along_host_mm - (hosts[end.host].ends[0].reach_mm if end.host in hosts else 0.0)


def _reading(assembly: Assembly) -> Iterator[str]:
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


def wood_blocks(assembly: Assembly) -> Iterator[Named]:
    """The wood to start from, and the sizes of what is bored into the seat when it is done."""
    from jigs.cutting import cut_rows

    cut = cut_rows(assembly)
    rows = [_cut_cells(assembly, row) for row in cut]
    if len(cut) > 1:
        rows.append(_sum_cells(assembly, cut))
    yield from _numbered("wood", tables("Wood to cut, before it is worked", _CUT, rows))
    sizes = {leg.name: _sizes(assembly, leg) for leg in assembly.bored}
    alike = [[stems(names), *cells] for cells, names in _alike(sizes)]
    yield from _numbered("sizes", tables("Finished sizes, along the middle", _SIZES, alike))


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
    if kg is None:
        return "–"
    return f"{kg:.2f} kg" if assembly.furniture.units == "mm" else f"{kg / LB_KG:.2f} lb"


# International avoirdupois pound, exact since 1 July 1959.
LB_KG = 0.45359237


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


def standing_blocks(assembly: Assembly) -> Iterator[Named]:
    """The tipping loads and the published case; nothing of fewer than three legs, which are a part of something."""
    from jigs.loads import LEAST_FEET, standing, weighed_as
    from jigs.statics import GUIDE

    if len(assembly.legs) < LEAST_FEET:
        return
    stability = standing(assembly)
    said = [stability.falls] if stability.falls is not None else []
    said += [
        "Each is the load straight down on the seat, at its outermost point that way, at which the far feet start to "
        f"lift; {weighed_as(assembly)}" + ("; a crest rail is not counted." if _has_back(assembly) else ".")
    ]
    if stability.published is not None and assembly.furniture.use != "table":
        said.append(_published(stability.published))
    said.append(GUIDE)
    if stability.falls is None:
        yield from _numbered("standing", tables("How it stands: the load that tips it", *_loads(assembly)))
    yield "how it stands", plain(said)


def _has_back(assembly: Assembly) -> bool:
    return bool(assembly.posts or assembly.spindles)


def _loads(assembly: Assembly) -> tuple[tuple[Column, ...], list[list[str]]]:
    from jigs.loads import standing

    loads = standing(assembly).loads
    width = WIDTH_MM / len(loads)
    columns = tuple(Column(*_two_words(load.at), width) for load in loads)
    return columns, [[_newtons(load) for load in loads], [_hung(assembly, load) for load in loads]]


def _two_words(at: str) -> tuple[str, str]:
    first, _, second = at.partition(" ")
    return (first, second) if second else ("", first)


def _newtons(load: EdgeLoad) -> str:
    return "none can" if load.load_n is None else f"{load.load_n:.0f} N"


def _hung(assembly: Assembly, load: EdgeLoad) -> str:
    """The same as the weight that presses so."""
    from jigs.statics import GRAVITY_M_S2

    if load.load_n is None:
        return ""
    kg = load.load_n / GRAVITY_M_S2
    return f"{kg:.1f} kg" if assembly.furniture.units == "mm" else f"{kg / LB_KG:.1f} lb"


def _published(case: PublishedCase) -> str:
    from jigs import statics

    x, y = case.toward
    at, _ = max(statics.PLACES, key=lambda place: place[1][0] * x + place[1][1] * y)
    loads = (
        f"{statics.PUBLISHED_DOWN_N:.0f} N down {statics.PUBLISHED_FROM_EDGE_MM:.0f} mm inside the seat's edge with "
        f"{statics.PUBLISHED_OUTWARD_N:.0f} N outward at its height"
    )
    margin = f"{abs(case.margin_nm):.1f} N m"
    ends = f"it stays down, with {margin} to spare" if case.stays_down else f"it tips, {margin} short"
    return f"The case as published (EN 1022, every way round): {loads}; worst to the {at}, where {ends}."
