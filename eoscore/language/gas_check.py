"""What a gas block must be to make sense: its words, its mass, its energy, the parameters of its dispersion."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from eoscore.language.demand import must_be, must_be_positive
from eoscore.language.faults import listed
from eoscore.language.kind import Kind, dimension

if TYPE_CHECKING:
    from eoscore.language.block import Gas
    from eoscore.language.checker import Checker
    from eoscore.language.nodes import Ident
    from eoscore.language.scope import Named

__all__ = ["MOMENTA", "STATISTICS", "TREATMENTS", "check_gas"]

STATISTICS: Final = ("bose", "fermi", "classical")
TREATMENTS: Final = ("ideal", "hartree_fock")
MOMENTA: Final = (("p",), ("px",), ("px", "py"), ("px", "py", "pz"))


def check_gas(gas: Gas, checker: Checker) -> None:
    """Notes every fault of a gas block."""
    _word(gas.statistics, STATISTICS, "statistics", checker)
    _word(gas.treatment, TREATMENTS, "treatment", checker)
    for named in list(gas.scope.names.values()):
        _entry(named, checker)
    _parameters(gas, checker)
    if gas.treatment is not None and gas.treatment.name == "hartree_fock" and "a_s" not in gas.scope.names:
        message = f"`treatment hartree_fock` needs a scattering length, gas `{gas.name}` has none"
        checker.faults.add(gas.treatment.span, message, "add a line such as `a_s = 5 nm`")


def _word(word: Ident | None, known: tuple[str, ...], what: str, checker: Checker) -> None:
    if word is not None and word.name not in known:
        hint = listed(word.name, known, what=f"the words after `{what}`")
        checker.faults.add(word.span, f"`{word.name}` is no {what}", hint)


def _entry(named: Named, checker: Checker) -> None:
    definition = named.definition
    if definition is None:
        return
    if named.name == "E":
        _energy(named, checker)
        return
    if named.is_function:
        checker.body(named)
        return
    kind, span = checker.named(named), definition.value.span
    wanted = {
        "m": ("kg", "the mass `m`"),
        "degeneracy": ("1", "the degeneracy"),
        "a_s": ("m", "the scattering length `a_s`"),
    }
    if named.name in wanted:
        unit, words = wanted[named.name]
        fits = must_be(kind, (unit,), span, words, checker.faults)
        if fits and named.name != "a_s":
            must_be_positive(kind, span, words, checker.faults)


def _energy(named: Named, checker: Checker) -> None:
    definition = named.definition
    if definition is None:
        return
    names = tuple(parameter.name for parameter in definition.parameters or ())
    if names not in MOMENTA:
        came = f"E({', '.join(names)})" if definition.parameters is not None else "E without momenta"
        wanted = ", ".join(f"E({', '.join(momenta)})" for momenta in MOMENTA)
        checker.faults.add(
            definition.name.span, f"`{came}` is no energy of a particle", f"write one of {wanted}"
        )
        checker.body(named)
        return
    kind = checker.function(named, [Kind(dimension("kg.m/s"))] * len(names))
    must_be(kind, ("J",), definition.value.span, "E", checker.faults)


def _parameters(gas: Gas, checker: Checker) -> None:
    signature = gas.signature
    if signature is None:
        return
    for parameter in signature.parameters:
        named = gas.parameters.get(parameter.name)
        if named is not None and named.definition is not None:
            words = f"`{parameter.name}` of the dispersion `{signature.name}`"
            must_be(
                checker.named(named), (parameter.unit,), named.definition.value.span, words, checker.faults
            )
        elif named is None and parameter.name not in signature.levels and gas.dispersion is not None:
            message = (
                f"the dispersion `{signature.name}` needs a value for `{parameter.name}` ({parameter.doc})"
            )
            hint = f"write dispersion {signature.name} {{ {parameter.name} = ... {parameter.unit} }}"
            checker.faults.add(gas.dispersion.name.span, message, hint)
    if signature.levels and gas.dispersion is not None and not gas.dispersion.parameters:
        message = f"the dispersion `{signature.name}` wants at least one of {', '.join(signature.levels)}"
        hint = f"write dispersion {signature.name} {{ {signature.levels[-1]} = 2*pi*5 kHz }}"
        checker.faults.add(gas.dispersion.name.span, message, hint)
