"""Elementwise evaluation in blocks that stay in the cache, and polynomials in place."""

from __future__ import annotations

from typing import TYPE_CHECKING, Literal

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

    Block = NDArray[np.float64]

__all__ = ["BLOCK", "blockwise", "horner", "horner_scalar"]

BLOCK = 8192
"""Elements of a block: 64 kB, so that a handful of temporaries fit a second-level cache."""


def horner(coefficients: Sequence[float], x: Block) -> Block:
    """The polynomial with these coefficients, lowest first, at every x, in one new array."""
    result = np.multiply(x, coefficients[-1])
    result += coefficients[-2]
    for coefficient in coefficients[-3::-1]:
        result *= x
        result += coefficient
    return result


def horner_scalar(coefficients: Sequence[float], x: float) -> float:
    """The same at one point: arrays would cost ten times as much there."""
    result = 0.0
    for coefficient in reversed(coefficients):
        result = result * x + coefficient
    return result


def blockwise(kernel: Callable[[Block], Block], x: Block, out: Block | None, size: int = BLOCK) -> Block:
    """`kernel` at all of x, block by block, into `out` (or a new array of the same shape)."""
    result = np.empty(x.shape) if out is None else out
    if result.shape != x.shape or result.dtype != np.float64:
        raise ValueError(
            f"out has shape {result.shape} and type {result.dtype}; "
            f"expected shape {x.shape} and float64; give an array made by numpy.empty({x.shape})"
        )
    with np.errstate(all="ignore"):
        if x.size <= size:
            result[...] = kernel(x.reshape(-1)).reshape(x.shape)
        elif x.flags.c_contiguous and result.flags.c_contiguous:
            _flat(kernel, x.reshape(-1), result.reshape(-1), size)
        else:
            _strided(kernel, x, result, size)
    return result


def _flat(kernel: Callable[[Block], Block], x: Block, result: Block, size: int) -> None:
    for start in range(0, x.size, size):
        result[start : start + size] = kernel(x[start : start + size])


def _strided(kernel: Callable[[Block], Block], x: Block, result: Block, size: int) -> None:
    flags: list[Literal["external_loop", "buffered"]] = ["external_loop", "buffered"]
    with np.nditer([x, result], flags, [["readonly"], ["writeonly"]], buffersize=size) as chunks:
        for chunk, target in chunks:
            target[...] = kernel(chunk)
