"""Writes tests/data/viscosity_library.csv: viscosity of dilute gases and collision integrals from general-purpose property libraries.

Run from the root with `pip install CoolProp==8.0.0 chemicals==1.5.2`.
"""
import CoolProp
import CoolProp.CoolProp as CP
import chemicals
from chemicals.lennard_jones import collision_integral_Kim_Monroe
from chemicals.viscosity import mu_data_VDI_PPDS_8

# Reference correlations, at a density at which the gas is dilute.
FLUIDS = {
    "He": "Helium", "Ar": "Argon", "H2": "Hydrogen", "N2": "Nitrogen", "O2": "Oxygen", "CO2": "CarbonDioxide", "CH4": "Methane",
    "H2O": "Water", "SF6": "SulfurHexafluoride",
}
# Fits of dilute gases in the VDI Heat Atlas, by CAS number: all species, so that some have two sources.
CAS = {
    "He": "7440-59-7", "Ne": "7440-01-9", "Ar": "7440-37-1", "Kr": "7439-90-9", "Xe": "7440-63-3", "H2": "1333-74-0", "N2": "7727-37-9",
    "O2": "7782-44-7", "CO": "630-08-0", "CO2": "124-38-9", "CH4": "74-82-8", "H2O": "7732-18-5", "N2O": "10024-97-2", "SF6": "2551-62-4",
}
TEMPERATURES = [250, 300, 400, 600, 800, 1000]


def main() -> None:
    rows = []
    for species, fluid in FLUIDS.items():
        for t in TEMPERATURES:
            # The property library states how far its equations hold.
            if t <= CP.PropsSI("TMAX", fluid):
                rows.append((species, "correlation", t, CP.PropsSI("V", "T", t, "Dmolar", 1e-3, fluid)))
    for species, cas in CAS.items():
        if cas not in mu_data_VDI_PPDS_8.index:
            continue
        a, b, c, d, e = (float(mu_data_VDI_PPDS_8.loc[cas][k]) for k in "ABCDE")
        for t in TEMPERATURES:
            rows.append((species, "atlas", t, a + t * (b + t * (c + t * (d + t * e)))))
    for t in [0.3, 0.5, 0.7, 1, 1.5, 2, 3, 5, 10, 20, 50, 100]:
        rows.append(("Omega22", "fit of 2014", t, collision_integral_Kim_Monroe(t, 2, 2)))
    with open("tests/data/viscosity_library.csv", "w") as out:
        out.write("# title: Viscosity of dilute gases (Pa s) and the collision integral (2,2)* of the Lennard-Jones potential, from general-purpose property libraries\n")
        out.write(f"# source: `correlation`: reference correlations in CoolProp {CoolProp.__version__} at 0.001 mol/m3; `atlas`: fits of the VDI Heat Atlas in chemicals {chemicals.__version__}; `fit of 2014`: S. U. Kim, C. W. Monroe, J. Comput. Phys. 273 (2014) 358, in the same, with the reduced temperature in the column of temperatures; made by viscosity_library.py\n")
        out.write("# digits: six significant\n")
        out.write("# status: [CALC] with the libraries; the data inside them were not re-read\n")
        out.write("# licence: facts and numbers; both libraries are under the MIT licence\n")
        out.write("# tolerance: see VISCOSITY in tolerances.rs: parameters of a two-parameter potential, fitted to older data\n")
        out.write("species,description,temperature,value\n")
        for species, description, t, value in rows:
            out.write(f"{species},{description},{t},{value:.6g}\n")


main()
