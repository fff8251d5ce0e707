"""Every text of the table is refused with one complaint, at the right place, in the words of the table."""

from __future__ import annotations

import pytest

from eoscore.errors import TarnError

from .labs import GAS, TRAP, program
from .wrong_meanings import WRONG, Wrong


@pytest.mark.parametrize("wrong", WRONG, ids=lambda wrong: wrong.text.splitlines()[-1][:50])
def test_one_complaint_in_the_words_of_the_table(wrong: Wrong):
    with pytest.raises(TarnError, match=r".") as caught:
        program(wrong.text)
    (complaint,) = caught.value.complaints
    lines = wrong.text.splitlines()[complaint.line - 1 : complaint.end_line]
    lines[-1] = lines[-1][: complaint.end_column - 1]
    assert " ".join([lines[0][complaint.column - 1 :], *lines[1:]]) == wrong.place
    assert wrong.message in complaint.message
    assert wrong.hint in (complaint.hint or "")


def test_all_faults_come_in_one_pass_in_the_order_of_the_text():
    text = (
        "a = 1 m + 1 s\n"
        + GAS
        + TRAP
        + "trap t { V(x) = 2*m }\nfind Tc for sr in bowl\nfind T_c for rb in bowl"
    )
    with pytest.raises(TarnError, match="cannot be added") as caught:
        program(text)
    assert [complaint.line for complaint in caught.value.complaints] == [1, 5, 6, 7]


def test_a_faulty_name_does_not_cause_further_faults():
    text = GAS + "trap t { w = nothing\n b = w + 1 m\n V(x) = b*w + exp(w)*w + if(w < b, w, 1 J) }"
    with pytest.raises(TarnError, match="`nothing` is not known") as caught:
        program(text)
    assert len(caught.value.complaints) == 1


def test_a_fault_of_a_trap_is_told_once_for_all_gases_that_ask():
    text = GAS + "gas yb { isotope Yb-174 }\ntrap t { V(x) = 2 m + 2 J }\n"
    with pytest.raises(TarnError, match="cannot be added") as caught:
        program(text + "find depth for sr in t\nfind depth for yb in t")
    assert len(caught.value.complaints) == 1


def test_what_a_faulty_part_leaves_is_still_checked():
    """The unknown name would have fitted; the other terms are no energy whatever it means."""
    text = GAS + "trap t { V(x) = 3*x + nothing*x }"
    with pytest.raises(TarnError, match=r"V must be kg m2/s2 .J., `3.x . nothing.x` is m") as caught:
        program(text)
    assert len(caught.value.complaints) == 2


def test_a_value_below_zero_is_told_with_its_number():
    with pytest.raises(TarnError, match="must be above 0, but `1 m3 - 3 m3` came") as caught:
        program(GAS + "trap t { volume = 1 m3 - 3 m3 }")
    assert len(caught.value.complaints) == 1
    with pytest.raises(TarnError, match="must be above 0, but `w` came, which is -2 in SI"):
        program(GAS + "trap t { w = 1 m3 - 3 m3\n volume = w }")
