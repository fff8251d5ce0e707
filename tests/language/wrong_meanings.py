"""Texts that parse but mean nothing, one fault each: the place that is marked, the words, the mend."""

from __future__ import annotations

from typing import NamedTuple

from .labs import BOX, GAS, TRAP


class Wrong(NamedTuple):
    """A text with its one fault: the marked words, and pieces of the message and of the hint."""

    text: str
    place: str
    message: str
    hint: str


def in_trap(lines: str) -> str:
    """A text whose trap holds these lines."""
    return GAS + "trap odd {\n" + lines + "\n}\n"


def asked(question: str, more: str = "") -> str:
    """A text that is right but for its question."""
    return GAS + TRAP + BOX + more + question


NAMES = [
    Wrong("a = 2*bb\nb = 3", "bb", "the name `bb` is not known here", "did you mean `b`?"),
    Wrong("width = 2 um\na = 3*widht", "widht", "`widht` is not known", "did you mean `width`?"),
    Wrong("a = sqr(2)", "sqr", "the function `sqr` is not known here", "did you mean `sqrt`?"),
    Wrong("w = 2 um\na = w(3)", "w", "`w` is a number, not a function", "w*(...)"),
    Wrong("f(x) = x\na = 2*f", "f", "`f` is a function and wants arguments", "write f(x)"),
    Wrong("f(x, y) = x*y\na = f(1)", "f(1)", "`f` takes 2 arguments, not 1", "write f(x, y)"),
    Wrong("a = atan2(1)", "atan2(1)", "`atan2` came with 1 argument", "write atan2(y, x)"),
    Wrong("a = min(1)", "min(1)", "`min` came with 1 argument", "write min(a, b, ...)"),
    Wrong("a = exp()", "exp()", "`exp` came with no arguments", "write exp(x)"),
    Wrong("sin(x) = x", "sin", "`sin` is a function of Tarn already", "another name"),
    Wrong("a = b\nb = a", "a", "a name cannot need itself: `a` needs `b` needs `a`", "break the circle"),
    Wrong("a = a + 1", "a", "`a` needs `a`", "break the circle"),
    Wrong("f(x) = f(x - 1)", "f", "recursion is not part of Tarn: `f` needs `f`", "break the circle"),
    Wrong("f(x) = g(x)\ng(x) = f(x)", "f", "`f` needs `g` needs `f`", "break the circle"),
    Wrong("a = 2 um\nb = 1\na = 3 um", "a", "`a` is defined twice; first in line 1", "keep one"),
    Wrong("a = 2*m", "m", "`m` is known inside a gas or a trap only", "pass the mass as an argument"),
    Wrong(
        "f(x) = x where x > 1",
        "x > 1",
        "`where` bounds V in a trap and E in a gas only",
        "if(condition, a, b)",
    ),
    Wrong("use optic", "use optic", "there is no shelf file `optic`", "did you mean `optics`?"),
]

DIMENSIONS = [
    Wrong("a = 1 m + 1 s", "1 m + 1 s", "cannot be added: `1 m` is m, `1 s` is s", "same dimension"),
    Wrong("a = 1 m - 1", "1 m - 1", "cannot be subtracted", "give `1` a unit of m"),
    Wrong("a = k_B*1 uK + 1 uK", "k_B*1 uK + 1 uK", "`1 uK` is K", "multiply `1 uK` by k_B"),
    Wrong("a = 1 kHz + h*1 kHz", "1 kHz + h*1 kHz", "`1 kHz` is 1/s (Hz)", "multiply `1 kHz` by h"),
    Wrong("a = mu_B*1 G + 1 G", "mu_B*1 G + 1 G", "`1 G` is kg/s2/A (T)", "magnetic moment, such as mu_B"),
    Wrong("a = m_u*c^2 + m_u", "m_u*c^2 + m_u", "`m_u` is kg", "multiply `m_u` by c^2"),
    Wrong("a = exp(1 m)", "1 m", "`exp` takes a pure number, `1 m` is m", "divide it by a scale"),
    Wrong("a = besselj(1, 2 m)", "2 m", "`besselj` takes a pure number", "divide it by a scale"),
    Wrong("a = atan2(1 m, 1 s)", "atan2(1 m, 1 s)", "stand together in atan2", "same dimension"),
    Wrong("a = max(1 m, 2 m, 3)", "max(1 m, 2 m, 3)", "stand together in max", "give `3` a unit of m"),
    Wrong("a = if(1 m < 1 s, 1, 2)", "1 m < 1 s", "cannot be compared", "same dimension"),
    Wrong("a = if(1 < 2, 1 m, 2 s)", "if(1 < 2, 1 m, 2 s)", "two branches of one `if`", "same dimension"),
    Wrong("a = 2^(1 m)", "(1 m)", "an exponent must be a pure number", "divide it by a scale"),
    Wrong("f(x) = (1 m)^x\na = f(cos(2)) + 1 m", "f(cos(2)) + 1 m", "cannot be added", ""),
    Wrong(
        "f(x) = 1 m + x\na = f(2 s)",
        "f(2 s)",
        "`f` does not fit here, where x is s: these",
        "line 1: `1 m + x`",
    ),
    Wrong(
        "f(x) = 1 m + x\ng(y) = 2*f(y)\na = g(2 s)",
        "g(2 s)",
        "`g` does not fit here, where y is s",
        "`1 m + x`",
    ),
    Wrong("f(x) = 1 m + 1 s + x\na = f(2 m)", "1 m + 1 s", "cannot be added", "same dimension"),
    Wrong("a = 9^9^9^9", "9^9^9", "is too large for a number", "its parts are 9, "),
    Wrong("a = 1/(2 - 2)", "1/(2 - 2)", "or a division by 0", "its parts are 1, 0"),
    Wrong(
        in_trap("V(x) = (1 J)*x/(3 m - 3 m)"), "(1 J)*x/(3 m - 3 m)", "or a division by 0", "its parts are 0"
    ),
    Wrong("a = sqrt(0 - 1)", "sqrt(0 - 1)", "has no value among the real numbers", "its parts are -1"),
    Wrong("f(x) = 1/x\na = f(0)", "f(0)", "`f` does not fit here", "line 1: `1/x`"),
]

