"""What a Hartree-Fock state says of its own errors."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

import eoscore
from eoscore.state.mean_field.precision import relative_error

PLACES = [
    "V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + 4*z^2)",
    "V(r) = 2e-31 J*(r/(1 um))^4",
    "V(r) = 1e-24 J/m*r",
    "V(rho, z) = m/2*(2*pi*50 Hz)^2*rho^2 + m*g_n*z where z > 0 um",
]


def held(place, treatment="hartree_fock"):
    text = f"gas g {{ isotope Sr-84\n a_s = 123 a0\n treatment {treatment}\n}}\ntrap t {{ {place} }}"
    lab = eoscore.loads(text)
    return lab["g"].held_in(lab["t"])


@pytest.mark.parametrize("place", PLACES)
@pytest.mark.parametrize("T", [30e-9, 200e-9, 600e-9])
def test_a_much_finer_rule_agrees_within_the_error(place, T):
    state = held(place).state(N=1e5, T=T)
    fill = state.fills[0]
    fine = replace(fill.cloud, order=48)
    stated = relative_error(fill.cloud)
    assert stated < 1e-9
    for name in ("number", "entropy", "potential", "kinetic"):
        assert getattr(fill.cloud, name) == pytest.approx(getattr(fine, name), rel=stated, abs=0)
    assert state.reading("U").error == pytest.approx(3 * stated * state.U, rel=0.01, abs=0)


def test_a_coarse_rule_says_so():
    cloud = held(PLACES[0]).state(N=1e5, T=150e-9).fills[0].cloud
    assert relative_error(replace(cloud, order=2)) > 1e-6 > 1e-9 > relative_error(cloud)


@pytest.mark.parametrize("T", [60e-9, 150e-9, 300e-9])
def test_heat_capacity_within_its_error(T):
    """Against a Richardson table of wide steps."""
    trap = held(PLACES[0])
    found, steps = trap.state(N=1e5, T=T).reading("C_N"), 0.02 / 2.0 ** np.arange(5)
    row = np.array(
        [
            (trap.state(N=1e5, T=T * (1 + h)).U - trap.state(N=1e5, T=T * (1 - h)).U) / (2 * h * T)
            for h in steps
        ]
    )
    for order in range(1, 5):
        row = (4.0**order * row[1:] - row[:-1]) / (4.0**order - 1)
    assert abs(found.value - row[0]) < found.error < 1e-5 * found.value


def test_temperature_from_entropy_carries_an_error():
    trap = held(PLACES[0])
    state = trap.state(N=1e5, S=trap.state(N=1e5, T=150e-9).S)
    assert abs(state.T - 150e-9) < state.reading("T").error < 1e-9 * state.T
