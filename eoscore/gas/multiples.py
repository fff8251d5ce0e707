"""The occupation of a state as a sum over multiples l of the inverse temperature, for sums over smooth spectra.

A sum of Bose, Fermi or classical occupations over states is sum_l w_l z^l Z(l b), with Z the partition function
of one particle and z = e^{mu/kT}. Classical: l = 1. Bose: all l, w = 1. Fermi: all l with alternating signs where
z < 1, else the same sum as an integral along a line (Sommerfeld and Watson). Each is a `Rule`: numbers l_j, some of
them complex, with weights, so that the sum is Re sum_j w_j z^{l_j} Z(l_j b).
"""

from __future__ import annotations

from functools import cache
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.errors import NoAnswerError

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import NDArray

__all__ = ["Rule", "fermi_rules", "multiples_of"]

FIRST = 10  # terms below are added one by one; from here on Z(l b) is smooth enough for quadrature
DIGITS = 42.0  # e^-42 = 6e-19 is dropped
FERMI_LIMIT = 2e5  # mu/kT; the line then takes 4 million points
PIECE = 4096  # points of a line made at a time


class Rule(NamedTuple):
    """Multiples l_j of the inverse temperature and their weights; the sum is the real part."""

    at: NDArray[np.inexact]
    weight: NDArray[np.inexact]


def multiples_of(statistics: str, rate: float) -> tuple[Rule, ...]:
    """The rules of a classical or Bose gas whose terms fall at least as e^{-rate l}, rate > 0."""
    if statistics == "classical":
        return (Rule(np.ones(1), np.ones(1)),)
    panels = max(1, int(np.ceil(np.log2(max(DIGITS / rate, 1.0) / FIRST))))
    return _real_part(panels), _strip()


@cache
def _real_part(panels: int) -> Rule:
    """1 .. FIRST - 1 one by one, half of FIRST, and the integral from FIRST in panels that double."""
    x, w = np.polynomial.legendre.leggauss(16)
    start = FIRST * 2.0 ** np.arange(panels)[:, None]
    at = np.concatenate([np.arange(1.0, FIRST + 1), (start * (1.5 + x / 2)).ravel()])
    weight = np.concatenate([np.ones(FIRST - 1), [0.5], (start / 2 * w).ravel()])
    return Rule(at, weight)


@cache
def _strip() -> Rule:
    """The rest of the Abel-Plana formula (DLMF 2.10(i)): i int (f(L + iy) - f(L - iy))/(e^{2 pi y} - 1) dy.

    L = FIRST. The poles of Z(l b) lie on Re l = 0, so f is smooth on the scale of L, and 24 nodes over
    0 < y < 6.4 give all digits.
    """
    x, w = np.polynomial.legendre.leggauss(24)
    y = 3.2 * (1 + x)
    return Rule(FIRST + 1j * y, 2j * 3.2 * w / np.expm1(2 * np.pi * y))


def fermi_rules(eta: float) -> Iterator[Rule]:
    """The rule of a Fermi gas at eta = mu/kT, in pieces; NoAnswerError where it would take too many points.

    sum_l (-1)^(l+1) z^l Z(l b) = 1/2i int z^s Z(s b)/sin(pi s) ds along Re s = c, 0 < c < 1. The line passes the
    poles of Z on Re s = 0, which make the shell structure, at the distance c, and the trapezoidal rule converges
    as e^{-2 pi c/step} (Trefethen and Weideman, SIAM Review 56, 385, 2014). With c = 4/eta nothing cancels.
    """
    if eta <= -1.0:
        at = np.arange(1.0, DIGITS / -eta + 2)
        yield Rule(at, np.where(at % 2 == 1, 1.0, -1.0))
        return
    if eta > FERMI_LIMIT:
        why = f"mu/kT is {eta:.3g}; sums over levels of a Fermi gas are made up to {FERMI_LIMIT:.0g}: raise T"
        raise NoAnswerError(why)
    c = min(0.5, 4 / max(eta, 1.0))
    step = 2 * np.pi * c / DIGITS
    count = int(13 / step)  # 1/|sin(pi s)| is down to e^{-13 pi} there
    for start in range(0, count, PIECE):
        s = c + 1j * step * (np.arange(start, min(start + PIECE, count)) + 0.5)
        yield Rule(s, step / np.sin(np.pi * s))
