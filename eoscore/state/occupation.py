"""Occupations summed over the nodes and the foot of a rule, for blocks of states."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.foot import foot_means

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure import Foot, Nodes
    from eoscore.state.ensemble import Counter
    from eoscore.state.reading import FloatArray

__all__ = ["boltzmann", "bose_count", "bose_sums", "counter"]

SMALL = 0.05  # of alpha, below which the foot is taken as 1/t and a few regular terms


def boltzmann(_: FloatArray, kT: FloatArray, rule: Nodes) -> tuple[FloatArray, FloatArray]:
    """Z = sum e^{-E/kT} and the mean of E/kT."""
    weight = rule.w * np.exp(-rule.v / kT[:, None])
    z = weight.sum(axis=1) + rule.foot.volume
    k = rule.foot.exponent
    return z, (weight @ rule.v + rule.foot.volume * rule.foot.edge * k / (k + 1)) / (kT * z)


def counter(kT: FloatArray, rule: Nodes) -> Counter:
    """N and -dN/dalpha of a block: with b = 1 - e^-x, f = z (1 - b)/(a + z b), a = 1 - z, without cancellation."""
    x = rule.v / -kT[:, None]
    fading, rest = np.exp(x), -np.expm1(x)

    def count(alpha: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        some = slice(None) if which.size == kT.size else which
        z = np.exp(-alpha)[:, None]
        f = rest[some] * z
        f += -np.expm1(-alpha)[:, None]
        np.divide(fading[some], f, out=f)
        f *= z
        number = f @ rule.w
        f *= f
        foot = _bose_foot(alpha, kT[some], rule.foot)
        return number + foot[0], number + f @ rule.w + foot[4]

    return count


def bose_count(alpha: FloatArray, kT: FloatArray, rule: Nodes) -> tuple[FloatArray, FloatArray]:
    """N and -dN/dalpha of bosons, asked once."""
    f = 1 / np.expm1(rule.v / kT[:, None] + alpha[:, None])
    number = f @ rule.w
    f *= f
    foot = _bose_foot(alpha, kT, rule.foot)
    return number + foot[0], number + f @ rule.w + foot[4]


def bose_sums(alpha: FloatArray, kT: FloatArray, rule: Nodes) -> tuple[FloatArray, ...]:
    """The seven columns of `Sums` of bosons."""
    t = rule.v / kT[:, None]
    t += alpha[:, None]
    f = np.expm1(t)
    np.divide(1, f, out=f)
    n = f @ rule.w
    u = f @ (rule.w * rule.v)
    work = np.log1p(f)
    y = work @ rule.w
    s = y + u / kT + alpha * n
    np.add(f, 1, out=work)
    f *= work
    b0 = f @ rule.w
    f *= t
    b1 = f @ rule.w
    f *= t
    nodes = n, u, s, y, b0, b1, f @ rule.w
    return tuple(a + b for a, b in zip(nodes, _bose_foot(alpha, kT, rule.foot), strict=True))


def _bose_foot(alpha: FloatArray, kT: FloatArray, foot: Foot) -> tuple[FloatArray, ...]:
    """The seven sums over the foot, where x is below 1e-12: f and its kin are those at alpha plus a mean of 1/t."""
    k, mass = foot.exponent, foot.volume
    if k == 0:
        f, w, tw, ttw, log = _at_bottom(alpha)
        zero = np.zeros_like(alpha)
        return mass * f, zero, mass * (log + alpha * f), mass * log, mass * w, mass * tw, mass * ttw
    x = foot.edge / kT
    a = alpha / x
    small = alpha < SMALL
    first, second = np.ones((2, alpha.size))
    if small.any():
        first[small], second[small] = foot_means(k, a[small])
    t = alpha + x * k / (k + 1)
    far, near = _at_bottom(t), _regular(t)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        inverse = first / x
        f = np.where(small, inverse + near[0], far[0])
        w = np.where(small, second / x**2 + near[1], far[1])
        tw = np.where(small, inverse + near[2], far[2])
        ttw = far[3]
        lean = np.where(alpha > 0, 1 - a * first, 1.0)
        log = np.where(small, -np.log(-np.expm1(-(x + alpha))) + lean / k, far[4])
        xf = np.where(small, lean, x * k / (k + 1) * far[0])
        af = np.where(alpha > 0, alpha * f, 0.0)
    return mass * f, mass * kT * xf, mass * (log + xf + af), mass * log, mass * w, mass * tw, mass * ttw


def _regular(t: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
    """f - 1/t, w - 1/t^2 and t w - 1/t for t < 0.05 (Bernoulli numbers, DLMF 24.2.1)."""
    u = t * t
    w = -1 / 12 + u * (1 / 240 - u * (1 / 6048 - u / 172800))
    return -0.5 + t * (1 / 12 - u * (1 / 720 - u / 30240)), w, t * w


def _at_bottom(alpha: FloatArray) -> tuple[FloatArray, ...]:
    """f, w, t w, t^2 w and -ln(1 - e^-t) at t = alpha, with their limits at 0."""
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        f = 1 / np.expm1(alpha)
        w = f * (1 + f)
        ttw = np.where(alpha > 1e-12, alpha**2 * w, 1.0)
        return f, w, np.where(alpha > 0, alpha * w, np.inf), ttw, np.log1p(f)
