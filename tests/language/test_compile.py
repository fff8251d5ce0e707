"""Single expressions outside a file: the energy text of a plugin as a formula."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import constants as si

from eoscore.errors import TarnError
from eoscore.language.compile import compile_text
from eoscore.language.kind import dimension

from .labs import near

MOMENTUM, ENERGY = dimension("kg.m/s"), dimension("J")
MASS = {"m": (1.5e-25, dimension("kg"))}


def test_an_energy_text_becomes_a_formula_of_its_momenta():
    energy = compile_text("sqrt(m^2*c^4 + p^2*c^2) - m*c^2", {"p": MOMENTUM}, MASS, ENERGY)
    p = 3e-17
    wanted = np.hypot(1.5e-25 * si.c**2, p * si.c) - 1.5e-25 * si.c**2
    assert float(energy.evaluate({"p": p})) == near(wanted, rel=1e-9)
    assert energy.variables == {"p"}


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("p^2", "the expression must be kg m2/s2 .J."),
        ("p^2/(2*M)", "the name `M` is not known here"),
        ("p*c where p > 0", "`where` came|is not one expression"),
        ("p*c\nq = 3", "is not one expression"),
        ("", "value"),
        ("p*c + p", "these cannot be added"),
        ("p*c) + (p*c", "came"),
    ],
)
def test_a_text_that_is_no_energy_is_refused(text, message):
    with pytest.raises(TarnError, match=message):
        compile_text(text, {"p": MOMENTUM}, MASS, ENERGY)


def test_an_argument_of_a_value_that_is_zero_is_refused_where_it_divides():
    with pytest.raises(TarnError, match="or a division by 0"):
        compile_text("p*c + (1 J)/a", {"p": MOMENTUM}, {"a": (0.0, dimension("1"))}, ENERGY)
