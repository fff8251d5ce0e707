"""The page of a file: whole, self-contained, linked, and readable by eye, keyboard and machine."""

from __future__ import annotations

import re
from hashlib import sha256
from xml.etree import ElementTree as ET

import pytest
from click.testing import CliRunner

from eoscore.cli import command

pytest.importorskip("matplotlib", reason="the extra `plot` is not installed")

TEXT = """\
# A bowl of strontium <above a beam>
gas strontium {
    isotope Sr-84
}

trap bowl {
    P = 2 W
    f = 120(2) Hz
    V(x, y) = m/2*(2*pi*f)^2*(x^2 + y^2)
    E_max = k_B*2 uK
}

trap wide {
    V(x, y) = m/2*(2*pi*20 Hz)^2*(x^2 + y^2)
}

find freq, depth, T_c for strontium in bowl with N = 2.0(1)e5
find f_0, kappa_T for strontium in bowl with N = 2e5, T = 100 nK
find T_c for strontium in bowl with N = 2e5 over f = [60 Hz, 120 Hz]
derive N_c for strontium in wide with T = 100 nK
"""


@pytest.fixture(scope="module")
def page(tmp_path_factory):
    folder = tmp_path_factory.mktemp("page")
    (folder / "bowl.tarn").write_text(TEXT)
    words = ["report", str(folder / "bowl.tarn"), "--out", str(folder / "bowl.html")]
    shown = CliRunner().invoke(command, words, standalone_mode=False)
    assert shown.return_value == 0, shown.output
    return folder / "bowl.html"


@pytest.fixture(scope="module")
def text(page):
    return page.read_text(encoding="utf-8")


def test_the_page_asks_the_network_for_nothing(text):
    assert not re.findall(r'(?:src|href)="(?!#|data:)[^"]*"', text)
    assert not re.findall(r"url\((?!#)|@import|<script", text)


def test_every_link_leads_somewhere_and_ids_are_unique(text):
    ids = re.findall(r' id="([^"]+)"', text)
    assert len(ids) == len(set(ids))
    assert set(re.findall(r'href="#([^"]+)"', text)) <= set(ids)


def test_answers_come_first_and_link_to_their_lines(text):
    order = [text.index(f'id="{name}"') for name in ("hardware", "answers", "traps", "curves", "source")]
    assert order == sorted(order)
    for number, line in enumerate((17, 18, 19, 20), 1):
        assert f'href="#L{line}"' in text
        assert f'href="#answer-{number}"' in text


@pytest.mark.parametrize(
    "words",
    [
        "class 4",
        "no value: ",
        "numerical error",
        "Uncertainty budget",
        "<math ",
        "How it was derived",
        "SHA-256",
    ],
)
def test_the_page_tells(text, words):
    assert words in text


def test_the_hash_is_that_of_the_input(text):
    assert sha256(TEXT.encode()).hexdigest() in text


def test_words_of_the_file_are_no_markup(text):
    assert "<title>A bowl of strontium &lt;above a beam&gt;</title>" in text
    assert "<above" not in text


def test_every_picture_has_a_name_and_words(text):
    pictures = re.findall(r"<figure>.*?</figure>", text, re.DOTALL)
    assert len(pictures) >= 7
    for picture in pictures:
        name = re.search(r'aria-labelledby="([^"]+)"', picture)[1]
        assert re.search(rf'<title id="{name}">.+?</title>', picture)
        assert len(re.search(r"<figcaption>(.*)</figcaption>", picture, re.DOTALL)[1]) > 60


def test_pictures_and_formulas_are_well_formed(text):
    for part in re.findall(r"<svg .*?</svg>|<math .*?</math>", text, re.DOTALL):
        ET.fromstring(part)  # noqa: S314  our own page


def test_the_page_is_light(text):
    assert len(text) < 3_000_000


def test_the_same_input_gives_the_same_page(page, text):
    again = page.with_name("again.html")
    words = ["report", str(page.with_name("bowl.tarn")), "--out", str(again)]
    CliRunner().invoke(command, words, standalone_mode=False)
    assert again.read_text(encoding="utf-8") == text


