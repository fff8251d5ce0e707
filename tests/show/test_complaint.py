"""Complaints show the line and mark the place."""

from __future__ import annotations

import pytest

from eoscore.show.complaint import complaint_text, complaints_text

from .records import complaint


def test_the_place_is_marked_below_its_line():
    assert complaint_text(complaint()).splitlines() == [
        "a.tarn:4:12: kg is added to Hz",
        "    4 |     V(x) = m/2 + 3 Hz",
        "      |            ^^^^^^^^^^",
        "      multiply by h to make 3 Hz an energy",
    ]


def test_tabs_keep_the_marks_below_the_words():
    source, marks = complaint_text(complaint("\tx = 3 Hz", 6, 10)).splitlines()[1:3]
    assert source.index("3 Hz") == marks.index("^^^^")
    assert "\t" in marks


def test_a_very_long_line_is_cut_around_the_place():
    text = complaint_text(complaint("a" * 5_000_000 + "!" + "b" * 100, 5_000_001, 5_000_002))
    source, marks = text.splitlines()[1:3]
    assert len(text) < 500
    assert source[marks.index("^")] == "!"


@pytest.mark.parametrize(
    ("excerpt", "column", "end_column"),
    [("x", 5, 9), ("", 1, 1), ("abc", 2, 2), ("a\x00b", 2, 3)],
    ids=["past the end", "empty line", "empty span", "NUL"],
)
def test_odd_places_still_give_a_complaint(excerpt, column, end_column):
    text = complaint_text(complaint(excerpt, column, end_column))
    assert "kg is added to Hz" in text
    assert "\x00" not in text


def test_several_lines_are_marked_to_the_end_of_the_first():
    assert "^" * 10 in complaint_text(complaint(end_line=6, end_column=2))


def test_the_count_closes_the_list():
    assert complaints_text([complaint()]).endswith("1 fault found; nothing was computed.")
    assert complaints_text([complaint()] * 3).endswith("3 faults found; nothing was computed.")
