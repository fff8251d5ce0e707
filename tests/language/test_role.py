"""What names after `with` and `over` stand for: conditions, the file's own names."""

from __future__ import annotations

import pytest

from eoscore.errors import TarnError

from .labs import BOX, GAS, TRAP, near, program

OWN = "trap own { f_0 = 100 Hz\n V(r) = m/2*(2*pi*f_0)^2*r^2 }\n"


@pytest.mark.parametrize(
    ("condition", "value"),
    [
        ("f_0 = 0.3", 0.3),
        ("N_0 = 2e4", 2e4),
        ("PSD = 1.2", 1.2),
        ("fugacity = 0.5", 0.5),
        ("n_peak = 2 um-3", 2e18),
    ],
)
def test_further_conditions_give_a_state(condition, value):
    (question,) = program(f"{GAS}{TRAP}find mu for sr in bowl with T = 60 nK, {condition}").questions
    assert question.given[condition.split()[0]].value == near(value)
    assert not question.values


def test_a_name_of_the_file_comes_before_a_condition_of_that_name():
    (question,) = program(f"{GAS}{OWN}find f_0 for sr in own with N = 1, T = 1 K, f_0 = 50 Hz").questions
    assert question.values["f_0"].value == near(50.0)
    assert set(question.given) == {"N", "T"}


def test_six_names_are_always_conditions():
    with pytest.raises(TarnError, match="is the condition of the gas, never a name of the file"):
        program(f"U = 3 W\n{GAS}{TRAP}find T for sr in bowl with N = 1, U = 4 W")


@pytest.mark.parametrize(
    ("place", "conditions", "words"),
    [
        ("bowl", "N = 1, f_0 = 1 K", "`f_0` must be a pure number"),
        ("bowl", "N = 1, n_peak = 1", "`n_peak` must be 1/m3"),
        ("bowl", "N = 1, n_peak = 1 m-2", "density n_peak must be in m-3"),
        ("bowl", "N = 1, PSD = -1", "`PSD` must be above 0"),
        ("bowl", "f_0 = 0.5", "only f_0 is given"),
        ("bowl", "N = 1, T = 1 K, f_0 = 0.5", "`f_0` is one condition too many"),
        ("uniform", "T = 1 K, N_0 = 3", "has no total N_0"),
    ],
)
def test_conditions_are_refused_in_words(place, conditions, words):
    with pytest.raises(TarnError, match=words):
        program(f"{GAS}{TRAP}find mu for sr in {place} with {conditions}")


def test_any_two_conditions_give_the_number_that_T_c_needs():
    (question,) = program(f"{GAS}{BOX}find T_c for sr in box with T = 60 nK, f_0 = 0.5").questions
    assert set(question.given) == {"T", "f_0"}


BOWL = "trap cart { y0 = 1 um\n V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + (y - y0)^2 + z^2) }\n"


def test_coordinates_are_given_where_something_is_asked_at_positions():
    text = f"{GAS}{BOWL}find n_at for sr in cart with N = 1, T = 1 uK, y = 2 um over x = even(-1 um, 1 um, 3)"
    (question,) = program(text).questions
    assert question.coordinates == ("x", "y", "z")
    assert question.given["y"].value == near(2e-6)
    assert question.over[0].thermodynamic


@pytest.mark.parametrize(
    ("question", "words"),
    [
        ("find n_at for sr in cart with N = 1, T = 1 K, x = 1 s", "the coordinate `x` must be m"),
        ("find mu for sr in cart with N = 1, T = 1 K, x = 1 m", "`x` is neither a condition nor a name"),
        ("find n_at for sr in cart with N = 1, T = 1 K, r = 1 m", "`r` is neither a condition nor a name"),
        ("find n_at for sr in cart with N = 1, x = 1 m", "only N is given"),
        ("find n_column for sr in cart with N = 1, T = 1 K, x = 1 m", "y, z are left here"),
        (
            "find n_column for sr in cart with N = 1, T = 1 K, x = 1 m, y = 0 over z = [1 m]",
            "none is left here",
        ),
    ],
)
def test_positions_are_refused_in_words(question, words):
    with pytest.raises(TarnError, match=words):
        program(f"{GAS}{BOWL}{question}")
