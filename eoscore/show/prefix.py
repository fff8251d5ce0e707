"""Numbers as people write them: SI prefixes that fit, uncertainties in concise notation."""

from __future__ import annotations

import math

__all__ = ["fitting", "quantity", "written"]

_PREFIXES = {-15: "f", -12: "p", -9: "n", -6: "µ", -3: "m", 0: "", 3: "k", 6: "M", 9: "G", 12: "T"}
_PREFIXED = ("K", "Hz", "m", "W", "A", "V", "s", "T", "Pa")  # energies in J keep their power of ten
_DIGITS = 6
_NOISE = 1e-9  # a standard deviation below this share of the value is rounding, not input


def fitting(size: float, unit: str) -> tuple[float, str]:
    """The factor and the unit in which a number of this size (in SI `unit`) reads well.

    Only plain units take a prefix; others, and sizes beyond the prefixes, stay as they are.
    """
    if unit not in _PREFIXED or not math.isfinite(size) or size == 0.0:
        return 1.0, unit
    power = 3 * math.floor((math.log10(abs(size)) + 1e-12) / 3)
    if power not in _PREFIXES:
        return 1.0, unit
    return 10.0**power, _PREFIXES[power] + unit


def written(value: float, sigma: float | None = None, digits: int = _DIGITS) -> str:
    """A number to six `digits`, or with its standard deviation in concise notation: `703(14)`."""
    if not math.isfinite(value):
        return "-"
    if sigma is None or not math.isfinite(sigma) or sigma <= _NOISE * abs(value):
        return _short_power(f"{value:.{digits}g}")
    from uncertainties import ufloat

    number, _, rest = f"{ufloat(value, sigma):.2uS}".partition("(")
    deviation, _, power = rest.partition(
        ")"
    )  # counted in the last digits: 1.6(12), where the package writes 1.6(1.2)
    return _short_power(f"{number}({deviation.replace('.', '')}){power}")


def _short_power(number: str) -> str:
    """`4.24(34)e4` for `4.24(34)e+04`, as Tarn writes numbers."""
    digits, e, power = number.partition("e")
    return f"{digits}e{int(power)}" if e else number


def quantity(value: float, unit: str, sigma: float | None = None) -> str:
    """A number with its unit, prefix fitted: `703(14) nK`; the unit `1` is not written."""
    factor, shown = fitting(value, unit)
    number = written(value / factor, None if sigma is None else sigma / factor)
    return number if shown == "1" else f"{number} {shown}"
