"""What a person reads."""

from __future__ import annotations

import io
import math
import re

import pytest

from eoscore.answer.record import DerivedAnswer
from eoscore.show.page import print_report

from .records import answer, finding, report, sampled


def page(*answers):
    stream = io.StringIO()
    print_report(report(*answers), stream)
    return stream.getvalue()


def test_a_single_answer_shows_value_error_route_budget_and_caution():
    text = page(answer({"T_c": finding(7.03e-7, sigma=1.4e-8, error=1e-15, budget={"P": 0.75, "w": 0.25})}))
    for words in ("line 7: find T_c", "703(14) nK", "2e-9 relative", "closed form", "P (75 %), w (25 %)"):
        assert words in text
    assert "Caution (shallow): the depth is only 4 kT." in text


def test_a_missing_number_is_told_in_words():
    text = page(answer({"T_c": finding(math.nan, why="the trap is open")}))
    assert "T_c: no value, because the trap is open" in text
    assert "nan" not in text


@pytest.mark.parametrize(
    ("found", "words"),
    [
        (sampled(1e-7, 0.9e-7, 1.4e-7), "T_c: 68 % of 50 samples lie from 90 to 140 nK"),
        (sampled(1e-7, 0.9e-7, 1.4e-7, answered=0.8), "50 samples (20 % of them had no answer) lie from"),
        (sampled(1e-7, math.nan, math.nan, answered=0.1), "T_c: no interval: too few of 50 samples have"),
    ],
)
def test_a_sampled_interval_is_told(found, words):
    assert words in page(answer({"T_c": found}))


def test_an_interval_that_no_sample_has_is_not_told():
    assert "samples" not in page(answer({"T_c": sampled(math.nan, math.nan, math.nan, answered=0.0)}))


def test_a_grid_shows_the_ends_of_sampled_intervals():
    found = sampled([1e-7, 2e-7], [0.9e-7, math.nan], [1.1e-7, math.nan])
    rows = page(answer({"T_c": found}, over={"P": [1, 2]}, units={"P": "W"})).splitlines()
    assert re.split(r"  +", rows[1]) == ["P (W)", "T_c (nK)", "low T_c (nK)", "high T_c (nK)"]
    assert [row.split() for row in rows[3:5]] == [["1", "100", "90", "110"], ["2", "200", "-", "-"]]


def test_lists_show_every_entry():
    assert "55 Hz, 1.2 kHz" in page(answer({"freq": finding([55.0, 1200.0], "Hz")}))


def test_plain_text_has_no_control_codes():
    assert "\x1b" not in page(answer({"T_c": finding(1.0)}))


def test_a_grid_has_one_prefix_per_column():
    text = page(answer({"T_c": finding([1e-7, 2e-6])}, over={"P": [0.6, 6.0]}, units={"P": "W"}))
    assert "T_c (µK)" in text
    assert "P (W)" in text
    assert " 0.1\n" in text


def test_a_long_grid_is_cut_in_the_middle():
    text = page(answer({"T_c": finding(range(1000))}, over={"P": range(1000)}))
    assert "960 rows more" in text
    assert len(text.splitlines()) < 60


@pytest.mark.parametrize("words", ["[bold]T_c[/bold]", ":warning:", "100 %"])
def test_texts_are_taken_literally(words):
    assert words in page(answer({"T_c": finding(1.0)}, question=words))


def test_the_same_caution_is_told_once():
    text = page(answer({"T_c": finding(1.0)}), answer({"T_c": finding(2.0)}))
    assert text.count("the depth is only 4 kT.") == 1
    assert text.count("shallow") == 2


def test_formulas_show_text_and_value():
    formulas = {
        "T_c": {"sympy": "...", "text": "T_c = hbar*omega*(N/zeta(3))**(1/3)/k_B", "value": 7e-7, "unit": "K"}
    }
    text = page(DerivedAnswer(3, "derive T_c for a in b", "a", "b", {}, formulas))
    assert "T_c = hbar*omega" in text
    assert "700 nK" in text


@pytest.mark.parametrize(
    ("value", "words"), [(None, "small = N/2; small -> 0"), (0.25, "small = N/2 = 0.25; ")]
)
def test_an_expansion_tells_what_is_small_with_or_without_numbers(value, words):
    expansion = {"limit": "low temperature", "text": "T_c = N", "value": value, "range": "small -> 0"}
    expansion |= {"small_text": "small = N/2", "small_value": value}
    formula = {"sympy": "...", "text": "T_c solves T^3 = N", "value": None, "expansions": [expansion]}
    assert words in page(DerivedAnswer(3, "derive T_c for a in b", "a", "b", {}, {"T_c": formula}))


def test_formula_and_engine_that_part_are_told():
    formula = {"sympy": "...", "text": "T_c = N", "value": None, "numerical": 1.0, "why": "they part"}
    assert "no number, because they part" in page(DerivedAnswer(3, "", "a", "b", {}, {"T_c": formula}))


def test_a_grid_that_is_too_wide_stands_in_several_tables():
    found = {f"quantity_number_{place}": finding([1.25e-31, 1.0 / 3], "J") for place in range(9)}
    lines = page(answer(found, over={"P": [1, 2]}, units={"P": "W"})).splitlines()
    assert max(map(len, lines)) <= 110
    assert sum(line.startswith("P (W)") for line in lines) == 3
    assert sum(line.count("0.333333") for line in lines) == 9
