"""The order of work in words: which face, which way the bit leans, how deep, what comes before what."""

from __future__ import annotations

import pytest

from jigs.advice import SAFETY, order_of_work
from jigs.bores import bored_mm
from tests.jigs.chair import CHAIR, chair, railed, whole
from tests.jigs.conftest import DEMOS, demo, stool

CHAIRS = {"chair": chair, "railed": railed}


def assembly_named(name):
    return CHAIRS[name]() if name in CHAIRS else demo(name)


def step(assembly, *words):
    """The number of the one step that says all the words."""
    (found,) = [k for k, said in enumerate(order_of_work(assembly)) if all(word in said for word in words)]
    return found


@pytest.mark.parametrize("name", [*DEMOS, *CHAIRS])
def test_the_legs_are_bored_with_the_shank_toward_the_foot_from_below_and_away_from_it_from_above(name):
    assembly = assembly_named(name)
    way = "toward the arrow" if assembly.drilled == "underside" else "away from the arrow"
    said = order_of_work(assembly)[step(assembly, "FOOT the same way", f"leans {way} to the foot")]
    assert f"from the {assembly.drilled}" in said
    for leg in assembly.legs:
        assert assembly.length(leg.mortise.bit) in said


@pytest.mark.parametrize("name", [*DEMOS, *CHAIRS])
def test_posts_and_spindles_are_bored_from_the_top_after_the_legs_with_the_bit_leaning_with_the_arrow(name):
    assembly = assembly_named(name)
    above = [*assembly.posts, *assembly.spindles]
    steps = order_of_work(assembly)
    if not above:
        assert not [said for said in steps if "TOP END" in said]
        return
    here = step(assembly, "TOP END the same way as the arrow", "leans toward the arrow", "from the top")
    assert here > step(assembly, "FOOT the same way")
    for part in above:
        assert assembly.length(part.mortise.bit) in steps[here]
        assert f"{part.kind}s" in steps[here]
    assert ("Turn the seat over" in steps[here]) == (assembly.drilled == "underside")
    assert ("share a card" in steps[here]) == bool(assembly.spindles)


def test_each_blind_depth_is_said_with_the_parts_that_it_is_of():
    said = " ".join(order_of_work(chair()))
    assert "arm post left, right: stop at 36 mm" in said
    assert "spindle 1 to 9: stop at 30 mm" in said


@pytest.mark.parametrize("name", DEMOS)
def test_every_blind_mortise_has_its_depth_and_every_through_one_its_scrap(name):
    assembly = demo(name)
    said = " ".join(order_of_work(assembly))
    for part in assembly.bored:
        if part.mortise.depth is not None:
            assert f"stop at {assembly.length(bored_mm(part))}" in said
    through = [leg for leg in assembly.legs if leg.mortise.depth is None]
    assert ("Clamp scrap to the" in said) == bool(through)


def test_scrap_goes_to_the_face_where_the_bit_comes_out():
    said = " ".join(order_of_work(chair()))
    assert "Clamp scrap to the top" in said
    assert "Clamp scrap to the underside" in " ".join(order_of_work(demo("harbour-chair")))
    assert "For posts that go through: clamp scrap to the underside" in " ".join(order_of_work(railed()))


@pytest.mark.parametrize("name", [*DEMOS, *CHAIRS])
def test_tapered_mortises_are_reamed_where_the_part_enters(name):
    assembly = assembly_named(name)
    reamed = [said for said in order_of_work(assembly) if said.startswith("Ream")]
    tapered = {part.kind for part in assembly.bored if part.mortise.taper}
    assert any("the leg enters" in said and "from the underside" in said for said in reamed) == ("leg" in tapered)
    assert any("the post enters" in said and "from the top" in said for said in reamed) == ("post" in tapered)


def test_both_templates_are_laid_where_both_faces_are_bored():
    assert step(chair(), "both templates", "Lay each on the face that it names") == 1
    assert step(stool(), "Tape the template", "Lay it on the") == 1


def test_stretchers_are_bored_after_a_dry_fit_and_glued_as_the_notes_on_assembly_say():
    assembly = chair()
    fit, bore = step(assembly, "dry in the seat", "clock starts"), step(assembly, "V-block")
    assert step(assembly, "FOOT the same way") < fit < bore < step(assembly, "together dry") < step(assembly, "Glue up")
    steps = order_of_work(assembly)
    assert "manual" in steps[bore]
    assert "Ø 15 mm, 19 mm deep for side left, right" in steps[bore]
    assert "Ø 12 mm, 14 mm deep for medial" in steps[bore]
    assert "How the stretchers go together" in steps[-1]
    assert "the legs that take stretchers" in steps[fit]
    assert "the posts that take stretchers" in order_of_work(railed())[step(railed(), "dry in the seat")]


def test_only_stretchers_that_take_others_are_bored_themselves():
    assert step(chair(), "Bore stretchers that take others", "upward")
    without = whole(CHAIR[: CHAIR.rindex("[[stretchers]]")])
    assert not [said for said in order_of_work(without) if "Bore stretchers" in said]


@pytest.mark.parametrize("name", [name for name in DEMOS if not demo(name).stretchers])
def test_nothing_is_said_of_stretchers_where_there_are_none(name):
    assert not [said for said in order_of_work(demo(name)) if "stretcher" in said or "V-block" in said]


def test_the_cautions_defer_to_the_tools_manual():
    assert any("manual of your tool" in words for words in SAFETY)
