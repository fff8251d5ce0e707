"""Random traps bent by maps that keep every volume: y -> y + f(x), z -> z + g(x, y).

What a trap holds does not change by such a map, but its coordinates no longer part, so that an exact route and a
general one answer the same question. Seeded; what is asked is that the stated error holds.
"""

import numpy as np
import pytest

from eoscore.formula import call, constant, variable
from eoscore.formula.field import Field
from eoscore.gas import gas_of
from eoscore.language.facts import GasFacts
from eoscore.place.trap import TrapPlace
from eoscore.state import hold

K_B, MASS = 1.380649e-23, 1.4e-25
PIECES = {
    "bowl": lambda rng, s: s**2 + rng.uniform(0, 1) * s**4 + rng.uniform(-0.5, 0.5) * s**3,
    "soft": lambda rng, s: call("sqrt", 1 + rng.uniform(0.5, 5) * s**2),
    "beam": lambda rng, s: (
        -rng.uniform(5, 15) * call("exp", -2 * (s / rng.uniform(1, 3)) ** 2) + rng.uniform(0.02, 0.3) * s
    ),
    "bowl again": lambda rng, s: s**2,
}


def straight_and_bent(seed, dimension):
    """A field whose coordinates part, and the same bent; an energy (J) that sets the scale of both."""
    rng = np.random.default_rng(seed)
    names = ("x", "y", "z")[:dimension]
    energy = 1e-29 * 10 ** rng.uniform(-1, 1)
    s = {name: variable(name) / (1e-5 * 10 ** rng.uniform(-0.7, 0.7)) for name in names}
    kinds = rng.choice(sorted(PIECES), size=dimension)
    v = energy * sum(
        (PIECES[kind](rng, s[name]) for kind, name in zip(kinds, names, strict=True)), constant(0.0)
    )
    length = {name: 1 / s[name].evaluate({name: 1.0}) for name in names}
    one, other = rng.uniform(-0.6, 0.6), rng.uniform(-0.5, 0.5)
    bends = {"y": variable("y") + one * float(length["y"]) * s["x"] ** 2 / (1 + (s["x"] / 4) ** 2)}
    if dimension == 3:
        bends["z"] = variable("z") + other * float(length["z"]) * s["x"]
    return Field(names, v), Field(names, v.substitute(bends)), energy


def critical_number(field, energy, T):
    gas = gas_of(GasFacts("gas", "bose", 1.0, MASS, None, None, "free", {}, None))
    held = hold(gas, TrapPlace("trap", field, 8 * energy, MASS))
    reading = held.find(["N_c"], {"T": T})["N_c"]
    return float(reading.value), float(reading.error)


@pytest.mark.parametrize(
    ("seed", "dimension"), [*((seed, 2) for seed in range(8)), *((seed, 3) for seed in range(6))]
)
def test_bending_changes_no_number_beyond_its_error(seed, dimension):
    straight, bent, energy = straight_and_bent(seed, dimension)
    T = np.random.default_rng(seed + 100).uniform(0.1, 0.5) * energy / K_B
    exact, slack = critical_number(straight, energy, T)
    value, error = critical_number(bent, energy, T)
    assert abs(value - exact) <= error + slack
    assert error < 1e-3 * value  # an error of any size would hold
