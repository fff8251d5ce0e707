"""The range of each operation over intervals, by where it rises and falls."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula.numeric import numeric

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    Array = NDArray[np.float64]
    Bounds = tuple[Array, Array]
    Rule = Callable[..., Bounds]

__all__ = ["BOUNDS"]


def _rising(op: str, least: float = -np.inf, most: float = np.inf) -> Rule:
    """A function that rises over its whole domain [least, most]."""

    def rule(x: Bounds) -> Bounds:
        outside = (x[1] < least) | (x[0] > most)
        low, high = (numeric(op)(np.clip(end, least, most)) for end in x)
        return np.where(outside, np.nan, low), np.where(outside, np.nan, high)

    return rule


def _falling(op: str, least: float = -np.inf, most: float = np.inf) -> Rule:
    """A function that falls over its whole domain."""
    rising = _rising(op, least, most)

    def rule(x: Bounds) -> Bounds:
        high, low = rising(x)
        return low, high

    return rule


def _mul(a: Bounds, b: Bounds) -> Bounds:
    corners = [np.where((x == 0) | (y == 0), 0.0, x * y) for x, y in _pairs(a, b)]
    return np.minimum.reduce(corners), np.maximum.reduce(corners)


def _pairs(a: Bounds, b: Bounds) -> list[tuple[Array, Array]]:
    return [(x, y) for x in a for y in b]


def _div(a: Bounds, b: Bounds) -> Bounds:
    low, high = b
    touches = (low <= 0) & (high >= 0)
    least = np.where(touches & (low < 0), -np.inf, 1 / high)
    most = np.where(touches & (high > 0), np.inf, 1 / low)
    return _mul(a, (np.where(touches & (high == 0), -np.inf, least), most))


def _pow(a: Bounds, b: Bounds) -> Bounds:
    """x**y for x >= 0, through the logarithm."""
    return _rising("exp")(_mul(b, _rising("ln", 0.0)(a)))


def _abs(x: Bounds) -> Bounds:
    one, other = np.abs(x[0]), np.abs(x[1])
    return np.where((x[0] < 0) & (x[1] > 0), 0.0, np.minimum(one, other)), np.maximum(one, other)


def _cosh(x: Bounds) -> Bounds:
    return _rising("cosh", 0.0)(_abs(x))


def _cos(x: Bounds) -> Bounds:
    return _wave(np.cos, x, 0.0)


def _sin(x: Bounds) -> Bounds:
    return _wave(np.sin, x, np.pi / 2)


def _wave(function: Callable[[Array], Array], x: Bounds, crest: float) -> Bounds:
    """A wave of period 2 pi with a crest there: 1 if a crest lies in the interval, -1 if a trough does."""
    one, other = function(x[0]), function(x[1])
    turns = [(end - crest) / (2 * np.pi) for end in x]
    slack = 1e-15 * (1 + np.abs(turns[0]) + np.abs(turns[1]))
    has_crest = np.floor(turns[1] + slack) >= np.ceil(turns[0] - slack)
    has_trough = np.floor(turns[1] + 0.5 + slack) >= np.ceil(turns[0] + 0.5 - slack)
    return np.where(has_trough, -1.0, np.minimum(one, other)), np.where(
        has_crest, 1.0, np.maximum(one, other)
    )


def _tan(x: Bounds) -> Bounds:
    one, other = np.tan(x[0]), np.tan(x[1])
    pole = np.floor(x[1] / np.pi + 0.5) != np.floor(x[0] / np.pi + 0.5)
    return np.where(pole, -np.inf, one), np.where(pole, np.inf, other)


def _atan2(y: Bounds, x: Bounds) -> Bounds:
    """Corners of the box, and the whole circle where the cut along negative x is touched."""
    corners = [np.arctan2(v, u) for u, v in _pairs(x, y)]
    cut = (x[0] <= 0) & (y[0] <= 0) & (y[1] >= 0)
    low, high = np.minimum.reduce(corners), np.maximum.reduce(corners)
    return np.where(cut, -np.pi, low), np.where(cut, np.pi, high)


def _besselj(order: Bounds, x: Bounds) -> Bounds:
    """|J| <= 1 and |J'| <= 1 for whole orders (DLMF 10.14.1, 10.6.1); other orders are bounded for x >= 0."""
    n = order[0]
    value = numeric("besselj")(n, (x[0] + x[1]) / 2)
    spread = (x[1] - x[0]) / 2
    tight = (n == order[1]) & (n == np.round(n))
    known = tight | ((n >= 0) & (x[0] >= 0))
    low = np.where(tight, np.maximum(-1.0, value - spread), np.where(known, -1.0, -np.inf))
    high = np.where(tight, np.minimum(1.0, value + spread), np.where(known, 1.0, np.inf))
    return low, high


def _elliptic(op: str, *, rises: bool) -> Rule:
    """The derivatives of K are positive and rise with m, those of E are negative and fall (DLMF 19.2.8)."""

    def rule(order: Bounds, m: Bounds) -> Bounds:
        low, high = (numeric(op)(order[0], np.minimum(end, 1.0)) for end in m)
        edge = np.inf if rises else -np.inf
        high = np.where(m[1] >= 1, edge, high)
        return (low, high) if rises else (high, low)

    return rule


def _choose(condition: Bounds, a: Bounds, b: Bounds) -> Bounds:
    never, always = condition[1] == 0, condition[0] == 1
    low = np.where(always, a[0], np.where(never, b[0], np.fmin(a[0], b[0])))
    return low, np.where(always, a[1], np.where(never, b[1], np.fmax(a[1], b[1])))


BOUNDS: dict[str, Rule] = {
    "add": lambda a, b: (a[0] + b[0], a[1] + b[1]),
    "sub": lambda a, b: (a[0] - b[1], a[1] - b[0]),
    "neg": lambda a: (-a[1], -a[0]),
    "mul": _mul,
    "div": _div,
    "pow": _pow,
    "abs": _abs,
    "sin": _sin,
    "cos": _cos,
    "tan": _tan,
    "cosh": _cosh,
    "acos": _falling("acos", -1.0, 1.0),
    "sqrt": _rising("sqrt", 0.0),
    "ln": _rising("ln", 0.0),
    "log10": _rising("log10", 0.0),
    "asin": _rising("asin", -1.0, 1.0),
    **{op: _rising(op) for op in ("exp", "atan", "sinh", "tanh", "sign", "erf")},
    "ellipk": _rising("ellipk", most=1.0),
    "ellipe": _falling("ellipe", most=1.0),
    "ellipk_n": _elliptic("ellipk_n", rises=True),
    "ellipe_n": _elliptic("ellipe_n", rises=False),
    "atan2": _atan2,
    "besselj": _besselj,
    "min": lambda a, b: (np.minimum(a[0], b[0]), np.minimum(a[1], b[1])),
    "max": lambda a, b: (np.maximum(a[0], b[0]), np.maximum(a[1], b[1])),
    "choose": _choose,
    "less": lambda a, b: (1.0 * (a[1] < b[0]), 1.0 * (a[0] < b[1])),
    "less_equal": lambda a, b: (1.0 * (a[1] <= b[0]), 1.0 * (a[0] <= b[1])),
    "both": lambda a, b: (np.minimum(a[0], b[0]), np.minimum(a[1], b[1])),
    "either": lambda a, b: (np.maximum(a[0], b[0]), np.maximum(a[1], b[1])),
}
