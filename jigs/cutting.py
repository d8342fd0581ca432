"""The parts of an assembly as wood to cut: the length of each blank, the cut at each foot, the cut list.

Owns the way from parts to `wood`'s sums. Imports `assembly`, `bores`, `wood`; no drawing. Lengths in mm, weights in kg.
"""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

from jigs import wood
from jigs.assembly import Assembly
from jigs.bores import bored_mm, mouth_mm, radius_mm, taper_widening
from jigs.legs import Leg
from jigs.stretchers import Stretcher
from jigs.wood import CutRow

# Blanks whose lengths agree so closely are cut to one stop (practice).
ALIKE_MM = 0.05


def blank_mm(assembly: Assembly, leg: Leg) -> float:
    """The length to cut a leg's, post's or spindle's blank to: with its tenon, the slanted cuts and waste for turning.

    A leg has an allowance to level its foot by; a post or spindle ends square at its upper end.
    """
    through = leg.mortise.depth is None and leg.in_seat_mm > 0.0
    tip_mm = 2 * radius_mm(leg, leg.in_seat_mm)
    return wood.blank_mm(
        leg.axis_mm,
        bored_mm(leg),
        _foot_reach_mm(leg),
        top_reach_mm=wood.slant_reach_mm(tip_mm, leg.seat.resultant_deg) if through else 0.0,
        tenon_beyond_mm=wood.TENON_BEYOND_MM if through else 0.0,
        foot_allowance_mm=wood.FOOT_ALLOWANCE_MM if leg.kind == "leg" else 0.0,
    )


def _foot_reach_mm(leg: Leg) -> float:
    """How far along a leg the cut at the floor reaches beyond its axis; nothing for what ends square."""
    if leg.kind != "leg":
        return 0.0
    widening = (leg.foot_diameter_mm - leg.diameter_mm) / 2 / leg.axis_mm
    return wood.slant_reach_mm(leg.foot_diameter_mm, leg.floor.resultant_deg, widening)


def foot_bevel_deg(leg: Leg) -> float:
    """How far the cut at a leg's foot leans from square across it; 0 for a post or spindle, which ends square."""
    return wood.foot_bevel_deg(leg.floor.resultant_deg) if leg.kind == "leg" else 0.0


def stretcher_blank_mm(stretcher: Stretcher) -> float:
    """The length to cut a stretcher's blank to: over its tenons, with waste for turning."""
    return stretcher.over_tenons_mm + wood.TURNING_WASTE_MM


def tenon_mm3(leg: Leg) -> float:
    """The volume of what fills a mortise along its axis: the reamed cone down to the bit's size, then a cylinder."""
    deep, bit, mouth = bored_mm(leg), leg.mortise.bit, mouth_mm(leg)
    widening = taper_widening(leg.mortise)
    if widening == 0.0:
        return wood.frustum_mm3(deep, bit, bit)
    cone = min(deep, (mouth - bit) / 2 / widening)
    return wood.frustum_mm3(cone, mouth, mouth - 2 * cone * widening) + wood.frustum_mm3(deep - cone, bit, bit)


@cache
def cut_rows(assembly: Assembly) -> tuple[CutRow, ...]:
    """The cut list: seat, legs, posts, spindles, stretchers, alike ones in one row; unweighed where no wood is said."""
    table = assembly.furniture.wood
    seat, rest = (None if name is None else wood.density_kg_m3(name) for name in (table.seat, table.legs))
    return (_seat_row(assembly, seat), *_bored_rows(assembly, rest), *_stretcher_rows(assembly, rest))


def _seat_row(assembly: Assembly, density: float | None) -> CutRow:
    box, thickness = assembly.blank.bounds, assembly.thickness_mm
    # What is bored out of it is weighed with the tenons that fill it.
    area = assembly.blank.area_mm2 - sum(map(tenon_mm3, assembly.bored)) / thickness
    return wood.seat_row("seat", box.width, box.height, thickness, area, density)


# What decides which parts are alike: kind, blank, thickest, finished volume.
_Key = tuple[str, int, float, int]


def _bored_rows(assembly: Assembly, density: float | None) -> Iterator[CutRow]:
    alike: dict[_Key, list[Leg]] = {}
    for leg in assembly.bored:
        key = (leg.kind, round(blank_mm(assembly, leg) / ALIKE_MM), _thickest_mm(leg), round(_finished_mm3(leg) / 100))
        alike.setdefault(key, []).append(leg)
    for legs in alike.values():
        first, length = legs[0], max(blank_mm(assembly, leg) for leg in legs)
        name = ", ".join(leg.name for leg in legs)
        yield wood.turned_row(name, len(legs), length, _thickest_mm(first), _finished_mm3(first), density)


def _thickest_mm(leg: Leg) -> float:
    return max(leg.diameter_mm, leg.foot_diameter_mm, mouth_mm(leg))


def _finished_mm3(leg: Leg) -> float:
    return wood.frustum_mm3(leg.axis_mm, leg.diameter_mm, leg.foot_diameter_mm) + tenon_mm3(leg)


def _stretcher_rows(assembly: Assembly, density: float | None) -> Iterator[CutRow]:
    alike: dict[tuple[int, float, float, float], list[Stretcher]] = {}
    for bar in assembly.stretchers:
        key = (round(stretcher_blank_mm(bar) / ALIKE_MM), bar.diameter_mm, bar.tenon_diameter_mm, bar.tenon_mm)
        alike.setdefault(key, []).append(bar)
    for bars in alike.values():
        first, length = bars[0], max(map(stretcher_blank_mm, bars))
        thickest = max(first.diameter_mm, first.tenon_diameter_mm)
        tenons = 2 * wood.frustum_mm3(first.tenon_mm, first.tenon_diameter_mm, first.tenon_diameter_mm)
        finished = wood.frustum_mm3(first.shoulder_mm, first.diameter_mm, first.diameter_mm) + tenons
        yield wood.turned_row(", ".join(bar.name for bar in bars), len(bars), length, thickest, finished, density)
