"""Walks over nodes that cost no stack: a step is a generator that yields the steps it needs the results of.

Text decides how deep nodes nest (a sum of 10^5 terms, a chain of 10^5 definitions), so no walk may recurse.
"""

from __future__ import annotations

from collections.abc import Generator, Iterable
from typing import Any, TypeVar

__all__ = ["Step", "every", "run"]

Result = TypeVar("Result")
Step = Generator[Any, Any, Result]


def run(step: Step[Result]) -> Result:
    """Runs a step and all the steps it yields, depth first, and gives back its result."""
    stack: list[Step[Any]] = [step]
    result: Any = None
    while stack:
        try:
            stack.append(stack[-1].send(result))
            result = None
        except StopIteration as done:
            stack.pop()
            result = done.value
    final: Result = result
    return final


def every(steps: Iterable[Step[Result]]) -> Step[list[Result]]:
    """The results of several steps, one after the other."""
    results = []
    for step in steps:
        result: Result = yield step
        results.append(result)
    return results
