"""Slow changes at constant N and S."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.errors import NoAnswerError
from eoscore.state import hold

from .places import MASS, Bare, bent, box, gas, harmonic, held, power, uniform

PLACES = {
    "harmonic": harmonic(),
    "tight": harmonic(400.0),
    "linear": power(1.0),
    "bent": bent(),
    "box": box(),
}


@settings(max_examples=25, deadline=None)
@given(
    *[st.sampled_from(sorted(PLACES))] * 2,
    st.floats(0.05, 5.0),
    st.sampled_from(["bose", "fermi", "classical"]),
)
def test_there_and_back(one, other, t, statistics):
    here, there = held(PLACES[one], statistics), held(PLACES[other], statistics)
    T = t * held(PLACES[one]).T_c(N=1e5)
    start = here.state(N=1e5, T=T)
    end = here.brought_from(there.brought_from(start))
    assert pytest.approx(T, rel=1e-9, abs=0) == end.T
    assert end.f_0 == pytest.approx(start.f_0, abs=1e-9)


def test_a_chain_is_its_last_change():
    chain = [held(place) for place in (harmonic(), bent(), power(1.0))]
    start = chain[0].state(N=1e5, T=[80e-9, 300e-9])
    by_steps = chain[2].brought_from(chain[1].brought_from(start))
    assert (
        pytest.approx(chain[2].brought_from(chain[0], N=1e5, T=[80e-9, 300e-9]).T, rel=1e-12, abs=0)
        == by_steps.T
    )


def test_into_a_dimple():
    """A small tight well in a wide trap condenses a gas that was above T_c, reversibly.

    The order of size is that of Stamper-Kurn et al., Phys. Rev. Lett. 81, 2194 (1998): some ten per cent.
    """
    wide = harmonic(20.0).measure
    dimple = Bare(wide.cut(np.inf))
    dimple._measure = type(wide)([(wide.terms[0][0] * 3e-3, 1.5), (wide.terms[0][0] * 1e29**1.5 * 3e-3, 3.0)])
    start = held(harmonic(20.0)).state(N=1e6, T=1.05 * held(harmonic(20.0)).T_c(N=1e6))
    end = held(dimple).brought_from(start)
    assert start.f_0 == 0
    assert 0 < end.f_0 < 0.9


def test_points_without_a_state_have_none_after():
    end = held(power(1.0)).brought_from(held(harmonic()).state(N=1e5, T=[1e-7, -1.0]))
    assert np.ma.getmaskarray(end.T).tolist() == [False, True]


def test_only_a_gas_with_a_number_can_be_brought():
    with pytest.raises(NoAnswerError, match="in the first place: a uniform gas has no number"):
        held(harmonic()).brought_from(held(uniform()).state(n=1e18, T=1e-7))


def test_the_gas_stays_the_same():
    with pytest.raises(NoAnswerError, match="a slow change keeps the gas"):
        held(harmonic(), "fermi").brought_from(held(harmonic()).state(N=1e5, T=1e-7))


def test_spill_tells_the_share():
    cut = hold(gas(), harmonic(top=40e-30))
    spilling = cut.brought_from(held(harmonic()), N=1e4, T=400e-9)
    assert "lie above the escape energy" in spilling.spill[0]
    assert "%" in spilling.spill[0]
    assert cut.brought_from(held(harmonic()), N=1e4, T=50e-9).spill == ()
    assert MASS > 0
