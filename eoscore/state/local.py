"""The local picture: the gas per volume where the potential is v above its bottom."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.state.ensembles import ensemble_of

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import NDArray

    from eoscore.state.ensemble import Ensemble
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["Local", "local_at"]


class Local(NamedTuple):
    """Density in m^-d and pressure in J/m^d, each with its slopes d/dalpha and d/dlnT of the whole gas."""

    density: FloatArray
    density_by_alpha: FloatArray
    density_by_log: FloatArray
    pressure: FloatArray
    pressure_by_alpha: FloatArray
    pressure_by_log: FloatArray


def local_at(held: HeldGas, v: FloatArray, alpha: FloatArray, kT: FloatArray) -> Local:
    """n and P of the excited gas at mu - v, for flat arrays of one length; v in J from the bottom, inf behind walls.

    Below an escape energy only held momenta count, and nothing lies above it. nan where alpha or kT is.
    """
    lost = np.isnan(alpha) | np.isnan(kT)
    columns = np.where(lost, np.nan, np.zeros((6, v.size)))
    for part, ensemble in _alike(held, v, np.flatnonzero(~lost & (v < held.top))):
        energy, depth = kT[part], v[part] / kT[part]
        here = alpha[part] + depth
        with np.errstate(all="ignore"):
            sums = ensemble.sums(here, energy)
            by_alpha, by_log = sums.slopes("N", here, energy)
            pressure = energy * sums.Y
            columns[:, part] = (
                sums.N,
                by_alpha,
                by_log - np.where(depth > 0, depth * by_alpha, 0.0),
                pressure,
                -energy * sums.N,
                pressure + sums.U + depth * energy * sums.N,
            )
    return Local(*columns)


def _alike(
    held: HeldGas, v: FloatArray, some: NDArray[np.intp]
) -> Iterator[tuple[NDArray[np.intp], Ensemble]]:
    """Points that share an ensemble: all of them without an escape energy, else those of one v."""
    local = held.model.local
    if local is None:
        raise NoAnswerError(held.why_not_local)
    if not some.size:
        return
    if not np.isfinite(held.top):
        yield some, local
        return
    values, back = np.unique(v[some], return_inverse=True)
    order = np.argsort(back, kind="stable")
    for value, part in zip(values, np.split(some[order], np.cumsum(np.bincount(back))[:-1]), strict=True):
        yield part, ensemble_of(held.gas, held.momentum.cut(held.top - value))
