"""Handbook numbers of some metals from general reference packages, written to elements.json.

Room-temperature resistivity and density of the solid come from pymatgen-core; mendeleev, which
lists no resistivity, gives density and lattice constant as a second source. Values are copied as
the packages give them (density of mendeleev in g/cm3 and lattice constant in angstrom, converted
to SI). Nothing is computed.

Libraries: pymatgen-core, mendeleev (see requirements.txt). Run: python3 tests/reference/elements.py
"""
import json
import pathlib
from importlib.metadata import version

from mendeleev import element
from pymatgen.core import Element

METALS = ("Fe", "Co", "Ni", "Cu", "Ag", "Al", "Au", "Pt", "Ru", "Ta", "Gd")


def main():
    """Write elements.json beside this script."""
    rows = {}
    for symbol in METALS:
        first, second = Element(symbol), element(symbol)
        rows[symbol] = {
            "pymatgen-core": {"resistivity": float(first.electrical_resistivity),
                              "density": float(first.density_of_solid)},
            "mendeleev": {"density": float(f"{second.density * 1e3:.10g}"),
                          "lattice_constant": float(f"{second.lattice_constant * 1e-10:.10g}"),
                          "lattice": second.lattice_structure},
        }
    about = {"script": "tests/reference/elements.py",
             "packages": {name: version(name) for name in ("pymatgen-core", "mendeleev")},
             "units": "resistivity ohm m (room temperature), density kg/m3, lattice constant m"}
    path = pathlib.Path(__file__).with_suffix(".json")
    path.write_text(json.dumps({"about": about, "elements": rows}, indent=1) + "\n")
    print(f"{len(rows)} elements")


if __name__ == "__main__":
    main()
