"""Sums of powers against the formulas they stand for."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.special import zeta

from eoscore.measure import Powers

EXPONENTS = st.sampled_from([0.25, 0.5, 1.0, 1.5, 3.0, 4.5])


def test_volume_and_density_are_those_of_the_powers():
    measure = Powers([(2.0, 1.5), (3.0, 3.0)])
    v = np.array([0.5, 2.0])
    np.testing.assert_allclose(measure.volume(v), 2 * v**1.5 + 3 * v**3, rtol=1e-15)
    np.testing.assert_allclose(measure.density(v), 3 * v**0.5 + 9 * v**2, rtol=1e-15)


def test_nothing_lies_below_the_bottom_or_above_the_top():
    measure = Powers([(2.0, 1.0)], top=3.0)
    assert measure.volume(-1.0) == 0
    assert measure.volume(5.0) == 6
    assert measure.density(3.5) == 0


def test_a_flat_floor_has_its_volume_at_zero():
    measure = Powers([(7.0, 0.0)])
    assert measure.floor == 7
    assert measure.volume(0.0) == 7
    assert measure.nodes(1.0).foot.volume == pytest.approx(7, rel=1e-15)


def test_equal_exponents_are_gathered():
    assert Powers([(1.0, 2.0), (2.0, 2.0), (0.0, 1.0)]).terms == ((3.0, 2.0),)


@pytest.mark.parametrize("term", [(-1.0, 2.0), (1.0, -0.5)])
def test_a_term_that_is_no_measure_is_refused(term):
    with pytest.raises(ValueError, match="a measure wants C >= 0 and k >= 0"):
        Powers([term])


def test_no_term_is_refused():
    with pytest.raises(ValueError, match="at least one C v"):
        Powers([(0.0, 1.0)])


def test_nodes_need_an_end():
    with pytest.raises(ValueError, match="needs a finite energy"):
        Powers([(1.0, 1.0)]).nodes()


@pytest.mark.parametrize("k", [1.5, 2.0, 3.0])
@pytest.mark.parametrize("T", [1e-3, 1.0, 20.0])
def test_nodes_integrate_a_saturated_bose_function(k, T):
    """int k v^(k-1) / (e^(v/T) - 1) dv = Gamma(k + 1) zeta(k) T^k (DLMF 25.5.1); the foot's share is v1^(k-1)."""
    nodes = Powers([(1.0, k)]).nodes(45 * T)
    rest = k / (k - 1) * T * nodes.foot.edge ** (k - 1)
    total = nodes.w @ (1 / np.expm1(nodes.v / T)) + rest
    expected = float(np.prod([k]) * np.exp(np.log(T) * k)) * float(zeta(k)) * _gamma(k)
    assert total == pytest.approx(expected, rel=1e-12)


def _gamma(k):
    from math import gamma

    return gamma(k)


@given(EXPONENTS, st.floats(0.1, 1e3), st.floats(0.1, 10))
def test_the_rule_holds_the_whole_volume(k, c, end):
    nodes = Powers([(c, k)]).nodes(end)
    assert nodes.w.sum() + nodes.foot.volume == pytest.approx(c * end**k, rel=1e-13)


@given(EXPONENTS, st.floats(1e-3, 1e3))
def test_scaling_multiplies(k, factor):
    measure = Powers([(2.0, k)], top=4.0)
    assert measure.scaled(factor).volume(3.0) == pytest.approx(factor * measure.volume(3.0), rel=1e-14)
    assert measure.scaled(factor).top == 4


def test_cutting_lowers_the_top_only():
    measure = Powers([(1.0, 1.0)], top=2.0)
    assert measure.cut(1.0).top == 1
    assert measure.cut(3.0).top == 2
