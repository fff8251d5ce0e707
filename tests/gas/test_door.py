"""What is refused at the door, and how it is told."""

import pytest

from eoscore.errors import PluginError
from eoscore.gas import Dispersion, Parameter
from eoscore.gas.door import admitted


def plugin(base=Dispersion, **declared):
    """A dispersion class called `odd` with the given attributes over a sound set; None takes one away."""
    sound = {"name": "odd", "origin": "this test", "energy": "p^2/(2*m)"} | declared
    return type("Odd", (base,), {key: value for key, value in sound.items() if value is not None})


def test_a_sound_class_is_let_in():
    kind = plugin(parameters=(Parameter("J", "J", 1e-30, "a scale"),), energy="J*(p/(m*c))^4")
    assert admitted("odd", kind) is kind


TABLE = [
    (42, "int 42, not a class", "a subclass of eoscore.gas.Dispersion"),
    (int, "the class int, no dispersion", "a subclass of Dispersion"),
    (plugin(name="even"), "name = 'even'", "name = 'odd', as its entry point is called"),
    (plugin(name=None), "name = None", "name = 'odd'"),
    (plugin(origin=None), "origin = None", "where the formula comes from"),
    (plugin(energy=None), "no energy formula", "a Tarn expression in J"),
    (plugin(energy=7), "no energy formula", "a Tarn expression in J"),
    (plugin(energy="  "), "no energy formula", "a Tarn expression in J"),
    (plugin(energy="p^2/(2*m"), "does not read", "a Tarn expression in J of p"),
    (plugin(energy="p^2"), "does not read", "a Tarn expression in J of p"),
    (plugin(energy="p^2/(2*m) + gap"), "the name `gap` is not known here", "a Tarn expression in J of p"),
    (
        plugin(energy="p^2/(2*m)", needs_mass=False),
        "`m` is known inside a gas or a trap only",
        "a Tarn expression in J of p",
    ),
    (plugin(energy="__import__('os')"), "does not read", "a Tarn expression in J of p"),
    (plugin(momentum="p"), "momentum = 'p'", r"\('p',\) or \('px',\)"),
    (plugin(momentum=("px", "pz")), "momentum", r"\('px', 'py'\)"),
    (plugin(walls=["p"]), r"walls = \['p'\]", "walls: a tuple of Tarn expressions"),
    (plugin(walls=("p/c",)), "does not read", "a Tarn expression"),
    (plugin(needs_mass=1), "needs_mass = 1", "needs_mass: True or False"),
    (plugin(parameters=["J"]), r"parameters = \['J'\]", "parameters: a tuple of Parameter"),
    (plugin(parameters=(Parameter("my gap", "J", None, ""),)), "a parameter 'my gap'", "a Tarn name"),
    (
        plugin(parameters=(Parameter("m", "kg", None, ""),)),
        "a parameter 'm'",
        "neither a momentum nor a constant",
    ),
    (plugin(parameters=(Parameter("hbar", "J.s", 1.0, ""),)), "a parameter 'hbar'", "neither a momentum nor"),
    (plugin(parameters=(Parameter("J", "J", 1.0, ""),) * 2), "a parameter 'J' twice", "each parameter once"),
    (plugin(parameters=(Parameter("J", "joules", 1.0, ""),)), "in the unit 'joules'", "a unit of Tarn"),
    (plugin(parameters=(Parameter("J", "J m", 1.0, ""),)), "in the unit 'J m'", "a unit of Tarn"),
    (plugin(levels=("omega_z",)), r"levels = \('omega_z',\)", "names of its parameters"),
    (
        type("Half", (Dispersion,), {"name": "odd", "origin": "this test"}),
        "no energy formula",
        "a Tarn expression",
    ),
]


@pytest.mark.parametrize(("found", "came", "wanted"), TABLE)
def test_a_bad_plugin_is_refused_with_what_came_and_what_was_wanted(found, came, wanted):
    with pytest.raises(PluginError, match=f"plugin 'odd' is refused: found .*{came}.*; wanted .*{wanted}"):
        admitted("odd", found)


def test_all_faults_of_a_plugin_are_told_at_once():
    bad = plugin(name="even", origin="", momentum="k", needs_mass=None)
    with pytest.raises(PluginError, match=r"name = 'even'.*; origin = ''.*; momentum = 'k'"):
        admitted("odd", bad)


def test_a_class_that_fails_when_it_is_read_is_refused():
    def fails(self):
        raise RuntimeError("no such file")

    with pytest.raises(PluginError, match="RuntimeError: no such file"):
        admitted("odd", plugin(field=property(fails)))
