"""Carried uncertainty of random files against their texts written out anew with drawn numbers."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
import pytest

import eoscore
from eoscore.answer.asking import piece_of
from eoscore.answer.holding import HeldGases

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.answer.record import Finding

SEEDS = range(6)
DRAWS = 120
QUANTITIES = ("T_c", "n_peak", "S", "mu", "PSD")


class Random:
    """A file of a random trap, with its uncertain numbers as holes in the text; `f` is used twice."""

    def __init__(self, seed: int) -> None:
        rng = np.random.default_rng(seed)
        self.values = {
            "f": rng.uniform(50, 300),
            "F": rng.uniform(5, 30),
            "N": rng.uniform(0.5, 5.0),
            "T": rng.uniform(300, 900),
        }
        self.sigmas = {name: value * rng.uniform(0.002, 0.02) for name, value in self.values.items()}
        self.power = 2 * int(rng.integers(1, 4))
        self.statistics = str(rng.choice(["bose", "fermi", "classical"]))

    def _text(self, numbers: dict[str, str]) -> str:
        V = f"m/2*(2*pi*f)^2*(x^2 + 3*y^2) + k_B*F*(z/(3 um))^{self.power}"
        return (
            f"gas probe {{ isotope Rb-87\nstatistics {self.statistics} }}\n"
            f"trap any {{ f = {numbers['f']} Hz\nF = {numbers['F']} nK\nV(x, y, z) = {V} }}\n"
            f"find {', '.join(QUANTITIES)} for probe in any with N = {numbers['N']}e4, T = {numbers['T']} nK\n"
        )

    def uncertain(self) -> str:
        """The text with every number in concise notation."""
        return self._text(
            {name: f"{value:.8f}({round(self.sigmas[name] * 1e8)})" for name, value in self.values.items()}
        )

    def drawn(self, rng: np.random.Generator) -> str:
        """The text with numbers drawn, by plain replacement."""
        return self._text(
            {name: f"{rng.normal(value, self.sigmas[name]):.12f}" for name, value in self.values.items()}
        )


def found(text: str) -> Mapping[str, Finding]:
    """What is found, without the cautions, which cost more than the answers here."""
    program = eoscore.loads(text).program
    return piece_of(program, program.questions[0], HeldGases()).found


@pytest.mark.parametrize("seed", SEEDS)
def test_sigma_is_the_spread_of_drawn_files(seed):
    """The spread of 120 draws is known to 1/sqrt(240), 6 %; three times that is allowed."""
    file, rng = Random(seed), np.random.default_rng(1000 + seed)
    carried = found(file.uncertain())
    draws = [found(file.drawn(rng)) for _ in range(DRAWS)]
    for name in QUANTITIES:
        if carried[name].reasons:
            continue
        spread = np.std([float(draw[name].value) for draw in draws], ddof=1)
        assert float(carried[name].sigma) == pytest.approx(spread, rel=0.2, abs=0), name


@pytest.mark.parametrize(
    ("power", "expected"), [("f^2*x^2 + f^2*y^2", 2 / 3), ("f^2*x^2 + (1e4/(1 s2))*y^2", 1 / 3)]
)
def test_a_name_used_twice_moves_both_directions(power, expected):
    """T_c ~ (f_x f_y f_z)^(1/3), Bagnato, Pritchard, Kleppner, Phys. Rev. A 35, 4354 (1987)."""
    trap = f"trap bowl {{ f = 100(1) Hz\nV(x, y, z) = m/2*(2*pi)^2*({power} + (100 Hz)^2*z^2) }}\n"
    at = found(f"gas probe {{ isotope Rb-87 }}\n{trap}find T_c for probe in bowl with N = 1e5")["T_c"]
    assert float(at.sigma / at.value) == pytest.approx(expected * 0.01, rel=1e-6, abs=0)
