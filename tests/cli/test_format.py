"""The verb `format`."""

from __future__ import annotations

import pytest
from click.testing import CliRunner

from eoscore.cli import command


def run(*words, text=None):
    return CliRunner().invoke(command, ["format", *map(str, words)], input=text, standalone_mode=False)


@pytest.fixture
def file(tmp_path):
    path = tmp_path / "a.tarn"
    path.write_text("a=1  #one\n")
    return path


def test_the_layout_is_written_out_and_the_file_left(file):
    assert run(file).output == "a = 1  #one\n"
    assert file.read_text() == "a=1  #one\n"


def test_a_file_is_rewritten_and_then_in_order(file):
    assert run(file, "--check").return_value == 1
    assert run(file, "--write").return_value == 0
    assert file.read_text() == "a = 1  #one\n"
    assert run(file, "--check").return_value == 0


def test_standard_input_is_laid_out():
    assert run("-", text="b = 2*  c").output == "b = 2*c\n"


def test_a_faulty_file_is_left_with_its_complaints(file):
    file.write_text("a = 2 khz\n")
    shown = run(file, "--write")
    assert shown.return_value == 1
    assert "`khz` came" in shown.output
    assert file.read_text() == "a = 2 khz\n"


@pytest.mark.parametrize("words", [("-", "--write"), ("x.tarn", "--check", "--write")])
def test_options_that_do_not_fit_are_told(words):
    assert "choose one" in str(run(*words).exception) or "wants a FILE" in str(run(*words).exception)
