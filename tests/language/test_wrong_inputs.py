"""Every text of the table is refused with one complaint, at the marked place, in the words of the table."""

from __future__ import annotations

import pytest

from eoscore.errors import Complaint, TarnError
from eoscore.language.parse import parse
from eoscore.source import Source

from .wrong_inputs import UNREADABLE, WRONG, Wrong


def complaints(text: str | bytes) -> tuple[Complaint, ...]:
    with pytest.raises(TarnError, match=r".") as caught:
        parse(text)
    return caught.value.complaints


@pytest.mark.parametrize("wrong", WRONG, ids=lambda wrong: ascii(wrong.marked[-50:]))
def test_one_complaint_in_the_words_of_the_table(wrong: Wrong):
    (complaint,) = complaints(wrong.text)
    source = Source("<text>", wrong.text)
    start, end = map(source.place, wrong.place)
    assert (complaint.line, complaint.column) == start
    assert (complaint.end_line, complaint.end_column) == end
    assert wrong.message in complaint.message
    assert wrong.hint in (complaint.hint or "")


CLOSED = [
    wrong for wrong in WRONG if wrong.text.count("{") == wrong.text.count("}") and wrong not in UNREADABLE
]


@pytest.mark.parametrize("wrong", CLOSED, ids=lambda wrong: ascii(wrong.marked[-50:]))
def test_a_fault_hides_none_in_the_entries_after_it(wrong: Wrong):
    found = complaints(wrong.text + "\nlast = 7 um2x\n")
    assert found[-1].message.startswith("`um2x` came after a number")


def test_all_faults_come_in_one_pass_in_the_order_of_the_text():
    text = "a = 2 x\ngas {\n m = 3 uu\n isotope Sr84\n}\nb = (1 + 2\nfind T_c in bowl\ntrap t { V(x) = 1 1 }\nc = 1e999"
    assert [complaint.line for complaint in complaints(text)] == [1, 2, 3, 4, 6, 7, 8, 9]


@pytest.mark.parametrize(
    "head", ["gass sr {", "gas {", "gas sr sr {", "atom sr {", "gas sr", "gas 3 {", "gas 'sr' {"]
)
def test_a_faulty_head_hides_nothing_of_its_block(head: str):
    text = f"{head}\n isotope Sr84\n dispersoin trapped {{\n omega = 3 hz\n }}\n m = 3 uu\n}}\nb = 1"
    first = 2 if head == "gas sr" else 1
    assert [complaint.line for complaint in complaints(text)] == [first, 2, 3, 4, 6]


def test_a_fault_in_a_question_of_many_lines_is_told_once():
    text = "find T_c\n  for g\n  in bowl\n  with N 2e5,\n    T = 400 nK\n  over P = [1, 2]\nb = 3"
    assert [complaint.line for complaint in complaints(text)] == [4]


@pytest.mark.parametrize("line", ["a = 1 1\n", "a = 1 foo\n", "a = б\n"])
def test_at_most_a_hundred_faults_are_told(line: str):
    assert len(complaints(line * 500)) == 100


@pytest.mark.parametrize(
    ("data", "message"),
    [(b"a = 1\nb = \xff3", "the byte 0xFF came, which is not UTF-8"), (b"a = 3 \xc2", "the byte 0xC2 came")],
)
def test_bytes_that_are_no_text(data: bytes, message: str):
    (complaint,) = complaints(data)
    assert message in complaint.message
    assert (complaint.line, complaint.column) == ((2, 5) if len(data) > 10 else (1, 7))
