"""Physical constants in SI units.

Five are exact by the definition of the SI (SI Brochure, 9th edition, 2019) or follow from those by
arithmetic. The three measured ones are the CODATA 2022 adjustment (Mohr, Newell, Taylor and Tiesinga,
"CODATA recommended values of the fundamental physical constants: 2022").
"""

from __future__ import annotations

import math
from typing import Final

# Exact by definition of the metre, SI Brochure 2019 [m/s]
SPEED_OF_LIGHT: Final = 299_792_458.0
# Exact by definition of the ampere, SI Brochure 2019 [C]
ELEMENTARY_CHARGE: Final = 1.602176634e-19
# Exact by definition of the kilogram, SI Brochure 2019 [J s]
PLANCK: Final = 6.62607015e-34
# Exact: h / 2π [J s]
REDUCED_PLANCK: Final = PLANCK / (2 * math.pi)
# Exact by definition of the mole, SI Brochure 2019 [1/mol]
AVOGADRO: Final = 6.02214076e23
# Exact by definition of the kelvin, SI Brochure 2019 [J/K]
BOLTZMANN: Final = 1.380649e-23
# Measured, CODATA 2022, relative standard uncertainty 1.6e-10 [F/m]
VACUUM_PERMITTIVITY: Final = 8.8541878188e-12
# Measured, CODATA 2022, relative standard uncertainty 1.6e-10 [H/m]
VACUUM_PERMEABILITY: Final = 1.25663706127e-6
# Measured, CODATA 2022, relative standard uncertainty 3.1e-10 [kg]
ELECTRON_MASS: Final = 9.1093837139e-31
