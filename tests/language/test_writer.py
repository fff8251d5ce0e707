"""What is written is read back as the same nodes."""

from __future__ import annotations

import pytest
from hypothesis import given, settings

from eoscore.language import nodes
from eoscore.language.parse import parse
from eoscore.language.writer import write

from .trees import NOWHERE, expressions, files


@settings(deadline=None, max_examples=50)
@given(files())
def test_a_file_is_read_back_as_it_was_written(file: nodes.File):
    assert parse(write(file)) == file


@settings(deadline=None)
@given(expressions())
def test_an_expression_is_read_back_as_it_was_written(expression: nodes.Expr):
    (entry,) = parse(f"a = {write(expression)}").entries
    assert isinstance(entry, nodes.Definition)
    assert entry.value == expression


@settings(deadline=None, max_examples=50)
@given(files())
def test_the_layout_is_settled_at_once(file: nodes.File):
    assert write(parse(write(file))) == write(file)


@pytest.mark.parametrize(
    "text",
    [
        "a = (b + c)*d - (e - f)",
        "a = -b^2",
        "a = (-b)^2",
        "a = b^-c^d",
        "a = (b^c)^d",
        "a = b/(c*d)",
        "a = (5 W)^2",
        "a = 5 W / w",
        "a = -2.1(3)e5 J.m2/W/K2",
        "a = 3 cm-3",
        "a(x) = if(x < 1 and (x > 2 or not x < 3), 1, -x)",
        "V(x, y) = x*y where x < 1, not (y < 1 and x < 2)",
        'use "lab/light.tarn"',
        "find T_c, f_0 for g in a from b from c with N = 1e5, T = 3 nK over w = even(1 um, 2 um, 3), f = [1, 2]",
    ],
)
def test_a_canonical_line_is_written_as_it_stands(text: str):
    assert write(parse(text)) == text + "\n"


def test_blocks_stand_apart_and_their_lines_are_indented():
    file = parse(
        "a = b gas g { isotope Sr-84 dispersion trapped { omega_z = 3 kHz } }\nfind T_c for g find mu for g"
    )
    assert write(file) == (
        "a = b\n\ngas g {\n    isotope Sr-84\n    dispersion trapped {\n        omega_z = 3 kHz\n    }\n}\n\n"
        "find T_c for g\nfind mu for g\n"
    )


def test_only_nodes_of_a_file_can_be_written():
    with pytest.raises(TypeError, match="Node is no node of a Tarn file"):
        write(nodes.Node(span=NOWHERE))
