"""The laws of the contract, for every dispersion that is installed with eoscore, and for broken ones."""

import pytest
from eoscore.plugins.free import Free
from eoscore.plugins.relativistic import Relativistic

from eoscore.constants import K_B, M_U, C
from eoscore.errors import LawError
from eoscore.gas import Branch, Dispersion
from eoscore.gas.registry import dispersion, dispersion_names
from eoscore.testing import check_dispersion

LIGHT = 1e-36  # kg; m c^2 is 6500 K
CASES = {
    "free": [{}],
    "relativistic": [
        {"mass": LIGHT, "temperatures": (1.0, LIGHT * C**2 / K_B, 1e7)},
        {"mass": 0.0, "temperatures": (300.0,)},
        {"values": {"antiparticles": 1.0}},
    ],
    "trapped": [{"values": {"omega_z": 3e4}}, {"values": {"omega_x": 1e3, "omega_y": 2e3}}],
}


@pytest.mark.parametrize("name", dispersion_names())
def test_every_plugin_keeps_the_laws(name):
    assert CASES.get(name), f"the plugin {name} has no case here"
    for case in CASES[name]:
        check_dispersion(dispersion(name), **case)


class Heavier(Free):
    """A closed form that belongs to a mass a thousandth larger."""

    def momentum_measure(self, d):
        return Free(1.001 * self.mass).momentum_measure(d)


class Warmer(Free):
    """A partition function that is too large."""

    def partition(self, beta, d):
        return 1.00001 * super().partition(beta, d)


class Denser(Free):
    """A density that is no derivative of the pressure."""

    def local_density(self, mu, T, d, statistics):
        return 1.00001 * super().local_density(mu, T, d, statistics)


class Lighter(Relativistic):
    """A symbolic energy that is another function."""

    def symbolic_energy(self):
        return super().symbolic_energy() * 2


class Charged(Free):
    """Antiparticles alone."""

    branches = (Branch(-1, 0.0),)


class Endless(Free):
    """An energy that stays bounded, without a zone."""

    energy = "m*c^2*tanh((p/(m*c))^2)"


class Dipped(Dispersion):
    """An energy whose least value lies on a ring."""

    name, origin = "dipped", "this test"
    energy = "m*c^2*((p/(m*c))^2 - 1)^2"


@pytest.mark.parametrize(
    ("kind", "options", "words"),
    [
        (Heavier, {}, r"d = 3, T = 1e-07 K: momentum_measure: Omega\(.* J\) = .*; the formula gives"),
        (Warmer, {}, r"partition: K\(.*/J\) = .*; the formula gives"),
        (Denser, {}, r"local_density of a bose gas at mu = .* J \(dP/dmu\)"),
        (Lighter, {"mass": LIGHT, "temperatures": (300.0,)}, r"energy at .* kg m/s = .*; the formula gives"),
        (Charged, {}, r"branches = .*; wanted particles \(1, 0 J\) first"),
        (Endless, {}, "does not rise beyond all bounds with p; it needs walls"),
        (Dipped, {}, r"the energy falls with \|p\| at .* kg m/s \(allow it: rises=False\)"),
    ],
)
def test_a_broken_law_is_named_with_both_numbers(kind, options, words):
    with pytest.raises(LawError, match=words):
        check_dispersion(kind, **options)


def test_a_ring_of_least_energy_is_no_fault_when_it_is_meant():
    check_dispersion(Dipped, mass=LIGHT, temperatures=(300.0,), rises=False)


def test_all_broken_laws_are_told_at_once():
    with pytest.raises(LawError) as caught:
        check_dispersion(Heavier, temperatures=(1e-6,))
    assert len(caught.value.broken) > 6
    assert caught.value.dispersion == "free"
    assert caught.value.broken[0].startswith("d = 1")


def test_an_instance_will_do():
    check_dispersion(Free(84 * M_U), temperatures=(1e-6,))
