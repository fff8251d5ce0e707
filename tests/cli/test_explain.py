"""The verb `explain`."""

from __future__ import annotations

import os
import re
import subprocess
import sys

from click.testing import CliRunner

from eoscore.cli import command
from eoscore.show.glossary import glossary


def run(*words):
    return CliRunner().invoke(command, ["explain", *words], standalone_mode=False)


def test_a_name_is_told_with_formula_unit_and_source():
    shown = run("freq")
    assert shown.return_value == 0
    for word in ("freq: quantity", "formula:", "unit:    Hz", "source:"):
        assert word in shown.output


def test_every_name_is_told():
    """Quantities, functions, constants, units, words, dispersions, shelf functions and cautions, in one call."""
    names = sorted(glossary())
    shown = run(*names)
    assert shown.return_value == 0
    heads = re.findall(r"^(\S+): (?:[a-z].*)$", shown.output, re.MULTILINE)
    assert set(names) <= set(heads)
    assert len(names) > 150


def test_an_unknown_name_is_answered_with_the_near_ones():
    shown = run("tc", "freq")
    assert shown.return_value == 1
    assert "`tc` is no name of the language; did you mean T_c" in shown.output
    assert "freq: quantity" in shown.output


def test_a_name_like_nothing_points_to_the_reference():
    assert "grammar/README.md" in run("qqqqqqq").output


def test_the_shell_completes_names():
    """As click's own completion asks the command."""
    words = {"_EOSCORE_COMPLETE": "bash_complete", "COMP_WORDS": "eoscore explain lamb", "COMP_CWORD": "2"}
    shown = subprocess.run(
        [sys.executable, "-m", "eoscore"], env=os.environ | words, capture_output=True, text=True, check=True
    )
    assert "plain,lambda_T" in shown.stdout