BLOCKS = [
    Wrong(
        in_trap("V(x) = 2*pi*100 Hz*x"), "2*pi*100 Hz*x", "V must be kg m2/s2 (J), `2*pi*100 Hz*x` is m/s", ""
    ),
    Wrong(in_trap("V(x) = 100 Hz"), "100 Hz", "V must be kg m2/s2 (J)", "multiply `100 Hz` by h"),
    Wrong(
        in_trap("f = 100 Hz\nV(x, y, z) = f + m*g_n*z"),
        "f + m*g_n*z",
        "`f` is 1/s (Hz), `m*g_n*z` is kg m2/s2 (J)",
        "multiply `f` by h",
    ),
    Wrong(in_trap("V(x, q) = 1 J"), "V", "`V(x, q)` is no potential", "V(rho, z)"),
    Wrong(in_trap("V = 1 J"), "V", "`V without coordinates` is no potential", "V(x, y, z)"),
    Wrong(in_trap("a = 1"), "odd", "trap `odd` has neither V nor volume", "volume = 1 mm3"),
    Wrong(in_trap("V(x) = 1 J\nvolume = 1 m3"), "odd", "has both V and volume", ""),
    Wrong(
        in_trap("volume = 1 m4"), "1 m4", "the volume must be m3 or m2 or m, `1 m4` is m4", "m3 or m2 or m"
    ),
    Wrong(in_trap("volume = 0 m3"), "0 m3", "the volume must be above 0", "check its sign"),
    Wrong(
        in_trap("volume = 1 m3\nE_max = 5 uK"),
        "5 uK",
        "`E_max` must be kg m2/s2 (J)",
        "multiply `5 uK` by k_B",
    ),
    Wrong(
        in_trap("volume = 1 m3\nE_mx = 5 uK*k_B"), "E_mx", "`E_mx` is used nowhere", "did you mean `E_max`?"
    ),
    Wrong(in_trap("volume = 1 m3\nm = 3 kg"), "m", "`m` in a place is the mass of the gas", "another name"),
    Wrong(in_trap("V(x) = 1 J where x < 2"), "x < 2", "cannot be compared", "give `2` a unit of m"),
    Wrong("gas a { isotope Sx-84 }", "isotope Sx-84", "there is no element `Sx`", "known elements"),
    Wrong(
        "gas a { isotope Sr-184 }", "isotope Sr-184", "no mass is known of `Sr-184`", "known isotopes near it"
    ),
    Wrong("gas a { isotope Sr-84\n m = 84 u }", "m = 84 u", "the mass comes twice", "keep one"),
    Wrong("gas a { m = 84 um }", "84 um", "the mass `m` must be kg", "kg"),
    Wrong("gas a { m = -84 u }", "-84 u", "the mass `m` must be above 0", "check its sign"),
    Wrong("gas a { statistics bosons }", "bosons", "`bosons` is no statistics", "did you mean `bose`?"),
    Wrong(
        "gas a { statistics bose\n statistics fermi }", "fermi", "a block has one `statistics`", "keep one"
    ),
    Wrong("gas a { degeneracy = 0.0 }", "0.0", "the degeneracy must be above 0", "check its sign"),
    Wrong("gas a { a_s = 5 nK }", "5 nK", "the scattering length `a_s` must be m", "m"),
    Wrong(
        "gas a { degenracy = 3 }", "degenracy", "`degenracy` is used nowhere", "did you mean `degeneracy`?"
    ),
    Wrong("gas a { dispersion fre }", "fre", "there is no dispersion `fre`", "did you mean `free`?"),
    Wrong(
        "gas a { dispersion band }", "band", "needs a value for `J` (hopping energy)", "dispersion band { J ="
    ),
    Wrong("gas a { dispersion trapped }", "trapped", "wants at least one of omega_x", "omega_z = 2*pi*5 kHz"),
    Wrong(
        "gas a { dispersion trapped { omega = 1 Hz } }",
        "omega",
        "has no parameter `omega`",
        "did you mean `omega_",
    ),
    Wrong("gas a { dispersion band { J = 5 Hz } }", "5 Hz", "`J` of the dispersion `band` must be", "by h"),
    Wrong(
        "gas a { dispersion free\n E(p) = c*p }",
        "dispersion free",
        "a dispersion by name or a formula",
        "keep one",
    ),
    Wrong("gas a { E(k) = 1 J }", "E", "`E(k)` is no energy of a particle", "E(px, py, pz)"),
    Wrong("gas a { E(p) = p^2/2 }", "p^2/2", "E must be kg m2/s2 (J), `p^2/2` is kg2 m2/s2", ""),
    Wrong("gas a { E(p) = p^2/(2*m) }", "m", "the mass `m` is not known in gas a", "isotope Sr-84"),
    Wrong("gas a { treatment hartree_fock }", "hartree_fock", "needs a scattering length", "a_s = 5 nm"),
    Wrong("gas uniform { m = 1 u }", "uniform", "`uniform` is the built-in unbounded place", "another name"),
    Wrong(GAS + "gas sr { m = 1 u }", "sr", "a block called `sr` stands already in line 1", "another name"),
    Wrong("states s { exponent = 2 }", "s", "neither rho(E) nor an exponent with its anchor", "anchor N_c"),
    Wrong(
        "states s { rho(E) = 1 J-1 where E < 1 J }", "E < 1 J", "`where` bounds V in a trap", "take it out"
    ),
    Wrong("states s { rho(E) = 1 }", "1", "rho(E) must be s2/kg/m2, `1` is a pure number", "J-1"),
    Wrong("states s { rho(q) = 1 J-1 }", "rho", "the density of states is a function of E", "rho(E)"),
    Wrong(
        "states s { exponent = 2\n anchor N_c = 3e5 at T = 90 nm }",
        "90 nm",
        "`T` of the anchor must be K",
        "K",
    ),
    Wrong(
        "states s { exponent = -2\n anchor N_c = 3e5 at T = 9 nK }", "-2", "the exponent must be above 0", ""
    ),
    Wrong("states s { rho(E) = E^(E/(1 J))/(1 J) }", "E^(E/(1 J))", "exponent must be a constant", "divide"),
]

