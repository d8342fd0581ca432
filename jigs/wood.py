"""Wood as stuff to buy, cut and weigh: species, volumes, board measure, the length of a leg's blank, the cut list.

Owns the table of species and the allowances of the bench. Imports `problems`, `spec_problems` and `quantities`; no
geometry in space. Lengths in mm, volumes in mm³, densities in kg/m³, weights in kg.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from typing import NamedTuple

from jigs.problems import shown
from jigs.quantities import KG_PER_LB, MM_PER_INCH
from jigs.spec_problems import nearest

# A board foot is a board of 12 × 12 × 1 in, 144 cubic inches.
MM3_PER_BOARD_FOOT = 144 * float(MM_PER_INCH) ** 3
# Density at 12 % moisture is 1000 kg/m³ × specific gravity (oven-dry mass over volume at 12 %) × 1.12: FPL, Wood
# Handbook, GTR-190 (2010) and GTR-282 (2021).
DENSITY_KG_M3 = 1120.0
# A density that the maker gives, and what wood weighs: from balsa to lignum vitae with room to spare (memory).
_DENSITY = re.compile(r"(\d{1,4}(?:\.\d{1,3})?) ?(kg/m|lb/ft)[3³]", re.ASCII)
DENSITIES_KG_M3 = (80.0, 1400.0)
# Exact by the definitions of the pound and the foot (12 in).
KG_M3_PER_LB_FT3 = KG_PER_LB / (12 * float(MM_PER_INCH) / 1000) ** 3

# What stands out above the seat, to be wedged and cut flush (practice).
TENON_BEYOND_MM = 6.0
# Left at the foot to level the piece on the floor by scribing (practice).
FOOT_ALLOWANCE_MM = 20.0
# Lost at the two ends of a turned blank together, to the lathe's centres and to squaring (practice).
TURNING_WASTE_MM = 20.0
# What a square is larger than the thickest part to be turned from it (practice).
TURNING_ALLOWANCE_MM = 6.0
# What a seat's board is longer and wider than its outline, both edges together (practice).
SEAT_ALLOWANCE_MM = 10.0


class Species(NamedTuple):
    """A wood: its specific gravity at 12 % moisture, and where the number was found."""

    specific_gravity: float
    source: str


_TABLE = "FPL Wood Handbook, GTR-190 (2010) / GTR-282 (2021), Table 5-3"
_MEMORY = f"{_TABLE} (from memory)"

SPECIES = {
    "white ash": Species(0.60, _TABLE),
    "American beech": Species(0.64, _TABLE),
    "yellow birch": Species(0.62, _TABLE),
    "black cherry": Species(0.50, _TABLE),
    "American elm": Species(0.50, _TABLE),
    "shagbark hickory": Species(0.72, _TABLE),
    "sugar maple": Species(0.63, _TABLE),
    "red maple": Species(0.54, _TABLE),
    "ponderosa pine": Species(0.40, _TABLE),
    "white oak": Species(0.68, _MEMORY),
    "northern red oak": Species(0.63, _MEMORY),
    "black walnut": Species(0.55, _MEMORY),
    "yellow-poplar": Species(0.42, _MEMORY),
}


class UnknownSpeciesError(ValueError):
    """A wood that is not in the table; `given`, `rule` and `cure` are the parts of a problem."""

    def __init__(self, species: str, cure: str) -> None:
        self.given, self.rule, self.cure = shown(species), "is not a wood in the table", cure
        super().__init__(f"{self.given} {self.rule}; {cure}")


def density_kg_m3(species: str) -> float:
    """At 12 % moisture, of a species or as the maker gives it: "560 kg/m³", "35 lb/ft³".

    Case, hyphens and runs of spaces do not matter. Raises UnknownSpeciesError, which names the nearest.
    """
    given = _given_kg_m3(species)
    return DENSITY_KG_M3 * SPECIES[species_name(species)].specific_gravity if given is None else given


def species_name(species: str) -> str:
    """The wood as the table writes it, or the density as the maker gives it. Raises UnknownSpeciesError."""
    if _given_kg_m3(species) is not None:
        return _DENSITY.sub(r"\1 \2³", species.strip())
    names = {_plain(name): name for name in SPECIES}
    plain = _plain(species)
    if plain in names:
        return names[plain]
    close = nearest(plain, list(names))
    known = f"did you mean {shown(names[close])}?" if close else f"there are {', '.join(SPECIES)}."
    raise UnknownSpeciesError(species, f'{known} Or give its density, such as "560 kg/m³"')


def _given_kg_m3(species: str) -> float | None:
    """The density given in place of a species, None where there is none. Raises UnknownSpeciesError out of range."""
    found = _DENSITY.fullmatch(species.strip())
    if found is None:
        return None
    density = float(found[1]) * (KG_M3_PER_LB_FT3 if found[2] == "lb/ft" else 1.0)
    low, high = DENSITIES_KG_M3
    if not low <= density <= high:
        raise UnknownSpeciesError(species, f"wood weighs {low:.0f} to {high:.0f} kg/m³")
    return density


def _plain(species: str) -> str:
    return " ".join(species.lower().replace("-", " ").replace("_", " ").split())


def frustum_mm3(length_mm: float, start_diameter_mm: float, end_diameter_mm: float) -> float:
    """The volume of a round bar that tapers evenly, its ends square."""
    a, b = start_diameter_mm / 2, end_diameter_mm / 2
    return math.pi * length_mm * (a * a + a * b + b * b) / 3


def frustum_centroid(start_diameter_mm: float, end_diameter_mm: float) -> float:
    """How far along such a bar its centre of gravity lies, as a fraction of its length from the start."""
    a, b = start_diameter_mm, end_diameter_mm
    return (a * a + 2 * a * b + 3 * b * b) / (4 * (a * a + a * b + b * b))


def slab_mm3(area_mm2: float, thickness_mm: float) -> float:
    """The volume of a flat seat with edges square to it."""
    return area_mm2 * thickness_mm


def weight_kg(volume_mm3: float, density: float) -> float:
    """The mass of a volume, for a density in kg/m³."""
    return volume_mm3 * 1e-9 * density


def board_feet(volume_mm3: float) -> float:
    """In board measure, 144 cubic inches each, unrounded."""
    return volume_mm3 / MM3_PER_BOARD_FOOT


def slant_reach_mm(diameter_mm: float, resultant_deg: float, widening: float = 0.0) -> float:
    """How far along a leg its slanted cut reaches beyond the point where the axis meets the cut.

    For a round leg of radius r leaning R from square to the cut it is r tan R. Where the radius grows by k for each mm
    toward that end the cut's far edge is further out: r sin R / (cos R - k sin R). Raises ValueError for a lean so
    steep that the cut never leaves the leg.
    """
    lean = math.radians(resultant_deg)
    opening = math.cos(lean) - widening * math.sin(lean)
    if opening <= 0.0:
        raise ValueError(f"a cut leaning {resultant_deg:g}° never leaves the leg")
    return diameter_mm / 2 * math.sin(lean) / opening


def blank_mm(
    axis_mm: float,
    in_seat_mm: float,
    foot_reach_mm: float,
    *,
    top_reach_mm: float = 0.0,
    tenon_beyond_mm: float = TENON_BEYOND_MM,
    foot_allowance_mm: float = FOOT_ALLOWANCE_MM,
    waste_mm: float = TURNING_WASTE_MM,
) -> float:
    """The length to cut a leg's blank to.

    `axis_mm` runs from the underside to the floor, `in_seat_mm` from there up through the seat, or to the bottom of a
    blind mortise (then nothing stands beyond it). The reaches are what the slanted cuts at foot and top take beyond the
    axis (`slant_reach_mm`).
    """
    leg_mm = axis_mm + in_seat_mm + tenon_beyond_mm + foot_reach_mm + top_reach_mm
    return leg_mm + foot_allowance_mm + waste_mm


def foot_bevel_deg(floor_resultant_deg: float) -> float:
    """How far the cut at the foot leans from square across the leg, for the leg to stand flat.

    Square across is square to the axis, the floor is square to plumb, so it is the angle from axis to plumb: the
    resultant in the floor frame, on a pitched seat too. The cut is lowest on the side that the leg leans to.
    """
    return floor_resultant_deg


@dataclass(frozen=True, slots=True)
class CutRow:
    """One line of the cut list: `count` pieces of a length and a section (width × thickness), before they are worked.

    `board_feet` is the stuff for all of them; `weight_kg` is what they weigh finished, all together, None where the
    wood is not said.
    """

    name: str
    count: int
    length_mm: float
    section_mm: tuple[float, float]
    board_feet: float
    weight_kg: float | None

    @property
    def volume_mm3(self) -> float:
        """Of the stuff for all of them."""
        return self.count * self.length_mm * self.section_mm[0] * self.section_mm[1]


def cut_row(
    name: str, count: int, length_mm: float, section_mm: tuple[float, float], finished_mm3: float, density: float | None
) -> CutRow:
    """Pieces of any kind; `finished_mm3` is the volume of one when it is done, `density` in kg/m³."""
    stuff = count * length_mm * section_mm[0] * section_mm[1]
    weight = None if density is None else weight_kg(count * finished_mm3, density)
    return CutRow(name, count, length_mm, section_mm, board_feet(stuff), weight)


def seat_row(
    name: str, width_mm: float, depth_mm: float, thickness_mm: float, area_mm2: float, density: float | None
) -> CutRow:
    """A seat's board, of its outline's extent and SEAT_ALLOWANCE_MM each way; the longer way is the length."""
    short, long = sorted((width_mm + SEAT_ALLOWANCE_MM, depth_mm + SEAT_ALLOWANCE_MM))
    return cut_row(name, 1, long, (short, thickness_mm), slab_mm3(area_mm2, thickness_mm), density)


def turned_row(
    name: str, count: int, blank_length_mm: float, thickest_mm: float, finished_mm3: float, density: float | None
) -> CutRow:
    """Turned parts: squares of the thickest diameter and TURNING_ALLOWANCE_MM."""
    side = thickest_mm + TURNING_ALLOWANCE_MM
    return cut_row(name, count, blank_length_mm, (side, side), finished_mm3, density)
