"""Tapers of reamed mortises against the series in print."""

from __future__ import annotations

import math

import pytest

from jigs.bores import taper_widening
from jigs.quantities import angle_deg
from jigs.spec import Mortise

HALF_A_SECOND_RAD = math.radians(0.5 / 3600)


@pytest.mark.parametrize(
    ("included", "length_to_one"),
    [("5° 43' 29\"", 10), ("4° 46' 19\"", 12), ("2° 51' 51\"", 20), ("7° 9' 10\"", 8)],
)
def test_a_mortise_widens_by_one_in_the_length_of_its_taper(included, length_to_one):
    """ISO 1119 series (as in GOST R 53440-2009), angles printed to a second."""
    mortise = Mortise(bit=16, taper=angle_deg(included))
    across_a_millimetre = 2 * taper_widening(mortise)
    # The diameter's growth moves with the angle by 1 + growth²/4, nearly one to one.
    assert across_a_millimetre == pytest.approx(1 / length_to_one, abs=1.01 * HALF_A_SECOND_RAD)


def test_a_reamer_of_six_degrees_is_not_one_in_ten():
    """Computed: 6° included is 1:9.5406."""
    assert 0.5 / taper_widening(Mortise(bit=16, taper=6.0)) == pytest.approx(9.5406, abs=5e-5)


def test_a_plain_mortise_has_no_taper():
    assert taper_widening(Mortise(bit=25)) == 0.0
