"""What wood weighs, against the tables in print."""

from __future__ import annotations

from jigs.wood import SPECIES

# FPL Wood Handbook, GTR-190 (2010) / GTR-282 (2021), Table 5-3, specific gravity at 12 % moisture.
PRINTED = {
    "white ash": 0.60,
    "American beech": 0.64,
    "yellow birch": 0.62,
    "black cherry": 0.50,
    "American elm": 0.50,
    "shagbark hickory": 0.72,
    "sugar maple": 0.63,
    "red maple": 0.54,
    "ponderosa pine": 0.40,
}
# The same table, from memory.
REMEMBERED = {"white oak": 0.68, "northern red oak": 0.63, "black walnut": 0.55, "yellow-poplar": 0.42}


def test_the_woods_are_those_of_the_wood_handbook_and_say_which_are_from_memory():
    assert {name: wood.specific_gravity for name, wood in SPECIES.items()} == PRINTED | REMEMBERED
    assert {name for name, wood in SPECIES.items() if "from memory" in wood.source} == REMEMBERED.keys()
    assert all("Table 5-3" in wood.source for wood in SPECIES.values())
