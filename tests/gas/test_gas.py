"""From the facts of a file to a gas."""

import math

import numpy as np
import pytest
from scipy.optimize import brentq

from eoscore.constants import HBAR, K_B, M_U, C, H
from eoscore.errors import NoAnswerError
from eoscore.formula import call, constant, variable
from eoscore.formula.field import Field
from eoscore.gas import Gas, gas_of
from eoscore.language.facts import GasFacts

M = 84 * M_U


def facts(**changed):
    given = {
        "name": "strontium", "statistics": "bose", "degeneracy": 1.0, "mass": M, "a_s": None, "treatment": None,
        "dispersion": "free", "parameters": {}, "energy": None,
    }  # fmt: skip
    return GasFacts(**(given | changed))


def inline(formula, *momenta, walls=()):
    return facts(mass=None, energy=Field(momenta, formula, walls))


@pytest.mark.parametrize("d", [1, 2, 3])
def test_wavelength_of_a_free_particle(d):
    T = np.array([[1e-7], [3.0]])
    wanted = H / np.sqrt(2 * math.pi * M * K_B * T)
    assert gas_of(facts()).thermal_wavelength(T, d) == pytest.approx(wanted, rel=1e-14, abs=0)


def test_wavelength_of_a_massless_particle():
    """int d^3p e^{-cp/kT} = 8 pi (kT/c)^3."""
    gas = gas_of(inline(C * variable("p"), "p"))
    wanted = H / (8 * math.pi) ** (1 / 3) / (K_B * 4.0 / C)
    assert gas.thermal_wavelength(4.0, 3) == pytest.approx(wanted, rel=1e-12, abs=0)


def test_degeneracy_counts_states_but_not_wavelengths():
    one, three = gas_of(facts()), gas_of(facts(degeneracy=3.0))
    assert three.momentum_measure(3).volume(1e-30) == pytest.approx(
        3 * one.momentum_measure(3).volume(1e-30), rel=1e-15, abs=0
    )
    assert three.thermal_wavelength(1e-6, 3) == one.thermal_wavelength(1e-6, 3)
    assert three.local_density(-1e-31, 1e-7, 3) == pytest.approx(
        3 * one.local_density(-1e-31, 1e-7, 3), rel=1e-15, abs=0
    )


def test_levels_leave_the_other_directions_free():
    gas = gas_of(facts(dispersion="trapped", parameters={"omega_x": 1e3, "omega_z": 2e3}))
    assert gas.quanta == pytest.approx((1e3 * HBAR, 2e3 * HBAR), rel=1e-15, abs=0)
    wanted = gas_of(facts()).momentum_measure(1).volume(1e-30)
    assert gas.momentum_measure(1).volume(1e-30) == pytest.approx(wanted, rel=1e-15, abs=0)


def test_all_directions_held_leave_one_state_for_each_spin():
    parameters = {f"omega_{axis}": 1e3 for axis in "xyz"}
    gas = gas_of(facts(dispersion="trapped", parameters=parameters, degeneracy=2.0))
    assert gas.momentum_measure(0).powers() == ((2.0, 0.0),)
    with pytest.raises(NoAnswerError, match="no thermal wavelength"):
        gas.thermal_wavelength(1e-7, 0)


def test_antiparticles_count_against_particles():
    m = 1e-36
    gas = gas_of(facts(mass=m, dispersion="relativistic", parameters={"antiparticles": 1.0}))
    assert [(b.charge, b.gap) for b in gas.branches] == [(1, 0.0), (-1, 2 * m * C**2)]
    middle = -m * C**2  # mu = 0 with the rest energy counted in: as many of either
    assert gas.local_density(middle, 300.0, 3) == 0
    alone = gas_of(facts(mass=m, dispersion="relativistic"))
    assert gas.local_pressure(middle, 300.0, 3) == pytest.approx(
        2 * alone.local_pressure(middle, 300.0, 3), rel=1e-14, abs=0
    )


