"""Hartree-Fock elsewhere: boxes, a quartic trap, a beam under gravity, attraction, and words."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from flint import acb
from scipy.constants import hbar, k, physical_constants
from scipy.integrate import quad
from scipy.optimize import brentq

import eoscore
from eoscore.errors import NoAnswerError

BOHR = physical_constants["Bohr radius"][0]
HARMONIC = "V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2)"
BEAM = """
P = 1 W
w = 60 um
beam(d2) = 2*P/(pi*w^2)*exp(-2*d2/w^2)
V(x, y, z) = -7e-37 J.m2/W*(beam(x^2 + z^2) + beam(y^2 + z^2)) + m*g_n*z
"""


def held(place, gas="a_s = 100 a0", isotope="Rb-87"):
    text = f"gas g {{ isotope {isotope}\n {gas}\n treatment hartree_fock\n}}\ntrap t {{ {place or 'volume = 1 m3'} }}"
    lab = eoscore.loads(text)
    return lab["g"].held_in(lab["t"] if place else lab["uniform"])


def g_function(s, y):
    """Li_s(e^-y) by flint."""
    return float(acb(np.exp(-y)).polylog(s).real)


def test_quartic_trap_by_brute_force():
    """N of V = v0 (r/l)^4 at fixed mu and T: the two equations solved point by point, the radius integrated by quad."""
    trap = held("V(r) = 2e-31 J*(r/(1 um))^4")
    state = trap.state(N=3e4, T=200e-9)
    m, T = trap.gas.mass, 200e-9
    lam = np.sqrt(2 * np.pi) * hbar / np.sqrt(m * k * T)
    G = 2 * 100 * BOHR / lam
    edge = state.R_TF[0]

    def density(r):
        w = (state.mu - 2e-31 * (r / 1e-6) ** 4) / (k * T)
        if r < edge:
            y = brentq(lambda y: y + 2 * G * g_function(1.5, y) - w, 5 * np.pi * G**2, w)
            return (y / G + g_function(1.5, y)) / lam**3
        y = brentq(lambda y: 2 * G * g_function(1.5, y) - y - w, 1e-12, 5 - w)
        return g_function(1.5, y) / lam**3

    inner = quad(lambda r: 4 * np.pi * r**2 * density(r), 0, edge, epsrel=1e-6)[0]
    outer = quad(lambda r: 4 * np.pi * r**2 * density(r), edge, 4 * edge, epsrel=1e-6, limit=200)[0]
    assert inner + outer == pytest.approx(3e4, rel=1e-6)


def test_box_condenses_where_the_ideal_gas_does():
    """At fixed density a mean field gives no shift of T_c (Baym et al., Eur. Phys. J. B 24, 107 (2001))."""
    box = held("volume = 1e-13 m3")
    ideal = (1e7 / 1e-13 / 2.612375348685488) ** (2 / 3) * 2 * np.pi * hbar**2 / (box.gas.mass * k)
    assert box.T_c(N=1e7) == pytest.approx(ideal, rel=1e-10, abs=0)
    assert box.find(["shift_int"], {"N": 1e7})["shift_int"].value == 0
    assert box.state(N=1e7, T=1.0001 * ideal).f_0 == 0


def test_box_far_below_T_c():
    """mu = g (2 n - n_0) and P = g n^2 - g n_0^2/2 + kT g_(5/2)/lambda^3: algebra of the two equations."""
    box = held("volume = 1e-13 m3")
    state = box.state(N=1e7, T=100e-9)
    g = 4 * np.pi * hbar**2 * 100 * BOHR / box.gas.mass
    n = 1e7 / 1e-13
    assert state.n_0_peak + state.n_peak == pytest.approx(n, rel=1e-12)
    assert state.mu == pytest.approx(g * (2 * n - state.n_0_peak), rel=1e-11, abs=0)
    assert state.pressure == pytest.approx(
        (2 / 3 * (state.U - state.U_int) + state.U_int) / 1e-13, rel=1e-9, abs=0
    )
    assert pytest.approx(g_function(1.5, g * state.n_0_peak / (k * 100e-9)), rel=1e-11) == state.PSD


def test_uniform_and_box_agree():
    box, uniform = held("volume = 1e-13 m3").state(N=1e7, T=2e-7), held("").state(n=1e20, T=2e-7)
    for name in ("f_0", "mu", "pressure", "kappa_T", "n_0_peak"):
        assert getattr(uniform, name) == pytest.approx(getattr(box, name), rel=1e-12, abs=0)
    assert "no end" in uniform.reading("U").why


def test_compressibility_is_that_of_the_density():
    box = held("")
    up, mid, down = (box.state(n=1e20 * s, T=2e-7) for s in (1.001, 1.0, 0.999))
    assert mid.kappa_T == pytest.approx(0.002e20 / (up.mu - down.mu) / 1e40, rel=1e-5, abs=0)


def test_beams_under_gravity():
    """Repulsion fills the trap further: a smaller condensate than the ideal one, in the same place."""
    ideal = held(BEAM, "a_s = 0 a0", "Sr-84")
    assert ideal.state(N=2e5, T=1.5e-7).f_0 == pytest.approx(1 - ideal.N_c(T=1.5e-7) / 2e5, rel=1e-9)
    repelled = replace(ideal, gas=replace(ideal.gas, a_s=123 * BOHR)).state(N=2e5, T=1.5e-7)
    assert ideal.state(N=2e5, T=1.5e-7).f_0 - 0.1 < repelled.f_0 < ideal.state(N=2e5, T=1.5e-7).f_0


def test_attraction():
    """A condensate holds up to N_0 |a|/a_ho = 0.575 (Ruprecht et al., PRA 51, 4704 (1995), from memory)."""
    trap = held(HARMONIC, "a_s = -100 a0")
    a_ho = np.sqrt(hbar / (trap.gas.mass * 2 * np.pi * 100))
    most = 0.575 * a_ho / (100 * BOHR)
    T = 100e-9
    N_c = trap.N_c(T=T)
    assert pytest.approx(0.9 * most, rel=1e-6) == trap.state(N=N_c + 0.9 * most, T=T).N_0
    words = trap.find(["f_0"], {"N": N_c + 1.1 * most, "T": T})["f_0"].why
    assert "falls in on itself" in words
    assert f"{most:.4g}" in words


@pytest.mark.parametrize("name", ["U", "U_int", "E_release", "n_0_peak", "C_N", "kappa_T"])
def test_a_condensate_without_repulsion_has_no_shape(name):
    trap = held(HARMONIC, "a_s = -100 a0")
    given = {"N": trap.N_c(T=1e-7) + np.array([-10.0, 50.0]), "T": 1e-7}
    reading = trap.find([name], given)[name]
    assert "kinetic energy, which the Thomas-Fermi limit leaves out" in reading.why
    assert np.isfinite(reading.value[0])
    assert list(reading.missing) == [False, True]


def test_what_needs_no_state_is_told_where_there_is_none():
    """T_c and its shifts depend on N alone, N_c on T alone: they stand where the condensate falls in."""
    trap, given = held(HARMONIC, "a_s = -100 a0"), {"N": 1e4, "T": 1e-8}
    found = trap.find(["f_0", "T_c", "N_c", "shift_int", "shift_size"], given)
    assert "falls in on itself" in found["f_0"].why
    assert [name for name, reading in found.items() if reading.why] == ["f_0"]
    assert found["T_c"].value == pytest.approx(trap.T_c(N=1e4), rel=1e-12)


@pytest.mark.parametrize("name", ["U", "S"])
def test_attraction_just_above_T_c(name):
    """The search passes temperatures at which the condensate falls in."""
    trap = held(HARMONIC, "a_s = -100 a0")
    T = 1.001 * trap.T_c(N=1e4)
    value = getattr(trap.state(N=1e4, T=T), name)
    assert pytest.approx(T, rel=1e-9, abs=0) == trap.state(**{"N": 1e4, name: value}).T


def test_no_temperature_from_the_energy_of_an_attractive_condensate():
    trap = held(HARMONIC, "a_s = -100 a0")
    U = 0.9 * trap.state(N=1e4, T=1.0001 * trap.T_c(N=1e4)).U
    assert "is not known here" in trap.find(["T"], {"N": 1e4, "U": U})["T"].why


def test_an_ideal_condensate_has_no_peak():
    found = held(HARMONIC, "a_s = 0 a0").find(["n_0_peak", "kappa_T", "U_int"], {"N": 1e5, "T": 1e-7})
    assert "size of the lowest level" in found["n_0_peak"].why
    assert found["kappa_T"].why
    assert found["U_int"].value == 0


def test_attraction_draws_the_gas_together():
    trap, ideal = held(HARMONIC, "a_s = -100 a0"), held(HARMONIC, "a_s = 0 a0")
    assert trap.state(N=1e5, T=3e-7).n_peak > ideal.state(N=1e5, T=3e-7).n_peak
    assert trap.T_c(N=1e5) > ideal.T_c(N=1e5)


WORDS = [
    ("V(x) = 1e-30 J*(x/(1 um))^2", "a_s = 1 nm", "three dimensions"),
    (HARMONIC, "a_s = 1 nm\n statistics fermi", "for bosons"),
    (HARMONIC, "a_s = 1 nm\n degeneracy = 2", "one spin state"),
    ("volume = 1 mm3", "a_s = -1 nm", "nothing confines"),
    ("V(r) = 1e-30 J*(r/(1 um))^4", "a_s = -1 nm", "not harmonic"),
    ("V(x, y, z) = 1e-30 J*(x^2+y^2+z^2)/(1 um)^2\n E_max = 1e-30 J", "a_s = 50 nm", "escape energy"),
]


@pytest.mark.parametrize(("place", "gas", "words"), WORDS)
def test_words(place, gas, words):
    given = {"N": 1e11 if "mm3" in place else 1e5, "T": 1e-8}
    assert words in held(place, gas).find(["f_0"], given)["f_0"].why


def test_more_than_a_leaky_trap_holds():
    trap = held("V(r) = -1e-29 J*exp(-(r/(20 um))^2)", "a_s = 5 nm")
    found = trap.find(["f_0", "T_c"], {"N": 1e8, "T": 2e-8})
    assert "above the escape energy" in found["f_0"].why
    assert "begin to condense" in found["T_c"].why
    assert "times the depth" in trap.find(["N_c"], {"T": 1e-3})["N_c"].why
    T = 5e-6
    onset = trap.state(N=1e3, T=T).filling.setting.at_onset(1.380649e-23 * T)
    assert 0 < onset.mu < trap.depth[0]
    assert onset.mu == pytest.approx(onset.fluid.onset.w * onset.fluid.kT, rel=1e-9, abs=0)


def test_a_flat_floor_has_no_thomas_fermi_radius():
    trap = held("V(r) = 0 J where r < 10 um")
    assert "ends at the walls" in trap.find(["R_TF"], {"N": 1e5, "T": 1e-8})["R_TF"].why


@pytest.mark.parametrize("name", ["U", "S"])
def test_values_that_no_temperature_gives(name):
    assert "so small" in held(HARMONIC).find(["T"], {"N": 1e5, name: 1e-40})["T"].why


def test_a_state_wants_one_of_four_pairs():
    with pytest.raises(NoAnswerError, match="N and T; mu and T; N and S; N and U"):
        held(HARMONIC).state(S=1e-20, T=1e-7)


def test_a_slow_change_keeps_number_and_entropy():
    tight, wide = held(HARMONIC.replace("100 Hz", "300 Hz")), held(HARMONIC)
    before = wide.state(N=1e5, T=150e-9)
    after = tight.brought_from(before)
    assert pytest.approx(before.S, rel=1e-9, abs=0) == after.S
    assert 2.5 < after.T / 150e-9 < 3.0


def test_from_a_file():
    text = f"gas g {{ isotope Rb-87\n a_s = 100(2) a0\n treatment hartree_fock\n}}\ntrap t {{ {HARMONIC} }}\n"
    text += "find mu, R_TF, U_int for g in t with N = 1e5, T = 100 nK over N = [5e4, 1e5]".replace(
        "N = 1e5, ", ""
    )
    found = eoscore.loads(text).answers()[0].found
    assert found["R_TF"].value.shape == (2, 3)
    assert found["mu"].sigma[1] / found["mu"].value[1] == pytest.approx(0.4 * 0.02, rel=0.2)
