"""Hartree-Fock in the harmonic trap: Thomas-Fermi numbers, the virial theorem, limits."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.constants import hbar, k, physical_constants
from scipy.special import zeta

import eoscore

BOHR = physical_constants["Bohr radius"][0]
OMEGA = 2 * np.pi * 100.0


def trap(a_s="100.4 a0", treatment="hartree_fock", V="m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2)"):
    text = f"gas g {{ isotope Rb-87\n a_s = {a_s}\n treatment {treatment}\n}}\ntrap t {{ V(x, y, z) = {V} }}"
    lab = eoscore.loads(text)
    return lab["g"].held_in(lab["t"])


def test_thomas_fermi_numbers():
    """mu = (hbar w/2)(15 N a/a_ho)^(2/5), R = sqrt(2 mu/m)/w, n = mu/g: Baym and Pethick, PRL 76, 6 (1996).

    Digits worked out for N = 1e5, 100 Hz, 100.4 a0 from the formula; the thermal part is gone at 1e-13 K.
    """
    state = trap().state(N=1e5, T=1e-13)
    assert state.mu / (hbar * OMEGA) == pytest.approx(17.636976580, rel=1e-9)
    assert state.mu / k == pytest.approx(84.644137688e-9, rel=1e-9, abs=0)
    assert pytest.approx([6.4049808674e-6] * 3, rel=1e-9, abs=0) == state.R_TF
    assert state.n_0_peak == pytest.approx(2.2714223199e20, rel=1e-9)
    assert pytest.approx(5 / 7 * 1e5 * state.mu, rel=1e-9, abs=0) == state.U
    assert state.E_release == pytest.approx(2 / 7 * 1e5 * state.mu, rel=1e-9, abs=0)


@pytest.mark.parametrize("T", [20e-9, 150e-9, 200e-9, 203e-9, 300e-9])
@pytest.mark.parametrize("a_s", ["5 a0", "100 a0", "3000 a0"])
def test_virial_theorem(T, a_s):
    """2 E_kin - 2 E_ho + 3 E_int = 0 in a harmonic trap (Dalfovo et al., Rev. Mod. Phys. 71, 463 (1999))."""
    state = trap(a_s).state(N=1e5, T=T)
    kinetic = state.E_release - state.U_int
    held = state.U - state.E_release
    assert 2 * kinetic + 3 * state.U_int == pytest.approx(2 * held, rel=1e-9, abs=0)


def test_condensate_fraction_to_first_order():
    """f_0 = 1 - t^3 - eta zeta(2)/zeta(3) t^2 (1 - t^3)^(2/5), eta = mu/kT_c of Thomas-Fermi: the limit of small eta.

    S. Giorgini, L. Pitaevskii, S. Stringari, PRL 78, 3987 (1997), from memory.
    """
    t, left = 0.7, []
    for a_s in (1e-6, 1e-9):
        held = trap(f"{a_s} a0")
        T_c = trap(treatment="ideal").T_c(N=1e5)
        eta = held.state(N=1e5, T=1e-3 * T_c * a_s).mu / (k * T_c)
        expected = -eta * zeta(2) / zeta(3) * t**2 * (1 - t**3) ** 0.4
        left.append((held.state(N=1e5, T=t * T_c).f_0 - (1 - t**3)) / expected)
    assert left[1] == pytest.approx(1, abs=1e-3)
    assert abs(left[1] - 1) < abs(left[0] - 1) / 5


@pytest.mark.parametrize("T", [100e-9, 208e-9, 300e-9])
def test_vanishing_interaction_is_the_ideal_gas(T):
    weak, ideal = trap("1e-13 a0").state(N=1e5, T=T), trap(treatment="ideal").state(N=1e5, T=T)
    for name in ("f_0", "U", "S", "n_peak", "C_N"):
        assert getattr(weak, name) == pytest.approx(getattr(ideal, name), rel=3e-5, abs=0)
    none = trap("0 a0").state(N=1e5, T=T)
    for name in ("f_0", "mu", "U", "S", "n_peak"):
        assert getattr(none, name) == pytest.approx(getattr(ideal, name), rel=1e-9, abs=1e-40)


def test_critical_temperature_moves_by_the_first_order_shift():
    """The shift of the self-consistent T_c over `shift_int` tends to 1, with an error of the order of the shift."""
    ratios = []
    for a_s in ("1 a0", "0.1 a0"):
        held = trap(a_s)
        shift = held.T_c(N=1e5) / trap(treatment="ideal").T_c(N=1e5) - 1
        ratios.append(shift / float(held.find(["shift_int"], {"N": 1e5})["shift_int"].value) - 1)
    assert abs(ratios[1]) < 5e-3
    assert abs(ratios[1]) < abs(ratios[0]) / 2


def test_condensate_begins_at_T_c():
    held = trap()
    T_c = held.T_c(N=1e5)
    assert held.N_c(T=T_c) == pytest.approx(1e5, rel=1e-9)
    below, above = held.state(N=1e5, T=T_c * (1 - 1e-6)), held.state(N=1e5, T=T_c * (1 + 1e-6))
    assert 0 < below.f_0 < 1e-4
    assert above.f_0 == 0
    assert below.mu == pytest.approx(above.mu, rel=1e-4, abs=0)


@pytest.mark.parametrize("T", [120e-9, 230e-9])
def test_first_law(T):
    """dU = mu dN at fixed S, and T dS at fixed N, by central differences of the solved states."""
    held, N, h = trap("300 a0"), 1e5, 1e-4
    S = held.state(N=N, T=T).S
    up, down = (held.state(N=N * (1 + s), S=S).U for s in (h, -h))
    assert (up - down) / (2 * h * N) == pytest.approx(held.state(N=N, T=T).mu, rel=1e-5, abs=0)
    (U2, S2), (U1, S1) = ((s.U, s.S) for s in (held.state(N=N, T=T * (1 + d)) for d in (h, -h)))
    assert pytest.approx(T, rel=1e-5, abs=0) == (U2 - U1) / (S2 - S1)


@pytest.mark.parametrize("name", ["S", "U"])
def test_the_temperature_is_found_again(name):
    held = trap()
    state = held.state(N=1e5, T=170e-9)
    assert pytest.approx(170e-9, rel=1e-9, abs=0) == held.state(**{"N": 1e5, name: getattr(state, name)}).T
    assert pytest.approx(1e5, rel=1e-9) == held.state(mu=state.mu, T=170e-9).N


def test_densities_add_up():
    """4 pi int r^2 n(r) dr of both parts, by a rule on each side of the edge, gives N_0 and N."""
    held = trap()
    state = held.state(N=1e5, T=150e-9)
    x, w = np.polynomial.legendre.leggauss(400)
    edge = state.R_TF[0]
    r = np.concatenate([edge * (1 + x) / 2, edge + 40e-6 * (1 + x) / 2])
    dr = np.concatenate([edge * w / 2, 40e-6 * w / 2])
    parts = state.densities(x=r, y=0.0, z=0.0)
    counted = [float(np.sum(4 * np.pi * r**2 * part * dr)) for part in parts]
    assert counted == pytest.approx([state.N_0, 1e5 - state.N_0], rel=1e-5)
