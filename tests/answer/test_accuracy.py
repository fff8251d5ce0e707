"""What an error is judged by: a quantity that passes through zero by its natural scale, others by themselves."""

from __future__ import annotations

import numpy as np
import pytest

import eoscore
from eoscore.answer.record import Finding

LAB = """gas rubidium { isotope Rb-87 }
gas photons { E(p) = p*c }
trap bowl { V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2) }
trap crossed {
    I = k_B*15 uK
    w = 40 um
    V(x, y, z) = -I*exp(-2*(x^2 + y^2)/w^2) - I*exp(-2*(z^2 + y^2)/w^2) + m*g_n*z
}
"""
T_C = 209.506613934e-9  # of 1e5 atoms: k T_c = hbar w (N/zeta(3))^(1/3), Bagnato et al. (1987)


def found(question):
    (answer,) = eoscore.loads(f"{LAB}find {question}").answers()
    return answer.found


@pytest.mark.parametrize("name", ["f_0", "N_0", "mu"])
@pytest.mark.parametrize("away", [-1e-9, -1e-12, 1e-12, 1e-9])
def test_next_to_the_transition_errors_are_small_beside_the_scale(name, away):
    finding = found(f"{name} for rubidium in bowl with N = 1e5, T = {T_C * (1 + away)!r} K")[name]
    assert finding.worst() < 1e-12


def test_the_stated_error_stays_absolute_and_honest():
    # f_0 = 1 - t^3 (Bagnato et al. 1987).
    t = 1 - 1e-7
    finding = found(f"f_0 for rubidium in bowl with N = 1e5, T = {T_C * t!r} K")["f_0"]
    exact = 1 - float((T_C * t / float(found("T_c for rubidium in bowl with N = 1e5")["T_c"].value)) ** 3)
    assert abs(float(finding.value) - exact) <= float(finding.error) + 1e-15
    assert 0.0 < float(finding.error) < 1e-12


def test_a_component_of_the_bottom_that_is_zero_is_judged_by_the_others():
    finding = found("r_min for rubidium in crossed")["r_min"]
    assert finding.value[1] == pytest.approx(0.0, abs=1e-15)
    assert finding.worst() <= 1e-8


def test_a_grid_keeps_the_scale_of_every_point():
    question = f"N_0, f_0 for rubidium in bowl over N = [1e3, 1e5], T = [10 nK, {T_C!r} K]"
    at = found(question)
    assert at["N_0"].scale == pytest.approx(np.array([[1e3, 1e3], [1e5, 1e5]]), rel=1e-15)
    assert np.array_equal(at["f_0"].scale, np.ones((2, 2)))


@pytest.mark.parametrize(
    ("scale", "worst"), [(None, 0.5), (1.0, 1e-3), (1e-9, 0.5)], ids=["itself", "larger", "smaller"]
)
def test_the_larger_of_value_and_scale_counts(scale, worst):
    array = None if scale is None else np.array(scale)
    finding = Finding(np.array(2e-3), "1", np.array(1e-3), "", scale=array)
    assert finding.worst() == pytest.approx(worst)
