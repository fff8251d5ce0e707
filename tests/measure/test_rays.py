"""The pieces of the rays about a bottom, each against an exact sum or SciPy's quadrature."""

import numpy as np
import pytest
from scipy.integrate import quad

from eoscore.measure.kronrod import kronrod
from eoscore.measure.partition import Partition
from eoscore.measure.rays import stretched


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
    expected = quad(lambda t: t * t * np.prod(np.cosh(rate * t)), 0, q, epsrel=1e-13, epsabs=0)[0]
    assert stretched(np.array([q]), rate[None])[0] == pytest.approx(expected, rel=1e-13, abs=0)


def test_shares_of_wells_make_up_all_space():
    rng = np.random.default_rng(1)
    bottoms, points = rng.normal(size=(4, 3)), rng.normal(size=(3, 500)) * 3
    partition = Partition(bottoms, np.array([1.0, 2.0, 0.5]))
    assert sum(partition.share(k, points) for k in range(4)) == pytest.approx(1.0, rel=1e-12)
    assert partition.share(2, bottoms[2][:, None])[0] == pytest.approx(1.0, rel=1e-12)
