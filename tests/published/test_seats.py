"""How high seats are, and the loads that they are tried with, against what is in print or common practice."""

from __future__ import annotations

import pytest

from jigs.checks import SEAT_HEIGHTS, SIZE_MARKS_MM
from jigs.statics import PUBLISHED_DOWN_N, PUBLISHED_FROM_EDGE_MM, PUBLISHED_OUTWARD_N


# Common practice, no source; in inches.
@pytest.mark.parametrize(("use", "least", "most"), [("dining", 17, 19), ("counter", 24, 26), ("bar", 28, 32)])
def test_usual_heights_are_those_of_common_practice(use, least, most):
    assert SEAT_HEIGHTS[use].least_mm == pytest.approx(least * 25.4)
    assert SEAT_HEIGHTS[use].most_mm == pytest.approx(most * 25.4)


def test_the_size_marks_are_those_of_en_1729_1():
    # EN 1729-1, seat heights of size marks 1 to 6.
    assert SIZE_MARKS_MM == (260.0, 310.0, 350.0, 380.0, 430.0, 460.0)


def test_the_published_case_is_that_of_en_1022():
    # EN 1022, forward overturning: 600 N down at 60 mm from the edge, with 20 N horizontal.
    assert (PUBLISHED_DOWN_N, PUBLISHED_FROM_EDGE_MM, PUBLISHED_OUTWARD_N) == (600.0, 60.0, 20.0)
