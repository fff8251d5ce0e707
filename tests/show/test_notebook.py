"""Notebooks: the magic, the displays, and a notebook that is run."""

from __future__ import annotations

import pytest

pytest.importorskip("IPython", reason="the extra `notebook` is not installed")

from IPython.core.completer import provisionalcompleter
from IPython.core.interactiveshell import InteractiveShell

CELL = """\
gas strontium {
    isotope Sr-84
}

trap bowl {
    V(x, y, z) = m/2*(2*pi*120 Hz)^2*(x^2 + y^2 + 4*z^2)
}

find T_c for strontium in bowl with N = 2e5
derive T_c for strontium in bowl
"""


@pytest.fixture(scope="module")
def shell():
    with pytest.MonkeyPatch.context() as patch:
        patch.delenv("VIRTUAL_ENV", raising=False)  # of whoever runs the tests: it may be another one
        shell = InteractiveShell()
    shell.run_line_magic("load_ext", "eoscore")
    return shell


@pytest.fixture(scope="module")
def answers(shell):
    return shell.run_cell_magic("tarn", "lab", CELL)


def shown(shell, thing, kind="text/html"):
    return shell.display_formatter.format(thing)[0].get(kind, "")


def test_a_cell_returns_its_answers_and_keeps_its_lab(shell, answers):
    """k T_c = hbar omega (N/zeta(3))^(1/3) with the geometric mean of the frequencies, Bagnato et al. (1987)."""
    assert len(answers) == 2
    assert float(answers[0].found["T_c"].value) == pytest.approx(399.085e-9, rel=1e-5)
    assert shell.user_ns["lab"].contents() == "1 gas, 1 place, 2 questions"
    assert "399.085 nK" in repr(answers)
    assert "399.085 nK" in answers._repr_html_()


def test_a_faulty_cell_is_told_without_a_trace(shell, capsys):
    assert shell.run_cell_magic("tarn", "", "f = 2 khz") is None
    assert "<cell>:1:7: `khz` came" in capsys.readouterr().err


def test_what_a_lab_hands_out_shows_itself(shell, answers):
    lab = shell.user_ns["lab"]
    held = lab["strontium"].held_in(lab["bowl"])
    assert "kg" in shown(shell, lab["strontium"])
    assert "trap bowl {" in shown(shell, lab["bowl"])
    assert "unbounded" in shown(shell, lab["uniform"])
    assert "<table>" in shown(shell, held)
    assert "f_0" in shown(shell, held.state(N=2e5, T=150e-9))
    assert "<math" in shown(shell, answers[1])
    assert r"\zeta" in shown(shell, answers[1], "text/latex")


def completed(shell, text):
    """What the shell offers at the end of a text, as a notebook's front end asks it."""
    with provisionalcompleter():
        return {text[: each.start] + each.text for each in shell.Completer.completions(text, len(text))}


def test_names_are_completed(shell, answers):
    assert shell.user_ns["lab"]._ipython_key_completions_() == ["strontium", "bowl", "uniform"]
    shell.run_cell("held = lab['strontium'].held_in(lab['bowl'])\nstate = held.state(N=2e5, T=1e-7)")
    assert {"state.f_0", "state.C_N", "state.n_peak"} <= completed(shell, "state.")


@pytest.mark.parametrize(
    ("begun", "whole"),
    [
        ("%%tarn\ngas g { waist = 3 um\n}\nfind f", {"find f_0", "find freq"}),
        ("%%tarn\nwaist = 3 um\ntrap t { V(x) = w", {"trap t { V(x) = waist"}),
        ("%%tarn lab\ntrap t { a = bess", {"trap t { a = besselj"}),
        ("%%tarn\ntrap hollow { }\nfind freq for g in ho", {"find freq for g in hollow"}),
    ],
)
def test_names_of_a_cell_are_completed_in_it(shell, begun, whole):
    head = begun[: begun.rindex("\n") + 1]
    assert {f"{head}{line}" if "\n" not in line else line for line in whole} <= completed(shell, begun)


def test_parameters_are_completed_where_a_gas_is_held(shell, answers):
    shell.run_cell_magic(
        "tarn", "knobs", CELL.replace("120 Hz", "f").replace("trap bowl {", "trap bowl { f = 9 Hz\n")
    )
    offered = completed(shell, 'knobs["strontium"].held_in(knobs["bowl"], f')
    assert 'knobs["strontium"].held_in(knobs["bowl"], f=' in offered


def test_a_notebook_with_the_magic_is_run():
    """A faulty cell stops nothing."""
    nbclient = pytest.importorskip("nbclient", reason="nbclient is not installed")
    nbformat = pytest.importorskip("nbformat")
    pytest.importorskip("ipykernel", reason="there is no kernel")
    cells = ["%load_ext eoscore", "%%tarn lab\n" + CELL, "%%tarn\nf = 2 khz", "print(lab.contents())"]
    book = nbformat.v4.new_notebook(cells=[nbformat.v4.new_code_cell(cell) for cell in cells])
    nbclient.NotebookClient(book, timeout=120, kernel_name="python3").execute()
    _, answered, faulty, told = (cell.outputs for cell in book.cells)
    (output,) = (each for each in answered if each.output_type == "execute_result")
    assert "399.085 nK" in output["data"]["text/html"]
    assert output["data"]["text/plain"].startswith("line 9: find T_c for strontium in bowl with N = 2e5")
    assert [each.name for each in faulty] == ["stderr"]
    assert "<cell>:1:7: `khz` came" in faulty[0].text
    assert told[0].text == "1 gas, 1 place, 2 questions\n"