QUESTIONS = [
    Wrong(
        asked("find T_c for rb in bowl with N = 1"), "rb", "there is no gas `rb`", "gases of this file: sr"
    ),
    Wrong(asked("find T_c for bowl in bowl with N = 1"), "bowl", "`bowl` is a place, not a gas", "sr"),
    Wrong(
        asked("find T_c for sr in bow with N = 1"), "bow", "there is no place `bow`", "did you mean `bowl`?"
    ),
    Wrong(
        asked("find T_c for sr in sr with N = 1"), "sr", "`sr` is a gas, not a place", "places of this file"
    ),
    Wrong(asked("find T_c for sr with N = 1"), "sr", "it is not said where the gas `sr` is held", "in PLACE"),
    Wrong(asked("find Tc for sr in bowl with N = 1"), "Tc", "`Tc` is no quantity", "did you mean `T_c`?"),
    Wrong(asked("find V for sr in bowl"), "V", "`V` is a function: it has no value", "a = V(...)"),
    Wrong(asked("find f, f for sr in bowl"), "f", "`f` is asked for twice", "keep one"),
    Wrong(asked("find T_c for sr in bowl"), "T_c", "`T_c` needs the number N", "with N = 2e5"),
    Wrong(
        asked("find N_c for sr in bowl with N = 1"),
        "N_c",
        "`N_c` needs the temperature T; only N is given",
        "T =",
    ),
    Wrong(
        asked("find mu for sr in bowl with N = 1"),
        "mu",
        "`mu` needs a state, which is two of",
        "N = 2e5, T =",
    ),
    Wrong(
        asked("find mu for sr in bowl with N = 1, T = 1 K, S = 1 J/K"),
        "S",
        "one condition too many",
        "N and T",
    ),
    Wrong(asked("find f for sr in bowl with f = 3 Hz, f = 4 Hz"), "f", "`f` is given twice", "keep one"),
    Wrong(
        asked("find f for sr in bowl with f = 3 Hz over f = [1 Hz]"), "f", "`f` is given twice", "keep one"
    ),
    Wrong(
        asked("find T_c for sr in bowl with N = 1 K"), "1 K", "`N` must be a pure number", "without a unit"
    ),
    Wrong(asked("find T_c for sr in bowl with N = -1"), "-1", "`N` must be above 0", "check its sign"),
    Wrong(asked("find N_c for sr in bowl with T = 1 Hz"), "1 Hz", "`T` must be K", "K"),
    Wrong(
        asked("find f for sr in bowl with ff = 3 Hz"),
        "ff",
        "neither a condition nor a name",
        "did you mean `f`?",
    ),
    Wrong(
        asked("find f for sr in bowl with f = 3 m"),
        "3 m",
        "`f` is 1/s (Hz), but `3 m` is m",
        "same dimension",
    ),
    Wrong(
        asked("find f for sr in bowl with hbar = 3 J.s"), "hbar", "`hbar` is a constant", "a name of your own"
    ),
    Wrong(
        asked("find f for sr in bowl with V = 3 J"),
        "V",
        "`V` is a function and cannot be set",
        "set the values",
    ),
    Wrong(
        asked("find T_c for sr in bowl with n = 1 m-3"), "n", "a density n is a condition in `uniform`", "N"
    ),
    Wrong(
        asked("find T_c for sr in box with n = 1 m-2"), "n", "its density n must be in m-3", "write n in m-3"
    ),
    Wrong(asked("find T_c for sr in uniform with N = 1"), "N", "has no total N", "give the density n"),
    Wrong(
        asked("find f for sr in bowl over f = even(1 Hz, 2 K, 3)"),
        "2 K",
        "`f` is 1/s (Hz), but `2 K` is K",
        "",
    ),
    Wrong(
        asked("find f for sr in bowl over f = even(1 Hz, 2 Hz, 2.5)"),
        "2.5",
        "must be a whole number from 1",
        "",
    ),
    Wrong(
        asked("find f for sr in bowl over f = even(1 Hz, 2 Hz, 1e12)"),
        "1e12",
        "a whole number from 1 to 1e+07",
        "",
    ),
    Wrong(
        asked("find f for sr in bowl over f = geometric(0 Hz, 2 Hz, 3)"),
        "geometric(0 Hz, 2 Hz, 3)",
        "0",
        "even",
    ),
    Wrong(
        asked("find f for sr in bowl over f = even(1 Hz, 2 Hz, 1e5), T = even(1 K, 2 K, 1e5)"),
        "f = even(1 Hz, 2 Hz, 1e5), T = even(1 K, 2 K, 1e5)",
        "this grid has 1e+10 points, more than 1e+08",
        "fewer points",
    ),
    Wrong(
        asked("find f for sr in bowl from box with N = 1"),
        "box",
        "`from box` needs the state there",
        "T = 500 nK",
    ),
    Wrong(
        asked("find f for sr in bowl from uniform with T = 1 K, mu = 0"),
        "uniform",
        "is unbounded",
        "use a volume",
    ),
    Wrong(asked("derive depth for sr in bowl"), "depth", "there is no formula to derive for `depth`", "T_c"),
    Wrong(
        asked("find T_c for ph in bowl with N = 1", "gas ph { statistics bose }\n"),
        "m",
        "the mass `m` is not known in bowl with ph",
        "isotope Sr-84",
    ),
    Wrong(
        asked("find T_c for ph in box with N = 1", "gas ph { statistics bose }\n"),
        "ph",
        "gas `ph` has no mass, which the dispersion `free` needs (line 6)",
        "isotope Sr-84",
    ),
    Wrong(
        asked("find T_c for el in box with N = 1", "gas el { E(px, py) = c*(px + py) }\n"),
        "el",
        "E(px, py) of `el` moves in 2D, `box` is 3D",
        "same number of directions",
    ),
    Wrong(
        asked(
            "find T_c for tr in box with N = 1",
            "gas tr { m = 1 u\n dispersion trapped { omega_z = 1 kHz } }\n",
        ),
        "tr",
        "`tr` holds omega_z as levels: only 2D is left",
        "leave the held directions out",
    ),
]

WRONG = [*NAMES, *DIMENSIONS, *BLOCKS, *QUESTIONS]
