"""Text to program: parse, take in what is used, sort, check everything, and gather all faults in one pass."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

from eoscore.errors import NoAnswerError, TarnError
from eoscore.language import nodes
from eoscore.language.block import Gas, pair
from eoscore.language.checker import Checker
from eoscore.language.faults import Faults
from eoscore.language.gas_check import check_gas
from eoscore.language.include import Includer
from eoscore.language.kind import Kind, dimension
from eoscore.language.parse import parse
from eoscore.language.place_check import check_place
from eoscore.language.program import Program, UncertainLiteral
from eoscore.language.question_check import check_question
from eoscore.language.role import settable
from eoscore.language.scope import Named, Scope
from eoscore.language.setting import settings_of
from eoscore.language.stray import check_strays
from eoscore.language.value import si_sigma, si_value
from eoscore.language.world import World, world_of
from eoscore.source import Source, Span

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from eoscore.language.block import Place
    from eoscore.language.signature import Signature

__all__ = ["load", "read"]

_TRIED = 5  # gases that a place is tried with when no question asks for it
_NOWHERE = Span(Source("<nowhere>", ""), 0, 0)


def load(path: str | Path, *, settings: Sequence[str] = (), dispersions: Mapping[str, Signature]) -> Program:
    """The program of a file; `use` reaches the files below its folder.

    Raises OSError where the file cannot be read, TarnError with every fault of the text.
    """
    path = Path(path)
    text = path.read_bytes()
    return _read(text, str(path), path, settings, dispersions)


def read(
    text: str | bytes,
    name: str = "<text>",
    *,
    folder: str | Path | None = None,
    settings: Sequence[str] = (),
    dispersions: Mapping[str, Signature],
) -> Program:
    """The program of a text; `use` reaches the files below `folder`, none without it.

    `settings` are texts such as `P=2 W` that take the place of what the file says. Raises TarnError with every
    fault of the text and the settings, each with its place.
    """
    where = Path(folder) / Path(name).name if folder is not None else None
    return _read(text, name, where, settings, dispersions)


def _read(
    text: str | bytes,
    name: str,
    path: Path | None,
    settings: Sequence[str],
    dispersions: Mapping[str, Signature],
) -> Program:
    faults = Faults()
    file = parse(text, name)
    includer = Includer(path.parent if path else None, faults)
    includer.take(file, path.resolve() if path else None)
    set_values, broken = settings_of(settings)
    broken = [*includer.included.broken, *broken]
    if broken or faults:
        raise TarnError([*broken, *faults.complaints()])
    world = world_of(includer.included, dispersions, set_values, faults)
    checker = Checker(faults)
    _check_names(world, checker)
    for gas in world.gases.values():
        check_gas(gas, checker)
    _check_places(world, checker)
    questions = [check_question(node, world, checker) for node in world.questions]
    _check_settings(world, checker)
    check_strays(world, checker)
    faults.raise_if_any()
    literals = _literals(world, checker)
    program = Program(
        file.span.source,
        file,
        world,
        checker,
        tuple(question for question in questions if question is not None),
        tuple(literal for literal, _ in literals),
        tuple(node for _, node in literals),
        set(world.pairs_made),
    )
    _try_values(program, faults)
    return program


def _try_values(program: Program, faults: Faults) -> None:
    """Faults for new values that leave no gas or no place, such as a waist of 0, before anything is computed."""
    for question in program.questions:
        for place in (question.place, *question.origins) if question.values else ():
            binding = program.bind(question.gas, place, program.conditions(question).values)
            try:
                _ = binding.gas, binding.place
            except NoAnswerError as senseless:
                first, *_others, last = (*question.values.values(), *question.values.values())
                span = first.node.span.to(last.node.span)
                faults.add(span, senseless.why, "give another value")
    faults.raise_if_any()


def _check_names(world: World, checker: Checker) -> None:
    """The names of the file itself and of the shelf."""
    for scope in (world.scope, *world.shelf):
        for named in list(scope.names.values()):
            definition = named.definition
            if definition is None:
                continue
            if named.is_function:
                checker.body(named)
            else:
                checker.named(named)


def _check_places(world: World, checker: Checker) -> None:
    """Each place with every gas it is asked with; one that nobody asks, with the gas that suits it best."""
    pairs = {}
    for question in world.questions:
        origins = question.origins if isinstance(question, nodes.Find) else ()
        gas = world.gases.get(question.gas.name)
        for name in (question.place, *origins):
            place = world.places.get(name.name) if name is not None else None
            if gas is not None and place is not None:
                pairs[world.pair(gas, place)] = place.name
    for each in pairs:
        check_place(each, checker)
    asked = set(pairs.values())
    for place in world.places.values():
        if place.name not in asked:
            check_place(pair(_suiting(place, world), place), checker)


def _suiting(place: Place, world: World) -> Gas:
    """The gas in whose company a place has the fewest faults; an unnamed one with a mass where there is no gas."""
    candidates = list(world.gases.values())[:_TRIED] or [_nobody(world)]
    return min(candidates, key=lambda gas: _faults_with(gas, place))


def _faults_with(gas: Gas, place: Place) -> int:
    faults = Faults()
    check_place(pair(gas, place), Checker(faults))
    return len(faults)


def _nobody(world: World) -> Gas:
    scope = Scope("a gas", world.scope, {"m": Named("m", given=Kind(dimension("kg")))}, is_block=True)
    name = nodes.Ident("a gas", span=_NOWHERE)
    return Gas(nodes.Gas(name, (), span=_NOWHERE), scope, {}, None, None, None, None)


def _check_settings(world: World, checker: Checker) -> None:
    if not world.settings.definitions:
        return
    scopes = {"": world.scope} | {gas.name: gas.scope for gas in world.gases.values()}
    for place in world.places.values():
        scopes[place.name] = pair(_suiting(place, world), place).scope
    world.settings.check(checker, scopes, settable(list(scopes.values())))


def _literals(world: World, checker: Checker) -> list[tuple[UncertainLiteral, int]]:
    """The uncertain literals in the order of the text, file by file, each with the identity of its node."""
    alone = _standing_alone(world)
    files: dict[str, int] = {}
    for node in checker.uncertain.values():
        files.setdefault(node.span.source.name, len(files))
    ordered = sorted(checker.uncertain.values(), key=lambda n: (files[n.span.source.name], n.span.start))
    literals = []
    for index, node in enumerate(ordered):
        name = alone.get(id(node))
        literals.append((UncertainLiteral(index, node.span, si_value(node), si_sigma(node), name), id(node)))
    return literals


def _standing_alone(world: World) -> dict[int, str]:
    """The names that are defined by one literal, by the identity of its node."""
    definitions = [named.definition for named in settable([world.scope]).values()]
    for gas in world.gases.values():
        definitions += [named.definition for named in (*gas.scope.names.values(), *gas.parameters.values())]
    for place in world.places.values():
        definitions += place.definitions
    for question in world.questions:
        definitions += question.conditions
    return {id(each.value): each.name.name for each in definitions if each is not None}