def reported(*words):
    return CliRunner().invoke(command, ["report", *map(str, words)], standalone_mode=False)


@pytest.mark.parametrize(
    ("out", "words"),
    [
        ("none/a.html", r"the folder .*none does not exist"),
        (".", r"is a folder"),
        ("a.tarn", r"a.tarn is the file that the page is about; give the page another name"),
    ],
)
def test_where_no_page_can_be_written_is_told_before_anything_is_computed(tmp_path, out, words):
    source = tmp_path / "a.tarn"
    source.write_text("f = 2 khz")
    shown = reported(source, "--out", tmp_path / out)
    assert re.search(words, str(shown.exception))
    assert source.read_text() == "f = 2 khz"


def test_a_missing_file_is_told(tmp_path):
    assert "cannot be read" in str(reported(tmp_path / "no.tarn", "--out", tmp_path / "a.html").exception)


def test_without_matplotlib_the_extra_is_named(tmp_path, monkeypatch):
    monkeypatch.setattr("importlib.util.find_spec", lambda name: None)
    (tmp_path / "a.tarn").write_text("")
    shown = reported(tmp_path / "a.tarn", "--out", tmp_path / "a.html")
    assert "matplotlib" in str(shown.exception)
    assert "pip install 'eoscore[plot]'" in str(shown.exception)


def test_an_empty_file_has_a_page(tmp_path):
    (tmp_path / "a.tarn").write_text("")
    assert reported(tmp_path / "a.tarn", "--out", tmp_path / "a.html").return_value == 0
    assert "SHA-256" in (tmp_path / "a.html").read_text()


def test_a_number_short_of_the_accuracy_is_on_the_page_and_in_the_status(tmp_path):
    """Exit status 3, as of `run`."""
    text = "gas g { isotope Sr-84 }\ntrap t { V(r) = k_B*1 uK*((r/(9 um))^2 + (r/(9 um))^3) }\n"
    (tmp_path / "a.tarn").write_text(text + "find T_c for g in t with N = 1e5\n")
    shown = reported(tmp_path / "a.tarn", "--out", tmp_path / "a.html", "--accuracy", "1e-16")
    assert shown.return_value == 3
    assert "was not reached" in (tmp_path / "a.html").read_text()


def test_intervals_of_samples_are_on_the_page_and_in_its_command(tmp_path):
    text = "gas g { isotope Sr-84 }\ntrap t { f = 80(9) Hz\nV(r) = m/2*(2*pi*f*r)^2 }\n"
    asked = "find T_c for g in t with N = 1e5\nfind T_c for g in t over N = [1e4, 1e5]\n"
    (tmp_path / "a.tarn").write_text(text + asked)
    assert reported(tmp_path / "a.tarn", "--out", tmp_path / "a.html", "--sample", 20).return_value == 0
    page = (tmp_path / "a.html").read_text()
    for words in ("T_c: 68 % of 20 samples lie", "low T_c", "Bands: where 68 % of 20", "--sample 20 --out"):
        assert words in page


def test_a_trap_that_holds_in_a_grid_only_is_shown_from_there(tmp_path):
    text = "gas g { isotope Sr-84 }\ntrap t { P = 0 W\nV(x) = P*(1 s/m)*abs(x) }\n"
    (tmp_path / "a.tarn").write_text(
        text + "find S for g in t with N = 9, T = 1 nK over P = [0 W, 1e-24 W]\n"
    )
    assert reported(tmp_path / "a.tarn", "--out", tmp_path / "a.html").return_value == 0
    assert "g in t at P = 1e-24 W: cut along x" in (tmp_path / "a.html").read_text()


def test_a_faulty_file_has_no_page(tmp_path):
    (tmp_path / "a.tarn").write_text("f = 2 khz")
    words = ["report", str(tmp_path / "a.tarn"), "--out", str(tmp_path / "a.html")]
    assert CliRunner().invoke(command, words, standalone_mode=False).return_value == 1
    assert not (tmp_path / "a.html").exists()
