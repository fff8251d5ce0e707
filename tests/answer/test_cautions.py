"""Cautions come with their sizes, where they are deserved and only there."""

from __future__ import annotations

import re

import pytest

import eoscore
from eoscore.answer.wording import percent

ISOTROPIC = "V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)"
PANCAKE = "V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 400*z^2)"
SOFT = "V(x, y, z) = k_B*1 nK*sqrt(x^2 + y^2 + z^2)/(1 um)"
SAGGING = "V(x) = -k_B*U*exp(-2*x^2/(50 um)^2) + m*g_n*x"


def cautions(trap, question, gas="m = 84 u"):
    text = f"gas a {{ {gas} }}\ntrap b {{ {trap} }}\nfind {question}\n"
    (answer,) = eoscore.loads(text).answers()
    return {caution.code: caution.text for caution in answer.cautions}


@pytest.mark.parametrize(
    ("trap", "question", "gas", "code", "size"),
    [
        # hbar w/k = 4.799 nK at 100 Hz: 20 nK is 4.2 spacings
        (
            f"f = 100 Hz\n {ISOTROPIC}",
            "U for a in b with N = 1e6, T = 20 nK",
            "m = 84 u",
            "level_spacing",
            "4.2",
        ),
        # 2 kHz across is 96 nK: 20 nK is 0.21 spacings
        (
            f"f = 100 Hz\n {PANCAKE}",
            "U for a in b with N = 1e6, T = 20 nK",
            "m = 84 u",
            "reduced_dimension",
            "0.21",
        ),
        # -0.7275 N^(-1/3): Grossmann and Holthaus 1995
        (f"f = 100 Hz\n {ISOTROPIC}", "T_c for a in b with N = 1e3", "m = 84 u", "finite_number", "-7.3 %"),
        # depth/k = 3.858 uK of 10 uK (computed by root finding for this mass below)
        (
            "U = 10 uK\n" + SAGGING,
            "mu for a in b with N = 10, T = 1 uK",
            "m = 86.909180529 u",
            "shallow",
            "3.86",
        ),
        (
            "volume = 1 mm3",
            "T_c for a in b with N = 1e12",
            "m = 84 u\n a_s = 100 a0",
            "three_body_loss",
            "1e+15",
        ),
        (
            "volume = 1 mm3",
            "T_c for a in b with N = 1e11",
            "m = 84 u\n a_s = 1000 a0",
            "not_dilute",
            "1.5e-02",
        ),
        # N_cr = 0.575 a_ho/|a|: 1.097 um / 5.29 nm * 0.575 = 119
        (
            f"f = 100 Hz\n {ISOTROPIC}",
            "f_0 for a in b with N = 1e4, T = 20 nK",
            "m = 84 u\n a_s = -100 a0",
            "collapse",
            "1.2e+02",
        ),
        (f"f = 100 Hz\n I = 40 A\n {ISOTROPIC}", "freq for a in b", "m = 84 u", "coil_current", "I = 40 A"),
        (f"f = 100 Hz\n P = 2 W\n {ISOTROPIC}", "freq for a in b", "m = 84 u", "laser_class_4", "P = 2 W"),
        (
            f"f = 100 Hz\n P = 20 mW\n {ISOTROPIC}",
            "freq for a in b",
            "m = 84 u",
            "laser_class_3b",
            "P = 0.02 W",
        ),
        (
            f"f = 100 Hz\n U_0 = 2 kV\n {ISOTROPIC}",
            "freq for a in b",
            "m = 84 u",
            "high_voltage",
            "U_0 = 2e+03 V",
        ),
    ],
    ids=lambda part: part if isinstance(part, str) and re.fullmatch(r"[a-z_34]+", part) else "",
)
def test_a_caution_tells_its_size(trap, question, gas, code, size):
    text = cautions(trap, question, gas)[code]
    assert size in text


def test_a_large_ideal_gas_in_a_deep_trap_needs_none():
    assert not cautions(f"f = 100 Hz\n {ISOTROPIC}", "T_c for a in b with N = 1e8")


BAND = "d = 500 nm\n J = 1e-31 J\n E(px) = 2*J*(1 - cos(px*d/hbar)) where abs(px) < pi*hbar/d"


