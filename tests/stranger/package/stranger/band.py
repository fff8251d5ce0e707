"""The lowest band of a cubic lattice in tight binding."""

from eoscore.gas import Dispersion, Parameter


class Band(Dispersion):
    """Hopping J between neighbours at the distance a: the zone ends at pi hbar/a."""

    name = "band"
    origin = "N. W. Ashcroft, N. D. Mermin, Solid State Physics, chapter 10"
    energy = "2*J*(3 - cos(px*a/hbar) - cos(py*a/hbar) - cos(pz*a/hbar))"
    momentum = ("px", "py", "pz")
    walls = ("pi*hbar/a - abs(px)", "pi*hbar/a - abs(py)", "pi*hbar/a - abs(pz)")
    needs_mass = False
    parameters = (
        Parameter("J", "J", None, "energy of hopping to a neighbour"),
        Parameter("a", "m", None, "distance of neighbours"),
    )
