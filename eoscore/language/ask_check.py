"""Whether a question gives what its quantities need, and whether gas and place fit each other."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.faults import listed
from eoscore.language.kind import dimension
from eoscore.language.place_check import dimension_of
from eoscore.language.quantities import AT_COUNTS, CONDITIONS, COUNT, DERIVED, QUANTITIES

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.language.block import Gas, Pair
    from eoscore.language.checker import Checker
    from eoscore.language.question import Axis, Given, Question
    from eoscore.language.role import Roles

__all__ = ["check_ask"]

_KNOWN = ", ".join(CONDITIONS)


def check_ask(question: Question, pairs: Sequence[Pair], roles: Roles, checker: Checker) -> Question:
    """The question with its dimension; faults for what is missing, too much, or does not fit."""
    for pair, name in zip(pairs, [question.node.place, *_origins(question)], strict=True):
        _mass(question, pair, checker)
        if pair.place is None:
            _held_fully(question, pair.gas, checker)
        elif pair.place.node is None and name is not None and len(pairs) > 1:
            checker.faults.add(
                name.span,
                "`uniform` is unbounded: no gas can be brought into it or out of it",
                "use a volume",
            )
    _positions(question, checker)
    written = _written(question, roles)
    _quantities(question, pairs[0], written, checker)
    _conditions(question, pairs[-1] if len(pairs) > 1 else pairs[0], written, checker)
    dims = [_dimension(question, pair, checker) for pair in pairs]
    return replace(question, dimension=dims[0])


def _origins(question: Question) -> tuple[nodes.Ident, ...]:
    return question.node.origins if isinstance(question.node, nodes.Find) else ()


def _thermodynamic(question: Question) -> list[Given | Axis]:
    return [*question.given.values(), *(axis for axis in question.over if axis.thermodynamic)]


def _written(question: Question, roles: Roles) -> list[nodes.Ident]:
    """The thermodynamic names as written, faulty values or not, so that one fault does not cause another."""
    names = [condition.name for condition in question.node.conditions]
    names += [axis.name for axis in question.node.over] if isinstance(question.node, nodes.Find) else []
    return [name for name in names if roles.of(name.name) == "condition"]


def _positions(question: Question, checker: Checker) -> None:
    """A column runs along the one coordinate that is left free; a probability is that of some number."""
    names = [condition.name.name for condition in question.node.conditions]
    names += [axis.name.name for axis in question.node.over] if isinstance(question.node, nodes.Find) else []
    free = [name for name in question.coordinates if name not in (*names, COUNT)]
    for asked in question.quantities:
        if asked.name in AT_COUNTS and COUNT not in names and question.verb == "find":
            message = f"`{asked.name}` is the probability of some number {COUNT}, and none is given"
            hint = f"write: with N = 100, T = 20 nK over {COUNT} = even(0, 100, 101)"
            checker.faults.add(asked.span, message, hint)
        if asked.name == "n_column" and question.coordinates and len(free) != 1:
            came = f"{', '.join(free)} are" if free else "none is"
            message = f"`n_column` runs along the one coordinate that is not given; {came} left here"
            checker.faults.add(
                asked.span, message, "give all coordinates but one, such as x = 0 um, y = 0 um"
            )


def _mass(question: Question, pair: Pair, checker: Checker) -> None:
    """A mass is needed only where something uses it: a dispersion that says so, but not with given states."""
    signature, gas = pair.gas.signature, pair.gas
    has_states = pair.place is not None and isinstance(pair.place.node, nodes.States)
    if pair.scope.title in checker.massless:
        return
    if signature is not None and signature.needs_mass and gas.mass is None and not has_states:
        message = f"gas `{gas.name}` has no mass, which the dispersion `{signature.name}` needs (line {question.line})"
        checker.faults.add(gas.node.name.span, message, "add a line such as `isotope Sr-84` or `m = 84 u`")


def _held_fully(question: Question, gas: Gas, checker: Checker) -> None:
    """Without a place the gas must hold itself: the levels given are the first of those its dispersion knows."""
    levels = gas.signature.levels if gas.signature else ()
    if not gas.held or gas.held != levels[: len(gas.held)]:
        message = f"it is not said where the gas `{gas.name}` is held"
        checker.faults.add(question.node.gas.span, message, f"write: for {gas.name} in PLACE")


def _dimension(question: Question, pair: Pair, checker: Checker) -> int | None:
    """The dimension of the place's space, checked against the momenta, the levels and the unit of a density."""
    gas, place = pair.gas, pair.place
    if place is None or isinstance(place.node, nodes.States):
        return None
    name = question.node.gas.span
    own = None if gas.momenta == ("p",) else len(gas.momenta)
    density = next((each for each in _thermodynamic(question) if each.name in ("n", "n_peak")), None)
    by_density = next((d for d in (1, 2, 3) if density and density.dimension == dimension(f"m-{d}")), None)
    found = dimension_of(pair, checker)
    if place.node is None:
        found = by_density or own or 3 - len(gas.held)
    if found is None:
        return None
    if own is not None and own != found:
        message = f"E({', '.join(gas.momenta)}) of `{gas.name}` moves in {own}D, `{place.name}` is {found}D"
        checker.faults.add(name, message, "give both the same number of directions")
    elif found + len(gas.held) > 3:
        left = f"only {3 - len(gas.held)}D is left, `{place.name}` is {found}D"
        message = f"`{gas.name}` holds {', '.join(gas.held)} as levels: {left}"
        checker.faults.add(name, message, "leave the held directions out of the place")
    if density is not None and by_density not in (None, found):
        message = f"`{place.name}` is {found}D: its density {density.name} must be in m-{found}"
        checker.faults.add(density.node.name.span, message, f"write {density.name} in m-{found}")
    return found


