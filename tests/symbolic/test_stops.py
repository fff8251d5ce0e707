"""Where no formula is found the answer names the integral, and gives the engine's number or the engine's words."""

import pytest

import eoscore

GAS = "gas strontium { isotope Sr-84 }\n"


def asked(place, question):
    (answer,) = eoscore.loads(f"{GAS}{place}\n{question}").answers()
    return answer.formulas


@pytest.mark.parametrize(
    ("potential", "integral"),
    [
        ("V(r) = U*(cosh(r/(5 um)) - 1)", "(U*(cosh(200000*r) - 1))) dr"),
        (
            "V(x, y, z) = U*if(x > 0 um, x/b, -2*x/b) + U*(y^2 + z^2)/b^2",
            "(U*Piecewise((x/b, x > 0), (-2*x/b, True)))) dx",
        ),
    ],
)
def test_the_integral_is_named_and_the_number_given(potential, integral):
    place = f"trap t {{ U = k_B*1 uK\n b = 5 um\n {potential} }}"
    entry = asked(place, "derive T_c for strontium in t with N = 1e3")["T_c"]
    assert entry["why"].startswith("no closed form was found for the integral of exp(-beta*")
    assert entry["why"].endswith(integral)
    assert 1e-8 < entry["value"] < 1e-6
    assert entry["sympy"] is None


def test_a_sum_that_diverges_is_no_condensation():
    """rho(0) > 0 means a = 1: the sum over l of 1/l."""
    place = "states s { rho(E) = 1e40 J-1*exp(-E/(k_B*1 uK)) }"
    entry = asked(place, "derive T_c for strontium in s with N = 1e3")["T_c"]
    assert entry["value"] is None
    assert entry["why"].startswith("no condensation: the states below E grow as E^a with a = 1")


def test_a_number_that_was_not_asked_for_is_not_missed():
    """N_c wants a temperature: without one there is nothing to say about the numbers."""
    place = "trap t { V(r) = -k_B*1 uK*exp(-r^2/(10 um)^2) }"
    found = asked(place, "derive N_c, U for strontium in t with N = 1e3")
    for entry in found.values():
        assert entry["why"].endswith("no closed form is known for the rest")
