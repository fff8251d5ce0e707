"""V times a number: the measure is stretched, not made again, and the numbers are those of the trap itself."""

from __future__ import annotations

import numpy as np
import pytest

import eoscore
from eoscore import measure
from eoscore.formula import call, choose, constant, less, variable
from eoscore.formula.ratio import ratio

X, Y = variable("x"), variable("y")
DIMPLE = """
gas strontium { m = 84 u }
trap dimple {
    Q = 2 uK
    E_max = 0.4*k_B*Q
    V(x) = -k_B*Q*exp(-2*x^2/(50 um)^2)PULL
}
find S, depth, V_min for strontium in dimple with N = 1e3, T = 200 nK over Q = [1 uK, 2 uK, 5 uK, 9 uK]
"""


def well(depth):
    return -constant(depth) * call("exp", -(X**2)) / (1 + Y**2) - depth * call("exp", -(Y**2))


@pytest.mark.parametrize(
    ("f", "g", "c"),
    [
        (well(6.0), well(2.0), 3.0),
        (well(1.0), well(7.0), 1 / 7),
        (2 * X + 4 * Y, X + 2 * Y, 2.0),
        (call("sqrt", 4 * X), call("sqrt", X), 2.0),
        (call("abs", -3 * X), call("abs", X), 3.0),
        ((3 * X) ** 2, X**2, 9.0),
        (choose(less(X, 1.0), 2 * X, 2 * Y), choose(less(X, 1.0), X, Y), 2.0),
        (call("max", 2 * X, 2 * Y), call("max", X, Y), 2.0),
    ],
)
def test_a_ratio_is_shown_by_structure(f, g, c):
    assert ratio(f, g) == pytest.approx(c, rel=1e-14, abs=0)


@pytest.mark.parametrize(
    ("f", "g"),
    [
        (2 * X + 3 * Y, X + Y),
        (call("exp", 2 * X), call("exp", X)),
        (X + 1, X),
        (X**2, X**3),
        (choose(less(X, 2.0), X, Y), choose(less(X, 1.0), X, Y)),
        (call("max", -2 * X, -2 * Y), call("max", X, Y)),
        (constant(0.0), X),
    ],
)
def test_no_ratio_is_invented(f, g):
    assert ratio(f, g) is None


def test_formulas_deeper_than_the_walk_are_not_compared():
    deep = X
    for _ in range(5000):
        deep = call("sin", deep) + X
    assert ratio(2 * deep, 3 * (deep + Y)) is None
    assert ratio(2 * deep, 3 * deep) == pytest.approx(2 / 3, rel=1e-15, abs=0)


@pytest.mark.parametrize(("pull", "measured"), [("", 1), (" + m*g_n/10*x", 4)])
def test_a_trap_is_measured_once_unless_gravity_pulls(monkeypatch, pull, measured):
    asked, whole = set(), measure.measure_of
    monkeypatch.setattr(measure, "measure_of", lambda field, *a: asked.add(field) or whole(field, *a))
    text = DIMPLE.replace("PULL", pull)
    (answer,) = eoscore.loads(text).answers()
    assert len(asked) == measured
    for place, depth in enumerate("1259"):
        alone = text.replace(" over Q = [1 uK, 2 uK, 5 uK, 9 uK]", "")
        (single,) = eoscore.loads(alone, settings=[f"Q={depth} uK"]).answers()
        for name, finding in single.found.items():
            assert np.isfinite(finding.value)
            np.testing.assert_allclose(answer.found[name].value[place], finding.value, rtol=1e-9, atol=0)


OVER = {
    "mass that V does not know": ("A = k_B*1 uK", "q = even(40, 90, 5)"),
    "mass that scales V": ("A = m*(1 mm/s)^2", "q = even(40, 90, 5)"),
    "knife": ("A = k_B*1 uK\n E_max = 0.5*k*k_B*1 uK", "k = even(0.2, 1, 5)"),
    "power below a knife": ("A = k_B*k*1 uK\n E_max = k_B*0.5 uK", "k = even(0.7, 2, 5)"),
    "name that is not used": ("A = k_B*1 uK\n other = 3 um", "other = even(1 um, 2 um, 5)"),
    "scattering length": ("A = k_B*1 uK", "a_s = even(1 nm, 5 nm, 5)"),
}


@pytest.mark.parametrize("name", OVER)
def test_what_does_not_change_along_an_axis_is_measured_once(monkeypatch, name):
    asked, whole = [], measure.measure_of
    monkeypatch.setattr(measure, "measure_of", lambda *a: asked.append(a) or whole(*a))
    given, over = OVER[name]
    text = (
        "gas g { q = 84\n m = q*1 u\n a_s = 1 nm }\n"
        f"trap t {{ k = 1\n {given}\n V(x, y) = -A*exp(-(x^2 + 3*y^2 + x*y)/(50 um)^2) }}\n"
        f"find S, freq, depth for g in t with N = 100, T = 60 nK over {over}"
    )
    (answer,) = eoscore.loads(text).answers()
    assert len(asked) == 1
    alone = text.partition(" over ")[0]
    values = next(iter(answer.over.values()))
    setting = f"{next(iter(answer.over))}={values[-1]} {next(iter(answer.over_units.values()))}"
    (last,) = eoscore.loads(alone, settings=[setting.removesuffix(" 1")]).answers()
    for finding, single in zip(answer.found.values(), last.found.values(), strict=True):
        np.testing.assert_allclose(finding.value[-1], single.value, rtol=1e-9, atol=0)


def test_exact_levels_stay_exact():
    """A stronger trap in a grid has the levels that it has by itself."""
    text = (
        "gas g {{ m = 84 u }}\ntrap t {{ f = {} Hz\n V(x) = m/2*(2*pi*f)^2*x^2\n levels exact }}\n"
        "find T_c for g in t with N = 100"
    )
    alone = [float(eoscore.loads(text.format(f)).answers()[0].found["T_c"].value) for f in (100, 130)]
    grid = eoscore.loads(text.format(100) + " over f = [100 Hz, 130 Hz]").answers()[0].found["T_c"]
    assert "exact sums" in grid.route
    assert grid.value == pytest.approx(alone, rel=1e-12, abs=0)