def _quantities(question: Question, pair: Pair, written: Sequence[nodes.Ident], checker: Checker) -> None:
    seen: set[str] = set()
    for name in question.quantities:
        if name.name in seen:
            checker.faults.add(name.span, f"`{name.name}` is asked for twice", "keep one of them")
        elif question.verb == "derive":
            _derived(name, checker)
        elif name.name in QUANTITIES:
            _needs(name, question, written, checker)
        else:
            _own_name(name, pair, checker)
        seen.add(name.name)


def _derived(name: nodes.Ident, checker: Checker) -> None:
    if name.name not in DERIVED:
        message = f"there is no formula to derive for `{name.name}`"
        checker.faults.add(name.span, message, listed(name.name, DERIVED, what="can be derived"))


def _own_name(name: nodes.Ident, pair: Pair, checker: Checker) -> None:
    named = pair.scope.find(name.name)
    if named is None:
        hint = listed(name.name, [*QUANTITIES, *pair.scope.known()], what="can be asked for")
        checker.faults.add(
            name.span, f"`{name.name}` is no quantity, nor a name of the gas or the place", hint
        )
    elif named.is_function:
        message = f"`{name.name}` is a function: it has no value of its own"
        checker.faults.add(name.span, message, f"define a name for its value, such as a = {name.name}(...)")
    else:
        checker.named(named)


def _needs(name: nodes.Ident, question: Question, written: Sequence[nodes.Ident], checker: Checker) -> None:
    need = QUANTITIES[name.name]
    given = [each.name for each in written]
    is_state = len(set(given)) >= 2 or bool(question.origins)
    lacking = {
        "nothing": None,
        "number": None if {"N", "n"} & set(given) or is_state else "the number N (or the density n)",
        "temperature": None if "T" in given or is_state else "the temperature T",
        "state": None if is_state else f"a state, which is two of {_KNOWN}",
        "number and temperature": None if {"N", "T"} <= set(given) else "the number N and the temperature T",
    }[need]
    if lacking is not None:
        came = f"only {', '.join(given)} is given" if given else "nothing is given"
        example = {"number": "N = 2e5", "temperature": "T = 100 nK"}.get(need, "N = 2e5, T = 100 nK")
        checker.faults.add(name.span, f"`{name.name}` needs {lacking}; {came}", f"write: with {example}")


def _conditions(question: Question, pair: Pair, written: Sequence[nodes.Ident], checker: Checker) -> None:
    faults = checker.faults
    names = [each.name for each in written]
    if question.origins and len(set(names)) != 2:
        message = f"`from {question.origins[0]}` needs the state there: two of {_KNOWN}"
        faults.add(_origins(question)[0].span, message, "write: with N = 2e5, T = 500 nK")
    for extra in written[2:] if len(set(names)) == len(names) else ():
        message = f"`{extra.name}` is one condition too many: a state is given by two of {_KNOWN}"
        faults.add(extra.span, message, f"{' and '.join(names[:2])} are given already; take one out")
    place = pair.place
    unbounded = place is not None and place.node is None
    flat = unbounded or (place is not None and place.has("volume"))
    for each in written:
        if each.name == "n" and not flat:
            faults.add(
                each.span, "a density n is a condition in `uniform` or a `volume` only", "give the number N"
            )
        if each.name in ("N", "S", "U", "N_0") and unbounded:
            message = f"`uniform` is unbounded: a gas in it has no total {each.name}"
            faults.add(each.span, message, "give the density n (its unit chooses the dimension), T or mu")
    if flat and {"n", "N"} <= set(names):
        faults.add(written[-1].span, "N and n say the same of a volume", "keep one of them")
