"""Constants and isotope masses against CODATA and AME2020, as they come out of a Tarn file."""

import pytest

from eoscore import constants
from eoscore.gas.registry import Signatures
from eoscore.language.reading import read


@pytest.mark.parametrize(
    ("name", "value"),
    [
        ("H", 6.62607015e-34),
        ("K_B", 1.380649e-23),
        ("C", 299792458.0),
        ("E", 1.602176634e-19),
    ],
)
def test_constants_that_define_the_units(name, value):
    """SI Brochure, 9th edition (2019): exact."""
    assert getattr(constants, name) == value


@pytest.mark.parametrize(
    ("name", "value"),
    [
        ("M_U", 1.66053906892e-27),
        ("A_0", 5.29177210544e-11),
        ("EPSILON_0", 8.8541878188e-12),
        ("MU_B", 9.2740100657e-24),
    ],
)
def test_measured_constants(name, value):
    """CODATA 2022; the editions differ by some 1e-10."""
    assert getattr(constants, name) == pytest.approx(value, rel=1e-9, abs=0)


AME2020 = {
    "H-1": (1.0078250319, 1e-10),
    "He-4": (4.00260325413, 16e-11),
    "Li-6": (6.0151228874, 15e-10),
    "Li-7": (7.016003434, 4e-9),
    "Na-23": (22.989769282, 2e-9),
    "K-39": (38.963706485, 5e-9),
    "K-40": (39.96399817, 6e-8),
    "K-41": (40.961825256, 4e-9),
    "Ca-40": (39.962590851, 22e-9),
    "Cr-52": (51.94050471, 12e-8),
    "Sr-84": (83.9134191, 13e-7),
    "Sr-88": (87.905612254, 6e-9),
    "Rb-85": (84.911789736, 5e-9),
    "Rb-87": (86.909180529, 6e-9),
    "Cs-133": (132.905451959, 9e-9),
    "Dy-164": (163.9291808, 7e-7),
    "Er-168": (167.93237828, 28e-8),
    "Yb-174": (173.938867546, 12e-9),
}


@pytest.mark.parametrize("isotope", AME2020)
def test_mass_of_a_neutral_atom(isotope):
    """M. Wang et al., Chin. Phys. C 45, 030003 (2021), within its uncertainty."""
    program = read(f"gas probe {{\n isotope {isotope}\n}}", dispersions=Signatures())
    mass, sigma = AME2020[isotope]
    assert program.bind("probe", None).gas.mass / constants.M_U == pytest.approx(mass, abs=sigma)
