"""Carried uncertainty against the closed forms of power laws, and correlations."""

from __future__ import annotations

import math

import numpy as np
import pytest

import eoscore

GAS = "gas strontium { m = 84 u }\n"


def found(trap, question, gas=GAS):
    (answer,) = eoscore.loads(f"{gas}trap bowl {{ {trap} }}\nfind {question}\n").answers()
    return answer.found


def relative(finding):
    return float(finding.sigma / finding.value)


@pytest.mark.parametrize(
    ("f", "number", "expected"),
    [
        ("100(2) Hz", "1e5", 0.02),  # T_c ~ f N^(1/3)
        ("100 Hz", "1.0(3)e5", 0.3 / 3),
        ("100(2) Hz", "1.0(3)e5", math.hypot(0.02, 0.1)),
        ("50(1) Hz + 50 Hz", "1e5", 0.01),
    ],
)
def test_sigma_of_T_c_of_a_bowl(f, number, expected):
    trap = f"f = {f}\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)"
    finding = found(trap, f"T_c for strontium in bowl with N = {number}")["T_c"]
    assert relative(finding) == pytest.approx(expected, rel=1e-6, abs=0)


def test_the_budget_tells_each_share_of_the_variance():
    trap = "f = 100(3) Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)"
    budget = found(trap, "T_c for strontium in bowl with N = 1.00(12)e5")["T_c"].budget
    assert float(budget["f"]) == pytest.approx(0.03**2 / (0.03**2 + 0.04**2), rel=1e-6, abs=0)
    assert sum(map(float, budget.values())) == pytest.approx(1.0)


def test_a_name_used_twice_is_one_variable():
    # w_x = 2 pi f and w_y = (2 pi)^2 f0^2 / (2 pi f): the product is free of f, so its uncertainty drops out.
    trap = "f = 100(5) Hz\n V(x, y, z) = m/2*(2*pi)^2*(f^2*x^2 + (100 Hz)^4/f^2*y^2 + (100 Hz)^2*z^2)"
    finding = found(trap, "T_c for strontium in bowl with N = 1e5")["T_c"]
    assert relative(finding) == pytest.approx(0.0, abs=1e-8)
    twice = "f = 100(5) Hz\n V(x, y, z) = m/2*(2*pi)^2*(f^2*x^2 + f^2*y^2 + (100 Hz)^2*z^2)"
    finding = found(twice, "T_c for strontium in bowl with N = 1e5")["T_c"]
    assert relative(finding) == pytest.approx(0.05 * 2 / 3, rel=1e-6, abs=0)


def test_there_is_no_sigma_where_no_input_had_one():
    trap = "f = 100 Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)"
    answers = found(trap, "T_c, freq for strontium in bowl with N = 1.0(1)e5")
    assert answers["freq"].sigma is None
    assert answers["T_c"].sigma is not None


def test_a_literal_of_another_trap_does_not_matter():
    text = GAS + "trap a { V(r) = m*(10(1) 1/s)^2*r^2 }\ntrap b { V(r) = m*(10/(1 s))^2*r^2 }\n".replace(
        "10(1) 1/s", "10(1) Hz"
    )
    (answer,) = eoscore.loads(text + "find T_c for strontium in b with N = 1e5\n").answers()
    assert answer.found["T_c"].sigma is None


def test_sigma_lives_on_the_grid():
    trap = "f = 100(2) Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)"
    finding = found(trap, "T_c for strontium in bowl over N = [1e4, 1e5, 1e6]")["T_c"]
    np.testing.assert_allclose(finding.sigma / finding.value, 0.02, rtol=1e-6)


def test_names_of_the_file_carry_their_uncertainty():
    trap = "f = 100(2) Hz\n w = 2*pi*f\n V(r) = m/2*w^2*r^2"
    finding = found(trap, "w for strontium in bowl")["w"]
    assert float(finding.value) == pytest.approx(2 * math.pi * 100, rel=1e-15, abs=0)
    assert float(finding.sigma) == pytest.approx(2 * math.pi * 2, rel=1e-9, abs=0)


def test_the_condensate_fraction_far_below_T_c():
    # f_0 = 1 - (T/T_c)^3, so sigma = 3 (1 - f_0) sigma_T/T.
    trap = "f = 100 Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)"
    finding = found(trap, "f_0 for strontium in bowl with N = 1e5, T = 100(2) nK")["f_0"]
    assert float(finding.sigma) == pytest.approx(3 * (1 - float(finding.value)) * 0.02, rel=1e-6, abs=0)


def cautions(condition, f="100 Hz"):
    trap = f"f = {f}\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)"
    text = f"{GAS}trap bowl {{ {trap} }}\nfind f_0 for strontium in bowl with N = 1e5, {condition}\n"
    (answer,) = eoscore.loads(text).answers()
    return {caution.code: caution.text for caution in answer.cautions}


@pytest.mark.parametrize(
    ("temperature", "misleads"),
    [("100(5) nK", False), ("209(5) nK", True), ("212(5) nK", True), ("300(5) nK", False)],
)
def test_a_condensate_that_sets_in_within_the_uncertainty_is_told(temperature, misleads):
    # T_c = 0.9405 hbar w N^(1/3)/k = 209.5 nK
    assert ("first_derivative" in cautions(f"T = {temperature}")) is misleads


def test_rounding_is_no_onset():
    # At fixed N and S a bowl of any frequency has the same f_0.
    assert "first_derivative" not in cautions("S = 1e-18 J/K", f="55.0(5) Hz")


def test_equal_literals_keep_their_own_shares():
    trap = "V(x, y, z) = m/2*(2*pi)^2*((100(2) Hz)^2*x^2 + (100(2) Hz)^2*y^2 + (100(2) Hz)^2*z^2)"
    finding = found(trap, "T_c for strontium in bowl with N = 1e5")["T_c"]
    assert relative(finding) == pytest.approx(0.02 / math.sqrt(3), rel=1e-6, abs=0)
    assert list(map(float, finding.budget.values())) == pytest.approx([1 / 3] * 3)
