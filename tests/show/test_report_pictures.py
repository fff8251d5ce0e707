"""What the pictures of a page are made of: which part of a trap they show, how dense the cloud is, where it leaks."""

from __future__ import annotations

import numpy as np
import pytest

import eoscore
from eoscore.constants import K_B
from eoscore.show.report.raised import with_prefixes
from eoscore.show.report.subject import subjects
from eoscore.show.report.view import views_of
from eoscore.show.report.way_out import way_out

pytest.importorskip("matplotlib", reason="the extra `plot` is not installed")

from eoscore.show.report.cloud import Cloud
from eoscore.show.report.contours import Contours
from eoscore.show.report.curves import _around

GAS = "gas strontium { isotope Sr-84 }\n"
FLOOR = "trap can { L = 60 um\n V(x, y) = m*0.3 m/s2*y where abs(x) < 20 um, y > 0 um, y < L }\n"
BOWL = "trap bowl { V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + 4*y^2 + 400*z^2) }\n"
# A beam that sags: the pass lies below the beam, outside the picture of what it holds.
SAG = "trap sag { U = k_B*20 uK\n w = 50 um\n V(x, y) = -U*exp(-2*(x^2 + y^2)/w^2) + m*g_n*y }\n"


def asked(trap, *questions):
    lab = eoscore.loads(GAS + trap + "".join(f"find {each}\n" for each in questions))
    return next(iter(subjects(lab, lab.answers())))


def test_a_bottom_on_a_wall_has_a_picture_from_wall_to_wall():
    subject = asked(FLOOR, "T_c, n_peak for strontium in can with N = 1e4, T = 50 nK")
    (view,) = views_of(subject.trap, subject.temperature)
    (left, right), (low, high) = view.ranges
    assert (left, right) == pytest.approx((-30e-6, 30e-6), rel=0.02, abs=0)
    assert low < 0 < 30e-6 < high


def test_the_peak_of_a_cloud_is_that_of_the_engine():
    subject = asked(FLOOR, "n_peak for strontium in can with N = 1e4, T = 500 nK")
    (view,) = views_of(subject.trap, subject.temperature)
    cloud = Cloud(subject, view)
    want = float(subject.held.find(("n_peak",), {"N": 1e4, "T": 5e-7})["n_peak"].value)
    assert cloud.peak == pytest.approx(want, rel=1e-6)
    assert cloud.at(np.array([np.nan, 0.0, 1e-20])) == pytest.approx([0.0, cloud.peak, 0.0], rel=1e-6)


def test_between_its_points_a_cloud_follows_the_engine():
    subject = asked(BOWL, "T_c for strontium in bowl with N = 1e5")
    (view,) = views_of(subject.trap, subject.temperature)
    cloud, x = Cloud(subject, view), np.linspace(0.0, 2e-5, 7)
    exact = subject.state.profile(x=x, y=0.0, z=0.0)
    assert cloud.at(exact.potential) == pytest.approx(exact.density, rel=0.01, abs=0.005 * cloud.peak)


def test_a_map_is_true_to_scale_where_it_can_be():
    subject = asked(BOWL, "T_c for strontium in bowl with N = 1e5")
    (view,) = views_of(subject.trap, subject.temperature)
    near, far = Contours(view, None, (0, 1)), Contours(view, None, (0, 2))
    assert near.equal
    assert "scales of their own" not in near.words
    assert not far.equal
    assert far.words.endswith("The two axes have scales of their own.")


def test_a_leak_outside_the_picture_has_one_that_reaches_it():
    subject = asked(SAG, "depth for strontium in sag")
    view = next(iter(views_of(subject.trap, None)))
    escape = subject.trap.landscape.escape
    assert not view.shows(escape.position)
    out = way_out(view)
    assert out.view.shows(escape.position)
    assert out.view.shows(subject.trap.r_min)
    assert "Cross: the trap leaks" in Contours(out.view, None, out.pair).words


def test_density_beyond_the_pass_is_not_of_the_cloud():
    """Falling along y beyond the pass, V comes back to where the cloud is."""
    subject = asked(SAG, "depth for strontium in sag")
    view = next(iter(views_of(subject.trap, None)))
    y = np.linspace(-400e-6, 50e-6, 901)
    values = view.energies({**view.at_bottom(), "y": y})
    bottom = int(np.argmin(np.abs(y - subject.trap.r_min[1])))
    held = view.holds(values, (bottom,))
    assert held[bottom]
    assert values[0] < 0
    assert not held[0]


def test_a_gas_that_is_brought_elsewhere_is_shown_at_the_temperature_found_there():
    tight = "trap tight { V(r) = m/2*(2*pi*400 Hz)^2*r^2 }\n"
    subject = asked(BOWL + tight, "T for strontium in tight from bowl with N = 1e5, T = 900 nK")
    bowl = (100 * 200 * 2000) ** (1 / 3)
    assert subject.given == pytest.approx({"N": 1e5, "T": 900e-9 * 400 / bowl}, rel=1e-9)


@pytest.mark.parametrize(
    ("text", "written"),
    [
        (
            "over the pass at y = 0.00973091 m, z = -5.75134e-05 m, towards -z",
            "y = 9.73091 mm, z = -57.5134 µm,",
        ),
        ("at x = 0 m", "at x = 0 m"),
        ("0.1 m/s2 and 1e14 m^-3", "0.1 m/s2 and 1e14 m^-3"),
    ],
)
def test_lengths_in_words_take_a_prefix(text, written):
    assert written in with_prefixes(text)


def test_both_sides_of_a_jump_are_looked_at():
    around = _around(1e-7, 1e-7)
    gap = np.diff(around).min() / 1e-7
    assert gap == pytest.approx(2e-9, rel=1e-3)
    assert around[0] > 0
    assert np.all(np.diff(around) > 0)


def test_the_height_of_a_deep_view_is_that_of_the_escape():
    subject = asked(SAG, "depth for strontium in sag with N = 1e3, T = 50 nK")
    first = next(iter(views_of(subject.trap, 1e-6)))
    assert first.energy == subject.trap.top
    assert first.energy / K_B < 20e-6
