"""Writes tests/data/vapour_pressure_library.csv: vapour pressure of pure liquids from general-purpose property libraries.

Run from the root with `pip install CoolProp==8.0.0 chemicals==1.5.2`.
"""
import math

import CoolProp
import CoolProp.CoolProp as CP
import chemicals
from chemicals import vapor_pressure

# Reference equations of state.
FLUIDS = {
    "Ar": "Argon", "Kr": "Krypton", "Xe": "Xenon", "CO": "CarbonMonoxide", "CO2": "CarbonDioxide", "N2": "Nitrogen", "N2O": "NitrousOxide",
    "O2": "Oxygen", "CF4": "R14", "CH4": "Methane", "C2H4": "Ethylene", "C2H6": "Ethane", "C3H8": "n-Propane", "H2O": "Water",
    "NH3": "Ammonia", "SF6": "SulfurHexafluoride", "SO2": "SulfurDioxide",
}
# Fits of Perry's Chemical Engineers' Handbook, for species that have no such equation, by CAS number.
CAS = {"C2H2": "74-86-2", "NO": "10102-43-9"}


def main() -> None:
    rows = []
    for species, fluid in FLUIDS.items():
        low, high = CP.PropsSI("Ttriple", fluid), CP.PropsSI("Tcrit", fluid)
        temperatures = {t for t in range(100, 421, 10) if low + 0.5 < t < high - 0.5} | {t for t in (293, 296, 300) if low < t < high}
        for t in sorted(temperatures):
            rows.append((species, "equation of state", t, CP.PropsSI("P", "T", t, "Q", 0, fluid)))
        rows.append((species, "critical temperature", f"{high:.6g}", CP.PropsSI("Pcrit", fluid)))
    for species, cas in CAS.items():
        fit = vapor_pressure.Psat_data_Perrys2_8.loc[cas]
        c = [float(fit[f"C{k}"]) for k in range(1, 6)]
        # From the melting point of the constants under test on: NO melts at 112 K there.
        for t in range(120, 421, 10):
            if float(fit["Tmin"]) <= t <= float(fit["Tmax"]):
                rows.append((species, "handbook fit", t, math.exp(c[0] + c[1] / t + c[2] * math.log(t) + c[3] * t ** c[4])))
    with open("tests/data/vapour_pressure_library.csv", "w") as out:
        out.write("# title: Vapour pressure of pure liquids (Pa), and critical points, from general-purpose property libraries\n")
        out.write(f"# source: `equation of state` and `critical temperature`: reference equations in CoolProp {CoolProp.__version__}; `handbook fit`: Perry's Chemical Engineers' Handbook, 8th edition, table 2-8, in chemicals {chemicals.__version__}; made by vapour_pressure_library.py\n")
        out.write("# digits: seven significant\n")
        out.write("# status: [CALC] with the libraries; the data inside them were not re-read\n")
        out.write("# licence: facts and numbers; both libraries are under the MIT licence\n")
        out.write("# tolerance: see VAPOUR_PRESSURE in tolerances.rs: fits of other data with four constants\n")
        out.write("species,description,temperature,value\n")
        for species, description, t, value in rows:
            out.write(f"{species},{description},{t},{value:.7g}\n")


main()
