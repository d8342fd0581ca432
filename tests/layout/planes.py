"""What hypothesis draws for tests of plane geometry: points, angles and maps that a shop could meet."""

from hypothesis import settings
from hypothesis import strategies as st

from layout.geometry import Affine

modest = settings(max_examples=40, deadline=None)
mm = st.floats(-3000, 3000)
spot = st.tuples(mm, mm)
angle = st.floats(-720, 720)


@st.composite
def maps(draw):
    """Turns, moves, stretches and reflections that do not flatten the plane."""
    stretch = Affine(draw(st.floats(0.2, 3)), 0, 0, draw(st.floats(0.2, 3)) * draw(st.sampled_from([1, -1])), 0, 0)
    return Affine.turn(draw(angle)).then(stretch).then(Affine.turn(draw(angle))).then(Affine.move(*draw(spot)))
