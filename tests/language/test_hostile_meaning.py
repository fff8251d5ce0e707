"""Texts that would blow up a careless reader end soon, with a value or a complaint."""

from __future__ import annotations

import time

import pytest

from eoscore.errors import TarnError

from .labs import GAS, program

SECONDS = 12.0  # of processor time on a slow machine; the aim is a few


@pytest.fixture(autouse=True)
def soon():
    start = time.process_time()
    yield
    assert time.process_time() - start < SECONDS


def tower(levels: int, step: str) -> str:
    """Functions f0, f1, ..., each calling the one before twice."""
    lines = [f"f{k + 1}(x) = {step.replace('f(', f'f{k}(')}" for k in range(levels)]
    return "\n".join(["f0(x) = x", *lines])


def test_a_long_chain_of_definitions_needs_no_stack():
    chain = "\n".join(f"x{k + 1} = x{k} + 1" for k in range(4000))
    lab = program(f"{GAS}x0 = 1\n{chain}")
    assert lab.bind("sr", None).value("x4000")[0] == 4001.0


def test_a_tower_of_functions_costs_a_walk_per_level():
    lab = program(f"{GAS}{tower(60, 'f(x) + f(x)')}\ntrap t {{ V(x) = (1 J/m)*f60(x) }}")
    slope = lab.bind("sr", "t").place.field.formula.evaluate({"x": 3.0})
    assert float(slope) == 3.0 * 2.0**60


def test_a_tower_that_never_repeats_itself_is_a_complaint():
    with pytest.raises(TarnError, match="expands into more than 100,000 steps"):
        program(f"{tower(60, 'f(2*x) + f(2*x + 1)')}\na = f60(1)")


def test_a_tower_over_coordinates_is_a_complaint_when_it_is_bound():
    lab = program(f"{GAS}{tower(30, 'f(2*x + 1 m) + f(3*x)')}\ntrap t {{ V(x) = (1 J/m)*f30(x) }}")
    with pytest.raises(TarnError, match="expand into more than 100,000 steps"):
        _ = lab.bind("sr", "t").place


def test_a_long_circle_is_told_shortly():
    ring = "\n".join(f"x{k} = x{(k + 1) % 2000}" for k in range(2000))
    with pytest.raises(
        TarnError, match=r"cannot need itself: `x0` needs `x1`.* needs `...` needs `x0`"
    ) as caught:
        program(ring)
    assert len(caught.value.complaints) == 1


def test_a_thousand_unknown_names_are_told_one_by_one():
    known = "\n".join(f"known_{k} = 1" for k in range(1000))
    unknown = "\n".join(f"a{k} = unknown_{k}" for k in range(1000))
    with pytest.raises(TarnError, match="is not known here") as caught:
        program(f"{known}\n{unknown}")
    assert len(caught.value.complaints) == 1000


def test_many_gases_in_one_large_trap_are_refused_in_words():
    gases = "\n".join(f"gas g{k} {{ m = 1 u }}" for k in range(300))
    trap = "\n".join(f"a{k} = 1 + 2*3 - 4/5*6 + 7 - 8 + 9" for k in range(300))
    asked = "\n".join(f"find a0 for g{k} in t" for k in range(300))
    with pytest.raises(TarnError, match="takes more steps than can be worked through"):
        program(f"{gases}\ntrap t {{ volume = 1 m3\n{trap} }}\n{asked}")


@pytest.mark.parametrize(
    "power", ["9^9^9^9", "1.0001^1e9", "(9^9)^(9^9)", "exp(exp(exp(9)))", "10^400", "-(10^400)"]
)
def test_numbers_without_bounds_are_complaints(power):
    with pytest.raises(TarnError, match="is too large for a number"):
        program(f"a = {power}")


def test_small_numbers_become_zero_quietly():
    assert program(f"{GAS}a = 10^(-400) + 1").bind("sr", None).value("a")[0] == 1.0
