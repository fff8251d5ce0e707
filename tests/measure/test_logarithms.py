"""Tables of logarithms against the measures they are made from."""

import numpy as np
import pytest

from eoscore.measure import Sampled
from eoscore.measure.logarithms import Logarithms


@pytest.fixture
def gaussian():
    return Sampled(lambda v: 2 * np.sqrt(-np.log1p(-v)), 0.5, scale=1.0, top=0.95, route="test")


@pytest.mark.parametrize(("steep", "error"), [(True, 1e-10), (False, 1e-5)])
def test_values_come_back(gaussian, steep, error):
    table = Logarithms(gaussian, steep=steep)
    v = np.geomspace(1e-15, 0.95, 300).reshape(2, 150)
    np.testing.assert_allclose(table(v), gaussian.volume(v), rtol=error)


def test_nothing_lies_below_the_bottom(gaussian):
    np.testing.assert_array_equal(Logarithms(gaussian, steep=True)(np.array([-1.0, 0.0])), 0.0)


def test_a_table_grows_when_asked():
    measure = Sampled(lambda v: v + v**2, 1.0, scale=1.0, route="test")
    table = Logarithms(measure, steep=True)
    for v in (1e-3, 1.0, 1e5):
        assert table(np.array([v])) == pytest.approx(v + v**2, rel=1e-10)
