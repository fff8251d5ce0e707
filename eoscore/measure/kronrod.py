"""The rule of Gauss and Kronrod with 15 nodes on the unit interval, which knows its own error."""

from __future__ import annotations

from functools import cache
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray

__all__ = ["NODES", "kronrod"]

NODES = 15
# Nodes from the middle outwards and weights on [-1, 1] (Piessens et al., QUADPACK, Springer 1983); the Gauss
# rule takes every second node, the middle one included.
PLACES = (
    0.0,
    0.20778495500789846760,
    0.40584515137739716691,
    0.58608723546769113029,
    0.74153118559939443986,
    0.86486442335976907279,
    0.94910791234275852453,
    0.99145537112081263921,
)
WEIGHTS = (
    0.20948214108472782801,
    0.20443294007529889241,
    0.19035057806478540991,
    0.16900472663926790283,
    0.14065325971552591875,
    0.10479001032225018384,
    0.06309209262997855329,
    0.02293532201052922496,
)
GAUSS = (0.41795918367346938776, 0.38183005050511894495, 0.27970539148927666790, 0.12948496616886969327)


@cache
def kronrod() -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """Nodes on [0, 1] ascending and three rules on them, exact to degree 22, 13 (Gauss) and 3 (three Gauss nodes)."""
    x = np.array(PLACES)
    rules = [np.array(WEIGHTS) / 2, np.zeros(len(x)), np.zeros(len(x))]
    rules[1][::2] = np.array(GAUSS) / 2
    rules[2][4] = 1 / (6 * x[4] ** 2)
    rules[2][0] = 1 - 2 * rules[2][4]
    fine, coarse, coarsest = (np.concatenate([half[:0:-1], half]) for half in rules)
    return (1 + np.concatenate([-x[:0:-1], x])) / 2, fine, coarse, coarsest