@pytest.mark.parametrize(
    ("trap", "question", "gas", "code"),
    [
        (f"f = 100 Hz\n {ISOTROPIC}", "U for a in b with N = 1e6, T = 200 nK", "m = 84 u", "level_spacing"),
        (f"f = 1 Hz\n {PANCAKE}", "U for a in b with N = 1e6, T = 20 nK", "m = 84 u", "reduced_dimension"),
        (f"f = 100 Hz\n {ISOTROPIC}", "T_c for a in b with N = 1e6", "m = 84 u", "finite_number"),
        (f"f = 100 Hz\n {ISOTROPIC}", "T_c for a in b with N = 1e6", "m = 84 u\n a_s = 1 a0", "interactions"),
        ("U = 10 uK\n" + SAGGING, "mu for a in b with N = 10, T = 0.4 uK", "m = 87 u", "shallow"),
        ("volume = 1 mm3", "T_c for a in b with N = 1e10", "m = 84 u\n a_s = 100 a0", "three_body_loss"),
        ("volume = 1 mm3", "T_c for a in b with N = 1e10", "m = 84 u\n a_s = 100 a0", "not_dilute"),
        (
            f"f = 100 Hz\n {ISOTROPIC}",
            "f_0 for a in b with N = 100, T = 5 nK",
            "m = 84 u\n a_s = -100 a0",
            "collapse",
        ),
        ("V(x) = 1e-20 N/m*x^2", "mu for a in b with N = 1e3, T = 1 nK", BAND, "momentum_zone"),
        (f"f = 9 Hz\n I = 0.9 A\n {ISOTROPIC}", "freq for a in b", "m = 84 u", "coil_current"),
        (f"f = 9 Hz\n P = 0.4 W\n {ISOTROPIC}", "freq for a in b", "m = 84 u", "laser_class_4"),
        (f"f = 9 Hz\n P = 4 mW\n {ISOTROPIC}", "freq for a in b", "m = 84 u", "laser_class_3b"),
        (f"f = 9 Hz\n U_0 = 49 V\n {ISOTROPIC}", "freq for a in b", "m = 84 u", "high_voltage"),
        (SOFT, "U for a in b with N = 1e4, T = 500 nK", "m = 84 u", "local_picture"),
        (
            f"f = 100 Hz\n {ISOTROPIC}",
            "f_0 for a in b with N = 1e5, T = 50 nK",
            "m = 84 u\n a_s = 100 a0\n treatment hartree_fock",
            "local_picture",
        ),
    ],
)
def test_a_caution_is_silent_where_its_matter_is_small(trap, question, gas, code):
    assert code not in cautions(trap, question, gas)


def test_a_place_that_is_uneven_over_a_wavelength():
    # lambda = h/sqrt(2 pi m kT) = 4.259 um at 2 nK; kT reaches r = 2 um, a ball of (4 pi/3)^(1/3) 2 um = 3.22 um
    text = cautions(SOFT, "U for a in b with N = 1e4, T = 2 nK")["local_picture"]
    assert "0.76 thermal wavelengths" in text


def test_a_small_condensate_has_no_thomas_fermi_limit():
    # a_s = 1 a0, a_ho = 1.097 um: N_0 a_s/a_ho = 4.8e-5 N_0, N_0 near 1e4
    gas = "m = 84 u\n a_s = 1 a0\n treatment hartree_fock"
    text = cautions(f"f = 100 Hz\n {ISOTROPIC}", "f_0 for a in b with N = 1e4, T = 10 nK", gas)
    assert re.search(r"a_ho is only 0\.4[0-9]:", text["local_picture"])


def test_a_grid_is_looked_at_where_its_first_and_its_last_trap_hold():
    """At Q = 1 uK gravity empties the trap; from 5 uK on it holds, by 0.25 uK at first."""
    grid = "mu for a in b with N = 10, T = 50 nK over Q = [1 uK, 2 uK, 5 uK, 500 uK, 2 uK]"
    assert (
        "5.03 kT"
        in cautions("Q = 10 uK\n" + SAGGING.replace("U", "Q"), grid, "m = 86.909180529 u")["shallow"]
    )


def test_a_grid_of_traps_that_hold_nothing_needs_none():
    grid = "mu for a in b with N = 10, T = 50 nK over Q = [1 uK, 2 uK]"
    assert not cautions("Q = 10 uK\n" + SAGGING.replace("U", "Q"), grid, "m = 86.909180529 u")


def test_interactions_are_told_by_their_shift():
    # -1.3255 (a/a_ho) N^(1/6): a_ho = 1.097 um, a = 5.29 nm, N = 1e6: -6.4 %
    text = cautions(f"f = 100 Hz\n {ISOTROPIC}", "T_c for a in b with N = 1e6", "m = 84 u\n a_s = 100 a0")
    assert "-6.4 %" in text["interactions"]


@pytest.mark.parametrize("code", ["laser_class_4", "coil_current"])
def test_hardware_cautions_defer_to_the_local_rules(code):
    text = cautions(f"f = 1 Hz\n P = 2 W\n I = 40 A\n {ISOTROPIC}", "freq for a in b")[code]
    assert "local rules" in text
    assert "licensed" in text


def test_a_hot_gas_fills_its_momentum_zone():
    text = cautions("V(x) = 1e-20 N/m*x^2", "mu for a in b with N = 1e3, T = 100 nK", BAND)
    assert "0.29 kT wide" in text["momentum_zone"]


@pytest.mark.parametrize(
    ("share", "words"),
    [
        (-0.0132, "-1.3 %"),
        (0.5, "+50 %"),
        (-0.9999, "-100 %"),
        (-13.7, "-1370 %"),
        (2e-7, "+2e-05 %"),
        (-7e98, "-7e+100 %"),
    ],
)
def test_relative_changes_read_without_powers_of_ten(share, words):
    assert percent(share) == words
