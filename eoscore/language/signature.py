"""What the language must know of a dispersion to read `dispersion NAME { parameter = value ... }`."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Parameter:
    """One parameter of a dispersion.

    `unit` is a Tarn unit (`rad/s`, `J`, `1` for a pure number); `default` is an SI value, None where the file
    must give one or, for a level, may leave it out.
    """

    name: str
    unit: str
    default: float | None
    doc: str


@dataclass(frozen=True)
class Signature:
    """A dispersion as the language sees it.

    `levels` are the parameters that hold one direction each as discrete levels; `momentum` is `("p",)` for an
    isotropic dispersion, else the components in order.
    """

    name: str
    parameters: tuple[Parameter, ...]
    needs_mass: bool
    levels: tuple[str, ...] = ()
    momentum: tuple[str, ...] = ("p",)
