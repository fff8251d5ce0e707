"""The Bose function against stored values of python-flint, its limits, its identities and threads."""

from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.gas import bose
from eoscore.gas.blocks import BLOCK

# Written by make_reference.py with python-flint (Arb): rigorous balls, correctly rounded.
REFERENCE = np.load(Path(__file__).with_name("reference.npz"))
ORDERS = [-6.0, -2.5, -0.3, 0.0, 0.5, 1.0, 1.5, 2.0, 2.5, 3.0, 4.25, 12.0, 30.0]
# A table is made for each order, so that properties are tried at some orders and any argument.
orders = st.sampled_from([-4.6, -2.0, -0.3, 0.5, 0.8, 1.0, 1.5, 2.0, 2.3, 3.0 + 1e-10, 4.5, 17.25])
arguments = st.floats(1e-6, 50)


def errors(values, expected):
    return np.abs(values - expected) / np.abs(expected)


def test_stored_values():
    rows = ~REFERENCE["kind"]
    pairs = zip(REFERENCE["order"][rows], REFERENCE["argument"][rows], strict=True)
    found = errors(np.array([bose(float(s), float(a)) for s, a in pairs]), REFERENCE["value"][rows])
    assert found.max() < 2e-15
    assert np.median(found) < 2e-16


@pytest.mark.parametrize("s", ORDERS)
def test_arrays_and_numbers_agree(s):
    alpha = np.concatenate([np.geomspace(1e-12, 700, 400), np.linspace(0.45, 2.1, 100)])
    single = np.array([bose(s, float(a)) for a in alpha])
    assert errors(bose(s, alpha), single).max() < 1e-15


@pytest.mark.parametrize("s", [1.5, 2.0, -1.3, 2 + 1e-9, 1 - 1e-9, 0.7])
def test_against_flint_at_the_seams(s):
    flint = pytest.importorskip("flint")
    flint.ctx.prec = 200
    seam = min(max(0.5, 1 - s), 2.0)
    alpha = [1e-9, *(seam + np.linspace(-1e-3, 1e-3, 41)).tolist()]
    exact = [_flint(flint, s, a) for a in alpha]
    assert errors(bose(s, alpha), np.array(exact)).max() < 1e-15


def _flint(flint, s, alpha):
    return float(flint.acb(-flint.arb(alpha)).exp().polylog(flint.acb(s)).real.mid())


@pytest.mark.parametrize(("s", "limit"), [(-6.0, np.inf), (0.3, np.inf), (1.0, np.inf), (2.0, np.pi**2 / 6)])
def test_the_limit_at_zero(s, limit):
    assert bose(s, 0.0) == pytest.approx(limit, rel=1e-15, abs=0)
    assert bose(s, [0.0])[0] == bose(s, 0.0)


@pytest.mark.parametrize("s", ORDERS)
def test_the_ends(s):
    assert bose(s, np.inf) == 0.0
    assert bose(s, 700.0) == pytest.approx(np.exp(-700.0), rel=1e-15, abs=0)
    assert np.isnan(bose(s, [-1.0, np.nan])).all()
    assert np.isnan(bose(s, -1.0))


@pytest.mark.parametrize(
    ("s", "closed"),
    [
        (1.0, lambda a: np.where(a < 0.7, -np.log(-np.expm1(-a)), -np.log1p(-np.exp(-a)))),
        (0.0, lambda a: 1 / np.expm1(a)),
        (-1.0, lambda a: 0.25 / np.sinh(a / 2) ** 2),
    ],
)
def test_closed_forms(s, closed):
    alpha = np.geomspace(1e-10, 30, 300)
    assert errors(bose(s, alpha), closed(alpha)).max() < 2e-15


@settings(deadline=None)
@given(s=orders, alpha=arguments)
def test_the_derivative_is_the_order_below(s, alpha):
    step = 1e-5 * min(alpha, 1.0)
    slope = (bose(s, alpha + step) - bose(s, alpha - step)) / (2 * step)
    # The error of a central difference is step^2 / 6 of the third derivative, and a rounding.
    assert slope == pytest.approx(-bose(s - 1, alpha), rel=1e-7, abs=1e-15 * bose(s, alpha) / step)


@settings(deadline=None)
@given(s=orders, alpha=arguments)
def test_duplication(s, alpha):
    """Li_s(z) + Li_s(-z) = 2^(1-s) Li_s(z^2) (DLMF 25.12.11 in its general form), with -Li_s(-z) the Fermi function."""
    from eoscore.gas import fermi

    left, right = bose(s, alpha) - fermi(s, -alpha), 2 ** (1 - s) * bose(s, 2 * alpha)
    assert left == pytest.approx(right, rel=1e-14, abs=1e-15 * bose(s, alpha))


@settings(deadline=None)
@given(s=orders, alpha=arguments, more=st.floats(1.0001, 2))
def test_falls_with_alpha_and_order(s, alpha, more):
    assert bose(s, alpha * more) < bose(s, alpha)
    assert bose(s + more - 1, alpha) <= bose(s, alpha)


@settings(deadline=None)
@given(
    whole=st.sampled_from([-2, 0, 1, 2, 3, 9]), small=st.sampled_from([1e-15, -1e-12, 1e-9]), alpha=arguments
)
def test_smooth_across_whole_orders(whole, small, alpha):
    """d ln g_s / ds is some times 1 + |ln alpha|, below 50 here."""
    assert bose(whole + small, alpha) == pytest.approx(bose(whole, alpha), rel=2e-15 + 50 * abs(small), abs=0)


@pytest.mark.parametrize(
    "make", [lambda x: x.T, lambda x: x[::2, ::3], lambda x: np.broadcast_to(x, (2, *x.shape))]
)
def test_any_layout_of_any_size(make):
    alpha = np.random.default_rng(1).uniform(0, 3, (BLOCK // 64, 200))
    assert np.array_equal(bose(2.5, make(alpha)), make(bose(2.5, alpha)))


def test_out_is_filled_and_may_be_the_argument():
    alpha = np.linspace(0.1, 3, 3 * BLOCK + 5)
    expected = bose(1.5, alpha)
    assert bose(1.5, alpha, out=alpha) is not None
    assert np.array_equal(alpha, expected)


@pytest.mark.parametrize("out", [np.empty(3), np.empty(2, dtype=np.float32)])
def test_an_unfit_out_is_refused(out):
    with pytest.raises(ValueError, match=r"out has shape .* expected shape \(2,\) and float64"):
        bose(1.5, [1.0, 2.0], out=out)


@pytest.mark.parametrize("s", [-6.1, 30.5, np.nan, np.inf])
def test_an_order_out_of_range_is_refused(s):
    with pytest.raises(ValueError, match="expected a number from -6 to 30"):
        bose(s, 1.0)


def test_threads_make_the_same_tables():
    fresh = np.random.default_rng(5).uniform(0, 10, 6)
    with ThreadPoolExecutor(8) as pool:
        found = list(pool.map(lambda s: bose(s, 0.3), np.repeat(fresh, 8)))
    assert found == [bose(s, 0.3) for s in np.repeat(fresh, 8)]


def test_no_digits_of_the_caller_are_used():
    import decimal

    with decimal.localcontext(decimal.Context(prec=3)):
        coarse = bose(7.7251, 0.3)
    assert coarse == pytest.approx(_series(7.7251, 0.3), rel=1e-15, abs=0)


def _series(s, alpha):
    k = np.arange(200, 0, -1)
    return float((np.exp(-k * alpha) * k ** (-s)).sum())
