"""Slow changes of the trap, and the classical gas below an escape energy."""

import numpy as np
import pytest

from eoscore.constants import K_B

from .held import RUBIDIUM, held, power_trap

CLASSICAL = "isotope Rb-87\n statistics classical"
INF = float("inf")


@pytest.mark.parametrize(
    ("before", "after", "gain"),
    [(INF, 2, 4.48168907034), (2, 1, 4.48168907034), (INF, 1, 20.0855369232)],
)
def test_shape_change_of_a_classical_gas(before, after, gain):
    """PSD_f/PSD_i = exp(delta_f - delta_i), delta = 3/p (Pinkse et al., Phys. Rev. Lett. 78, 990, 1997)."""
    start = power_trap(before, CLASSICAL).state(N=1e5, T=1e-6)
    end = power_trap(after, CLASSICAL).brought_from(start)
    assert pytest.approx(gain, rel=1e-11, abs=0) == end.PSD / start.PSD


@pytest.mark.parametrize(
    ("before", "after", "fraction"),
    [(INF, 2, 0.643549656481), (INF, 1, 0.759868134395), (2, 1, 0.326324493802)],
)
def test_condensing_by_a_shape_change(before, after, fraction):
    """From T_c: N_0/N = 1 - S_i/S_f with the critical entropies of `test_traps`."""
    start = power_trap(before)
    end = power_trap(after).brought_from(start, N=1e5, T=start.T_c(N=1e5))
    assert end.f_0 == pytest.approx(fraction, rel=1e-10, abs=0)


def test_scale_change_keeps_the_phase_space():
    """T goes with the frequency, PSD and f_0 stay (adiabatic theorem); on both sides of T_c."""
    weak, tight = (held(f"V(r) = m/2 * (2*pi*{f} Hz)^2 * r^2") for f in (50, 400))
    T = weak.T_c(N=1e5) * np.array([0.2, 0.9, 1.1, 3.0])
    start = weak.state(N=1e5, T=T)
    end = tight.brought_from(start)
    assert pytest.approx(8 * T, rel=1e-11, abs=0) == end.T
    assert end.f_0 == pytest.approx(start.f_0, rel=1e-10, abs=0)
    assert pytest.approx(start.PSD, rel=1e-10, abs=0) == end.PSD


TRUNCATED = [
    (2, 6, 0.938031195583, 2.71460945399),
    (2, 8, 0.986246032256, 2.91292392574),
    (2, 10, 0.997230604284, 2.97723699535),
    (1, 6, 0.786690694917, 3.64006530925),
    (1, 8, 0.933118412226, 4.14192988602),
    (1, 10, 0.98208759547, 4.37432158278),
]


@pytest.mark.parametrize(("p", "eta", "fraction", "energy"), TRUNCATED)
def test_truncated_boltzmann_gas(p, eta, fraction, energy):
    """P(a, eta) and a P(a+1)/P(a), a = 3/2 + 3/p (Luiten, Reynolds, Walraven, Phys. Rev. A 53, 381, 1996, memory)."""
    T = 1e-6
    top = f"E_max = {eta * K_B * T!r} J"
    V = f"V(r) = 1e-30 J * (r/(1 um))^{p}"
    whole, cut = held(V, CLASSICAL), held(f"{V}\n{top}", CLASSICAL)
    mu = -3e-29
    assert pytest.approx(fraction, rel=1e-11, abs=0) == cut.state(mu=mu, T=T).N / whole.state(mu=mu, T=T).N
    state = cut.state(N=1e5, T=T)
    assert pytest.approx(energy, rel=2e-12, abs=0) == state.U / (1e5 * K_B * T)
    assert state.eta == pytest.approx(eta, rel=1e-12, abs=0)


def test_spilling_is_told():
    """A trap cut at 6 kT of a gas that filled an open one: P says that 6 % of a harmonic cloud lie above 6 kT."""
    V = "V(r) = m/2 * (2*pi*100 Hz)^2 * r^2"
    start = held(V, RUBIDIUM).state(N=1e4, T=1e-6)
    cut = held(f"{V}\nE_max = {6e-6 * K_B!r} J")
    assert "spill" in cut.brought_from(start).spill[0]
    assert held(V).brought_from(start).spill == ()
