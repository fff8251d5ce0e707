"""The command line: exit statuses, streams, options, and that no traceback ever reaches a user."""

from __future__ import annotations

import io
import json
import os
import signal
import subprocess
import sys

import numpy as np
import pytest
from scipy import constants, special

from eoscore.cli import main
from eoscore.cli.demo import demo_names

BOWL = """\
gas strontium { m = 84 u }
trap bowl {
    f = 100 Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2)
}
find T_c for strontium in bowl with N = 1e5
"""
FAULTY = BOWL + "find T_c for strontium in bowel with N = 1e5\nfind T_c for strontium in bowl with N = 3 m\n"


@pytest.fixture
def eoscore(tmp_path, monkeypatch, capsys):
    """Run the command in an empty folder: exit status, standard output, standard error."""
    monkeypatch.chdir(tmp_path)

    def run(*arguments, stdin=b""):
        monkeypatch.setattr(sys, "argv", ["eoscore", *map(str, arguments)])
        monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(stdin)))
        with pytest.raises(SystemExit) as left:
            main()
        shown = capsys.readouterr()
        assert "Traceback" not in shown.out + shown.err
        return left.value.code, shown.out, shown.err

    return run


@pytest.fixture
def bowl(tmp_path):
    path = tmp_path / "bowl.tarn"
    path.write_text(BOWL)
    return path


def bowl_T_c(number=1e5, frequency=100.0):
    """kT_c = hbar w (N/zeta(3))^(1/3), w the geometric mean: Bagnato et al., PRA 35, 4354 (1987), from memory."""
    omega = 2 * np.pi * frequency * 2 ** (1 / 3)
    return constants.hbar * omega * (number / special.zeta(3)) ** (1 / 3) / constants.k


def test_a_run_answers_and_leaves_with_zero(eoscore, bowl):
    status, out, err = eoscore("run", bowl)
    assert (status, err) == (0, "")
    assert "T_c" in out
    assert f"{bowl_T_c() * 1e9:.3f}" in out


def test_json_stands_alone_on_standard_output(eoscore, bowl):
    status, out, err = eoscore("run", bowl, "--json")
    assert (status, err) == (0, "")
    (answer,) = json.loads(out)["answers"]
    assert answer["found"]["T_c"]["value"] == pytest.approx(bowl_T_c(), rel=1e-12, abs=0)
    assert (answer["line"], answer["verb"], answer["from"]) == (6, "find", None)


def test_a_dash_reads_standard_input(eoscore):
    status, out, _ = eoscore("run", "-", "--json", stdin=BOWL.encode())
    assert status == 0
    assert len(json.loads(out)["answers"]) == 1


def test_settings_override_parameters_and_conditions(eoscore, bowl):
    assert "set from outside: f=50 Hz" in eoscore("run", bowl, "--set", "f=50 Hz")[1]
    _, out, _ = eoscore("run", bowl, "--json", "--set", "f=50 Hz")
    assert json.loads(out)["answers"][0]["found"]["T_c"]["value"] == pytest.approx(bowl_T_c(frequency=50.0))


@pytest.mark.parametrize("setting", ["f", "f=", "g=1 Hz", "f=3 m", "=3", "f=1 Hz; g=2", "f=\x00"])
def test_a_bad_setting_is_a_complaint(eoscore, bowl, setting):
    status, out, err = eoscore("run", bowl, "--set", setting)
    assert (status, out) == (1, "")
    assert err


def test_all_faults_are_told_in_one_pass_with_the_place_marked(eoscore, tmp_path):
    (tmp_path / "faulty.tarn").write_text(FAULTY)
    status, out, err = eoscore("run", "faulty.tarn")
    assert (status, out) == (1, "")
    assert "faulty.tarn:7:27" in err
    assert "faulty.tarn:8:" in err
    assert "^^^^^" in err
    assert "2 faults found" in err


def test_with_json_the_complaints_stand_in_the_document_too(eoscore, tmp_path):
    (tmp_path / "faulty.tarn").write_text(FAULTY)
    status, out, err = eoscore("run", "faulty.tarn", "--json")
    document = json.loads(out)
    assert status == 1
    assert document["answers"] == []
    assert [complaint["line"] for complaint in document["complaints"]] == [7, 8]
    assert "2 faults found" in err


@pytest.mark.parametrize("text", ["", "# nothing\n", "\ufeff"], ids=["empty", "comment", "byte order mark"])
def test_a_text_without_questions_is_fine(eoscore, text):
    status, out, _ = eoscore("run", "-", "--json", stdin=text.encode())
    assert status == 0
    assert json.loads(out)["answers"] == []


@pytest.mark.parametrize(
    "text",
    [b"\xff\xfe", b"gas \x00 {", b"((((" * 20_000, b"find" + b" x" * 5],
    ids=["UTF-8", "NUL", "deep", "words"],
)
def test_broken_texts_are_complaints(eoscore, text):
    status, _, err = eoscore("run", "-", stdin=text)
    assert status == 1
    assert "<stdin>:1" in err


@pytest.mark.parametrize(
    "arguments",
    [
        ["run"],
        ["run", "none.tarn"],
        ["run", "."],
        ["run", "bowl.tarn", "--out", "scan.txt"],
        ["run", "bowl.tarn", "--out", "none/scan.csv"],
        ["run", "bowl.tarn", "--accuracy", "0"],
        ["run", "bowl.tarn", "--accuracy", "fine"],
        ["run", "bowl.tarn", "--workers", "0"],
        ["run", "bowl.tarn", "--colour"],
        ["fly"],
        ["demo", "none"],
        ["demo", "pancake", "--write", "none"],
        ["run", "a\x00b"],
    ],
    ids=" ".join,
)
def test_wrong_use_leaves_with_two(eoscore, bowl, arguments):
    status, out, err = eoscore(*arguments)
    assert (status, out) == (2, "")
    assert err


