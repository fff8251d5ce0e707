"""The quantities that a question may ask for, what each needs to be given, and the conditions it may give."""

from __future__ import annotations

from typing import Final, Literal

__all__ = ["AT_COUNTS", "AT_POSITIONS", "CONDITIONS", "COUNT", "DERIVED", "QUANTITIES", "Need"]

# What a quantity needs: nothing, the number (N or n), the temperature, a state (two conditions), N and T themselves.
Need = Literal["nothing", "number", "temperature", "state", "number and temperature"]

# What is asked at a position, which coordinates among the conditions and axes give.
AT_POSITIONS: Final[dict[str, Need]] = {
    "V_at": "nothing",
    **dict.fromkeys(("n_at", "pressure_at", "n_column"), "state"),
}

# What is asked at a number of condensed particles, which `COUNT` among the conditions and axes gives.
AT_COUNTS: Final[dict[str, Need]] = {"P_N_0": "number and temperature"}
COUNT: Final = "N_0"

# tarn.md, the table of questions.
QUANTITIES: Final[dict[str, Need]] = {
    "T_c": "number",
    "N_c": "temperature",
    "n_c": "temperature",
    "exponent": "temperature",
    **dict.fromkeys(
        ("N", "n", "T", "mu", "S", "U", "fugacity", "N_0", "f_0", "n_peak", "PSD", "C_N"), "state"
    ),
    **dict.fromkeys(("pressure", "kappa_T", "rate_coll"), "state"),
    **dict.fromkeys(("U_int", "E_release", "n_0_peak", "R_TF"), "state"),
    "lambda_T": "temperature",
    "eta": "temperature",
    **dict.fromkeys(("depth", "freq", "r_min", "V_min"), "nothing"),
    **dict.fromkeys(("shift_size", "shift_int"), "number"),
    **dict.fromkeys(("N_0_canonical", "Delta_N_0"), "number and temperature"),
    **AT_COUNTS,
    **AT_POSITIONS,
}

# The thermodynamic conditions and their units; those of densities are one of three, and that of `n` chooses the
# dimension.
CONDITIONS: Final[dict[str, tuple[str, ...]]] = {
    "N": ("1",),
    "n": ("m-3", "m-2", "m-1"),
    "T": ("K",),
    "mu": ("J",),
    "S": ("J/K",),
    "U": ("J",),
    **dict.fromkeys(("fugacity", "f_0", "N_0", "PSD"), ("1",)),
    "n_peak": ("m-3", "m-2", "m-1"),
}

DERIVED: Final = ("T_c", "N_c", "f_0", "U", "S", "C_N", "g", "rho")
