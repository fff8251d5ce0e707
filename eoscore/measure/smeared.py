"""A sampled measure without breaks joined with powers, through the nodes that resolve it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.powers import Powers
from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.measure.base import FloatArray, Foot
    from eoscore.measure.sampled import Sampled

__all__ = ["footed", "smeared"]

CLEAR = 8.0  # feet above the bottom: below, the sampled measure is taken as its pure power
BLOCK = 64  # energies taken at once
ORDER = 24  # of the rules next to the end


def smeared(a: Sampled, b: Powers, energies: FloatArray) -> FloatArray:
    """int dOmega_a(v) Omega_b(E - v) at energies (n,), whatever waves Omega_a has.

    The nodes of a serve wherever E - v is not small beside their panel; the last panels have a rule of their own,
    in t with v = E - (E - start) t^2.
    """
    panels, nodes = a.whole_panels(float(energies.max()))
    blocks = [energies[i : i + BLOCK] for i in range(0, energies.size, BLOCK)]
    whole = np.concatenate([_block(a, b, e, nodes.v, nodes.w, panels) for e in blocks])
    whole += footed(nodes.foot, b.volume, energies)
    return np.where(energies < CLEAR * a.foot, _pure(a, b, energies), whole)


def _block(
    a: Sampled, b: Powers, energies: FloatArray, v: FloatArray, w: FloatArray, panels: FloatArray
) -> FloatArray:
    place = np.clip(np.searchsorted(panels, energies) - 2, 0, panels.size - 1)
    start = panels[place]
    used = v[v < start.max()]
    total = np.where(used < start[:, None], b.volume(energies[:, None] - used), 0.0) @ w[: used.size]
    middle = np.maximum(start, energies / 2)
    x, dx = legendre(ORDER)
    rest = (energies - middle)[:, None]
    near = energies[:, None] - rest * x**2
    total += np.sum(2 * x * dx * rest * a.density(near) * b.volume(rest * x**2), axis=1)
    length = np.log(middle / start)[:, None]
    for half in (0.0, 0.5):
        far = start[:, None] * np.exp(length * (half + x / 2))
        total += np.sum(dx / 2 * length * far * a.density(far) * b.volume(energies[:, None] - far), axis=1)
    return np.asarray(total)


def footed(foot: Foot, volume: Callable[[FloatArray], FloatArray], energies: FloatArray) -> FloatArray:
    """The share of the foot, whose power is the weight of a Gauss rule."""
    from scipy.special import roots_jacobi

    if foot.exponent == 0:
        return foot.volume * volume(energies)
    x, w = roots_jacobi(12, 0.0, foot.exponent - 1)
    inner = volume(energies[:, None] - foot.edge * (1 + x) / 2)
    return np.asarray(foot.volume * (inner @ w) / w.sum())


def _pure(a: Sampled, b: Powers, energies: FloatArray) -> FloatArray:
    """The same where a is a pure power."""
    from eoscore.measure.convolve import convolve

    c = float(a.volume(a.foot)) / a.foot**a.exponent
    return convolve(Powers([(c, a.exponent)]), Powers(b.terms)).volume(energies)
