"""The settings as numbers: the data of `angles --json` and the table of `angles`.

Imports `assembly`, `checks`, `legs`, `listings`, `columns`, `names`, `quantities`; no drawing.
"""

from __future__ import annotations

from typing import Any

from jigs.assembly import Assembly
from jigs.checks import cautions
from jigs.columns import sentences, text_table
from jigs.legs import Lean, Leg
from jigs.listings import assembly_notes, clock_reading, finished_sizes, standing_notes, tipping_loads, wood_to_cut
from jigs.names import short_name
from jigs.quantities import format_angle


def settings(assembly: Assembly) -> dict[str, Any]:
    """Everything `angles --json` gives, at full precision: lengths in mm, angles in degrees."""
    return {
        "name": assembly.furniture.name,
        "drill_from": assembly.drilled,
        "legs": [_leg_settings(assembly, leg) for leg in assembly.legs],
        "posts": [_leg_settings(assembly, post) for post in assembly.posts],
        "spindles": [_leg_settings(assembly, spindle) for spindle in assembly.spindles],
        "stretchers": [stretcher.data() for stretcher in assembly.stretchers],
        "assembly": assembly_notes(assembly),
        "cut_list": _cut_list(assembly),
        "stability": _stability(assembly),
        "standing": standing_notes(assembly),
        "warnings": [{"code": c.code, "where": c.where, "text": c.text} for c in cautions(assembly)],
    }


def _cut(assembly: Assembly, leg: Leg) -> dict[str, float]:
    from jigs.cutting import blank_mm, foot_bevel_deg  # noqa: PLC0415 - the table does without

    return {"blank_mm": blank_mm(assembly, leg), "foot_bevel_deg": foot_bevel_deg(leg)}


def _cut_list(assembly: Assembly) -> list[dict[str, Any]]:
    from jigs.cutting import cut_rows  # noqa: PLC0415 - as above

    return [
        {
            "name": row.name,
            "count": row.count,
            "length_mm": row.length_mm,
            "section_mm": list(row.section_mm),
            "board_feet": row.board_feet,
            "weight_kg": row.weight_kg,
        }
        for row in cut_rows(assembly)
    ]


def _stability(assembly: Assembly) -> Any:
    from jigs.loads import standing  # noqa: PLC0415 - as above

    return standing(assembly).data()


def _leg_settings(assembly: Assembly, leg: Leg) -> dict[str, Any]:
    return {
        "name": leg.name,
        **_lean(leg.floor),
        "drill": {**_lean(leg.drill), "bevel_deg": leg.drill.bevel_deg, "bearing_deg": leg.drill.bearing_deg},
        "mortise": {"top_mm": list(leg.top_mm), "underside_mm": list(leg.underside_mm)},
        "foot_mm": list(leg.foot_mm),
        "foot_z_mm": leg.foot_z_mm,
        "drilled_from": leg.drilled,
        "axis_mm": leg.axis_mm,
        "in_seat_mm": leg.in_seat_mm,
        "diameter_mm": leg.diameter_mm,
        "foot_diameter_mm": leg.foot_diameter_mm,
        "cut": _cut(assembly, leg),
    }


def _lean(lean: Lean) -> dict[str, float]:
    return {
        "splay_deg": lean.splay_deg,
        "rake_deg": lean.rake_deg,
        "resultant_deg": lean.resultant_deg,
        "sightline_deg": lean.sightline_deg,
    }


# Columns of the table: heading in two lines, width. Together with the names' column they stay within _TABLE_WIDTH.
_TABLE_WIDTH, _NAME_WIDTH, _PAIR_WIDTH = 80, 17, 20
_COLUMNS = (
    ("", "splay", 7),
    ("", "rake", 7),
    ("resul-", "tant", 8),
    ("sight-", "line", 8),
    ("comple-", "ment", 8),
    ("", "bevel", 7),
    ("outside", "the seat", 14),
)


_SIGHTLINE = (
    "Sightline: from the fore-and-aft line through the mortise toward the leg's own side; the complement is the same "
    "line from the across line. Left and right are as seen from above with the front edge toward you, whichever face "
    "you work on."
)


