"""A formula as a tape: its operations once each, in order, ready to be run over arrays again and again."""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING, Any

import numpy as np

from eoscore.formula.numeric import numeric, power_of

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from numpy.typing import ArrayLike, NDArray

    from eoscore.formula.expression import Node

__all__ = ["Tape", "ordered", "tape_of"]

CHUNK = 8192  # points run together: the buffers of a tape then stay in the processor's cache


def ordered(roots: Iterable[Node]) -> list[Node]:
    """All nodes below the roots, arguments before the nodes that use them."""
    found: dict[int, Node] = {}
    waiting = list(roots)
    while waiting:
        node = waiting.pop()
        if node.serial not in found:
            found[node.serial] = node
            waiting.extend(node.args)
    return [found[serial] for serial in sorted(found)]


class Tape:
    """The steps of one or several formulas, each subexpression once, buffers dropped after last use."""

    def __init__(self, roots: Sequence[Node]) -> None:
        nodes = ordered(roots)
        slot = {node.serial: i for i, node in enumerate(nodes)}
        self.outputs = [slot[root.serial] for root in roots]
        self._start: list[Any] = [node.value if node.op in ("constant", "truth") else None for node in nodes]
        self._inputs = {node.name: slot[node.serial] for node in nodes if node.op == "variable"}
        self._steps = self._written(nodes, slot)

    def _written(
        self, nodes: list[Node], slot: dict[int, int]
    ) -> list[tuple[Any, tuple[int, ...], int, Any]]:
        steps: list[tuple[Any, tuple[int, ...], int, list[int]]] = []
        for node in nodes:
            if not node.args:
                continue
            function, ins = numeric(node.op), tuple(slot[arg.serial] for arg in node.args)
            if node.op == "pow" and node.args[1].op == "constant":
                function, ins = power_of(float(node.args[1].value)), ins[:1]
            steps.append((function, ins, slot[node.serial], []))
        kept, seen = set(self.outputs) | {i for i, v in enumerate(self._start) if v is not None}, set[int]()
        for _, ins, _, dead in reversed(steps):
            dead.extend(set(ins) - seen - kept)
            seen.update(ins)
        return steps

    def run(self, values: Mapping[str, ArrayLike]) -> list[NDArray[np.float64]]:
        """The formulas at the values of their variables, each shaped as all values broadcast together.

        Raises ValueError if a variable has no value.
        """
        arrays = {name: np.asarray(value, float) for name, value in values.items()}
        missing = sorted(set(self._inputs) - set(arrays))
        if missing:
            message = (
                f"a formula of {', '.join(sorted(self._inputs))} was evaluated without {', '.join(missing)}"
            )
            raise ValueError(message)
        shape = np.broadcast_shapes(*(array.shape for array in arrays.values()))
        size = int(np.prod(shape))
        if size <= 2 * CHUNK or any(array.ndim and array.shape != shape for array in arrays.values()):
            return [_shaped(result, shape) for result in self._run(arrays)]
        flat = {name: array.ravel() if array.ndim else array for name, array in arrays.items()}
        results = [np.empty(size) for _ in self.outputs]
        for start in range(0, size, CHUNK):
            part = slice(start, start + CHUNK)
            pieces = self._run({name: array[part] if array.ndim else array for name, array in flat.items()})
            for result, piece in zip(results, pieces, strict=True):
                result[part] = piece
        return [result.reshape(shape) for result in results]

    def _run(self, arrays: Mapping[str, NDArray[np.float64]]) -> list[Any]:
        values = self._start.copy()
        for name, place in self._inputs.items():
            values[place] = arrays[name]
        with np.errstate(all="ignore"):
            for function, ins, out, dead in self._steps:
                values[out] = function(*[values[i] for i in ins])
                for i in dead:
                    values[i] = None
        return [values[out] for out in self.outputs]


def _shaped(result: object, shape: tuple[int, ...]) -> NDArray[np.float64]:
    array = np.asarray(result, float)
    return array if array.shape == shape else np.full(shape, array)


@lru_cache(maxsize=512)
def tape_of(*roots: Node) -> Tape:
    """The tape of these formulas, made once."""
    return Tape(roots)
