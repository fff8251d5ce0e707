"""First-order shifts of T_c against published coefficients and their sums."""

import numpy as np
import pytest

from eoscore.constants import HBAR
from eoscore.state.shifts import beyond_mean_field

from .places import MASS, box, harmonic, held, power, uniform

A_S = 5e-9
LOCAL = [
    (1, -2.31138638005),
    (2, -3.42603204918),
    (3, -4.06981426057),
    (4, -4.48703732818),
    (6, -4.99421692756),
    (12, -5.62177439180),
]


@pytest.mark.parametrize(("p", "coefficient"), LOCAL)
def test_mean_field_in_power_traps(p, coefficient):
    """-4 S/(a zeta(a)) a_s/lambda, S = sum_ij i^-1/2 j^-3/2 (i^(-3/p) - (i + j)^(-3/p)): first-order local mean field.

    Digits by mpmath, from the double sum; for p = 12 from the integral that it stands for, made smooth by y = v^(1/4).
    p = 2 agrees with the published -3.426 (Smith et al., Phys. Rev. Lett. 106, 250403, 2011, from memory).
    """
    trap = held(power(p), a_s=A_S)
    wavelength = trap.state(N=1e5, T=trap.T_c(N=1e5)).lambda_T
    assert trap.find(["shift_int"], {"N": 1e5})["shift_int"].value == pytest.approx(
        coefficient * A_S / wavelength, rel=1e-9, abs=0
    )


def test_mean_field_in_a_harmonic_trap():
    """-1.3255 (a_s/a_ho) N^(1/6) (Giorgini, Pitaevskii, Stringari, PRA 54, R4633, 1996: -1.33)."""
    shift = held(harmonic(), a_s=A_S).find(["shift_int"], {"N": [1e4, 1e6]})["shift_int"]
    a_ho = (HBAR / (MASS * 2 * np.pi * 100)) ** 0.5
    assert shift.value == pytest.approx(
        -1.325502799507 * A_S / a_ho * np.array([1e4, 1e6]) ** (1 / 6), rel=1e-9, abs=0
    )


def test_beyond_mean_field_in_a_box():
    """+1.32(2) a_s n^(1/3) (Arnold and Moore, Phys. Rev. Lett. 87, 120401, 2001)."""
    for place, given in ((box(1e-12), {"N": 1e7}), (uniform(), {"n": 1e19})):
        shift = held(place, a_s=A_S).find(["shift_int"], given)["shift_int"]
        assert shift.value == pytest.approx(1.32 * A_S * 1e19 ** (1 / 3), rel=1e-12, abs=0)
        x = A_S * 1e19 ** (1 / 3)
        second = (19.7518415457 * np.log(x) + 75.7) * x**2  # Arnold, Moore, Tomasik, PRA 65, 013606 (2002)
        assert shift.error == pytest.approx(0.02 * x + abs(second), rel=1e-9, abs=0)
        assert f"{second:.1e}" in shift.route


class Round(type(harmonic())):
    """A harmonic place that knows its frequencies."""

    frequencies = (100.0, 100.0, 100.0)


def test_finite_number_in_a_harmonic_trap():
    """-0.7275 N^(-1/3) (Grossmann and Holthaus, Phys. Lett. A 208, 188, 1995; Ketterle and van Druten, 1996)."""
    trap = held(Round(harmonic().measure))
    shift = trap.find(["shift_size"], {"N": [1e3, 1e6]})["shift_size"]
    assert shift.value == pytest.approx(-0.727503602287948 * np.array([1e-1, 1e-2]), rel=1e-11, abs=0)


def test_two_orders_in_a_box():
    """1 + 1.32 x + (19.7518 ln x + 75.7) x^2 at x = 1e-3 (Arnold, Moore, Tomasik, PRA 65, 013606, 2002)."""
    assert 1 + sum(beyond_mean_field(np.array(1e-3))) == pytest.approx(1.0012592594, abs=1e-9)


WORDS = [
    (held(harmonic()), "shift_int", "no scattering length"),
    (held(harmonic(d=2), a_s=A_S), "shift_int", "three dimensions"),
    (held(box()), "shift_size", "flat"),
    (held(harmonic(), "fermi", a_s=A_S), "shift_int", "do not condense"),
    (held(Round(power(12).measure)), "shift_size", "no first order"),
    (held(box()), "shift_size", "a volume has no shape"),
    (held(uniform()), "shift_size", "no end"),
]


@pytest.mark.parametrize(("trap", "name", "words"), WORDS)
def test_shifts_that_are_not_there(trap, name, words):
    assert words in trap.find([name], {"n" if trap.uniform else "N": 1e5})[name].why
