"""Where a formula of one variable has kinks, and where it jumps."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import Formula
from eoscore.formula.tape import ordered
from eoscore.measure.landscape_pieces import monotone_pieces

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["jumps_of", "kinks_of"]

CLOSE = 1e-12  # relative: nearer places are one
BESIDE = 1e-9  # relative: where a formula is looked at next to a kink, and a thousandth of that
SMALLEST = 1e-15  # m or kg m/s, next to 0
ROUNDING, ROUNDED = 1e-13, 1e-5  # of the formula, and of the rise up to `BESIDE` by rounding of the place


def kinks_of(formula: Formula, name: str, low: float = -np.inf, high: float = np.inf) -> tuple[float, ...]:
    """The places between two others (ascending) at which the parts of an operation meet.

    Zeros of what stands in abs, sign, a root or a broken power, and where the sides of min, max or a condition are
    equal: the formula may, but need not, have a kink or a jump there.
    """
    parts = [part for part in _parts(formula) if name in part.variables]
    found = sorted({x for part in parts for x in _zeros(part, name, low, high) if low < x < high})
    kept: list[float] = []
    for x in found:
        if not kept or x - kept[-1] > CLOSE * abs(x):
            kept.append(x)
    return tuple(kept)


def jumps_of(formula: Formula, name: str, low: float = -np.inf, high: float = np.inf) -> tuple[float, ...]:
    """Those of the kinks at which the formula goes from one value to another at once."""
    return tuple(x for x in kinks_of(formula, name, low, high) if _jumps(formula, name, x))


def _parts(formula: Formula) -> Iterator[Formula]:
    """Formulas at whose zeros the whole may have a kink."""
    for node in ordered([formula]):
        sides = [each for each in node.args if isinstance(each, Formula)]
        if node.op in ("abs", "sign", "sqrt") or (
            node.op == "pow" and not float(sides[1].value).is_integer()
        ):
            yield sides[0]
        elif node.op in ("min", "max", "less", "less_equal"):
            yield sides[0] - sides[1]


def _zeros(formula: Formula, name: str, low: float, high: float) -> Iterator[float]:
    """Where it changes its sign between two places, and where it touches zero."""
    from scipy.optimize import brentq  # 0.3 s to import, and only a formula with bends wants it

    def value(x: float) -> float:
        return float(formula.evaluate({name: np.array(x)}))

    points = monotone_pieces(formula, name, (low, high)).points
    values = np.broadcast_to(formula.evaluate({name: points}), points.shape)
    yield from points[values == 0].tolist()
    for i in np.flatnonzero(np.sign(values[:-1]) * np.sign(values[1:]) < 0).tolist():
        ends = points[i], points[i + 1]  # of all scales: halving alone takes some two hundred steps
        yield float(brentq(value, *ends, xtol=1e-300, rtol=4 * np.finfo(float).eps, maxiter=5000))


def _jumps(formula: Formula, name: str, at: float) -> bool:
    """Whether the difference of both sides stays where one looks a thousand times nearer."""
    step = (abs(at) * BESIDE or SMALLEST) * np.array([-1.0, 1.0, -1e-3, 1e-3])
    far_left, far_right, left, right = np.broadcast_to(formula.evaluate({name: at + step}), (4,)).tolist()
    own = ROUNDING * (abs(left) + abs(right)) + ROUNDED * (abs(far_left - left) + abs(far_right - right))
    return bool(abs(right - left) > max(0.5 * abs(far_right - far_left), own))
