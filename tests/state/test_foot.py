"""The share of the foot, against hypergeometric functions of arbitrary precision (DLMF 15.6.1)."""

import mpmath
import numpy as np
import pytest

from eoscore.state.foot import foot_means

A = np.array([1e-25, 1e-9, 1e-3, 0.2, 0.26, 1.0, 100.0, 1e6])


@pytest.mark.parametrize("k", [0.3, 0.5, 1.0, 1.0001, 1.04, 1.06, 1.5, 2.0, 2.5, 3.0, 4.5])
def test_means_of_one_over_t(k):
    """k B(k, 1) 2F1(n, k; k + 1; -1/a)/a^n; Gauss-Jacobi nodes near beta = -1 lose a few digits in SciPy."""
    first, second = foot_means(k, A)
    with mpmath.workdps(30):
        one = [float(mpmath.hyp2f1(1, k, k + 1, -1 / mpmath.mpf(a)) / a) for a in A]
        two = [float(mpmath.hyp2f1(2, k, k + 1, -1 / mpmath.mpf(a)) / mpmath.mpf(a) ** 2) for a in A]
    assert first == pytest.approx(one, rel=2e-13, abs=0)
    assert second == pytest.approx(two, rel=2e-12, abs=0)


@pytest.mark.parametrize("k", [1.5, 2.0, 3.0])
def test_limits_at_saturation(k):
    first, second = foot_means(k, np.zeros(1))
    assert first[0] == pytest.approx(k / (k - 1), rel=1e-14, abs=0)
    assert second[0] == (pytest.approx(k / (k - 2), rel=1e-13, abs=0) if k > 2 else np.inf)


@pytest.mark.parametrize("k", [2.5, 4.5, 7.5])
def test_close_to_saturation_nothing_overflows(k):
    """What is left out is of order a, or a^(k - 2)."""
    first, second = foot_means(k, np.array([1e-60, 1e-100, 1e-150, 1e-300]))
    assert first == pytest.approx(np.full(4, k / (k - 1)), rel=2e-13, abs=0)
    assert second == pytest.approx(np.full(4, k / (k - 2)), rel=2e-12, abs=0)
