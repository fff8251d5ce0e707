"""Units of what is derived."""

import pytest

import eoscore
from eoscore.symbolic.units import unit_of


@pytest.mark.parametrize(
    ("name", "per", "unit"),
    [
        ("N_c", 0, "1"),
        ("N_c", 3, "m^-3"),
        ("U", 2, "J/m^2"),
        ("S", 1, "J/K/m"),
        ("T_c", 3, "K"),
        ("g", 3, "1"),
    ],
)
def test_unit(name, per, unit):
    assert unit_of(name, per) == unit


def test_in_the_unbounded_place_everything_is_per_volume():
    text = "gas strontium { isotope Sr-84 }\nderive N_c, U for strontium in uniform with n = 1e19 m-3, T = 100 nK"
    found = eoscore.loads(text).answers()[0].formulas
    assert {name: entry["unit"] for name, entry in found.items()} == {"N_c": "m^-3", "U": "J/m^3"}
    assert found["N_c"]["difference"] < 1e-10
