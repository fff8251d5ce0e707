"""The words of Tarn that are no quantities: what each does, and an example of its use."""

from __future__ import annotations

from typing import Final

__all__ = ["WORDS"]

# word: what it does, an example
WORDS: Final[dict[str, tuple[str, str]]] = {
    "gas": ("opens a block that declares a gas", "gas strontium { isotope Sr-84 }"),
    "trap": (
        "opens a block that declares a place by its potential or its volume",
        "trap box { volume = 1 mm3 }",
    ),
    "states": (
        "opens a block that gives the density of states in place of a potential",
        "states s { rho(E) = A*E }",
    ),
    "use": ("takes in another file, or a file of the shelf", "use optics"),
    "find": ("asks for numbers", "find T_c for strontium in bowl with N = 1e5"),
    "derive": ("asks for formulas", "derive T_c for strontium in bowl"),
    "for": ("names the gas of a question", "find T_c for strontium in bowl with N = 1e5"),
    "in": ("names the place of a question", "find freq for strontium in bowl"),
    "from": (
        "names the place that the gas is slowly brought from",
        "find T for strontium in tight from bowl with N = 1e5, T = 90 nK",
    ),
    "with": (
        "gives conditions, and new values of parameters",
        "find T_c for strontium in bowl with N = 1e5, f = 90 Hz",
    ),
    "over": (
        "repeats a question on a grid",
        "find T_c for strontium in bowl with N = 1e5 over f = even(50 Hz, 90 Hz, 5)",
    ),
    "where": ("gives hard walls, or the edge of a zone of momenta", "V(z) = m*g_n*z where z > 0 um"),
    "at": ("gives the temperature of an anchor", "anchor N_c = 3e5 at T = 90 nK"),
    "and": ("joins conditions that must both hold", "if(x > 0 um and x < 1 um, 1, 0)"),
    "or": ("joins conditions of which one must hold", "if(x < 0 um or x > 1 um, 1, 0)"),
    "not": ("turns a condition round", "if(not x < 0 um, 1, 0)"),
    "if": ("chooses between two values by a condition", "if(x < 0 um, a, b)"),
    "isotope": ("gives a gas the mass of an isotope", "isotope Yb-174"),
    "statistics": ("says how particles fill states: bose, fermi or classical", "statistics fermi"),
    "treatment": ("says how the interaction enters a state", "treatment hartree_fock"),
    "levels": ("counts the true levels of a trap in place of the continuum", "levels exact"),
    "dispersion": ("chooses E(p) by the name of a plugin", "dispersion trapped { omega_z = 2*pi*5 kHz }"),
    "anchor": (
        "a measured point that sets the scale of a `states` place",
        "anchor N_c = 3.0(2)e5 at T = 90 nK",
    ),
    "even": ("a span in even steps: first, last, number of points", "over f = even(50 Hz, 150 Hz, 11)"),
    "geometric": ("a span in even ratios: first, last, number of points", "over N = geometric(1e4, 1e6, 5)"),
    "uniform": (
        "the unbounded place, always there; three-dimensional unless the unit of its density says otherwise",
        "find T_c for strontium in uniform with n = 1e13 cm-3",
    ),
    "degeneracy": ("the number of spin or polarisation states, 1 where nothing is said", "degeneracy = 2"),
    "a_s": ("the s-wave scattering length; without it the gas is ideal", "a_s = 123 a0"),
    "volume": ("makes a flat box of any shape", "volume = 1 mm3"),
    "E_max": (
        "cuts the states above an energy counted from the bottom: an evaporation knife",
        "E_max = k_B*2 uK",
    ),
}
