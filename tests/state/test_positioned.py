"""Density, pressure and column density at positions against the closed forms of the local picture."""

import numpy as np
import pytest
from scipy.special import zeta

import eoscore
from eoscore import bose
from eoscore.constants import HBAR, K_B
from eoscore.errors import NoAnswerError

OMEGA = 2 * np.pi * 100
TEXT = """
gas probe { isotope Rb-87 }
gas heavy { isotope Rb-87 statistics classical }
gas spins { isotope K-40 statistics fermi }
trap bowl { V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2) }
trap ball { V(r) = m/2 * (2*pi*100 Hz)^2 * r^2 }
trap pot { V(rho, z) = m/2 * (2*pi*100 Hz)^2 * (rho^2 + z^2) }
trap sheet { V(x, y) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2) }
trap wire { V(x) = m/2 * (2*pi*100 Hz)^2 * x^2 }
trap tip { V(r) = k_B*10 nK*r/(1 um) }
trap knife { V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2)
E_max = 10e-30 J }
trap sagging { V(x, y, z) = -k_B*8 uK*exp(-2*(x^2 + y^2 + z^2/4)/(30 um)^2) + m*g_n*z }
trap walled { V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2) where z > 0 }
"""
THROUGH = {"bowl": {"x": 0.0, "y": 0.0}, "ball": {}, "pot": {"z": 0.0}}


@pytest.fixture(scope="module")
def lab():
    return eoscore.loads(TEXT)


def near(value, rel=1e-12):
    return pytest.approx(value, rel=rel, abs=0)


@pytest.mark.parametrize("place", THROUGH)
def test_the_column_at_the_centre_at_T_c(lab, place):
    """lambda^-2 (kT/hbar w) zeta(2); the peak is lambda^-3 zeta(3/2) (Dalfovo et al., RMP 71, 463, 1999)."""
    held = lab["probe"].held_in(lab[place])
    T = held.T_c(N=1e5)
    state = held.state(N=1e5, T=T)
    column = state.lambda_T**-2 * K_B * T / (HBAR * OMEGA) * zeta(2)
    assert state.at("n_column", **THROUGH[place]) == near(column)
    assert state.at("n_at") == near(state.lambda_T**-3 * zeta(1.5))


def test_lines_that_are_alike_are_counted_once(lab):
    held = lab["probe"].held_in(lab["bowl"])
    held.model.lines.clear()
    held.state(N=1e5, T=300e-9).at("n_column", x=np.linspace(-1e-5, 1e-5, 50)[:, None], y=[0.0, 1e-6])
    assert len(held.model.lines) == 1


@pytest.mark.parametrize("T", [250e-9, 400e-9])
def test_columns_beside_the_centre(lab, T):
    """lambda^-2 (kT/hbar w) g_2(z e^{-V/kT}), for arrays of states and of positions together."""
    held = lab["probe"].held_in(lab["bowl"])
    state = held.state(N=[1e4, 1e5], T=T)
    x = np.array([0.0, 3e-6, 2e-5])[:, None]
    height = held.gas.mass / 2 * OMEGA**2 * (x**2 + (4e-6) ** 2) / (K_B * T)
    alpha = -np.log(state.fugacity) + height
    expected = state.lambda_T**-2 * K_B * T / (HBAR * OMEGA) * bose(2.0, alpha)
    assert state.at("n_column", x=x, y=4e-6) == near(expected, 1e-11)


@pytest.mark.parametrize(("place", "dimension"), [("wire", 1), ("sheet", 2)])
@pytest.mark.parametrize("gas", ["probe", "heavy", "spins"])
def test_columns_add_up_to_the_number(lab, gas, place, dimension):
    state = lab[gas].held_in(lab[place]).state(N=1e3, T=500e-9)
    if dimension == 1:
        assert state.at("n_column") == near(1e3, 1e-10)
        return
    edge = 12 * (K_B * 500e-9 / state.held.gas.mass) ** 0.5 / OMEGA
    x, w = np.polynomial.legendre.leggauss(60)
    assert state.at("n_column", y=edge * x) @ w * edge == near(1e3, 1e-9)


def test_the_gas_below_an_escape_energy_adds_up(lab):
    """int n_column dx dy = N_ex, by the trapezoidal rule in x^2 + y^2 (the trap is round)."""
    held = lab["probe"].held_in(lab["knife"])
    state = held.state(N=2e3, T=300e-9)
    edge = 2 * held.top / (held.gas.mass * OMEGA**2)
    x, w = np.polynomial.legendre.leggauss(24)
    square = edge * (1 + x) / 2
    assert np.pi * edge / 2 * (state.at("n_column", x=np.sqrt(square), y=0.0) @ w) == near(2e3, 1e-7)


