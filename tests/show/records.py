"""Small invented answers, built by hand, for the tests of this room."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from eoscore.answer.record import Caution, Finding, FoundAnswer, Given, Interval, Points, Reason, Report
from eoscore.errors import Complaint


def finding(value, unit="K", *, sigma=None, error=0.0, why=None, points=((),), budget=None):
    array = np.array(value, dtype=float)
    return Finding(
        value=array,
        unit=unit,
        error=np.broadcast_to(np.asarray(error, dtype=float), array.shape),
        route="closed form",
        sigma=None if sigma is None else np.array(sigma, dtype=float),
        reasons=() if why is None else (Reason(why, Points(points)),),
        budget={name: np.array(share) for name, share in (budget or {}).items()},
    )


def sampled(value, low, high, *, answered=1.0, **parts):
    """A finding with the interval of fifty samples."""
    told = finding(value, **parts)
    low, high, share = (
        np.broadcast_to(np.array(each, dtype=float), told.value.shape) for each in (low, high, answered)
    )
    return replace(told, interval=Interval(low, high, share, samples=50, coverage=0.6827))


def answer(found, over=None, units=None, **parts):
    axes = {name: np.array(values, dtype=float) for name, values in (over or {}).items()}
    defaults = {
        "line": 7,
        "question": "find T_c for strontium in crossed with N = 2e5",
        "gas": "strontium",
        "place": "crossed",
        "origins": (),
        "given": {"N": Given(2e5, "1")},
        "cautions": (Caution("shallow", "the depth is only 4 kT."),),
    }
    return FoundAnswer(
        **(defaults | parts), over=axes, over_units=units or dict.fromkeys(axes, "1"), found=found
    )


def report(*answers, complaints=()):
    return Report("pancake.tarn", answers, complaints)


def complaint(excerpt="    V(x) = m/2 + 3 Hz", column=12, end_column=22, **parts):
    defaults = {"file": "a.tarn", "line": 4, "end_line": 4, "message": "kg is added to Hz"}
    defaults |= {"hint": "multiply by h to make 3 Hz an energy"}
    return Complaint(**(defaults | parts), column=column, end_column=end_column, excerpt=excerpt)
