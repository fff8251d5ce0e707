"""The verb `explain`."""

from __future__ import annotations

from click.testing import CliRunner

from eoscore.cli import command


def run(*words):
    return CliRunner().invoke(command, ["explain", *words], standalone_mode=False)


def test_a_name_is_told_with_formula_unit_and_source():
    shown = run("freq")
    assert shown.return_value == 0
    for word in ("freq: quantity", "formula:", "unit:    Hz", "source:"):
        assert word in shown.output


def test_an_unknown_name_is_answered_with_the_near_ones():
    shown = run("tc", "freq")
    assert shown.return_value == 1
    assert "`tc` is no name of the language; did you mean T_c" in shown.output
    assert "freq: quantity" in shown.output


def test_a_name_like_nothing_points_to_the_reference():
    assert "grammar/README.md" in run("qqqqqqq").output
