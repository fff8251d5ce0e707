"""Sampled intervals: against first derivatives where these hold, against closed forms where they do not."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.stats import norm

import eoscore
from eoscore.answer.packing import packed, unpacked
from eoscore.answer.record import Piece

TRAP = "gas rubidium { isotope Rb-87 }\ntrap bowl { f = 100(1) Hz\nV(r) = m/2*(2*pi*f)^2*r^2 }\n"
T_C = 209.506613934  # nK, of 1e5 atoms at 100 Hz: kT_c = hbar w (N/zeta(3))^(1/3), Bagnato et al. (1987)


def answer(question, samples=400, trap=TRAP, **aid):
    (only,) = eoscore.loads(f"{trap}find {question}", samples=samples).answers(**aid)
    return only


def found(question, samples=400, trap=TRAP):
    return answer(question, samples, trap).found


@pytest.mark.parametrize("name", ["T_c", "freq"])
def test_half_the_interval_is_sigma_where_the_answer_is_straight(name):
    # A quantile of K draws is uncertain by sqrt(p(1-p)/K)/density: some 6 % of sigma for K = 400.
    finding = found(f"{name} for rubidium in bowl with N = 1.00(3)e5")[name]
    half = (finding.interval.high - finding.interval.low) / 2
    assert half == pytest.approx(finding.sigma, rel=0.2)
    assert np.all(finding.interval.answered == 1)


def test_at_T_c_the_interval_begins_at_zero_and_ends_at_the_quantile():
    """f_0 = max(0, 1 - (T/T_c)^3) falls with T: its upper end is f_0 at the lower quantile of T."""
    trap = TRAP.replace("100(1)", "100")
    finding = found(f"f_0 for rubidium in bowl with N = 1e5, T = {T_C}(5000000000) nK", 1000, trap)["f_0"]
    low = T_C + 5.0 * norm.ppf((1 - 0.6827) / 2)
    assert float(finding.interval.low) == 0.0
    assert float(finding.interval.high) == pytest.approx(1 - (low / T_C) ** 3, rel=0.15)


def test_a_name_used_twice_has_no_interval_where_it_drops_out():
    trap = TRAP.replace("(2*pi*f)^2*r^2", "(2*pi)^2*f^2*r^2*((100 Hz)^2/f^2)")
    finding = found("T_c for rubidium in bowl with N = 1e5", 50, trap)["T_c"]
    assert float(finding.interval.low) == pytest.approx(float(finding.interval.high), rel=1e-12, abs=0)


def test_draws_without_a_sense_are_counted_and_left_out():
    finding = found("T_c for rubidium in bowl with N = 1.0(8)e5", 500)["T_c"]
    assert float(finding.interval.answered) == pytest.approx(norm.cdf(1 / 0.8), abs=0.06)
    assert float(finding.interval.low) > 0


def test_hardly_any_answers_make_no_interval():
    finding = found("T for rubidium in bowl with N = 1e5, f_0 = 0.1(50)", 100)["T"]
    assert float(finding.interval.answered) < 0.3
    assert np.isnan(finding.interval.low)


@pytest.mark.parametrize(
    "question",
    [
        "T_c for rubidium in bowl with N = 1e5, f = 100 Hz",
        "exponent for rubidium in bowl with T = 1 uK, f = 90 Hz",
    ],
)
def test_nothing_is_sampled_where_nothing_is_uncertain(question):
    (finding,) = found(question).values()
    assert finding.interval is None


def test_nothing_is_sampled_unless_asked():
    assert found("T_c for rubidium in bowl with N = 1e5", 0)["T_c"].interval is None


def test_a_grid_has_the_intervals_of_its_points():
    grid = found(
        "f_0 for rubidium in bowl with N = 1.00(5)e5 over T = [150 nK, 209 nK], f = [100 Hz, 110 Hz]", 60
    )["f_0"]
    one = found("f_0 for rubidium in bowl with N = 1.00(5)e5, T = 209 nK, f = 110 Hz", 60)["f_0"]
    assert grid.interval.low.shape == (2, 2)
    # The literals of the two texts come in the same order, and so are drawn alike.
    assert grid.interval.high[1, 1] == pytest.approx(float(one.interval.high), rel=1e-12, abs=0)


def test_chunks_and_a_whole_draw_alike():
    over = "f = even(90 Hz, 110 Hz, 70)"  # more traps than one chunk has
    many = found(f"f_0 for rubidium in bowl with N = 1.00(5)e5, T = 205 nK over {over}", 5)["f_0"].interval
    few = found("f_0 for rubidium in bowl with N = 1.00(5)e5, T = 205 nK over f = [90 Hz, 110 Hz]", 5)[
        "f_0"
    ].interval
    assert many.high[[0, -1]] == pytest.approx(few.high, rel=1e-12, abs=0)


def test_intervals_are_kept_with_the_pieces_of_a_grid():
    finding = found("f_0 for rubidium in bowl with N = 1.00(5)e5 over T = [150 nK, 209 nK]", 20)["f_0"]
    again = unpacked(packed(Piece({"f_0": finding}))).found["f_0"]
    assert np.array_equal(again.interval.high, finding.interval.high)
    assert (again.interval.samples, again.interval.coverage) == (20, 0.6827)
    assert np.array_equal(again.scale, finding.scale)


def test_the_caution_says_how_to_get_an_interval():
    cautions = answer("f_0 for rubidium in bowl with N = 1e5, T = 209(5) nK", 0).cautions
    assert any("--sample 1000" in caution.text for caution in cautions)
