"""Tarn in colours: nothing is lost, nothing is unknown, and the words are what they are."""

from __future__ import annotations

from importlib.metadata import entry_points

import pytest
from pygments.token import Comment, Error, Keyword, Name, Number

from eoscore.cli.demo import demo_names, demo_text
from eoscore.show.lexer import TarnLexer


def tokens(text):
    return list(TarnLexer(stripnl=False, ensurenl=False).get_tokens(text))


@pytest.mark.parametrize("name", demo_names())
def test_a_demo_is_coloured_whole(name):
    found = tokens(demo_text(name))
    assert "".join(text for _, text in found) == demo_text(name)
    assert not [text for kind, text in found if kind is Error]


@pytest.mark.parametrize(
    ("text", "kind", "word"),
    [
        ("w = 45(1) um", Number, "45(1)"),
        ("w = 7e-37 J.m2/W", Keyword.Type, "J.m2/W"),
        ("find T for g with N = 1e5 over f = [1, 2]", Keyword, "over"),
        ("x = 3 for", Keyword, "for"),
        ("a = sqrt(2)", Name.Builtin, "sqrt"),
        ("a = hbar*b", Name.Constant, "hbar"),
        ("V(x) = beam(x)", Name.Function, "beam"),
        ("# all of it", Comment.Single, "# all of it"),
        ("isotope = 3", Name, "isotope"),
    ],
)
def test_a_word_has_its_kind(text, kind, word):
    assert (kind, word) in tokens(text)


def test_pygments_finds_the_lexer_by_its_entry_point():
    """As installed: an environment that was set up before the entry point was made has to be set up anew."""
    found = [point for point in entry_points(group="pygments.lexers") if point.name == "tarn"]
    if not found:
        pytest.skip("eoscore was installed before it had a lexer; install it again")
    assert found[0].load() is TarnLexer
