"""Levels in some or all directions."""

import numpy as np
import pytest

from eoscore.constants import HBAR, K_B
from eoscore.errors import NoAnswerError
from eoscore.state import hold

from .places import LEVEL, box, gas, harmonic, held, power

OMEGA = LEVEL / HBAR


def trapped(place=None, statistics="bose", *, axes="xyz", **facts):
    omegas = {f"omega_{axis}": OMEGA for axis in axes}
    return hold(gas(statistics, dispersion="trapped", **omegas, **facts), place)


@pytest.mark.parametrize(("x", "number"), [(0.1, 1469.990194368076), (0.01, 1227170.298514768)])
def test_critical_number_of_three_oscillators(x, number):
    """sum_k ((1 - e^-kx)^-3 - 1), exact sums by mpmath (method of Ketterle and van Druten, PRA 54, 656, 1996)."""
    well = trapped()
    T = LEVEL / K_B / x
    assert well.N_c(T=T) == pytest.approx(number, rel=1e-12, abs=0)
    assert well.T_c(N=number) == pytest.approx(T, rel=1e-12, abs=0)
    assert well.state(N=2 * number, T=T).f_0 == pytest.approx(0.5, rel=1e-12, abs=0)


@pytest.mark.parametrize("statistics", ["bose", "fermi", "classical"])
def test_sums_over_levels_one_by_one(statistics):
    """N, U, S of a three-dimensional oscillator: level n has (n + 1)(n + 2)/2 states; bosons leave out the lowest."""
    x, alpha = 0.3, 0.7
    n = np.arange(1.0 if statistics == "bose" else 0.0, 400.0)
    g = (n + 1) * (n + 2) / 2
    sign = {"bose": -1, "fermi": 1, "classical": 0}[statistics]
    f = 1 / (np.exp(n * x + alpha) + sign)
    s = -f * np.log(f) + (
        (1 + f) * np.log1p(f) if sign == -1 else -(1 - f) * np.log1p(-f) if sign == 1 else f
    )
    T = LEVEL / K_B / x
    state = trapped(statistics=statistics).state(mu=-alpha * K_B * T, T=T)
    sums = {"N": (g * f).sum(), "U": (g * f * n).sum() * LEVEL, "S": (g * s).sum() * K_B}
    for name, want in sums.items():
        reading = state.reading(name)
        assert abs(float(reading.value) - want) <= float(reading.error) <= 1e-8 * want


def test_a_pancake_becomes_round_when_it_is_hot():
    """Levels along z and a harmonic disc: at kT = 200 quanta N_c is that of three dimensions to first order, 1.5 %."""
    disc, ball = trapped(harmonic(d=2), axes="z"), held(harmonic())
    T = 200 * LEVEL / K_B
    assert disc.N_c(T=T) == pytest.approx(ball.N_c(T=T), rel=0.015, abs=0)
    assert disc.find(["exponent"], {"T": T})["exponent"].value == pytest.approx(3, abs=0.01)
    cold = disc.find(["exponent"], {"T": 0.05 * LEVEL / K_B})["exponent"]
    assert cold.value == pytest.approx(2, abs=1e-6)


def test_levels_that_leave_a_flat_sheet_do_not_condense():
    sheet = trapped(box(1e-8, 2), axes="z")
    assert sheet.state(N=1e4, T=1e-8).f_0 == 0
    with pytest.raises(NoAnswerError, match="a = 1"):
        sheet.T_c(N=1e4)


@pytest.mark.parametrize("statistics", ["bose", "fermi", "classical"])
def test_levels_below_an_escape_energy(statistics):
    """Each level has what is left of the top; a top out of reach is none."""
    T, mu = 2 * LEVEL / K_B, -0.5 * LEVEL
    open_, cut, far = (
        trapped(power(2.0, top, d=2), statistics, axes="z").state(mu=mu, T=T)
        for top in (np.inf, 6.3 * LEVEL, 100 * LEVEL)
    )
    assert pytest.approx(open_.N, rel=1e-12, abs=0) == far.N
    assert abs(open_.S - far.S) <= float(open_.reading("S").error) + float(far.reading("S").error)
    one_by_one = sum(
        held(power(2.0, (6.3 - n) * LEVEL, d=2), statistics).state(mu=mu - n * LEVEL, T=T).N for n in range(7)
    )
    assert pytest.approx(one_by_one, rel=1e-12, abs=0) == cut.N


def test_too_many_levels_below_the_top():
    with pytest.raises(NoAnswerError, match="hold fewer directions as levels"):
        trapped(power(2.0, 1e6 * LEVEL, d=1), axes="yz")


def test_all_levels_have_no_local_density():
    found = trapped().find(["n_peak", "lambda_T", "freq", "depth", "pressure"], {"N": 1e4, "T": 1e-7})
    assert all(reading.why for reading in found.values())
    with pytest.raises(NoAnswerError, match="every direction is held as levels"):
        trapped().state(N=1e4, PSD=1.0)
