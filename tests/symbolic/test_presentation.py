"""MathML keeps a formula as it was gathered, and is well-formed XML."""

from xml.etree import ElementTree as ET

import pytest
import sympy as sp

from eoscore.symbolic.writing import forms, root_forms

N, T, f, hbar, boltzmann, alpha = sp.symbols("N T f hbar k_B alpha", positive=True)
THIRD = sp.Rational(1, 3)


def shape(text):
    """Tags with their texts, without rows."""
    (root,) = ET.fromstring(f"<m>{text}</m>")  # noqa: S314 - our own text
    return _shape(root)


def _shape(element):
    if not len(element):
        return element.text
    inner = [_shape(child) for child in element]
    if element.tag == "mrow":
        return inner[0] if len(inner) == 1 else inner
    return (element.tag, *inner)


def written(expression):
    return shape(forms("x", expression, ())["mathml"])[2]


def test_a_root_of_a_ratio_stays_one_root():
    found = written(hbar * f * (N / sp.zeta(3)) ** THIRD / boltzmann)
    ratio = ("mfrac", "N", ["ζ", ["(", "3", ")"]])
    top = ["f", "\u2062", "ℏ", "\u2062", ("mroot", ratio, "3")]
    assert found == ("mfrac", top, ("msub", "k", "B"))


def test_a_power_of_a_product_stays_one_power():
    assert written((f * hbar) ** 3) == ("msup", ["(", ["f", "\u2062", "ℏ"], ")"], "3")


@pytest.mark.parametrize(
    ("expression", "first"),
    [(-3 * N / (4 * T), "−"), (-sp.Float("3.5", 3) * N, "−"), (sp.Rational(1, 2) * N, "mfrac"), (2 * N, "2")],
)
def test_a_product_begins_with_its_sign_or_its_number(expression, first):
    assert written(expression)[0] == first


def test_an_equation_shows_both_sides_and_not_their_difference():
    found = root_forms("T_c", T**3 + T**2, N, {"N"})
    assert found["sympy"] == "-N + T**3 + T**2"
    assert found["text"] == "T_c solves T^3 + T^2 = N"
    assert found["latex"] == "T^{3} + T^{2} = N"
    assert shape(found["mathml"])[-2:] == ["=", "N"]


def test_every_letter_is_written_as_itself():
    text = forms("g", sp.Sum(sp.exp(-alpha) / sp.sqrt(sp.pi), (sp.Symbol("l"), 1, sp.oo)), ())["mathml"]
    ET.fromstring(f"<m>{text}</m>")  # noqa: S314 - our own text
    assert "hbar" not in forms("x", hbar, ())["mathml"]
    assert "&pi;" not in text
