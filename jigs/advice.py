"""What is said to the maker in words: the order of work for the faces and their mortises, and the cautions.

Owns the wording. Imports `assembly`, `bores`, `names` and the template's wording; no drawing.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from jigs.assembly import Assembly, Face, other_face
from jigs.bores import bored_mm, mouth_mm
from jigs.legs import Leg
from jigs.names import stems
from jigs.template import bore_words

# 29 CFR 1910.133(a): eye protection; OSHA 3157 (1999): clamped work, no gloves or loose clothing at a drill press.
SAFETY = (
    "Wear eye protection. Clamp the seat; hands stay behind the edge and clear of where the bit comes through.",
    "At a drill press: no gloves, no loose clothing, long hair tied back; clamp the work to the tilted table.",
    "The manual of your tool, and the rules where you work, come before anything printed here.",
    "These sheets are geometry. Whether the wood and the joints bear the load is the maker's judgement.",
)


def order_of_work(assembly: Assembly) -> tuple[str, ...]:
    """The steps, for the faces that are drilled and the mortises that there are."""
    return tuple(_steps(assembly))


def _steps(assembly: Assembly) -> Iterator[str]:
    above = (*assembly.posts, *assembly.spindles)
    yield (
        "Print at 100 % (actual size). Measure the scale sheet and the bars of every page with the rule that you work "
        "by; go on only when each is right."
    )
    yield _marking(assembly)
    yield (
        "Prick each mortise's centre through the paper, and each sightline where it crosses the outline and at its "
        "other end. Lift the paper, draw the sightlines toward the arrow, with an arrow of your own, and check them "
        "with the strips. Then cut out the outline and mark it."
    )
    yield _boring(assembly, assembly.drilled)
    yield from _stopping(assembly, assembly.legs)
    if above:
        yield _boring_above(assembly, above)
        yield from _stopping(assembly, above)
    yield from _reaming(assembly)
    yield from _stretchers(assembly)
    yield _gluing(assembly)


def _marking(assembly: Assembly) -> str:
    faces = assembly.drilled_faces
    if len(faces) == 1:
        return (
            f"Tape the template together and measure its proof lengths; do not cut out its outline yet. Lay it on the "
            f"{faces[0]}, the word FRONT at the front edge; mark the centre line and which face this is."
        )
    return (
        "Tape both templates together and measure their proof lengths; do not cut out their outlines yet. Lay each on "
        "the face that it names, the word FRONT at the front edge; mark the centre line and which face this is."
    )


def _boring(assembly: Assembly, face: Face) -> str:
    way = "toward the arrow to the foot" if face == "underside" else "away from the arrow to the foot"
    return (
        f"Bore {'the legs ' if assembly.posts or assembly.spindles else ''}from the {face} with "
        f"{_bits(assembly, assembly.legs)}: stand the card of the leg on its sightline, FOOT the same way "
        f"as the arrow, its leaning edge at the mortise. The shank leans {way}. Sight the bit against the leaning edge "
        "from the side, and against the sightline from its end. At a drill press, tilt the table by the lean and turn "
        "the seat until the sightline lies square to the table's pivot. Two cards, splay and rake, on the across and "
        "the fore-and-aft line (the short lines at each centre) do the same. Where a card is longer than the seat "
        "there, lay a board flush with the face."
    )


def _bits(assembly: Assembly, parts: Sequence[Leg]) -> str:
    return f"Ø {', '.join(dict.fromkeys(assembly.length(part.mortise.bit) for part in parts))}"


def _boring_above(assembly: Assembly, above: Sequence[Leg]) -> str:
    """Posts and spindles, which are bored from the top as they stand: the bit leans with them."""
    kinds = _kinds(above)
    turn = "Turn the seat over, onto scrap, and bore" if assembly.drilled == "underside" else "Bore"
    shared = " Spindles that share a card differ by no more than it says." if assembly.spindles else ""
    return (
        f"{turn} the {kinds} from the top with {_bits(assembly, above)}: stand the card on the sightline, TOP END the "
        "same way as the arrow. The shank leans toward the arrow, as the part will stand; sight as before."
        f"{shared}"
    )


def _kinds(parts: Sequence[Leg]) -> str:
    return " and ".join(dict.fromkeys(f"{part.kind}s" for part in parts))


_CHECK = "Check the first hole with a dowel and the bevel before you bore the rest."


def _stopping(assembly: Assembly, parts: Sequence[Leg]) -> Iterator[str]:
    through = [part for part in parts if part.mortise.depth is None]
    if through:
        # Legs come first and need not be named; what is bored after them is.
        named = "" if through[0].kind == "leg" else f"For {_kinds(through)} that go through: "
        yield (
            f"{named}{'c' if named else 'C'}lamp scrap to the {other_face(through[0].drilled)}, or stop when the lead "
            "screw shows there and finish from that side; the dashed ellipse is where the bore comes through. "
            f"{_CHECK}"
        )
    for depth, bored in _by_depth(assembly, parts).items():
        names = stems([part.name for part in bored])
        yield f"{names}: stop at {depth}, measured along the bit; mark it there with tape. {_CHECK}"


def _by_depth(assembly: Assembly, parts: Sequence[Leg]) -> dict[str, list[Leg]]:
    depths: dict[str, list[Leg]] = {}
    for part in parts:
        if part.mortise.depth is not None:
            depths.setdefault(assembly.length(bored_mm(part)), []).append(part)
    return depths


def _reaming(assembly: Assembly) -> Iterator[str]:
    said = set()
    for part in assembly.bored:
        words = (part.kind, bore_words(assembly, part), assembly.length(mouth_mm(part)))
        if part.mortise.taper and words not in said:
            said.add(words)
            yield (
                f"Ream from the {part.enters}, where the {part.kind} enters ({words[1]}): little by little, testing "
                f"with a tapered dowel and the same card, until the mouth measures Ø {words[2]} square across."
            )


def _stretchers(assembly: Assembly) -> Iterator[str]:
    """Their mortises are bored in the loose parts, from marks made while these stand dry in the seat."""
    if not assembly.stretchers:
        return
    names = {end.host for stretcher in assembly.stretchers for end in stretcher.ends}
    hosts = _kinds([part for part in assembly.bored if part.name in names])
    yield (
        f"Fit the {hosts} that take stretchers dry in the seat, turned as they will stay. Mark on each the side where "
        "its sightline's arrow points, or its own end of the seat where it stands square: its clock starts there. Mark "
        "name and foot, and a line on seat and part to find the turn again."
    )
    yield (
        "Take them out. For each mortise mark the distance along the part, lay it in a V-block, turn it by the clock "
        "from its mark and bore at the boring angle, both from the table of mortises; hold it as your tool's manual "
        f"says. One that tapers needs packing under its thin end until its middle lies level. Along the bit from the "
        f"surface: {_tenons(assembly)}."
    )
    if names & {stretcher.name for stretcher in assembly.stretchers}:
        yield "Bore stretchers that take others the same way: their clock starts at the side that will lie upward."
    yield (
        "Put everything together dry. Measure between the shoulders on the piece itself, and go by that where it "
        "differs from the table."
    )


def _tenons(assembly: Assembly) -> str:
    """The mortise of each size of tenon, and whose it is."""
    sizes: dict[str, list[str]] = {}
    for stretcher in assembly.stretchers:
        across, deep = assembly.length(stretcher.tenon_diameter_mm), assembly.length(stretcher.tenon_mm)
        sizes.setdefault(f"Ø {across}, {deep} deep", []).append(stretcher.name)
    return "; ".join(f"{size} for {stems(names)}" for size, names in sizes.items())


def _gluing(assembly: Assembly) -> str:
    level = (
        "then scribe the feet parallel to the floor and trim them; the leg lengths here are to the middle of the foot."
    )
    if not assembly.stretchers:
        return f"Leave the legs long, glue up on a level place, {level}"
    return (
        "Leave the legs long. Glue up on a level place in the order that was fitted dry and that “How the stretchers "
        f"go together” gives; {level}"
    )
