"""Slow changes from place to place as files ask for them: into the condensate, out of it, and over the edge."""

from __future__ import annotations

import pytest

import eoscore

LAB = """gas rubidium { isotope Rb-87 }
trap box { volume = 1e-4 mm3 }
trap bowl { f = 100 Hz
V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2) }
trap wedge { V(x, y, z) = k_B*10 nK/(1 um)*(abs(x) + abs(y) + abs(z)) }
trap shallow { V(x, y, z) = -k_B*0.5 uK*exp(-2*(x^2 + y^2 + z^2)/(50 um)^2) }
"""


def answer(question):
    (only,) = eoscore.loads(f"{LAB}find {question}").answers()
    return only


def critical(place):
    return repr(float(answer(f"T_c for rubidium in {place} with N = 1e5").found["T_c"].value))


@pytest.mark.parametrize(
    ("way", "start", "fraction"),
    [
        ("bowl from box", "box", 0.643549656481),
        ("wedge from box", "box", 0.759868134395),
        ("wedge from bowl", "bowl", 0.326324493802),
        ("wedge from box from bowl", "box", 0.759868134395),
        ("wedge from bowl from box", "bowl", 0.326324493802),
    ],
)
def test_from_T_c_into_the_condensate(way, start, fraction):
    """N_0/N = 1 - S_i/S_f with the critical entropies of Bagnato, Pritchard, Kleppner, Phys. Rev. A 35, 4354 (1987).

    The number of dimensions and the sum of the powers of the wedge are those of V ~ r.
    """
    found = answer(f"f_0, N for rubidium in {way} with N = 1e5, T = {critical(start)} K").found
    assert float(found["f_0"].value) == pytest.approx(fraction, rel=1e-10, abs=0)
    assert float(found["N"].value) == pytest.approx(1e5, rel=1e-15, abs=0)


def test_out_of_the_condensate_and_back():
    found = answer("f_0, T for rubidium in bowl from bowl from box with N = 1e5, T = 150 nK").found
    assert (
        float(answer("f_0 for rubidium in box from bowl with N = 1e5, T = 190 nK").found["f_0"].value) == 0.0
    )
    assert float(found["T"].value) == pytest.approx(150e-9, rel=1e-11, abs=0)


@pytest.mark.parametrize(
    "conditions", ["N = 1e5, f_0 = 0.4", "T = 150 nK, f_0 = 0.4", "N = 1e5, S = 1e-18 J/K"]
)
def test_the_start_may_be_any_pair(conditions):
    here = answer(f"T, f_0, S for rubidium in bowl with {conditions}").found
    there = answer(f"T, f_0, S for rubidium in bowl from bowl with {conditions}").found
    for name in here:
        assert float(there[name].value) == pytest.approx(float(here[name].value), rel=1e-11, abs=0)


@pytest.mark.parametrize(
    ("T", "words"),
    [
        ("60 nK", None),
        ("240 nK", "% of the atoms would lie above the escape energy"),
        ("500 nK", "do not fit below"),
    ],
)
def test_atoms_that_would_spill_are_told(T, words):
    cautions = {
        each.code: each.text
        for each in answer(f"T for rubidium in shallow from bowl with N = 1e5, T = {T}").cautions
    }
    assert ("spill" in cautions) is (words is not None)
    assert (words or "") in cautions.get("spill", "")


def test_parameters_hold_in_every_place_and_grids_go_through_the_chain():
    found = answer("T for rubidium in bowl from bowl with N = 1e5, T = 150 nK over f = [50 Hz, 100 Hz]").found
    assert found["T"].value == pytest.approx(150e-9, rel=1e-11, abs=0)
