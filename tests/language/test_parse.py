"""Text to nodes: what each construct becomes, and where it stands."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.errors import Complaint, TarnError
from eoscore.language import nodes
from eoscore.language.parse import parse
from eoscore.language.reserved import LINE_WORDS, RESERVED
from eoscore.language.writer import write

LAB = """
# A pancake between two sheets of light.
gas strontium {
    isotope Sr-84
    statistics bose
    treatment hartree_fock
    dispersion trapped { omega_z = 2*pi*5 kHz }
    a_s = 123(2) a0
}
trap sheets {
    V(x, y) = m/2*(2*pi*40 Hz)^2*(x^2 + y^2) where x < 40 um, y < 40 um
}
states soft {
    exponent = 1.65(5)
    anchor N_c = 3.0(2)e5 at T = 90 nK
}
find T_c for strontium in sheets from soft from other with N = 2e5 over w = even(1, 2, 3), N = [1, 2]
derive T_c, g for strontium in sheets with N = 1e5
"""


def value(text: str) -> nodes.Expr:
    (entry,) = parse(f"a = {text}").entries
    assert isinstance(entry, nodes.Definition)
    return entry.value


def test_all_kinds_of_entries():
    gas, trap, states, find, derive = parse(LAB).entries
    assert isinstance(gas, nodes.Gas)
    assert [type(line) for line in gas.entries] == [
        nodes.Isotope,
        nodes.Statistics,
        nodes.Treatment,
        nodes.DispersionChoice,
        nodes.Definition,
    ]
    assert isinstance(trap, nodes.Trap)
    assert len(trap.entries[0].where) == 2
    assert isinstance(states, nodes.States)
    assert isinstance(states.entries[1], nodes.Anchor)
    assert isinstance(find, nodes.Find)
    assert [origin.name for origin in find.origins] == ["soft", "other"]
    assert [type(axis.values) for axis in find.over] == [nodes.Range, nodes.Listing]
    assert isinstance(derive, nodes.Derive)


@pytest.mark.parametrize(
    ("text", "meant"),
    [
        ("-x^2", "-(x^2)"),
        ("2^-x^3", "2^(-(x^3))"),
        ("a - b - c", "(a - b) - c"),
        ("a/b*c", "(a/b)*c"),
        ("a/b/c", "(a/b)/c"),
        ("a^b^c", "a^(b^c)"),
        ("-a*b", "(-a)*b"),
        ("1 + 2*3", "1 + (2*3)"),
        ("--a", "-(-a)"),
        ("1064 nm / 2", "(1064 nm)/2"),
        ("1064 nm/2", "(1064 nm)/2"),
        ("5 W/ (a)", "(5 W)/a"),
        ("5 W / w", "(5 W)/w"),
        ("5 m -2", "(5 m) - 2"),
        ("5 m-2*x", "(5 m-2)*x"),
        ("if(not a < b or c < d and e < f, 1, 2)", "if((not a < b) or (c < d and e < f), 1, 2)"),
    ],
)
def test_what_binds_tighter(text: str, meant: str):
    assert value(text) == value(meant)


def test_line_ends_matter_for_units_only():
    assert parse(LAB.replace("\n", "\r\n")) == parse(LAB)
    assert parse("a\n=\nb\n+\nc") == parse("a = b + c")
    assert parse("find T_c\nfor g\nin\nbowl\nwith N\n= 1") == parse("find T_c for g in bowl with N = 1")


@pytest.mark.parametrize(
    "name", [*LINE_WORDS, "even", "geometric", "uniform", "bose", "μ", "Ω_1", "T_c", "inside"]
)
def test_words_that_are_names(name: str):
    text = f"{name} = 1\ntrap t {{ {name} = 2*{name}\n }}\nfind {name} for {name} with {name} = {name}"
    assert write(parse(text)).count(name) == 7


@pytest.mark.parametrize("word", sorted(RESERVED))
def test_words_that_are_not_names(word: str):
    with pytest.raises(TarnError, match=f"`{word}` came"):
        parse(f"trap t {{ {word} = 1\n }}")


def test_the_two_signs_for_micro_are_one():
    assert parse("\u00b5 = 3 \u00b5m") == parse("\u03bc = 3 \u03bcm")


def test_a_node_knows_its_words():
    (entry,) = parse("a = 1\n   + (b - c)*f(x) # end").entries
    assert isinstance(entry, nodes.Definition)
    assert isinstance(entry.value, nodes.Binary)
    assert isinstance(entry.value.right, nodes.Binary)
    assert entry.span.text == "a = 1\n   + (b - c)*f(x)"
    assert entry.value.right.left.span.text == "(b - c)"
    assert (entry.value.right.span.line, entry.value.right.span.column) == (2, 6)


@pytest.mark.parametrize("text", ["", "  \n", "# nothing", b"", b"\xef\xbb\xbf", "\ufeff# mark"])
def test_an_empty_text_has_no_entries(text: str | bytes):
    assert parse(text).entries == ()


def test_bytes_and_a_byte_order_mark_change_nothing():
    assert parse(b"\xef\xbb\xbf" + LAB.encode()) == parse(LAB)


WORDS = "gas trap states use find derive for in with over from where at and or not if isotope Sr-84 anchor x V(x) m"
SIGNS = [*"{}()[]=+-*/^,<>#\"'.;°", "<=", ">=", "**", "2 um", "1.5(2)", "1e999", "3 foo"]
TOKENS = [*WORDS.split(), *SIGNS, "even(", "\n", "x = 1\n", "E(p) ="]


def faults_of(text: str | bytes) -> tuple[Complaint, ...]:
    try:
        parse(text)
    except TarnError as error:
        return error.complaints
    return ()


@settings(deadline=None)
@given(st.lists(st.sampled_from(TOKENS), max_size=40), st.sampled_from(["", " ", "\n"]))
def test_no_sequence_of_tokens_raises_anything_but_a_complaint(tokens: list[str], between: str):
    assert all(complaint.message and complaint.hint for complaint in faults_of(between.join(tokens)))


@settings(deadline=None)
@given(st.text(max_size=60) | st.binary(max_size=60) | st.text('gas{}=1 x()\n,;"', max_size=60))
def test_no_text_raises_anything_but_a_complaint(text: str | bytes):
    assert all(complaint.line >= 1 and complaint.column >= 1 for complaint in faults_of(text))


@settings(deadline=None)
@given(
    st.lists(
        st.tuples(st.integers(0, len(LAB)), st.integers(0, 8), st.sampled_from(["", *TOKENS])), max_size=4
    )
)
def test_no_slip_of_the_pen_raises_anything_but_a_complaint(slips: list[tuple[int, int, str]]):
    text = LAB
    for place, lost, written in slips:
        text = text[:place] + written + text[place + lost :]
    assert all(complaint.message and complaint.hint for complaint in faults_of(text))
