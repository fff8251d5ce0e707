"""A lattice far above its band: Watson's integral, and the engine's T_c."""

import pytest
import sympy as sp

from eoscore.symbolic.band_limit import above_band
from eoscore.symbolic.critical import number_of, root
from eoscore.symbolic.integrals.rule import BETA
from eoscore.symbolic.partition import partition_of
from eoscore.symbolic.quantities import K_B, NUMBER, Model, critical_number

J, a = sp.symbols("J a", positive=True)
VALUES = {J: 1e-31, a: 5e-7, K_B: 1.380649e-23}


def cubic(dimension=3, other=J):
    one = sp.exp(-2 * J * BETA) * sp.besseli(0, 2 * J * BETA) / a
    return one ** (dimension - 1) * one.subs(J, other)


def test_a_cubic_lattice_has_watsons_integral():
    """I_3 = 0.505462019717326: G. N. Watson, Q. J. Math. 10, 266 (1939)."""
    leading, correction = above_band(cubic())
    assert float(leading * K_B / (2 * J * a**3 * NUMBER)) == pytest.approx(1 / 0.505462019717326, rel=1e-11)
    assert correction == 1 / (2 * a**3 * NUMBER)


def test_two_terms_come_close_to_the_root_as_the_third_says():
    """N_c = W k_B T - Z1(0)/2 - Z1'(0)/(12 k_B T): the next term of Euler and Maclaurin, DLMF 2.10.1."""
    leading, correction = above_band(cubic())
    count = number_of(
        critical_number(Model(partition_of(cubic(), 1), partition_of(cubic(), 1), True)), VALUES
    )
    for filling in (20.0, 80.0):
        number = filling / VALUES[a] ** 3
        two = float((leading * (1 + correction)).subs({**VALUES, NUMBER: number}))
        heat = VALUES[K_B] * two / VALUES[J]
        third = 6 / (12 * heat) / filling  # Z1'(0) a^3 = -6 J
        assert root(count, number) / two - 1 == pytest.approx(-third, rel=0.05)


@pytest.mark.parametrize(
    "whole",
    [cubic(2), cubic(3, sp.Symbol("J_z", positive=True)), sp.exp(BETA) * sp.besselk(2, BETA), BETA**-3],
    ids=["diverges in two dimensions", "two widths", "no band", "a power"],
)
def test_what_is_no_lattice_of_one_width_is_none(whole):
    assert above_band(whole) is None


def test_a_root_is_found_however_hot():
    assert root(lambda T: (T / 1e22) ** 3, 8.0) == pytest.approx(2e22, rel=1e-12)
    with pytest.raises(ValueError, match=r"N_c\(T\) = N has no root between 1e-30 K and 1e\+40 K"):
        root(lambda T: T / (1 + T), 2.0)
