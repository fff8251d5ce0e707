"""Where a Bose gas saturates: kT at which the excited states hold a given number, or a given S or U."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.root import rising_root

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.ensemble import Ensemble
    from eoscore.state.reading import FloatArray

__all__ = ["saturated_kT"]

WIDE = 60.0  # of the bracket in ln kT, to each side


def saturated_kT(ensemble: Ensemble, name: str, value: FloatArray) -> FloatArray:
    """kT (J) where N, S (k_B) or U (J) of the gas at alpha = 0 has this value > 0; it must condense.

    Newton's method for the logarithm against ln kT, whose slope is the exponent d ln N_c / d ln T and its kin.
    """
    known = ensemble.saturated_kT(value) if name == "N" else None
    if known is not None:
        return known

    def work(log: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        kT = np.exp(log)
        alpha = np.zeros_like(kT)
        sums = ensemble.sums(alpha, kT)
        held: FloatArray = getattr(sums, name)
        return np.log(held / value[which]), sums.slopes(name, alpha, kT)[1] / held

    start = np.log(_scale(ensemble, name, value))
    return np.exp(rising_root(work, start - WIDE, start + WIDE, start))


def _scale(ensemble: Ensemble, name: str, value: FloatArray) -> FloatArray:
    """A first guess of kT: half the energy below which so many states lie; for U, also N kT = U.

    Over a pure power Omega ~ E^k, N_c = zeta(k) Gamma(k+1) Omega(kT): that energy is 1.8 to 2.3 kT for k from 3/2 to 4.
    """
    if name != "U":
        return np.maximum(ensemble.below(value) / 2, 1e-300)
    energy = ensemble.below(np.ones_like(value))
    for _ in range(60):
        following = np.sqrt(energy * np.maximum(ensemble.below(value / energy), 1e-300))
        close = np.all(np.abs(np.log(following / energy)) < 0.5)
        energy = following
        if close:
            break
    return energy
