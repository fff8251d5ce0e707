"""Quick looks: axes in units that fit, every line told apart, nothing drawn that is not there."""

from __future__ import annotations

import math

import numpy as np
import pytest

from eoscore.show.band import band_words
from eoscore.show.plotting import NothingToDrawError, draw, undrawable
from eoscore.show.scale import Scale

from .records import answer, finding, report, sampled

pytest.importorskip("matplotlib")

ONE = answer(
    {"T_c": finding([1e-7, 2e-7, math.nan], sigma=[1e-9, 2e-9, math.nan], why="open", points=((2,),))},
    over={"P": [1, 2, 3]},
    units={"P": "W"},
)
SAMPLED = answer(
    {"T_c": sampled([1e-7, 2e-7], [0.9e-7, 1.5e-7], [1.1e-7, 4e-7], sigma=[1e-9, 2e-9])},
    over={"P": [1, 2]},
    units={"P": "W"},
)
MAP = answer(
    {"f_0": finding(np.linspace(0.0, 1.0, 80).reshape(8, 10), "1")},
    over={"N": np.geomspace(1e4, 1e6, 8), "T": np.linspace(1e-7, 5e-7, 10)},
    units={"N": "1", "T": "K"},
    line=9,
)


@pytest.mark.parametrize(("ending", "head"), [("png", b"\x89PNG"), ("svg", b"<?xml"), ("pdf", b"%PDF")])
def test_every_format_is_written_twice_alike(tmp_path, ending, head):
    one, other = (draw(report(ONE), tmp_path / f"{name}.{ending}")[0].read_bytes() for name in "ab")
    assert one.startswith(head)
    assert one == other


def test_several_grids_give_several_files(tmp_path):
    names = [path.name for path in draw(report(ONE, MAP), tmp_path / "scan.png")]
    assert names == ["scan-line7.png", "scan-line9.png"]


def test_lines_have_bands_and_units_that_fit():
    from eoscore.show.figure import figure_of

    (axes,) = figure_of(ONE).axes
    assert (axes.get_xlabel(), axes.get_ylabel()) == ("P (W)", "T_c (nK)")
    np.testing.assert_allclose(axes.lines[0].get_ydata()[:2], [100.0, 200.0], rtol=1e-12)
    assert len(axes.collections) == 1


def test_bands_are_the_sampled_interval_where_there_is_one():
    from eoscore.show.figure import figure_of

    (axes,) = figure_of(SAMPLED).axes
    low, high = axes.collections[0].get_paths()[0].get_extents().get_points()[:, 1]
    assert (low, high) == (pytest.approx(90.0), pytest.approx(400.0))


def test_the_words_say_what_the_bands_are():
    assert band_words(SAMPLED.found.values()) == "Bands: where 68 % of 50 samples of the input lie."
    assert band_words(ONE.found.values()) == "Bands: one standard deviation carried from the input."
    assert band_words(MAP.found.values()) is None


def test_points_without_an_answer_keep_their_room():
    from eoscore.show.figure import figure_of

    (axes,) = figure_of(ONE).axes
    assert axes.get_xlim()[1] > 3.0


def test_a_map_has_the_second_name_across_and_a_bar():
    from eoscore.show.figure import figure_of

    axes, bar = figure_of(MAP).axes
    assert (axes.get_xlabel(), axes.get_ylabel(), axes.get_yscale()) == ("T (nK)", "N", "log")
    assert bar.get_ylabel() == "f_0"


@pytest.mark.parametrize(
    ("values", "unit", "label", "logarithmic"),
    [
        ([1e-7, 2e-7, 3e-7], "K", "x (nK)", False),
        ([1.0, 2.0, 4.0], "W", "x (W)", True),
        ([1e19, 2e19, 3e19], "m^-3", "x ($10^{19}$ m$^{-3}$)", False),
        ([1e11, 2e11, 3e11], "m^3/J", "x ($10^{11}$ m$^{3}$/J)", False),
        ([0.0, 0.0, 0.0], "1", "x", False),
    ],
)
def test_a_scale_reads_well(values, unit, label, logarithmic):
    scale = Scale.of(np.array(values), unit, "x")
    assert (scale.label, scale.logarithmic) == (label, logarithmic)


def test_without_a_grid_there_is_nothing_to_draw(tmp_path):
    with pytest.raises(NothingToDrawError, match=r"no question of pancake\.tarn has a grid"):
        draw(report(answer({"U": finding(1.0, "J")})), tmp_path / "a.png")


def test_what_cannot_be_drawn_is_known_beforehand(tmp_path):
    assert "the formats are .png, .svg, .pdf" in undrawable(tmp_path / "a.gif")
    assert "does not exist" in undrawable(tmp_path / "none" / "a.png")
    assert undrawable(tmp_path / "a.png") is None
