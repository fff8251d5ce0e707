"""The JSON document, as the contract words it."""

from __future__ import annotations

import json
import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from eoscore import __version__
from eoscore.answer.record import DerivedAnswer
from eoscore.show.document import json_text

from .records import answer, complaint, finding, report


def read(*answers, complaints=()):
    return json.loads(json_text(report(*answers, complaints=complaints)))


def test_the_head_names_program_language_and_file():
    assert read() == {
        "eoscore": __version__,
        "tarn": 1,
        "file": "pancake.tarn",
        "answers": [],
        "complaints": [],
    }


def test_a_single_answer_has_the_fields_of_the_contract():
    (shown,) = read(answer({"T_c": finding(7e-7, sigma=1e-8, error=2e-14)}))["answers"]
    assert list(shown) == ["line", "verb", "gas", "place", "from", "given", "over", "found", "cautions"]
    assert shown["given"] == {"N": {"value": 2e5, "unit": "1"}}
    assert shown["found"]["T_c"] == {
        "value": 7e-7,
        "unit": "K",
        "sigma": 1e-8,
        "error": 2e-14,
        "why": None,
        "route": "closed form",
    }


def test_a_missing_number_is_null_with_its_reason():
    found = read(answer({"T_c": finding(math.nan, why="no condensation")}))["answers"][0]["found"]["T_c"]
    assert (found["value"], found["error"], found["sigma"]) == (None, None, None)
    assert found["why"] == "no condensation"


def test_a_grid_nests_in_the_order_of_its_names_and_tells_reasons_with_points():
    grid = finding([[1.0, 2.0, math.nan], [3.0, 4.0, math.nan]], why="open trap", points=((0, 2), (1, 2)))
    shown = read(answer({"T_c": grid}, over={"P": [1, 2], "N": [1, 2, 3]}))["answers"][0]
    assert shown["over"] == {"P": [1.0, 2.0], "N": [1.0, 2.0, 3.0]}
    assert shown["found"]["T_c"]["value"] == [[1.0, 2.0, None], [3.0, 4.0, None]]
    assert shown["found"]["T_c"]["why"] == [{"why": "open trap", "points": [[0, 2], [1, 2]]}]


def test_frequencies_are_lists_at_every_point():
    shown = read(answer({"freq": finding([[1, 2], [math.nan, math.nan]], "Hz")}, over={"P": [1, 2]}))
    assert shown["answers"][0]["found"]["freq"]["value"] == [[1.0, 2.0], None]
    alone = read(answer({"freq": finding([math.nan, math.nan], "Hz", why="a cone")}))
    assert alone["answers"][0]["found"]["freq"]["value"] is None


@pytest.mark.parametrize(
    ("origins", "shown"), [((), None), (("crossed",), "crossed"), (("a", "b"), ["a", "b"])]
)
def test_the_places_of_origin(origins, shown):
    assert read(answer({}, origins=origins))["answers"][0]["from"] == shown


def test_complaints_come_without_the_source_line():
    (shown,) = read(complaints=[complaint()])["complaints"]
    assert list(shown) == ["file", "line", "column", "end_line", "end_column", "message", "hint"]


def test_formulas_pass_through():
    formulas = {"T_c": {"text": "T_c = ...", "closed": True, "slopes": [1.0, math.inf]}}
    (shown,) = read(DerivedAnswer(3, "derive T_c", "a", "b", {}, formulas))["answers"]
    assert shown["verb"] == "derive"
    assert shown["formulas"] == {"T_c": {"text": "T_c = ...", "closed": True, "slopes": [1.0, None]}}


@given(st.floats())
def test_every_double_round_trips_or_becomes_null(value):
    back = read(answer({"T_c": finding(value)}))["answers"][0]["found"]["T_c"]["value"]
    assert back == (value if math.isfinite(value) else None)
