"""The codes of cautions: when each is told, and what it rests on."""

from __future__ import annotations

from typing import Final

__all__ = ["CAUTIONS"]

_RULES = "defers to the local safety rules and the people licensed to apply them"

# code: when it is told, formula or limit, source
CAUTIONS: Final[dict[str, tuple[str, str, str]]] = {
    "accuracy": (
        "a number did not reach the relative error that `--accuracy` asks for",
        "",
        "our error estimate",
    ),
    "collapse": (
        "a_s is negative and the condensate holds more particles than attraction lets it",
        "N_0 < 0.575*a_ho/abs(a_s)",
        "P. A. Ruprecht, M. J. Holland, K. Burnett, M. Edwards, Phys. Rev. A 51, 4704 (1995)",
    ),
    "coil_current": (
        "the file names a current of 1 A or more: coils heat, burn and strike back",
        "I >= 1 A",
        _RULES,
    ),
    "finite_number": (
        "the finite number moves T_c by a share worth knowing; the answer is that of the infinite gas",
        "shift_size",
        "S. Grossmann, M. Holthaus, Phys. Lett. A 208, 188 (1995)",
    ),
    "first_derivative": (
        "an input is so uncertain that the answer bends within it: sigma, by first derivatives, misleads",
        "",
        "Guide to the expression of uncertainty in measurement, JCGM 100:2008, 5.1.2",
    ),
    "high_voltage": ("the file names a voltage of 50 V or more", "U >= 50 V", _RULES),
    "interactions": (
        "interactions are left out, and would move T_c by a share worth knowing",
        "shift_int",
        "S. Giorgini, L. P. Pitaevskii, S. Stringari, Phys. Rev. A 54, R4633 (1996)",
    ),
    "laser_class_3b": (
        "the file names a beam above 5 mW: it harms eyes",
        "P > 5 mW",
        f"IEC 60825-1; {_RULES}",
    ),
    "laser_class_4": (
        "the file names a beam of 0.5 W or more: its light harms eyes and skin and can start fires",
        "P >= 0.5 W",
        f"IEC 60825-1; {_RULES}",
    ),
    "level_spacing": (
        "kT is not far above the spacing of the levels, so that counting phase space is coarse",
        "h*f against k_B*T",
        "common practice",
    ),
    "local_picture": (
        "the place is uneven over a thermal wavelength, or a condensate is too small for the Thomas-Fermi limit",
        "N_0*a_s/a_ho < 10",
        "common practice",
    ),
    "momentum_zone": (
        "the momenta in play reach the edge of the zone, or where the expansion of E(p) ends",
        "",
        "common practice",
    ),
    "not_dilute": (
        "the gas is so dense that first order in a_s is not enough",
        "n*a_s^3 > 1e-4",
        "F. Dalfovo et al., Rev. Mod. Phys. 71, 463 (1999), section III",
    ),
    "reduced_dimension": (
        "kT is below the spacing of the levels across: the gas is frozen there, and of lower dimension",
        "k_B*T < h*f",
        "common practice",
    ),
    "shallow": (
        "the trap is only a few kT deep: the gas evaporates while it is held",
        "eta = depth/(k_B*T)",
        "O. J. Luiten, M. W. Reynolds, J. T. M. Walraven, Phys. Rev. A 53, 381 (1996)",
    ),
    "spill": (
        "after a slow change more particles or energy are there than the last trap holds: some run over its edge",
        "",
        "conservation of number and entropy",
    ),
    "three_body_loss": (
        "so dense that recombination of three particles usually limits the life of the gas",
        "n_peak > 1e14 cm^-3",
        "common practice",
    ),
}
