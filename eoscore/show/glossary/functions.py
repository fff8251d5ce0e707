"""The functions of Tarn: what each is, and where its definition stands."""

from __future__ import annotations

from typing import Final

__all__ = ["FUNCTIONS"]

_DLMF = "NIST Digital Library of Mathematical Functions, dlmf.nist.gov, "

# name: what it is, formula or range, source
FUNCTIONS: Final[dict[str, tuple[str, str, str]]] = {
    "sqrt": ("square root; of a value with a unit too", "sqrt(x)^2 = x, x >= 0", _DLMF + "4.2"),
    "exp": ("exponential function", "e^x", _DLMF + "4.2"),
    "ln": ("natural logarithm", "exp(ln(x)) = x, x > 0", _DLMF + "4.2"),
    "log10": ("logarithm to the base 10", "ln(x)/ln(10), x > 0", _DLMF + "4.2"),
    "sin": ("sine of an angle in radians", "(e^(i x) - e^(-i x))/(2i)", _DLMF + "4.14"),
    "cos": ("cosine of an angle in radians", "(e^(i x) + e^(-i x))/2", _DLMF + "4.14"),
    "tan": ("tangent of an angle in radians", "sin(x)/cos(x)", _DLMF + "4.14"),
    "asin": ("angle whose sine is x", "sin(asin(x)) = x, from -pi/2 to pi/2", _DLMF + "4.23"),
    "acos": ("angle whose cosine is x", "cos(acos(x)) = x, from 0 to pi", _DLMF + "4.23"),
    "atan": ("angle whose tangent is x", "tan(atan(x)) = x, from -pi/2 to pi/2", _DLMF + "4.23"),
    "atan2": (
        "angle of the point (x, y) from the x axis; y comes first",
        "tan(atan2(y, x)) = y/x, from -pi to pi",
        _DLMF + "4.23",
    ),
    "sinh": ("hyperbolic sine", "(e^x - e^-x)/2", _DLMF + "4.28"),
    "cosh": ("hyperbolic cosine", "(e^x + e^-x)/2", _DLMF + "4.28"),
    "tanh": ("hyperbolic tangent", "sinh(x)/cosh(x)", _DLMF + "4.28"),
    "abs": ("modulus; of a value with a unit too", "x where x >= 0, else -x", "elementary"),
    "sign": ("sign, a plain number", "1, 0 or -1 where x is above, at or below 0", "elementary"),
    "min": ("the least of two values or more, of one dimension", "min(a, b, ...)", "elementary"),
    "max": ("the largest of two values or more, of one dimension", "max(a, b, ...)", "elementary"),
    "erf": ("error function", "2/sqrt(pi) * integral of exp(-t^2) dt from 0 to x", _DLMF + "7.2"),
    "ellipk": (
        "complete elliptic integral of the first kind, of the parameter m = k^2",
        "integral of (1 - m*sin(t)^2)^(-1/2) dt from 0 to pi/2",
        _DLMF + "19.2",
    ),
    "ellipe": (
        "complete elliptic integral of the second kind, of the parameter m = k^2",
        "integral of (1 - m*sin(t)^2)^(1/2) dt from 0 to pi/2",
        _DLMF + "19.2",
    ),
    "besselj": (
        "Bessel function of the first kind; the order comes first",
        "1/pi * integral of cos(order*t - x*sin(t)) dt from 0 to pi, for a whole order",
        _DLMF + "10.2",
    ),
}
