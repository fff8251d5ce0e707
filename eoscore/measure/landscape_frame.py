"""The axes that a formula itself uses: a beam at an angle is followed along its own directions."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import Formula, variable
from eoscore.formula.expression import build
from eoscore.formula.field import Field
from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula.expression import Node
    from eoscore.measure.landscape_record import Landscape, Minimum

    Array = NDArray[np.float64]

__all__ = ["aligned", "expressed", "turned_back", "unaligned"]

CARTESIAN = frozenset("xyz")
PARALLEL = 1e-9


def _linear_forms(field: Field) -> dict[int, Array]:
    """Coefficients (d + 1, the constant last) of every linear node, by serial."""
    names = field.coordinates
    known: dict[int, Array] = {}
    for node in ordered([field.formula, *field.walls]):
        if node.op in ("constant", "variable"):
            known[node.serial] = np.append([float(node.name == name) for name in names], node.value)
        elif node.args and all(arg.serial in known for arg in node.args):
            form = _combined(node.op, *(known[arg.serial] for arg in node.args))
            if form is not None:
                known[node.serial] = form
    return known


def _combined(op: str, a: Array, b: Array | None = None) -> Array | None:
    """The linear form of an operation on linear forms, if it is one."""
    if b is None:
        return -a if op == "neg" else None
    if op in ("add", "sub"):
        return a + b if op == "add" else a - b
    if op == "mul" and not a[:-1].any():
        return np.asarray(a[-1] * b)
    if op == "mul" and not b[:-1].any():
        return np.asarray(b[-1] * a)
    return np.asarray(a / b[-1]) if op == "div" and not b[:-1].any() and b[-1] else None


def _directions(field: Field) -> Array:
    """Unit vectors of the linear forms that something else is made of, without repetition, shape (n, d)."""
    forms = _linear_forms(field)
    found: list[Array] = []
    for node in ordered([field.formula, *field.walls]):
        if node.serial in forms:
            continue
        for arg in node.args:
            slopes = forms.get(arg.serial, np.zeros(1))[:-1]
            size = float(np.linalg.norm(slopes))
            if size and not any(abs(abs(slopes @ other) - size) < PARALLEL * size for other in found):
                found.append(slopes / size)
    return np.array(found).reshape(-1, len(field.coordinates))


def aligned(field: Field) -> Array | None:
    """The orthonormal frame (columns) along most of the formula's directions; None if the axes serve as well."""
    if not set(field.coordinates) <= CARTESIAN:
        return None
    directions, d = _directions(field), len(field.coordinates)
    best, most = None, _served(directions, np.eye(d))
    for first in directions:
        frame = [first]
        for other in [*directions, *np.eye(d)]:
            if len(frame) < d and all(abs(other @ one) < PARALLEL for one in frame):
                frame.append(other)
        if len(frame) < d:
            full = np.linalg.svd(np.array(frame))[2]
            frame += list(full[len(frame) :])
        columns = np.array(frame).T
        if _served(directions, columns) > most:
            best, most = columns, _served(directions, columns)
    return best


def unaligned(field: Field) -> bool:
    """Whether the formula has directions that are not along the axes."""
    directions = _directions(field)
    return _served(directions, np.eye(len(field.coordinates))) < len(directions)


def _served(directions: Array, frame: Array) -> int:
    return int(np.sum(np.max(np.abs(directions @ frame), axis=1, initial=0.0) > 1 - PARALLEL))


def expressed(field: Field, frame: Array) -> Field:
    """The field in coordinates u along the frame's columns (x = frame u), under the same names.

    Linear forms are written anew in u, so that what is aligned depends on one coordinate only.
    """
    forms = _linear_forms(field)
    axes = [variable(name) for name in field.coordinates]
    done: dict[int, Node] = {}
    for node in ordered([field.formula, *field.walls]):
        form = forms.get(node.serial)
        if form is not None and form[:-1].any():
            slopes = form[:-1] @ frame
            slopes[np.abs(slopes) < 1e-14 * np.max(np.abs(slopes))] = 0.0
            total = Formula.of(float(form[-1]))
            for slope, axis in zip(slopes.tolist(), axes, strict=True):
                total = total + slope * axis
            done[node.serial] = total
        else:
            done[node.serial] = (
                build(node.op, tuple(done[arg.serial] for arg in node.args)) if node.args else node
            )
    results = [done[root.serial] for root in (field.formula, *field.walls)]
    formula, *walls = (result for result in results if isinstance(result, Formula))
    return Field(field.coordinates, formula, tuple(walls))


def turned_back(landscape: Landscape, frame: Array) -> Landscape:
    """A landscape found in the frame's coordinates, in the field's own."""

    def place(position: tuple[float, ...]) -> tuple[float, ...]:
        return tuple((frame @ np.array(position)).tolist())

    def minimum(found: Minimum) -> Minimum:
        return replace(found, position=place(found.position), hessian=frame @ found.hessian @ frame.T)

    escape = landscape.escape
    if escape is not None:
        position = None if escape.position is None else place(escape.position)
        escape = replace(escape, position=position, direction=place(escape.direction))
    minima = tuple(map(minimum, landscape.minima))
    bottom = minimum(landscape.bottom) if landscape.bottom else None
    return replace(landscape, bottom=bottom, minima=minima, escape=escape)