def test_a_column_is_the_integral_of_the_density(lab):
    """In a sagging trap with an escape energy, off the axis, condensed: panels between the edges of the line."""
    held = lab["probe"].held_in(lab["sagging"])
    state = held.state(N=1e4, T=0.7 * held.T_c(N=1e4))
    x, w = np.polynomial.legendre.leggauss(30)
    edges = np.linspace(-2e-5, 2e-5, 41)
    y = (edges[:-1, None] + np.diff(edges)[:, None] * (1 + x) / 2).ravel()
    dy = (np.diff(edges)[:, None] * w / 2).ravel()
    line = state.at("n_at", x=2e-6, y=y) @ dy
    assert state.at("n_column", x=2e-6, z=held.place.r_min[2]) == near(line, 1e-7)


def test_a_cone_has_a_column_too(lab):
    """lambda^-3 2 (kT/F) g_{5/2}(z) for V = F r: both sides of the tip."""
    state = lab["probe"].held_in(lab["tip"]).state(N=1e4, T=300e-9)
    length = 300e-9 / (10e-9 / 1e-6)
    expected = 2 * state.lambda_T**-3 * length * bose(2.5, -np.log(state.fugacity))
    assert state.at("n_column") == near(expected, 1e-10)


def test_coordinates_that_are_not_given_are_those_of_the_bottom(lab):
    state = lab["probe"].held_in(lab["sagging"]).state(N=1e4, T=200e-9)
    assert state.at("n_at") == near(state.n_peak, 1e-6)
    assert state.at("pressure_at", x=[0.0, 1e-6])[0] == near(state.pressure, 1e-9)
    assert state.at("V_at") == 0.0


def test_beyond_the_edge_there_is_nothing(lab):
    held = lab["probe"].held_in(lab["knife"])
    state = held.state(N=1e3, T=100e-9)
    assert state.at("n_column", x=1e-4, y=0.0) == 0.0
    assert state.at("n_at", x=1e-4) == 0.0


@pytest.mark.parametrize("z", [-2e-4, -1e-3, -1.0])
def test_where_the_trap_has_let_go_there_is_nothing(lab, z):
    """V falls below its value at the bottom of the trap there, beyond the pass."""
    state = lab["probe"].held_in(lab["sagging"]).state(N=1e4, T=200e-9)
    assert state.at("V_at", z=z) < 0
    assert state.at("n_at", z=z) == 0.0
    assert state.profile(x=0.0, y=0.0, z=z).density == 0.0


def test_just_beyond_the_pass_there_is_nothing(lab):
    held = lab["probe"].held_in(lab["sagging"])
    state = held.state(N=1e4, T=200e-9)
    z = held.place.landscape.escape.position[2]
    n = state.at("n_at", z=z + np.array([-2e-6, -1e-6, 1e-6, 2e-6]))
    assert np.all((n > 0) == [False, False, True, True])


def test_a_ring_is_held_all_round(lab):
    text = (
        TEXT
        + """trap ring { V(x, y) = k_B*10 uK*(1 - exp(-((x^2 + y^2)/(1 um)^2 - 400)^2/2e4)) + m*1 m/s2*x }"""
    )
    state = eoscore.loads(text)["probe"].held_in(eoscore.loads(text)["ring"]).state(N=1e4, T=200e-9)
    n = state.at("n_at", x=[-20e-6, 20e-6, 0.0, 0.0], y=[0.0, 0.0, 20e-6, 0.0])
    assert np.all(n[:3] > 0)


def test_behind_a_wall_there_is_nothing_and_half_a_line_is_half_a_column(lab):
    whole, half = (lab["probe"].held_in(lab[place]).state(mu=-1e-30, T=3e-7) for place in ("bowl", "walled"))
    expected = whole.at("n_column", x=1e-6, y=0.0) / 2
    assert half.at("n_column", x=1e-6, y=0.0) == near(expected, 1e-10)
    assert half.at("n_column", x=0.0, z=-1e-6) == 0.0
    assert np.ma.getmaskarray(half.at("V_at", z=[-1e-6, 1e-6])).tolist() == [True, False]


@pytest.mark.parametrize(
    ("name", "positions", "words"),
    [
        ("n_column", {"x": 0.0}, "along the one coordinate that is not given; of x, y, z came x"),
        ("n_at", {"r": 0.0}, "has no coordinate r; it has x, y, z"),
    ],
)
def test_positions_that_cannot_be(lab, name, positions, words):
    state = lab["probe"].held_in(lab["bowl"]).state(N=1e5, T=3e-7)
    with pytest.raises(NoAnswerError, match=words):
        state.at(name, **positions)


def test_each_error_is_below_the_one_stated(lab):
    """Against lambda^-3 g_{3/2}(z e^{-V/kT}) with mu given."""
    from eoscore.state.positioned import read_at

    state = lab["probe"].held_in(lab["bowl"]).state(mu=-1e-31, T=2e-7)
    reading = read_at(state, "n_at", {"x": np.linspace(0, 3e-5, 20)})
    alpha = (1e-31 + state.at("V_at", x=np.linspace(0, 3e-5, 20))) / (K_B * 2e-7)
    exact = state.lambda_T**-3 * bose(1.5, alpha)
    assert np.all(np.abs(reading.value - exact) <= reading.error + 4e-15 * exact)
