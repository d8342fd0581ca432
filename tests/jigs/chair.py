"""A whole chair for the tests of its drawings: four legs, two posts, nine spindles, an H of stretchers; and others."""

from __future__ import annotations

from functools import cache

from jigs.assembly import Assembly, assemble
from jigs.spec import parse_spec

CHAIR = """
name = "Purser's chair"
units = "mm"
[wood]
seat = "American elm"
legs = "white ash"
[seat]
shape = "shield"
width = 490
depth = 440
back_width = 400
front_bow = 30
corner_radius = 45
thickness = 46
height = 455
pitch = 4
[[legs]]
name = "front"
at = [165, 95]
mirror = true
splay = 10
rake = 8
mortise = { bit = 18, taper = 7 }
diameter = 40
foot_diameter = 28
[[legs]]
name = "back"
at = [130, 320]
mirror = true
splay = 9
rake = 14
mortise = { bit = 18, taper = 7 }
diameter = 38
foot_diameter = 28
[[posts]]
name = "arm post"
at = [195, 240]
mirror = true
splay = 16
rake = 6
end = "back"
length = 255
mortise = { bit = 17, depth = 36 }
diameter = 24
end_diameter = 15
[[spindles]]
name = "spindle"
count = 9
deck = { width = 310, back = 405, bow = 25 }
crest = { width = 430, back = 520, bow = 60, height = 480 }
mortise = { bit = 12, depth = 30 }
diameter = 15
end_diameter = 10
[[stretchers]]
name = "side left"
between = ["front left", "back left"]
heights = [175, 145]
diameter = 23
tenon = 19
tenon_diameter = 15
[[stretchers]]
name = "side right"
between = ["front right", "back right"]
heights = [175, 145]
diameter = 23
tenon = 19
tenon_diameter = 15
[[stretchers]]
name = "medial"
between = ["side left", "side right"]
fractions = [0.45, 0.45]
diameter = 21
tenon = 14
tenon_diameter = 12
"""

# The rail between the posts stands above the seat, the post that carries it through it.
RAILED = """
name = "Bollard bench with a rail"
units = "in"
[seat]
shape = "rectangle"
width = 40
depth = 14
thickness = "1 3/4 in"
height = 17
drill_from = "top"
[[legs]]
name = "the one nearest to the stove, at the front"
at = [15, 3]
mirror = true
splay = 12
rake = 10
mortise = 1
[[legs]]
name = "the one nearest to the stove, at the back"
at = [15, 11]
mirror = true
splay = 12
rake = 10
mortise = 1
[[posts]]
name = "end post"
at = [18, 12]
mirror = true
splay = 0
rake = 0
end = "back"
length = 15
mortise = { bit = "7/8 in", taper = 6 }
[[stretchers]]
name = "a rail for the backs of those who sit here"
between = ["end post left", "end post right"]
height = "29 13/64 in"
diameter = "1 1/8 in"
tenon = "5/8 in"
tenon_diameter = "5/8 in"
"""


@cache
def whole(text: str) -> Assembly:
    """A spec file worked out."""
    return assemble(parse_spec(text.encode(), "chair.toml"), "chair.toml")


def chair() -> Assembly:
    """The chair of CHAIR."""
    return whole(CHAIR)


def railed() -> Assembly:
    """The bench of RAILED."""
    return whole(RAILED)