def test_least_value_of_an_inline_energy_counts_as_zero():
    p = variable("p")
    low, high = (gas_of(inline(p**2 / (2 * M) + shift, "p")) for shift in (0.0, 7e-29))
    E = np.array([1e-32, 1e-30, 1e-28])
    assert high.momentum_measure(3).volume(E) == pytest.approx(
        low.momentum_measure(3).volume(E), rel=1e-9, abs=0
    )


@pytest.mark.parametrize(
    ("changed", "d", "words"),
    [
        ({"degeneracy": 0.0}, 3, "degeneracy = 0 came"),
        ({"mass": -1.0}, 3, "m = -1 kg came"),
        ({"mass": 0.0}, 3, r"m = 0 came; .* E\(p\) = c\*p"),
        ({"mass": None}, 3, "the dispersion free needs the mass"),
        ({}, 4, "holds 0 directions as levels, which leaves 3; the place has 4"),
        ({"parameters": {"gap": 1.0}}, 3, "free has no parameter gap; it has no parameters"),
        ({"dispersion": "relativistic", "parameters": {"antiparticles": 0.5}}, 3, "antiparticles = 0.5 came"),
        (
            {"dispersion": "trapped"},
            3,
            "trapped holds no direction; give at least one of omega_x, omega_y, omega_z",
        ),
        ({"dispersion": "trapped", "parameters": {"omega_z": -1.0}}, 2, "omega_z = -1 rad/s came"),
        (
            {"dispersion": "trapped", "parameters": {"omega_z": 1.0}},
            3,
            "holds 1 directions as levels, which leaves 2",
        ),
    ],
)
def test_refuses_in_words(changed, d, words):
    with pytest.raises(NoAnswerError, match=words):
        gas_of(facts(**changed)).momentum_measure(d)


@pytest.mark.parametrize(("momenta", "d"), [(("px", "py"), 3), (("px",), 2), (("px", "py", "pz"), 1)])
def test_momenta_that_do_not_fit_the_place(momenta, d):
    energy = sum((variable(name) ** 2 for name in momenta[1:]), variable(momenta[0]) ** 2)
    with pytest.raises(
        NoAnswerError, match=rf"the gas has E\({', '.join(momenta)}\), .* give the trap as many coord"
    ):
        gas_of(inline(energy, *momenta)).momentum_measure(d)


Q = variable("p") / 1e-27


@pytest.mark.parametrize(
    ("energy", "words"),
    [
        (1e-30 * (1 - call("cos", Q)), r"E\(p\) stays below 2e-30 J .* say where its zone ends"),
        (1e-30 * Q**2 / (1 + Q**2), r"E\(p\) stays below 1e-30 J .* say where its zone ends"),
        (
            -1e-30 * Q**2,
            r"the states of E\(p\) cannot be counted; with E called V and its momenta rho: .* holds nothing",
        ),
        (constant(1e-30), "cannot be counted"),
    ],
    ids=["repeats itself", "saturates", "falls", "is level"],
)
def test_an_energy_with_states_without_end_is_refused_in_words(energy, words):
    with pytest.raises(NoAnswerError, match=words):
        gas_of(inline(energy, "p")).momentum_measure(2)


def test_all_valleys_of_a_zone_count():
    """Two wells at the edge of a zone and in its middle: far above both, the whole zone lies below."""
    px = variable("px")
    edge = math.pi * 1e-27
    energy = 1e-30 * (1 - call("cos", 2 * px / 1e-27) - 0.1 * call("cos", px / 1e-27))
    measure = gas_of(inline(energy, "px", walls=(edge - call("abs", px),))).momentum_measure(1)
    assert measure.volume(1e-29) == pytest.approx(2 * edge / H, rel=1e-12, abs=0)
    low = 1.5e-31 / 1e-30  # in units of the band, above the least value: cos 2q + 0.1 cos q > 0.95
    inner = brentq(lambda q: math.cos(2 * q) + 0.1 * math.cos(q) - (1.1 - low), 0, 1)
    assert measure.volume(1.5e-31) == pytest.approx(2 * inner * 1e-27 / H, rel=1e-9, abs=0)


def test_a_gas_is_frozen():
    gas = gas_of(facts())
    assert isinstance(gas, Gas)
    with pytest.raises(AttributeError, match="cannot assign"):
        gas.mass = 0.0
