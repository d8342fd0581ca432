"""What is said to the maker in words: the order of work for a face and its mortises, and the cautions.

Owns the wording. Imports `assembly`, `bores` and the template's wording; no drawing.
"""

from __future__ import annotations

from collections.abc import Iterator

from jigs.assembly import Assembly, Face, other_face
from jigs.bores import bored_mm, mouth_mm
from jigs.legs import Leg
from jigs.template import bore_words

# 29 CFR 1910.133(a): eye protection; OSHA 3157 (1999): clamped work, no gloves or loose clothing at a drill press.
SAFETY = (
    "Wear eye protection. Clamp the seat; hands stay behind the edge and clear of where the bit comes through.",
    "At a drill press: no gloves, no loose clothing, long hair tied back; clamp the work to the tilted table.",
    "The manual of your tool, and the rules where you work, come before anything printed here.",
    "These sheets are geometry. Whether the wood and the joints bear the load is the maker's judgement.",
)


def order_of_work(assembly: Assembly) -> tuple[str, ...]:
    """The steps, for the face that is drilled and the mortises that there are."""
    return tuple(_steps(assembly, assembly.drilled))


def _steps(assembly: Assembly, face: Face) -> Iterator[str]:
    yield (
        "Print at 100 % (actual size). Measure the scale sheet and the bars of every page with the rule that you work "
        "by; go on only when each is right."
    )
    yield (
        f"Tape the template together, measure its proof lengths, cut out its outline. Lay it on the {face}, the word "
        "FRONT at the front edge; mark the outline, the centre line and which face this is."
    )
    yield (
        "Prick each mortise's centre through the paper, and each sightline at its arrow and its other end. Lift the "
        "paper, draw the sightlines and check them with the strips."
    )
    yield _boring(assembly, face)
    yield from _stopping(assembly, face)
    yield from _reaming(assembly)
    yield (
        "Leave the legs long, glue up on a level place, then scribe the feet parallel to the floor and trim them; the "
        "leg lengths here are to the middle of the foot."
    )


def _boring(assembly: Assembly, face: Face) -> str:
    way = "toward the arrow to the foot" if face == "underside" else "away from the arrow to the foot"
    bits = dict.fromkeys(assembly.length(leg.mortise.bit) for leg in assembly.legs)
    return (
        f"Bore from the {face} with Ø {', '.join(bits)}: stand the card of the leg on its sightline, FOOT the same way "
        f"as the arrow. The shank leans {way}. Sight the bit against the leaning edge from the side, and against the "
        "sightline from its end. At a drill press, tilt the table by the lean and turn the seat until the sightline "
        "lies square to the table's pivot."
    )


def _stopping(assembly: Assembly, face: Face) -> Iterator[str]:
    if any(leg.mortise.depth is None for leg in assembly.legs):
        yield (
            f"Clamp scrap to the {other_face(face)}, or stop when the lead screw shows there and finish from that "
            "side; the dashed ellipse is where the bore comes through. Check the first hole with a dowel and the bevel "
            "before you bore the rest."
        )
    for depth, legs in _by_depth(assembly).items():
        yield (
            f"{', '.join(leg.name for leg in legs)}: stop at {depth}, measured along the bit; mark it there with tape. "
            "Check the first hole with a dowel and the bevel before you bore the rest."
        )


def _by_depth(assembly: Assembly) -> dict[str, list[Leg]]:
    depths: dict[str, list[Leg]] = {}
    for leg in assembly.legs:
        if leg.mortise.depth is not None:
            depths.setdefault(assembly.length(bored_mm(leg)), []).append(leg)
    return depths


def _reaming(assembly: Assembly) -> Iterator[str]:
    said = set()
    for leg in assembly.legs:
        words = (bore_words(assembly, leg), assembly.length(mouth_mm(leg)))
        if leg.mortise.taper and words not in said:
            said.add(words)
            yield (
                f"Ream from the underside, where the leg enters ({words[0]}): little by little, testing with a tapered "
                f"dowel and the same card, until the mouth measures Ø {words[1]} square across."
            )
