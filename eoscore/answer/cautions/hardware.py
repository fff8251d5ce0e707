"""Hardware that can hurt: the usual cautions, which defer to the local rules and the people licensed to apply them."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.record import Caution

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

# Above 0.5 W a continuous beam is class 4, above 5 mW class 3B (IEC 60825-1, visible and near infrared; from memory).
_CLASS_4 = 0.5
_CLASS_3B = 0.005
_CURRENT = 1.0  # A
_VOLTAGE = 50.0  # V; the usual limit of extra-low alternating voltage (IEC 61140; from memory)

_DEFER = "Follow the local rules, and leave the decision to the people licensed to take it."


def hardware(scene: Scene) -> Iterator[Caution]:
    """Cautions for the powers, currents and voltages that the file names."""
    if scene.binding.place is None:
        return
    powers, currents, voltages = (scene.parameters(unit) for unit in ("W", "A", "V"))
    yield from _laser(powers)
    if currents and max(map(abs, currents.values())) >= _CURRENT:
        yield Caution(
            "coil_current",
            f"coil current: {_named(currents, 'A')}. High currents heat and burn, and a coil that is switched off "
            f"answers with high voltage; interlock the cooling and the supply. {_DEFER}",
        )
    if voltages and max(map(abs, voltages.values())) >= _VOLTAGE:
        yield Caution(
            "high_voltage",
            f"high voltage: {_named(voltages, 'V')}. Enclose, interlock and earth it before it is touched. {_DEFER}",
        )


def _laser(powers: dict[str, float]) -> Iterator[Caution]:
    strongest = max(map(abs, powers.values()), default=0.0)
    if strongest >= _CLASS_4:
        yield Caution(
            "laser_class_4",
            f"laser power: {_named(powers, 'W')}. Above 0.5 W a beam is class 4: the direct and the scattered light "
            f"harm eyes and skin and can start fires; enclosure, interlock and eyewear for the wavelength. {_DEFER}",
        )
    elif strongest > _CLASS_3B:
        yield Caution(
            "laser_class_3b",
            f"laser power: {_named(powers, 'W')}. Above 5 mW a beam is class 3B: the direct beam harms eyes; "
            f"enclosure and eyewear for the wavelength. {_DEFER}",
        )


def _named(values: dict[str, float], unit: str) -> str:
    return ", ".join(f"{name} = {value:.3g} {unit}" for name, value in values.items())
