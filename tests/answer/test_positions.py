"""Profiles and columns as files ask for them: grids of positions, states and traps, uncertainty, files written."""

from __future__ import annotations

import sys

import numpy as np
import pytest
from scipy.special import zeta

import eoscore
from eoscore import bose
from eoscore.cli import main
from eoscore.constants import HBAR, K_B

LAB = """gas rubidium { isotope Rb-87 }
gas dense { isotope Rb-87
a_s = 100 a0
treatment hartree_fock }
trap bowl { f = 100(1) Hz
V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2) }
trap box { volume = 1 mm3 }
trap lid { V(rho, z) = m/2*(2*pi*100 Hz)^2*(rho^2 + z^2) where z < 5 um }
"""
OMEGA = 2 * np.pi * 100


def answer(question):
    (only,) = eoscore.loads(f"{LAB}find {question}").answers()
    return only


def found(question):
    return answer(question).found


def test_a_profile_is_that_of_the_state():
    at = found(
        "n_at, pressure_at, V_at, T_c, freq for rubidium in bowl with N = 1e5, T = 300 nK over x = even(0 um, 20 um, 5)"
    )
    state = eoscore.loads(LAB)["rubidium"].held_in(eoscore.loads(LAB)["bowl"]).state(N=1e5, T=300e-9)
    profile = state.profile(x=np.linspace(0, 20e-6, 5), y=0.0, z=0.0)
    assert at["n_at"].value == pytest.approx(profile.density, rel=1e-14, abs=0)
    assert at["pressure_at"].value == pytest.approx(profile.pressure, rel=1e-14, abs=0)
    assert at["V_at"].value == pytest.approx(profile.potential, rel=1e-14, abs=0)
    assert at["T_c"].value.shape == (5,)
    assert at["freq"].value.shape == (5, 3)


def test_positions_states_and_traps_make_one_grid():
    over = "x = [0 um, 5 um, 9 um], N = [1e4, 1e5], f = [80 Hz, 100 Hz]"
    grid = found(f"n_at for rubidium in bowl with T = 300 nK over {over}")["n_at"].value
    assert grid.shape == (3, 2, 2)
    one = found("n_at for rubidium in bowl with T = 300 nK, x = 9 um, N = 1e5, f = 80 Hz")["n_at"].value
    assert grid[2, 1, 0] == pytest.approx(float(one), rel=1e-14, abs=0)


def test_the_column_on_the_axis():
    """lambda^-2 (kT/hbar w) g_2(z e^{-V/kT}); zeta(2) at the centre at T_c."""
    names = "n_column, lambda_T, fugacity"
    at = found(
        f"{names} for rubidium in bowl with N = 1e5, fugacity = 0.999999999999, y = 0 um over x = [0 um, 5 um]"
    )
    T = found("T for rubidium in bowl with N = 1e5, fugacity = 0.999999999999")["T"].value
    unit = at["lambda_T"].value ** -2 * K_B * T / (HBAR * OMEGA)
    assert at["n_column"].value[0] == pytest.approx(unit[0] * zeta(2), rel=1e-10, abs=0)
    mass = eoscore.loads(LAB)["rubidium"].held_in(eoscore.loads(LAB)["bowl"]).gas.mass
    height = mass / 2 * (OMEGA * 5e-6) ** 2 / (K_B * float(T))
    assert at["n_column"].value[1] == pytest.approx(unit[1] * bose(2.0, height + 1e-12), rel=1e-10, abs=0)
    assert at["n_column"].unit == "m^-2"


def test_the_uncertainty_of_a_position_and_of_the_trap_are_carried():
    # The classical far tail: n ~ exp(-m w^2 x^2/2kT), so dln n/dx = -m w^2 x/kT.
    finding = found("n_at for rubidium in bowl with mu = -1e-29 J, T = 300 nK, f = 100 Hz, x = 20.0(1) um")[
        "n_at"
    ]
    mass = eoscore.loads(LAB)["rubidium"].held_in(eoscore.loads(LAB)["bowl"]).gas.mass
    slope = mass * OMEGA**2 * 20e-6 / (K_B * 300e-9) * 1e-7
    assert float(finding.sigma / finding.value) == pytest.approx(slope, rel=0.02, abs=0)
    assert set(finding.budget) == {"x"}


@pytest.mark.parametrize(
    ("question", "words"),
    [
        (
            "n_at for rubidium in box with N = 1e5, T = 1 uK",
            "has no coordinates along which a profile could run",
        ),
        ("n_column for dense in bowl with N = 1e5, T = 200 nK, x = 0, y = 0", "with treatment hartree_fock"),
        ("V_at for rubidium in lid with z = 6 um", "lies behind a wall"),
        ("n_at for rubidium in bowl with N = 1e5, f_0 = 2, x = 0", "lies between 0 and 1"),
    ],
)
def test_what_has_no_value_is_told(question, words):
    (finding,) = found(question).values()
    assert words in finding.why


def test_a_mean_field_profile():
    at = found("n_at for dense in bowl with N = 1e5, T = 150 nK over x = [0 um, 4 um, 9 um]")["n_at"].value
    assert at[1] > at[0]  # the condensate pushes the thermal gas out of the middle
    assert at[1] > at[2] > 0


def test_profiles_are_written_out(tmp_path, monkeypatch):
    lab = tmp_path / "lab.tarn"
    lab.write_text(
        f"{LAB}find n_at for rubidium in bowl with N = 1e5, T = 300 nK over x = even(-9 um, 9 um, 7)"
    )
    monkeypatch.setattr(sys, "argv", ["eoscore", "run", str(lab), "--out", str(tmp_path / "out.csv")])
    with pytest.raises(SystemExit, match="0"):
        main()
    rows = [line for line in (tmp_path / "out.csv").read_text().splitlines() if not line.startswith("#")]
    assert rows[0].startswith("x (m),n_at (m^-3)")
    assert len(rows) == 8
