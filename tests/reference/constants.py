"""Physical constants in SI units, written to constants.json.

Values and uncertainties come from scipy.constants as they are; the file names the CODATA
adjustment that the installed SciPy carries. Nothing is computed.

Library: SciPy (see requirements.txt). Run: python3 tests/reference/constants.py
"""
import json
import pathlib
import re

import scipy
from scipy import constants

NAMES = {
    "e": "elementary charge",
    "h": "Planck constant",
    "hbar": "reduced Planck constant",
    "k": "Boltzmann constant",
    "mu_B": "Bohr magneton",
    "m_e": "electron mass",
    "epsilon_0": "vacuum electric permittivity",
    "mu_0": "vacuum mag. permeability",
    "eV": "electron volt",
}


def main():
    """Write constants.json beside this script."""
    adjustment = "CODATA " + re.search(r"CODATA ?(\d{4})", constants.__doc__).group(1)
    values = {}
    for symbol, name in NAMES.items():
        value, unit, uncertainty = constants.physical_constants[name]
        values[symbol] = {"name": name, "value": value, "unit": unit, "uncertainty": uncertainty}
    about = {"script": "tests/reference/constants.py", "library": f"SciPy {scipy.__version__}",
             "adjustment": adjustment, "uncertainty": "standard uncertainty, 0 where exact or truncated"}
    path = pathlib.Path(__file__).with_suffix(".json")
    path.write_text(json.dumps({"about": about, "constants": values}, indent=1) + "\n")
    print(f"{len(values)} constants, {adjustment}")


if __name__ == "__main__":
    main()
