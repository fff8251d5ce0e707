"""Writes reference.npz: 2,000 values of the Bose and Fermi functions by python-flint, each correctly rounded.

Run it by hand (`python tests/gas/make_reference.py`) when the ranges change; the tests need no flint to read the file.
"""

import math
from pathlib import Path

import numpy as np
from flint import acb, arb, ctx

FILE = Path(__file__).with_name("reference.npz")


def exact(kind: str, s: float, x: float) -> float:
    """Li_s(e^-x) for "bose", -Li_s(-e^x) for "fermi", with digits to spare even close to whole orders."""
    ctx.prec = 400 + int(2 * min(abs(x), 2000))
    sign = 1 if kind == "bose" else -1
    value = sign * (sign * acb(-sign * arb(x)).exp()).polylog(acb(s)).real
    assert value.rel_accuracy_bits() > 80, (kind, s, x)
    return float(value.mid())


def random_order(rng: np.random.Generator) -> float:
    """A common order, any order, or one close to a whole number."""
    whole = rng.integers(-6, 30)
    near = whole + rng.choice([-1, 1]) * 10 ** rng.uniform(-15, -1)
    return float(np.clip(rng.choice([rng.integers(-12, 61) / 2, rng.uniform(-6, 30), near]), -6, 30))


def random_argument(kind: str, s: float, rng: np.random.Generator) -> float:
    """Everywhere, on both scales, and crowded at the seams."""
    if kind == "bose":
        seam = min(max(0.5, 1 - s), 2.0)
        return float(
            rng.choice([10 ** rng.uniform(-15, 2.8), rng.uniform(0, 8), seam + rng.uniform(-1, 1) * 1e-3])
        )
    seam = rng.choice([-4.5, -1.75, -0.5, 0.0, 2.0, 4.5, 9.0, 17.0, 32.0])
    wide = rng.choice([-1, 1]) * 10 ** rng.uniform(-12, 2.8)
    return float(rng.choice([rng.uniform(-10, 50), wide, seam + rng.uniform(-1, 1) * 1e-3]))


def points(seed: int) -> list[tuple[str, float, float]]:
    """1,000 for either function; fewer orders of the Fermi function, whose tables take longer."""
    rng = np.random.default_rng(seed)
    found = []
    for kind, orders, each in (("bose", 40, 25), ("fermi", 20, 50)):
        for s in [random_order(rng) for _ in range(orders)]:
            found += [(kind, s, random_argument(kind, s, rng)) for _ in range(each)]
    return found


if __name__ == "__main__":
    rows = points(seed=20240607)
    values = [exact(*row) for row in rows]
    assert all(map(math.isfinite, values))
    np.savez_compressed(
        FILE,
        kind=np.array([row[0] == "fermi" for row in rows]),
        order=np.array([row[1] for row in rows]),
        argument=np.array([row[2] for row in rows]),
        value=np.array(values),
    )
