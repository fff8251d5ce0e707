"""Places from facts: what they tell of themselves, and in words what they do not have."""

from __future__ import annotations

import math

import mpmath
import numpy as np
import pytest

from eoscore.errors import NoAnswerError
from eoscore.formula import call, constant, variable
from eoscore.formula.field import Field
from eoscore.language.facts import StatesFacts, TrapFacts, UniformFacts, VolumeFacts
from eoscore.place import StatesPlace, TrapPlace, UniformPlace, VolumePlace, place_of

x, y, z, rho, energy = map(variable, ("x", "y", "z", "rho", "E"))
MASS, OMEGA = 1.4e-25, 2 * math.pi * 100


def _trap(formula, coordinates=("x", "y", "z"), e_max=None, walls=(), mass=MASS):
    return place_of(TrapFacts("t", Field(coordinates, formula, walls), e_max), mass)


def test_a_harmonic_trap():
    place = _trap(MASS / 2 * OMEGA**2 * (x**2 + 4 * y**2 + 9 * (z - 1e-5) ** 2) + 3e-30)
    assert place.frequencies == pytest.approx((100, 200, 300), rel=1e-13, abs=0)
    assert place.r_min == pytest.approx((0, 0, 1e-5), abs=1e-18)
    assert place.v_min == pytest.approx(3e-30, rel=1e-12, abs=0)
    assert (place.dimension, place.depth, place.escape_words) == (
        3,
        math.inf,
        "nowhere: it holds at every energy",
    )


def test_e_max_is_the_depth_where_it_is_lower():
    v = 1e-28 * (1 - call("exp", -(x**2) / 1e-10)) * constant(1)
    assert _trap(v, ("x",)).depth == pytest.approx(1e-28, rel=1e-12, abs=0)
    cut = _trap(v, ("x",), e_max=3e-29)
    assert (cut.depth, cut.escape_words) == (3e-29, "over E_max")


@pytest.mark.parametrize(
    ("formula", "coordinates", "words"),
    [
        (call("sqrt", x**2 + y**2) * 1e-23, ("x", "y"), "tip of a cone"),
        (x**4, ("x",), "not quadratic"),
        (1e-24 * x, ("x",), "holds nothing"),
    ],
)
def test_facts_that_a_trap_does_not_have_are_words(formula, coordinates, words):
    with pytest.raises(NoAnswerError, match=words):
        _ = _trap(formula, coordinates).frequencies


def test_frequencies_ask_for_a_mass():
    with pytest.raises(NoAnswerError, match="frequencies need the mass"):
        _ = _trap(x**2, ("x",), mass=None).frequencies


def test_a_ring_counts_its_level_direction_as_zero():
    place = _trap(MASS / 2 * OMEGA**2 * (rho - 1e-5) ** 2, ("rho",))
    assert place.frequencies == pytest.approx((0, 100), rel=1e-12, abs=0)
    assert (place.dimension, place.r_min[0]) == (2, pytest.approx(1e-5, rel=1e-12, abs=0))


def test_boxes():
    box = place_of(VolumeFacts("box", 2e-12, 3, 5e-30))
    assert isinstance(box, VolumePlace)
    assert (box.frequencies, box.v_min, box.depth) == ((0, 0, 0), 0, 5e-30)
    assert float(box.measure.volume(1e-30)) == 2e-12
    with pytest.raises(NoAnswerError, match="box has no coordinates"):
        _ = box.r_min


def test_the_uniform_place_is_one_unit_of_volume():
    place = place_of(UniformFacts(), dimension=2)
    assert isinstance(place, UniformPlace)
    assert (place.dimension, place.measure.powers()) == (2, ((1.0, 0.0),))


def test_a_gas_that_needs_no_place_gets_none():
    assert place_of(None) is None


def test_powers_of_the_energy_are_exact():
    place = place_of(StatesFacts("s", 3e40 * energy**0.65 + 2e69 * energy**2, None, None, None))
    assert isinstance(place, StatesPlace)
    np.testing.assert_allclose(place.measure.powers(), [(3e40 / 1.65, 1.65), (2e69 / 3, 3.0)], rtol=1e-13)


def test_any_density_is_summed():
    """mpmath's quadrature of rho(E) from 0."""
    place = place_of(StatesFacts("s", 1e40 * energy**0.5 * call("exp", energy / 1e-30), None, None, None))
    for top in (1e-31, 1e-30, 3e-30):
        wanted = mpmath.quad(lambda e: 1e40 * mpmath.sqrt(e) * mpmath.exp(e / 1e-30), [0, top])
        assert float(place.measure.volume(top)) == pytest.approx(float(wanted), rel=1e-10, abs=0)


def test_an_anchor_fixes_the_scale():
    """N_c = A Gamma(a) zeta(a) (k T)^a, so dOmega/dE = A E^(a-1) counts N_c at T."""
    place = place_of(StatesFacts("s", None, 1.65, 3e5, 90e-9))
    ((coefficient, exponent),) = place.measure.powers()
    kT = 1.380649e-23 * 90e-9
    number = coefficient * exponent * mpmath.gamma(1.65) * mpmath.zeta(1.65) * kT**1.65
    assert float(number) == pytest.approx(3e5, rel=1e-13, abs=0)


@pytest.mark.parametrize(
    ("facts", "words"),
    [
        (StatesFacts("s", None, 0.9, 3e5, 90e-9), "there is no condensation"),
        (StatesFacts("s", 1e10 / energy, None, None, None), "number of states is infinite"),
        (StatesFacts("s", -1e40 * energy, None, None, None), "must be positive"),
        (StatesFacts("s", None, 1.5, None, None), "needs rho"),
        (VolumeFacts("v", 0.0, 3, None), "holds nothing"),
        (TrapFacts("t", Field(("x",), x**2), -1.0), "E_max is -1 J"),
    ],
)
def test_places_that_cannot_be_say_why(facts, words):
    with pytest.raises(NoAnswerError, match=words):
        place_of(facts)


def test_the_measure_of_a_trap_ends_at_its_top():
    place = _trap(MASS / 2 * OMEGA**2 * (x**2 + y**2 + z**2), e_max=1e-29)
    assert isinstance(place, TrapPlace)
    radius = math.sqrt(2 * 5e-30 / MASS) / OMEGA
    assert float(place.measure.volume(5e-30)) == pytest.approx(4 / 3 * math.pi * radius**3, rel=1e-12, abs=0)
    assert place.measure.top == 1e-29