def table(assembly: Assembly) -> str:
    """The settings in 80 columns: what to bore by, how the legs stand, then the whole piece."""
    seat = assembly.furniture.seat
    lines = [assembly.furniture.name]
    for face in assembly.drilled_faces:
        lines += ["", f"To bore by: from the {face}, angles from the line square to the seat"]
        lines += _rows(assembly, [(leg, leg.drill) for leg in assembly.bored if leg.drilled == face])
    if seat.pitch:
        lines += ["", f"As they stand: the seat pitched {format_angle(seat.pitch)}, angles from plumb"]
        lines += _rows(assembly, [(leg, leg.floor) for leg in assembly.bored])
    lines += ["", "Where they come through and stand: x from the centre line, y from the front edge"]
    lines += [*_points(assembly), "", *sentences("", [_SIGHTLINE])]
    lines += [*_stretchers(assembly), *_whole(assembly)]
    return "\n".join(lines) + "\n"


def _rows(assembly: Assembly, leans: list[tuple[Leg, Lean]]) -> list[str]:
    firsts = " " * _NAME_WIDTH + "".join(first.rjust(width) for first, _, width in _COLUMNS)
    seconds = " " * _NAME_WIDTH + "".join(second.rjust(width) for _, second, width in _COLUMNS)
    return [firsts.rstrip(), seconds.rstrip(), *(_row(assembly, leg, lean) for leg, lean in leans)]


def _row(assembly: Assembly, leg: Leg, lean: Lean) -> str:
    angles = [lean.splay_deg, lean.rake_deg, lean.resultant_deg]
    cells = [format_angle(angle) for angle in angles]
    cells += [format_angle(lean.sightline_deg), format_angle(lean.complement_deg)] if lean.leans else ["-", "-"]
    cells += [format_angle(lean.bevel_deg), assembly.length(leg.axis_mm)]
    return _named(leg.name) + "".join(cell.rjust(width) for cell, (_, _, width) in zip(cells, _COLUMNS, strict=True))


def _named(name: str, width: int = _NAME_WIDTH) -> str:
    return short_name(name, lambda words: len(words) < width).ljust(width)


def _points(assembly: Assembly) -> list[str]:
    """Coordinates as pairs; a large seat in inches needs wider columns, which take from the names."""

    def pair(p: tuple[float, float]) -> str:
        return f"{_bare(assembly, p[0])}, {_bare(assembly, p[1])}"

    cells = [[pair(leg.top_mm), pair(leg.underside_mm), pair(leg.foot_mm)] for leg in assembly.bored]
    above = bool(assembly.posts or assembly.spindles)
    wide = max(_PAIR_WIDTH, 2 + max(len(cell) for row in cells for cell in row))
    names = min(_NAME_WIDTH, _TABLE_WIDTH - 3 * wide)
    rows = zip(
        [""] + [leg.name for leg in assembly.bored],
        [["on the top", "on the underside", "foot or upper end" if above else "foot"], *cells],
        strict=True,
    )
    return [_named(name, names) + "".join(cell.rjust(wide) for cell in row) for name, row in rows]


def _stretchers(assembly: Assembly) -> list[str]:
    """Each stretcher's lengths, then each of its ends: boring angle, clock position from the sightline, height."""
    if not assembly.stretchers:
        return []
    head = "".join(title.rjust(21) for title in ("between axes", "shoulders", "over tenons"))
    lines = ["", "Stretchers", " " * _NAME_WIDTH + head]
    for stretcher in assembly.stretchers:
        lengths = (stretcher.between_axes_mm, stretcher.shoulder_mm, stretcher.over_tenons_mm)
        lines.append(_named(stretcher.name) + "".join(assembly.length(mm).rjust(21) for mm in lengths))
        for end in stretcher.ends:
            bore, clock = format_angle(end.bore_deg), format_angle(end.clock_deg)
            height = assembly.length(end.height_mm)
            lines.append(f"  in {_named(end.host, 18)} bore {bore:>6}  clock {clock:>6}  height {height}")
    return [*lines, "", *sentences("", list(clock_reading(assembly))[:-1])]


def _whole(assembly: Assembly) -> list[str]:
    """How the stretchers go together, the wood to cut, the sizes when it is done, how it stands."""
    lines: list[str] = []
    notes = assembly_notes(assembly)
    if notes:
        lines += ["", *sentences("How the stretchers go together", notes)]
    for listing in (wood_to_cut(assembly), finished_sizes(assembly), tipping_loads(assembly)):
        lines += ["", *text_table(listing)] if listing else []
    said = standing_notes(assembly)
    return [*lines, "", *sentences("", said)] if said else lines


def _bare(assembly: Assembly, mm: float) -> str:
    return assembly.length(mm).removesuffix(" mm").removesuffix(" in")
