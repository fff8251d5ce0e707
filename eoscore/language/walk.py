"""Walks over nodes that cost no stack: a step is a generator that yields the steps it needs the results of.

Text decides how deep nodes nest (a sum of 10^5 terms, a chain of 10^5 definitions), so no walk may recurse.
"""

from __future__ import annotations

from collections.abc import Generator, Iterable
from typing import Any, TypeVar

from eoscore.language import nodes

__all__ = ["Step", "children", "every", "run"]

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


def children(node: nodes.Node) -> tuple[nodes.Expr | nodes.Condition, ...]:
    """The expressions and conditions that an expression or a condition is made of."""
    match node:
        case nodes.Negative():
            return (node.operand,)
        case nodes.Binary() | nodes.Compare():
            return (node.left, node.right)
        case nodes.If():
            return (node.condition, node.then, node.otherwise)
        case nodes.Call():
            return node.arguments
        case nodes.Logic():
            return node.operands
    return ()
