"""A dispersion with three faults, to be refused."""

from eoscore.gas import Dispersion, Parameter


class Unripe(Dispersion):
    """No origin, another name than its entry point, and a parameter that is no Tarn name."""

    name = "ripe"
    energy = "p^2/(2*m)"
    parameters = (Parameter("my gap", "J", None, "a gap"),)
