"""The pieces of the rays about a bottom, each against an exact sum or SciPy's quadrature."""

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.special import eval_legendre

from eoscore.formula import call, constant, variable
from eoscore.formula.field import Field
from eoscore.measure.kronrod import kronrod
from eoscore.measure.moments import TERMS, along_rays
from eoscore.measure.panel import Panel
from eoscore.measure.partition import Partition
from eoscore.measure.rays import Line, Rays, stretched
from eoscore.measure.walk import walk


@pytest.mark.parametrize(("rule", "degree"), [(1, 22), (2, 13), (3, 3)])
def test_rules_are_exact_to_their_degree(rule, degree):
    x, w = kronrod()[0], kronrod()[rule]
    powers = np.arange(degree + 7)
    miss = np.abs(w @ x[:, None] ** powers - 1 / (powers + 1))
    assert np.all(miss[: degree + 1] < 4e-16)
    assert np.any(miss[degree + 1 :] > 1e-15)  # and no further


@pytest.mark.parametrize("q", [0.1, 1.0, 3.0, 8.0])
def test_stretched_space_has_the_volume_of_its_integral(q):
    rate = np.array([0.9, 0.3, -0.2])
    expected = quad(lambda t: t * t * np.prod(1 + 3 * (rate * t) ** 2), 0, q, epsrel=1e-13, epsabs=0)[0]
    assert stretched(np.array([q]), rate[None])[0] == pytest.approx(expected, rel=1e-13, abs=0)


def test_a_ray_ends_on_a_summit_that_its_steps_pass_over():
    """V = x^2 e^(1 - x^2) reaches 1 at x = 1 and falls beyond; above 0.9999 it stays for 0.014 only."""
    x, y = variable("x"), variable("y")
    field = Field(("x", "y"), x**2 * call("exp", 1 - x**2) + y**2)
    box = np.full(2, 5.0)
    line = Line(field, np.zeros(2), np.eye(2), 0.0, -box, box, None, clear=True, region=None)
    along = np.array([[1.0, 0.0], [-1.0, 0.0], [0.0, 1.0]])
    rows = walk(line, along, 0.9999, 1e-3)
    np.testing.assert_allclose(rows.q[-1, :2], 1.0, rtol=1e-3)
    assert np.all(rows.v[-1] >= 0.9999)


def test_moments_are_those_of_the_density():
    """V = q^2/2 along a ray of unit length sweeps q^3/3 = (2 v)^(3/2)/3, so dOmega = sqrt(2 v) dv."""
    names = ("x", "y", "z")
    field = Field(names, sum((variable(name) ** 2 / 2 for name in names), constant(0.0)))
    box = np.full(3, 9.0)
    line = Line(field, np.zeros(3), np.eye(3), 0.0, -box, box, None, clear=True, region=None)
    along = np.array([[0.6, 0.8, 0.0]])
    rays = Rays(line, along, 4.0, 1e-3, (np.zeros(1), np.ones(1)), None)
    stretch = Panel(1.0, 4.0, "right")
    found = along_rays(rays, stretch, 2, 0.0, np.arange(1)).reshape(2, TERMS)
    for part, (start, stop) in zip(found, [(0.0, 0.5), (0.5, 1.0)], strict=True):
        for k in (0, 1, 5):

            def integrand(t, k=k, start=start, stop=stop):
                s = 2 * (t - start) / (stop - start) - 1
                return eval_legendre(k, s) * np.sqrt(2 * (4 - 3 * (1 - t) ** 2)) * 6 * (1 - t)

            exact = quad(integrand, start, stop, epsabs=1e-13, epsrel=1e-11)[0]
            assert part[k] == pytest.approx(exact, rel=1e-9, abs=1e-9 * found[0, 0])


def test_shares_of_wells_make_up_all_space():
    rng = np.random.default_rng(1)
    bottoms, points = rng.normal(size=(4, 3)), rng.normal(size=(3, 500)) * 3
    partition = Partition(bottoms, np.array([1.0, 2.0, 0.5]))
    assert sum(partition.share(k, points) for k in range(4)) == pytest.approx(1.0, rel=1e-12)
    assert partition.share(2, bottoms[2][:, None])[0] == pytest.approx(1.0, rel=1e-12)
