"""How dear a Bose or Fermi function is, as a ratio to numpy.exp on the same array in the same process.

Run with `pytest tests/bench --benchmark-only`; the ratios stand in extra_info and in the printed table. Nothing here
asserts a time.
"""

import time

import mpmath
import numpy as np
import pytest
from scipy.integrate import quad

from eoscore.gas import bose, bose_truncated, fermi, fermi_truncated

COUNT = 10**6
COMMON = [1.5, 2.0, 2.5, 3.0]
OTHER = [0.5, 0.8, 2.3, 2.0 + 1e-9, -1.5, -0.3, 12.0]


@pytest.fixture(scope="module")
def alpha():
    return np.random.default_rng(3).uniform(0.0, 5.0, COUNT)


def least(call, repeats=5):
    """The least time of a call, in seconds: the one that nothing disturbed."""
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        call()
        times.append(time.perf_counter() - start)
    return min(times)


def report(benchmark, x, call, count):
    """The ratio of one value to one exponential, timed turn by turn with it."""
    out = np.empty_like(x)
    exponential = least(lambda: np.exp(x, out=out)) / x.size
    benchmark.pedantic(call, rounds=5, iterations=1, warmup_rounds=1)
    exponential = min(exponential, least(lambda: np.exp(x, out=out)) / x.size)
    ratio = benchmark.stats.stats.min / count / exponential
    benchmark.extra_info["ratio to numpy.exp"] = round(ratio, 2)
    print(f"\n{benchmark.name}: {ratio:.2f} exponentials a value")  # noqa: T201


@pytest.mark.parametrize("s", COMMON + OTHER)
def test_bose(benchmark, alpha, s):
    out = np.empty_like(alpha)
    report(benchmark, -alpha, lambda: bose(s, alpha, out=out), COUNT)


@pytest.mark.parametrize("s", COMMON + OTHER)
def test_fermi(benchmark, alpha, s):
    eta, out = 8 * alpha - 10, np.empty_like(alpha)
    report(benchmark, -alpha, lambda: fermi(s, eta, out=out), COUNT)


@pytest.mark.parametrize("function", [bose_truncated, fermi_truncated])
def test_truncated(benchmark, alpha, function):
    some = alpha[:10000]
    report(benchmark, -alpha, lambda: function(2.5, some, 3 * some[::-1]), some.size)


@pytest.mark.parametrize("function", [bose, fermi])
@pytest.mark.parametrize("s", [1.5, 2.3])
def test_one_number(benchmark, alpha, function, s):
    report(benchmark, -alpha, lambda: [function(s, 1.3) for _ in range(1000)], 1000)


def test_a_new_order(benchmark):
    """The table of an order never seen: what the first call costs."""
    fresh = iter(np.random.default_rng(8).uniform(1, 6, 1000))
    benchmark.pedantic(lambda: bose(next(fresh), 1.0), rounds=20)


def test_mpmath(benchmark, alpha):
    some = alpha[:200].tolist()
    report(benchmark, -alpha, lambda: [mpmath.polylog(2.5, mpmath.exp(-a)) for a in some], len(some))


def test_flint(benchmark, alpha):
    flint = pytest.importorskip("flint")
    some = [flint.acb(-a).exp() for a in alpha[:1000].tolist()]
    report(benchmark, -alpha, lambda: [z.polylog(flint.acb(2.5)) for z in some], len(some))


def test_quad(benchmark, alpha):
    some = alpha[:200].tolist()
    report(
        benchmark,
        -alpha,
        lambda: [quad(lambda t, a=a: t**1.5 / np.expm1(t + a), 0, 60) for a in some],
        len(some),
    )
