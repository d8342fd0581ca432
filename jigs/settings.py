"""The settings as numbers: the data of `angles --json` and the table of `angles`.

Imports `assembly`, `checks`, `legs`, `quantities`; no drawing.
"""

from __future__ import annotations

from typing import Any

from jigs.assembly import Assembly
from jigs.checks import cautions
from jigs.legs import Lean, Leg
from jigs.quantities import format_angle


def settings(assembly: Assembly) -> dict[str, Any]:
    """Everything `angles --json` gives, at full precision: lengths in mm, angles in degrees."""
    return {
        "name": assembly.furniture.name,
        "drill_from": assembly.drilled,
        "legs": [_leg_settings(leg) for leg in assembly.legs],
        "warnings": [{"code": c.code, "where": c.where, "text": c.text} for c in cautions(assembly)],
    }


def _leg_settings(leg: Leg) -> dict[str, Any]:
    return {
        "name": leg.name,
        **_lean(leg.floor),
        "drill": {**_lean(leg.drill), "bevel_deg": leg.drill.bevel_deg, "bearing_deg": leg.drill.bearing_deg},
        "mortise": {"top_mm": list(leg.top_mm), "underside_mm": list(leg.underside_mm)},
        "foot_mm": list(leg.foot_mm),
        "axis_mm": leg.axis_mm,
        "in_seat_mm": leg.in_seat_mm,
    }


def _lean(lean: Lean) -> dict[str, float]:
    return {
        "splay_deg": lean.splay_deg,
        "rake_deg": lean.rake_deg,
        "resultant_deg": lean.resultant_deg,
        "sightline_deg": lean.sightline_deg,
    }


# Columns of the table: heading in two lines, width. Together with the names' column they fill 80 characters.
_NAME_WIDTH = 17
_COLUMNS = (
    ("", "splay", 7),
    ("", "rake", 7),
    ("resul-", "tant", 8),
    ("sight-", "line", 8),
    ("comple-", "ment", 8),
    ("", "bevel", 7),
    ("leg", "length", 12),
)


def table(assembly: Assembly) -> str:
    """The settings in 80 columns: what to bore by, then how the legs stand."""
    seat = assembly.furniture.seat
    lines = [assembly.furniture.name, ""]
    lines += [f"To bore by: from the {assembly.drilled}, angles from the line square to the seat"]
    lines += _rows(assembly, [(leg, leg.drill) for leg in assembly.legs])
    if seat.pitch:
        lines += ["", f"As they stand: the seat pitched {format_angle(seat.pitch)}, angles from plumb"]
        lines += _rows(assembly, [(leg, leg.floor) for leg in assembly.legs])
    lines += ["", "Where they come through and stand: x from the centre line, y from the front edge"]
    lines += _points(assembly)
    lines += [
        "",
        "Sightline: from the fore-and-aft line through the mortise toward the leg's own",
        "side; the complement is the same line from the across line. Left and right are",
        "as seen from above with the front edge toward you, whichever face you work on.",
    ]
    return "\n".join(lines) + "\n"


def _rows(assembly: Assembly, leans: list[tuple[Leg, Lean]]) -> list[str]:
    firsts = " " * _NAME_WIDTH + "".join(first.rjust(width) for first, _, width in _COLUMNS)
    seconds = " " * _NAME_WIDTH + "".join(second.rjust(width) for _, second, width in _COLUMNS)
    return [firsts.rstrip(), seconds.rstrip(), *(_row(assembly, leg, lean) for leg, lean in leans)]


def _row(assembly: Assembly, leg: Leg, lean: Lean) -> str:
    complement = 90.0 - lean.sightline_deg
    angles = [lean.splay_deg, lean.rake_deg, lean.resultant_deg]
    cells = [format_angle(angle) for angle in angles]
    cells += [format_angle(lean.sightline_deg), format_angle(complement)] if lean.leans else ["-", "-"]
    cells += [format_angle(lean.bevel_deg), assembly.length(leg.axis_mm)]
    return _named(leg.name) + "".join(cell.rjust(width) for cell, (_, _, width) in zip(cells, _COLUMNS, strict=True))


def _named(name: str) -> str:
    return (name if len(name) <= _NAME_WIDTH else name[: _NAME_WIDTH - 1] + "…").ljust(_NAME_WIDTH)


def _points(assembly: Assembly) -> list[str]:
    def pair(p: tuple[float, float]) -> str:
        return f"{_bare(assembly, p[0])}, {_bare(assembly, p[1])}".rjust(20)

    head = " " * _NAME_WIDTH + "".join(title.rjust(20) for title in ("on the top", "on the underside", "foot"))
    rows = [_named(leg.name) + pair(leg.top_mm) + pair(leg.underside_mm) + pair(leg.foot_mm) for leg in assembly.legs]
    return [head, *rows]


def _bare(assembly: Assembly, mm: float) -> str:
    return assembly.length(mm).removesuffix(" mm").removesuffix(" in")
