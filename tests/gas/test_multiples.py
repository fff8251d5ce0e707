"""The rules for sums over multiples of the inverse temperature, on functions whose sums are known."""

import math

import mpmath
import numpy as np
import pytest

from eoscore.errors import NoAnswerError
from eoscore.gas.multiples import fermi_rules, multiples_of


def total(rules, function):
    return sum(float(np.real(np.sum(rule.weight * function(rule.at)))) for rule in rules)


@pytest.mark.parametrize("rate", [1e-7, 1e-3, 0.1, 1.0, 30.0])
def test_geometric_series(rate):
    """sum_{l >= 1} e^{-rate l} = 1/(e^rate - 1)."""
    came = total(multiples_of("bose", rate), lambda at: np.exp(-rate * at))
    assert came == pytest.approx(1 / math.expm1(rate), rel=1e-13, abs=0)


@pytest.mark.parametrize("alpha", [1e-4, 0.02, 0.7, 9.0])
@pytest.mark.parametrize("s", [-1.0, 0.5, 1.5, 4.0])
def test_bose_function(s, alpha):
    """sum e^{-alpha l} l^-s = Li_s(e^-alpha) (DLMF 25.12.10)."""
    came = total(multiples_of("bose", alpha), lambda at: np.exp(-alpha * at) * at**-s)
    assert came == pytest.approx(float(mpmath.polylog(s, mpmath.exp(-alpha)).real), rel=1e-12, abs=0)


@pytest.mark.parametrize("eta", [-30.0, -1.0, -0.9, 0.0, 2.0, 35.0, 900.0])
@pytest.mark.parametrize("s", [0.5, 1.0, 2.5])
def test_fermi_function(s, eta):
    """The sum of z^l l^-s with alternating signs, or its continuation, is -Li_s(-e^eta) (DLMF 25.12.14)."""
    came = total(fermi_rules(eta), lambda at: np.exp(eta * at) * at**-s)
    with mpmath.workdps(40):  # at 15 digits mpmath itself loses half of them for small e^eta
        want = float(-mpmath.polylog(s, -mpmath.exp(eta)).real)
    assert came == pytest.approx(want, rel=1e-12, abs=0)


def test_classical_particles_take_the_first_alone():
    (rule,) = multiples_of("classical", 0.1)
    assert (rule.at, rule.weight) == (1, 1)


def test_a_step_too_sharp_is_refused():
    with pytest.raises(NoAnswerError, match=r"mu/kT is 1e\+07; .* up to 2e\+05: raise T"):
        list(fermi_rules(1e7))
