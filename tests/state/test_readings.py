"""Readings: units, words, errors that hold, and how states show themselves."""

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state import Reading, Reason, reading_of
from eoscore.state.table import QUANTITIES

from .places import bent, box, harmonic, held, power, sampled, uniform

CLOSED = ("N", "mu", "U", "S", "f_0", "n_peak", "C_N")


def exact(a, scale, N, T):
    """mu, U, S, f_0 and C of bosons over Omega = (E/scale)^a by mpmath at 25 digits."""
    with mpmath.workdps(25):
        kT = mpmath.mpf(K_B) * mpmath.mpf(T)
        M = mpmath.gamma(a + 1) * (kT / mpmath.mpf(scale)) ** a

        def g(s, alpha):
            return mpmath.polylog(s, mpmath.exp(-alpha)).real if alpha else mpmath.zeta(s)

        if M * mpmath.zeta(a) <= N:
            C = a * (a + 1) * mpmath.zeta(a + 1) * M
            return {
                "mu": 0.0,
                "U": float(a * kT * M * mpmath.zeta(a + 1)),
                "f_0": float(1 - M * mpmath.zeta(a) / N),
                "C_N": float(C * K_B),
            }
        alpha = mpmath.findroot(
            lambda x: mpmath.log(M * g(a, x) / N),
            (mpmath.mpf("1e-3"), mpmath.mpf(3)),
            solver="anderson",
            tol=1e-40,
            maxsteps=200,
        )
        C = a * (a + 1) * g(a + 1, alpha) / g(a, alpha) - a**2 * g(a, alpha) / g(a - 1, alpha)
        return {
            "mu": float(-alpha * kT),
            "U": float(a * kT * M * g(a + 1, alpha)),
            "f_0": 0.0,
            "C_N": float(C * N * K_B),
        }


@pytest.mark.parametrize("route", ["closed", "nodes"])
@pytest.mark.parametrize("t", [0.3, 0.97, 1.2, 2.0])
@pytest.mark.parametrize(("p", "a"), [(2.0, 3.0), (3.0, 2.5)])
def test_errors_hold(route, t, p, a):
    """The true error, against 25 digits, is below the stated one, and the stated one is below 1e-10 of the value."""
    place = power(p) if route == "closed" else sampled(power(p))
    gas, N = held(place), 1e5
    state = gas.state(N=N, T=t * gas.T_c(N=N))
    measure = gas.model.whole.measure
    scale = 1e-30 * float(measure.volume(1e-30)) ** (-1 / a)
    for name, true in exact(a, scale, N, float(state.T)).items():
        reading = state.reading(name)
        assert abs(float(reading.value) - true) <= float(reading.error) + 3e-14 * abs(true)
        assert float(reading.error) <= 1e-10 * max(abs(true), 1e-300) or true == 0


@settings(max_examples=40, deadline=None)
@given(st.floats(3, 7), st.floats(0.1, 4.0), st.sampled_from(["bose", "fermi"]))
def test_two_routes_agree_within_their_errors(log_N, t, statistics):
    """The closed form, and the same measure as a mere function."""
    N = 10.0**log_N
    T = t * held(bent()).T_c(N=N)
    one, other = (held(place, statistics).state(N=N, T=T) for place in (bent(), sampled(bent())))
    for name in CLOSED:
        a, b = one.reading(name), other.reading(name)
        assert abs(a.value - b.value) <= a.error + b.error + 1e-15 * abs(a.value)


WORDS = [
    ("kappa_T", {"N": 1e6, "T": 50e-9}, harmonic(), "diverges"),
    ("n", {"N": 1e5, "T": 50e-9}, harmonic(), "in a trap ask for n_peak"),
    ("depth", {}, box(), "infinite"),
    ("eta", {"T": 1e-7}, box(), "infinite"),
    ("T_c", {"T": 1e-7}, harmonic(), "two conditions"),
    ("mu", {"T": 1e-7}, harmonic(), "two conditions"),
    ("N_c", {"n": 1e18, "T": 1e-7}, uniform(), "ask for n_c"),
    ("S", {"n": 1e18, "T": 1e-7}, uniform(), "volume = "),
    ("C_N", {"n": 1e18, "T": 1e-7}, uniform(), "volume = "),
    ("N_0", {"n": 1e18, "T": 1e-7}, uniform(), "ask for f_0"),
    ("n_c", {"T": 1e-7}, harmonic(d=2), "a = 1"),
    ("n_peak", {"N": 1e6, "T": 20e-9}, harmonic(d=2), "no limit at mu = 0"),
    ("T_c", {"N": -1.0}, harmonic(), "above zero"),
    ("lambda_T", {"T": 0.0}, harmonic(), "above zero"),
    ("rate_coll", {"N": 1e5, "T": 1e-6}, harmonic(), "no scattering length"),
    ("r_min", {}, box(), "no coordinates"),
]


