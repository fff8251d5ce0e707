"""A layout changes neither meaning nor comments, and is settled at once."""

from __future__ import annotations

import re
from importlib.resources import files as resources

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.errors import TarnError
from eoscore.language.include import shelf_files
from eoscore.language.layout import laid_out
from eoscore.language.parse import parse
from eoscore.language.writer import write

from .trees import files

SHIPPED = {
    path.name: path.read_text(encoding="utf-8")
    for path in (*resources("eoscore.demos").iterdir(), *shelf_files().values())
    if path.name.endswith(".tarn")
}


def comments(text):
    """Comments in order; a text made here has no `#` in a path."""
    return [comment.rstrip() for comment in re.findall(r"#[^\n]*", text)]


def check(text):
    written = laid_out(text)
    assert parse(written) == parse(text)
    assert comments(written) == comments(text)
    assert laid_out(written) == written
    assert not re.search(r"[ \t]$", written, re.MULTILINE)
    assert "\n\n\n" not in written


@pytest.mark.parametrize("name", SHIPPED)
def test_a_shipped_file_keeps_its_meaning_and_comments(name):
    check(SHIPPED[name])


@st.composite
def dishevelled(draw):
    """A written file with white space and comments strewn between its words."""
    written = write(draw(files()))
    lines = []
    for line in written.split("\n"):
        filler = st.sampled_from(["  ", "\t", "\n", "\n\n\n  ", " # note (a = b) {\n", "\r\n#\n"])
        after_number = st.sampled_from(["\n", " # 2 m\n"])  # a name on a number's line would be its unit
        words = re.findall(r"\S+", line)
        lines.append("".join(word + (draw(filler) if draw(st.booleans()) else " ") for word in words))
        lines[-1] += draw(after_number)
    return "".join(lines)


@settings(deadline=None, max_examples=30)
@given(files())
def test_a_written_file_keeps_its_meaning(file):
    check(write(file))


@settings(deadline=None, max_examples=50)
@given(dishevelled())
def test_a_dishevelled_file_keeps_its_meaning_and_comments(text):
    try:
        parse(text)
    except TarnError:
        return  # the strewing tore a unit from its number: not a text
    check(text)


@pytest.mark.parametrize(
    ("text", "written"),
    [
        ("", ""),
        ("# only this", "# only this\n"),
        ("a=-b ^ - 2", "a = -b^-2\n"),
        ("a=1+2 W / w*- c", "a = 1 + 2 W / w*-c\n"),
        ("a = x -1\nbb=2   um", "a  = x - 1\nbb = 2 um\n"),
        ("V( x,y )=x where not(x<1)and(y>2)", "V(x, y) = x where not (x < 1) and (y > 2)\n"),
        ("gas g{isotope Sr-84 # mass\n}", "gas g {\n    isotope Sr-84  # mass\n}\n"),
        ("a = b # c\n# of g\ngas g {}", "a = b  # c\n\n# of g\ngas g {\n}\n"),
        ("a =\n   b  \n\n +c\n", "a =\n    b\n    + c\n"),
        ("Sr = 3 Sr84 = 2*Sr-84", "Sr   = 3\nSr84 = 2*Sr - 84\n"),
        ("find T_c for g\nfind mu, S  for g", "find T_c   for g\nfind mu, S for g\n"),
        ("a = 1 # x\nlong = 22 # y", "a    = 1   # x\nlong = 22  # y\n"),
    ],
)
def test_the_layout_of_a_text(text, written):
    if text.startswith("Sr = 3 "):
        text = text.replace("3 ", "3\n")
    assert laid_out(text) == written
    assert laid_out(written) == written


def test_a_faulty_text_has_no_layout():
    with pytest.raises(TarnError, match="`khz` came"):
        laid_out("f = 2 khz")
