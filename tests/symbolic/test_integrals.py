"""Boltzmann integrals in closed form against quadrature of the same exponential by SciPy."""

from itertools import pairwise

import numpy as np
import pytest
import sympy as sp
from scipy.integrate import quad

from eoscore.symbolic.axes import axes_of
from eoscore.symbolic.evaluate import compiled, number
from eoscore.symbolic.integrals import StopError, boltzmann
from eoscore.symbolic.integrals.rule import BETA, Task

x, y, z = sp.symbols("x y z", real=True)
rho, r, p = sp.symbols("rho r p", nonnegative=True)
a, b, c, k = sp.symbols("a b c k", positive=True)
VALUES = {a: 1.3, b: 0.7, c: 0.4, k: 2.1, BETA: 0.9}
ZONE = (sp.pi / k - sp.Abs(x),)
EDGE = float(np.pi / 2.1)

# function, axis, walls, the range of the check, the weight of the volume element there
ONE = {
    "cubic": (a * sp.Abs(x) ** 3, x, (), (-9, 9), 1.0),
    "tilted parabola": (a * x**2 / 2 + b * x, x, (), (-12, 12), 1.0),
    "ramp from a wall": (a * x, x, (x - b,), (0.7, 60), 1.0),
    "band": (a * (1 - sp.cos(k * x)), x, ZONE, (-EDGE, EDGE), 1.0),
    "band by sine squared": (4 * a * sp.sin(k * x / 2) ** 2, x, ZONE, (-EDGE, EDGE), 1.0),
    "hyperbola": (sp.sqrt(a**2 + b**2 * x**2), x, (), (-80, 80), 1.0),
    "quadratic and quartic": (a * x**2 + b * x**4, x, (), (-8, 8), 1.0),
    "symbolic exponent": (a * sp.Abs(x) ** k, x, (), (-12, 12), 1.0),
    "disc": (a * rho**3, rho, (), (0, 9), 2 * np.pi * rho),
    "ball": (a * r**12, r, (), (0, 3), 4 * np.pi * r**2),
    "line and square of a radius": (a * r + b * r**2, r, (), (0, 9), 4 * np.pi * r**2),
    "biased ball": (sp.sqrt(a**2 + b**2 * r**2) - a, r, (), (0, 90), 4 * np.pi * r**2),
    "flat cylinder wall": (sp.Integer(0) * r, r, (a**2 - r**2,), (0, 1.3), 4 * np.pi * r**2),
}


@pytest.mark.parametrize("name", ONE)
def test_one_axis_equals_quadrature(name):
    function, axis, walls, span, weight = ONE[name]
    done = boltzmann(Task(function, axes_of((axis,)), walls))
    at = compiled(function.subs(VALUES), [axis])
    bulk = compiled(sp.sympify(weight), [axis])
    bottom = number(done.minimum, VALUES)
    pieces = pairwise(np.linspace(*span, 17))
    want = sum(
        quad(lambda v: float(bulk(v)) * np.exp(-0.9 * (float(at(v)) - bottom)), *piece)[0] for piece in pieces
    )
    assert number(done.integral, VALUES) == pytest.approx(want, rel=1e-9)


TWO = {
    "rotated parabola": a * x**2 + b * x * y + c * y**2 + x,
    "elliptic cone": a * sp.sqrt(x**2 + 4 * y**2),
    "tilted cone": a * sp.sqrt(x**2 + 4 * y**2) + b * x,
    "sum of powers": a * sp.Abs(x) ** 3 + b * y**4,
    "root of a sum of powers": a * sp.sqrt(x**4 + y**2),
    "biased": sp.sqrt(b**2 + a**2 * (x**2 + 2 * y**2)) - b,
}


@pytest.mark.parametrize("name", TWO)
def test_two_axes_equal_quadrature(name):
    """Polar Gauss-Legendre about the bottom; kinks lie on the axes, between the quarters."""
    function = TWO[name]
    done = boltzmann(Task(function, axes_of((x, y))))
    at = sp.lambdify([x, y], function.subs(VALUES), "numpy")
    u0, v0 = (
        np.linalg.solve([[2.6, 0.7], [0.7, 0.8]], [-1.0, 0.0]) if name == "rotated parabola" else (0.0, 0.0)
    )
    node, weight = np.polynomial.legendre.leggauss(120)
    want = 0.0
    for t0, t1 in pairwise(np.linspace(0, 2 * np.pi, 5)):
        for s0, s1 in pairwise([0, 0.2, 1, 3, 8, 20, 60]):
            t, s = (t0 + t1) / 2 + (t1 - t0) / 2 * node, (s0 + s1) / 2 + (s1 - s0) / 2 * node[:, None]
            energy = at(s * np.cos(t) + u0, s * np.sin(t) + v0) - number(done.minimum, VALUES)
            want += np.sum(weight * weight[:, None] * s * np.exp(-0.9 * energy)) * (t1 - t0) * (s1 - s0) / 4
    assert number(done.integral, VALUES) == pytest.approx(want, rel=1e-9)


def test_a_field_whose_bias_grows_along_its_axis_gives_two_powers():
    """rho = A (E^3 + 2 U_0 E^2) with free motion: Q ~ 3/2 beta^-5/2 + U_0 beta^-3/2 (Luiten et al. 1996)."""
    function = sp.sqrt(a**2 * rho**2 + (b + c * z**2) ** 2) - b
    done = boltzmann(Task(function, axes_of((rho, z))))
    published = 2 * sp.pi ** sp.Rational(3, 2) / (a**2 * sp.sqrt(c))
    want = published * (sp.Rational(3, 2) * BETA ** sp.Rational(-5, 2) + b * BETA ** sp.Rational(-3, 2))
    assert sp.simplify(done.integral - want) == 0


def test_a_tilt_steeper_than_the_cone_is_a_condition():
    done = boltzmann(Task(a * sp.sqrt(x**2 + y**2 + 4 * z**2) + b * z, axes_of((x, y, z))))
    assert done.conditions == (b < 2 * a,)


def test_a_quasi_homogeneous_prefactor_without_closed_form_is_a_number_with_its_integral():
    function = x**4 + x**2 * y**2 + y**4
    done = boltzmann(Task(function, axes_of((x, y))))
    ((_, value, words, _),) = done.constants
    area = quad(lambda t: 0.5 / np.sqrt(1 - (np.cos(t) * np.sin(t)) ** 2), 0, 2 * np.pi)[0]
    assert value == pytest.approx(area, rel=1e-12)
    assert words.startswith("volume in m^2 where")


def test_what_no_rule_can_do_names_its_integral():
    function = sp.exp(a * x**2) * sp.cosh(b * y) + x * y
    with pytest.raises(StopError, match=r"no closed form was found for the integral of exp\(-beta\*"):
        boltzmann(Task(function, axes_of((x, y))))
