"""A beam with gravity, slice by slice: near its pass the arms are long, and the barrier below them is thin."""

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.optimize import brentq, minimize_scalar

from eoscore.formula import call, variable
from eoscore.formula.field import Field
from eoscore.measure import measure_of
from eoscore.measure.landscape import survey

U, WAIST, RAYLEIGH, WEIGHT = 2.3e-28, 55e-6, 8.9e-3, 1.37e-24  # J, m, m, N


def beam():
    x, y, z = map(variable, "xyz")
    wide = 1 + (x / RAYLEIGH) ** 2
    return Field(("x", "y", "z"), WEIGHT * z - U / wide * call("exp", -2 * (y**2 + z**2) / (WAIST**2 * wide)))


def slice_below(x, energy):
    """Area of {V < energy} about the valley at x: y^2 < w^2/2 ln(U/(m g z - E)) - z^2 between two roots in z."""
    wide = 1 + (x / RAYLEIGH) ** 2
    depth, waist = U / wide, WAIST * np.sqrt(wide)

    def square(z):
        return waist**2 / 2 * np.log(depth / (WEIGHT * z - energy)) - z**2

    lowest = energy / WEIGHT * (1 - 1e-9)
    fine = {"method": "bounded", "options": {"xatol": 1e-13}}
    barrier = minimize_scalar(square, bounds=(lowest, -waist / 2), **fine).x
    valley = minimize_scalar(lambda z: -square(z), bounds=(-waist / 2, waist), **fine).x
    if square(valley) <= 0:
        return 0.0
    low, high = brentq(square, barrier, valley), brentq(square, valley, 3 * waist)
    middle, half = (low + high) / 2, (high - low) / 2
    area = quad(
        lambda a: np.sqrt(max(square(middle + half * np.sin(a)), 0.0)) * np.cos(a), -np.pi / 2, np.pi / 2
    )
    return 2 * half * area[0]


@pytest.mark.parametrize("share", [0.5, 0.97, 0.999])
def test_space_below_an_energy_next_to_the_escape(share):
    field = beam()
    landscape = survey(field)
    measure = measure_of(field, landscape)
    energy = landscape.bottom.value + share * landscape.depth

    def deep(x):
        return slice_below(x, energy) > 0

    low, end = 1e-6, 2e-6
    while deep(end):
        low, end = end, 1.02 * end
    for _ in range(50):
        middle = (low + end) / 2
        low, end = (middle, end) if deep(middle) else (low, middle)
    exact = 2 * quad(slice_below, 0, end, args=(energy,), epsrel=1e-8, limit=200)[0]
    v = share * landscape.depth
    assert float(measure.volume(v)) == pytest.approx(exact, rel=float(measure.error_below(v)) + 1e-6, abs=0)