def test_check_computes_nothing(eoscore, bowl):
    status, out, _ = eoscore("check", bowl)
    assert status == 0
    assert "1 gas, 1 place, 1 question" in out


def test_check_tells_faults(eoscore):
    status, out, err = eoscore("check", "-", "--json", stdin=FAULTY.encode())
    assert status == 1
    assert len(json.loads(out)["complaints"]) == 2
    assert "<stdin>:7:27" in err


def test_plugins_are_listed_with_units_and_origin(eoscore):
    status, out, _ = eoscore("plugins")
    assert status == 0
    for words in ("free", "relativistic", "trapped", "package eoscore", "antiparticles", "omega_z", "rad/s"):
        assert words in out


def test_demos_are_listed_with_their_titles(eoscore):
    status, out, _ = eoscore("demo")
    assert status == 0
    assert [line.split()[0] for line in out.splitlines()] == demo_names()
    assert "photon gas" in out


def test_a_demo_is_copied_out_and_not_over_another_file(eoscore, tmp_path):
    assert eoscore("demo", "photons", "--write", tmp_path)[0] == 0
    assert eoscore("demo", "photons", "--write", tmp_path)[0] == 0
    assert eoscore("check", "photons.tarn")[0] == 0
    (tmp_path / "photons.tarn").write_text("mine")
    status, _, err = eoscore("demo", "photons", "--write", tmp_path)
    assert (status, (tmp_path / "photons.tarn").read_text()) == (2, "mine")
    assert "left as it is" in err


def test_a_grid_is_written_and_shown(eoscore, tmp_path):
    (tmp_path / "grid.tarn").write_text(BOWL.replace("with N = 1e5", "over N = geometric(1e3, 1e5, 3)"))
    status, out, err = eoscore("run", "grid.tarn", "--json", "--out", "grid.csv")
    assert status == 0
    assert "grid.csv" in err
    values = json.loads(out)["answers"][0]["found"]["T_c"]["value"]
    assert values == pytest.approx([bowl_T_c(number) for number in (1e3, 1e4, 1e5)], rel=1e-12, abs=0)
    assert "T_c (K)" in (tmp_path / "grid.csv").read_text()


def test_an_accuracy_out_of_reach_leaves_with_three_and_gives_the_answer(eoscore, bowl):
    status, out, err = eoscore("run", bowl, "--accuracy", "1e-30", "--json")
    assert status == 3
    assert json.loads(out)["answers"][0]["found"]["T_c"]["value"] == pytest.approx(bowl_T_c())
    assert "wanted 1e-30" in err


def test_a_fault_of_our_own_takes_no_other_question_with_it(eoscore, tmp_path, monkeypatch):
    from eoscore.answer import asking

    def fail_in_line_7(program, question, *rest):
        if question.line == 7:
            raise ZeroDivisionError("of all things")
        return answer_to(program, question, *rest)

    answer_to = asking.answer_to
    monkeypatch.setattr(asking, "answer_to", fail_in_line_7)
    (tmp_path / "two.tarn").write_text(BOWL + "find freq for strontium in bowl\n")
    status, out, err = eoscore("run", "two.tarn", "--json")
    document = json.loads(out)
    assert status == 1
    assert [answer["line"] for answer in document["answers"]] == [6]
    assert "this is a bug in eoscore" in document["complaints"][0]["message"]
    assert "the other questions were answered" in err


def test_a_fault_of_our_own_while_reading_is_one_calm_line(eoscore, bowl, monkeypatch):
    def fail(*_arguments, **_options):
        raise ZeroDivisionError("of all things")

    monkeypatch.setattr("eoscore.answer.lab.loads", fail)
    status, out, err = eoscore("run", bowl)
    assert (status, out) == (1, "")
    assert err.count("\n") == 1
    assert "this is a bug in eoscore" in err


def started(*arguments, **options):
    return subprocess.Popen([sys.executable, "-m", "eoscore", *map(str, arguments)], **options)


def test_a_reader_that_leaves_early_is_no_fault():
    read, write = os.pipe()
    os.close(read)
    process = started("demo", stdout=write, stderr=subprocess.PIPE)
    os.close(write)
    _, err = process.communicate(timeout=60)
    assert (process.returncode, err) == (141, b"")


def test_an_interrupt_is_answered_calmly():
    process = started("run", "-", stdin=subprocess.PIPE, stderr=subprocess.PIPE)
    process.stdin.write(b"#")
    process.stdin.flush()
    try:
        process.wait(timeout=3)  # it waits for the rest of its standard input
    except subprocess.TimeoutExpired:
        process.send_signal(signal.SIGINT)
    _, err = process.communicate(timeout=60)
    assert process.returncode == 130
    assert b"interrupted" in err
    assert b"Traceback" not in err


def test_a_screen_without_greek_letters_still_shows_the_answer(bowl):
    environment = os.environ | {"PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}
    process = started("run", bowl, stdout=subprocess.PIPE, stderr=subprocess.PIPE, env=environment)
    out, err = process.communicate(timeout=60)
    assert (process.returncode, err) == (0, b"")
    assert b"T_c" in out
