"""Steep powers, whose values near the bottom fall below the range of doubles."""

import numpy as np
import pytest

from eoscore.formula import constant, variable
from eoscore.formula.field import Field
from eoscore.measure import measure_of
from eoscore.measure.landscape import survey


@pytest.mark.parametrize("power", [8, 12, 20])
@pytest.mark.parametrize("size", [1e-6, 1e-4])
def test_a_soft_wall_has_one_bottom_and_its_power(power, size):
    """V = k_B 1 uK (r/R)^p: Omega(v) = 4 pi/3 R^3 (v/V_0)^{3/p}, by the sphere's volume."""
    depth, r = 1.380649e-29, variable("r")
    field = Field(("r",), constant(depth) * r**power / constant(size**power), ())
    landscape = survey(field)
    assert landscape.holds
    assert landscape.bottom.position == (0.0,)
    v = depth * np.array([1e-3, 0.3, 7.0])
    want = 4 * np.pi / 3 * size**3 * (v / depth) ** (3 / power)
    assert measure_of(field, landscape).volume(v) == pytest.approx(want, rel=1e-12, abs=0)
