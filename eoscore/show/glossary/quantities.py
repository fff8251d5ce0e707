"""The quantities that a question may ask for. k stands for k_B, d for the dimension of the place."""

from __future__ import annotations

from typing import Final

__all__ = ["DERIVED_ONLY", "QUANTITIES"]

_PITAEVSKII = (
    "L. Pitaevskii, S. Stringari, Bose-Einstein Condensation and Superfluidity (2016), chapters 10 and 17"
)
_HUANG = "K. Huang, Statistical Mechanics, 2nd edition (1987), chapters 8 to 12"
_DALFOVO = "F. Dalfovo, S. Giorgini, L. P. Pitaevskii, S. Stringari, Rev. Mod. Phys. 71, 463 (1999)"
_BAGNATO = "V. Bagnato, D. E. Pritchard, D. Kleppner, Phys. Rev. A 35, 4354 (1987)"
_LUITEN = "O. J. Luiten, M. W. Reynolds, J. T. M. Walraven, Phys. Rev. A 53, 381 (1996)"
_LANDAU = "L. D. Landau, E. M. Lifshitz, Mechanics, section 23"
_GIORGINI = "S. Giorgini, L. P. Pitaevskii, S. Stringari, Phys. Rev. A 54, R4633 (1996)"
_WEISS = "C. Weiss, M. Wilkens, Opt. Express 1, 272 (1997)"
_GROSSMANN = "S. Grossmann, M. Holthaus, Phys. Lett. A 208, 188 (1995)"