@pytest.mark.parametrize(("name", "given_", "place", "words"), WORDS)
def test_no_number_but_words(name, given_, place, words):
    reading = held(place).find([name], given_)[name]
    assert words in reading.why
    assert np.isnan(reading.value).all()
    with pytest.raises(NoAnswerError, match=words.split(" = ")[0]):
        reading.number()


@pytest.mark.parametrize("d", [1, 2, 3])
def test_units_follow_the_dimension(d):
    found = held(box(1e-6, d)).find(["n_peak", "pressure", "kappa_T"], {"N": 1e3, "T": 1e-6})
    power = "" if d == 1 else f"^{d}"
    assert [r.unit for r in found.values()] == [f"m^-{d}", f"J/m{power}", f"m{power}/J"]


def test_every_quantity_can_be_asked():
    found = held(harmonic()).find(QUANTITIES, {"N": [1e5, 2e5], "T": [[1e-7], [4e-7]]})
    for name, reading in found.items():
        assert reading.value.shape[:2] == (2, 2), name
        assert reading.error.shape == reading.value.shape
        assert np.isfinite(reading.value).all() or reading.why


def test_what_needs_less_than_a_state():
    gas = held(harmonic())
    assert gas.find(["T_c"], {"N": [1e4, 1e5]})["T_c"].value == pytest.approx(gas.T_c(N=[1e4, 1e5]))
    found = gas.find(["N_c", "n_c", "exponent", "lambda_T"], {"T": 1e-7})
    assert all(reading.why is None for reading in found.values())
    assert found["exponent"].value == pytest.approx(3)


def test_masks_tell_points_without_a_number():
    state = held(harmonic()).state(N=1e5, T=[50e-9, -1.0, 500e-9])
    assert np.ma.getmaskarray(state.U).tolist() == [False, True, False]
    reading = state.reading("U")
    assert reading.missing.tolist() == [False, True, False]
    assert reading.reasons[0].where.tolist() == [False, True, False]
    assert "above zero" in reading.why


def test_conditions_that_cannot_be_are_words_too():
    reading = held(uniform()).find(["T_c"], {"N": [1e5, 1e6]})["T_c"]
    assert "give its density n" in reading.why
    assert reading.value.shape == (2,)


def test_reading_keeps_only_reasons_that_hold():
    none, some = np.zeros(2, dtype=bool), np.array([True, False])
    reading = reading_of([1.0, 2.0], 1e-9, "K", "way", [Reason("a", none), Reason("b", some)])
    assert reading.why == "b"
    assert np.isnan(reading.value[0])
    assert reading.number()[1] == 2
    assert isinstance(reading, Reading)


def test_unknown_names():
    state = held(harmonic()).state(N=1e5, T=1e-7)
    with pytest.raises(NoAnswerError, match="bogus is no quantity of a state; known are T_c"):
        state.reading("bogus")
    with pytest.raises(AttributeError, match="a state has no 'bogus'"):
        _ = state.bogus
    assert "f_0" in dir(state)


def test_pages():
    gas = held(harmonic())
    state = gas.state(N=1e5, T=1e-7)
    assert "T = 1e-07" in repr(state)
    assert "<th>f_0</th><td>0.89" in state._repr_html_()
    assert "values" in gas.state(N=[1e5, 2e5], T=1e-7)._repr_html_()
    assert repr(gas) == "HeldGas(probe in bare: closed form, no escape energy)"
    assert "closed form" in gas._repr_html_()
    assert "2 values" in repr(gas.state(N=[1e5, 2e5], T=1e-7))
    assert "closed form" in repr(state.reading("U"))
    assert "none" in repr(state.reading("n"))
