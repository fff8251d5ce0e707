"""Physical constants by their usual symbols, SI values. A leaf.

Source of all: the CODATA values carried by `scipy.constants` (CODATA 2022 from SciPy 1.15 on).
"""

from __future__ import annotations

import math

from scipy import constants as codata

# Exact by definition (SI Brochure, 9th edition, 2019).
PI = math.pi
H = codata.h  # J s
HBAR = codata.hbar  # J s
K_B = codata.k  # J/K
C = codata.c  # m/s
E = codata.e  # C

# Measured (CODATA); the relative standard uncertainty stands behind.
M_E = codata.m_e  # kg, 3e-10
M_U = codata.m_u  # kg, 3e-10
MU_B = codata.physical_constants["Bohr magneton"][0]  # J/T, 3e-10
MU_0 = codata.mu_0  # N/A2, 1.6e-10
EPSILON_0 = codata.epsilon_0  # F/m, 1.6e-10
A_0 = codata.physical_constants["Bohr radius"][0]  # m, 1.6e-10

# Conventional (3rd CGPM, 1901).
G_N = codata.g  # m/s2