# name: what it is, formula, source
QUANTITIES: Final[dict[str, tuple[str, str, str]]] = {
    "T_c": (
        "critical temperature: below it a finite share of the particles is in the lowest state",
        "N_ex(T_c, mu = 0) = N",
        _BAGNATO,
    ),
    "N_c": (
        "critical number: the most particles that the excited states hold at T",
        "N_c = sum over states of 1/(exp(E/(k*T)) - 1), E from the lowest state",
        _BAGNATO,
    ),
    "n_c": ("critical density at the bottom, at T", "n_c = n_peak(T, mu = 0)", _HUANG),
    "N": ("number of particles (less the antiparticles, where there are any)", "N = N_ex + N_0", _HUANG),
    "n": ("density of a box or of the unbounded place `uniform`", "n = N/V", _HUANG),
    "T": ("temperature, absolute", "1/T = dS/dU at fixed N and trap", _HUANG),
    "mu": (
        "chemical potential, counted from the lowest single-particle energy of the semiclassical gas",
        "mu = dU/dN at fixed S and trap",
        _HUANG,
    ),
    "S": ("entropy", "S = -dOmega/dT at fixed mu and trap, Omega the grand potential", _HUANG),
    "U": (
        "energy, counted from all particles at rest in the lowest state",
        "U = sum over states of E*occupation",
        _HUANG,
    ),
    "fugacity": ("fugacity z", "exp(mu/(k*T))", _HUANG),
    "N_0": ("number of particles in the condensate", "N_0 = N - N_c(T) below T_c, else 0", _PITAEVSKII),
    "f_0": ("condensate fraction", "f_0 = N_0/N", _PITAEVSKII),
    "n_peak": (
        "density of the non-condensed gas at the bottom of the trap",
        "n_peak = lambda_T^-d * g(z), with g = g_{d/2} for the free particle",
        _PITAEVSKII,
    ),
    "lambda_T": (
        "thermal wavelength",
        "(h^d / integral of exp(-E(p)/(k*T)) d^dp)^(1/d) = h/sqrt(2*pi*m*k*T) for the free particle",
        "Z. Yan, Eur. J. Phys. 21, 625 (2000)",
    ),
    "PSD": ("phase-space density", "PSD = n_peak*lambda_T^d", _PITAEVSKII),
    "C_N": ("heat capacity at fixed number in a fixed trap", "C_N = dU/dT at fixed N", _BAGNATO),
    "pressure": (
        "pressure of the gas at the bottom of the trap",
        "P = -dOmega/dV of a uniform gas at the bottom",
        _HUANG,
    ),
    "kappa_T": (
        "isothermal compressibility at the bottom; it diverges for the ideal gas at and below T_c",
        "kappa_T = (1/n)*dn/dP = (1/n^2)*dn/dmu at fixed T",
        _HUANG,
    ),
    "depth": (
        "energy from the bottom to the lowest way out of the trap, or to E_max where that is lower",
        "depth = V(escape) - V_min",
        _LUITEN,
    ),
    "eta": ("truncation parameter: depth in units of kT", "eta = depth/(k*T)", _LUITEN),
    "freq": (
        "trap frequencies at the bottom along the principal axes, ascending; not angular",
        "f_i = sqrt(V''_i/m)/(2*pi), V''_i the principal second derivatives",
        _LANDAU,
    ),
    "r_min": ("position of the bottom, in the coordinates of V", "grad V(r_min) = 0, V least there", _LANDAU),
    "V_min": ("potential energy at the bottom", "V_min = V(r_min)", _LANDAU),
    "exponent": (
        "how steeply the critical number grows with temperature: 3 for a harmonic trap, 3/2 for a box",
        "d ln N_c / d ln T at T",
        _BAGNATO,
    ),
    "shift_size": (
        "relative shift of T_c by the finite number, first order",
        "-0.7275*(mean f/geometric mean f)*N^(-1/3) in a harmonic trap",
        _GROSSMANN,
    ),
    "shift_int": (
        "relative shift of T_c by interactions, first order in a_s",
        "-1.326*(a_s/a_ho)*N^(1/6) in a harmonic trap",
        _GIORGINI,
    ),
    "rate_coll": (
        "elastic collisions per particle and time, averaged over the density of the non-condensed gas",
        "8*pi*a_s^2*sqrt(16*k*T/(pi*m)) * integral n^2/integral n; 0 for one-component fermions",
        f"{_LUITEN}; {_DALFOVO}",
    ),
    "N_0_canonical": (
        "mean condensate number of exactly N particles (canonical ensemble), in a trap with `levels exact`",
        "sum over n = 0 ... N of n*P_N_0(n)",
        _WEISS,
    ),
    "Delta_N_0": (
        "standard deviation of the condensate number of exactly N particles (canonical ensemble)",
        "Delta_N_0^2 = sum over n = 0 ... N of (n - N_0_canonical)^2*P_N_0(n)",
        _WEISS,
    ),
    "P_N_0": (
        "probability that just N_0 of exactly N particles are in the lowest level, asked `over N_0 = ...`",
        "Z_(N - N_0)/(Z_0 + ... + Z_N), Z_M the partition function of M particles on the excited levels",
        _WEISS,
    ),
    "V_at": ("potential at a position, counted from the bottom of the trap", "V(r) - V_min", _LANDAU),
    "n_at": (
        "density of the non-condensed gas at a position; coordinates not given are those of the bottom",
        "n(mu - V(r), T), in the local picture",
        _PITAEVSKII,
    ),
    "pressure_at": ("pressure at a position", "P(mu - V(r), T), in the local picture", _HUANG),
    "n_column": (
        "column density: n_at integrated along the one coordinate that is not given",
        "integral of n(mu - V(r), T) along the line; through the centre to both sides for r and rho",
        _DALFOVO,
    ),
    "U_int": ("energy of interaction, in the `treatment` that the gas names", "part of U", _DALFOVO),
    "E_release": (
        "release energy: what an expansion measures once the trap is switched off",
        "kinetic energy + U_int",
        _DALFOVO,
    ),
    "n_0_peak": (
        "peak density of the condensate, in the `treatment` that the gas names",
        "n_0(r_min)",
        _DALFOVO,
    ),
    "R_TF": (
        "Thomas-Fermi radii of the condensate along the coordinates",
        "V(R_TF) - V_min = mu of the condensate, from the bottom",
        _DALFOVO,
    ),
}

# Asked for by `derive` alone: what it is, formula, unit, source.
DERIVED_ONLY: Final[dict[str, tuple[str, str, str, str]]] = {
    "g": (
        "generalised g-function of the trap, of alpha = -mu/(k*T): exp(-alpha) for large alpha",
        "N_ex = N_scale(T)*g(alpha)",
        "1",
        _BAGNATO,
    ),
    "rho": (
        "density of single-particle states; as `rho(E) = ...` it defines a `states` place",
        "rho(E) = h^-d * integral of delta(E - H(p, r)) d^dp d^dr",
        "1/J",
        _BAGNATO,
    ),
}
