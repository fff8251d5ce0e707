"""Profiles against the closed forms of the local picture, and against the whole gas."""

import numpy as np
import pytest

import eoscore
from eoscore.constants import K_B
from eoscore.errors import NoAnswerError

TEXT = """
gas probe { isotope Rb-87 }
gas heavy { isotope Rb-87 statistics classical }
trap bowl { V(r) = m/2 * (2*pi*100 Hz)^2 * r^2 }
trap knife { V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2)
E_max = 10e-30 J }
trap walled { V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2) where z > 0 }
trap flat { volume = 1 mm3 }
"""


@pytest.fixture(scope="module")
def lab():
    return eoscore.loads(TEXT)


@pytest.mark.parametrize(("gas", "T"), [("probe", 300e-9), ("probe", 100e-9), ("heavy", 300e-9)])
def test_profile_adds_up_to_the_excited_gas(lab, gas, T):
    """4 pi int n r^2 dr = N - N_0, by Gauss-Legendre panels; n(0) = n_peak."""
    state = lab[gas].held_in(lab["bowl"]).state(N=1e5, T=T)
    x, w = np.polynomial.legendre.leggauss(40)
    edges = np.linspace(0, 9 * (K_B * T / state.held.gas.mass) ** 0.5 / (2 * np.pi * 100), 9)
    r = (edges[:-1, None] + np.diff(edges)[:, None] * (1 + x) / 2).ravel()
    dr = (np.diff(edges)[:, None] * w / 2).ravel()
    n = state.profile(r=r).density
    assert 4 * np.pi * (n * r**2) @ dr == pytest.approx(state.N - state.N_0, rel=1e-9, abs=0)
    assert state.profile(r=0.0).density == pytest.approx(state.n_peak, rel=1e-12, abs=0)
    assert state.profile(r=0.0).pressure == pytest.approx(state.pressure, rel=1e-12, abs=0)


def test_classical_cloud_is_gaussian(lab):
    state = lab["heavy"].held_in(lab["bowl"]).state(N=1e5, T=1e-6)
    out = state.profile(r=[0.0, 1e-5, 3e-5])
    assert out.density == pytest.approx(
        state.n_peak * np.exp(-out.potential / (K_B * 1e-6)), rel=1e-12, abs=0
    )
    assert out.pressure == pytest.approx(out.density * K_B * 1e-6, rel=1e-12, abs=0)


def test_nothing_lies_above_the_escape_energy(lab):
    state = lab["probe"].held_in(lab["knife"]).state(N=1e4, T=200e-9)
    out = state.profile(x=np.linspace(0, 3e-5, 7), y=0.0, z=0.0)
    assert np.all(out.density[out.potential >= 10e-30] == 0)
    assert np.all(np.diff(out.density) <= 0)
    assert out.density[0] == pytest.approx(state.n_peak, rel=1e-12, abs=0)


def test_walls_hold(lab):
    state = lab["probe"].held_in(lab["walled"]).state(N=1e5, T=300e-9)
    out = state.profile(x=0.0, y=0.0, z=[-1e-6, 1e-6])
    assert out.density[0] == 0
    assert out.density[1] > 0
    assert np.isinf(out.potential[0])


@pytest.mark.parametrize(
    ("place", "conditions", "positions", "words"),
    [
        ("flat", {"N": 1e5, "T": 1e-7}, {"x": 0.0}, "has no coordinates"),
        ("bowl", {"N": 1e5, "T": 1e-7}, {"x": 0.0}, "wants the coordinates r; came x"),
        ("bowl", {"N": [1e5, 2e5], "T": 1e-7}, {"r": 0.0}, "wants one state"),
        ("bowl", {"N": 1e5, "T": -1e-7}, {"r": 0.0}, "above zero"),
    ],
)
def test_profiles_that_cannot_be(lab, place, conditions, positions, words):
    state = lab["probe"].held_in(lab[place]).state(**conditions)
    with pytest.raises(NoAnswerError, match=words):
        state.profile(**positions)
