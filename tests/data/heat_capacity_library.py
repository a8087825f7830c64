"""Writes tests/data/heat_capacity_library.csv: heat capacity and enthalpy of ideal gases from general-purpose property libraries.

Run from the root with `pip install CoolProp==8.0.0 chemicals==1.5.2 thermo==0.6.1`.
"""
import CoolProp
import CoolProp.CoolProp as CP
import chemicals
import thermo

R = 8.31446261815324
# Reference equations of state: ideal-gas part, up to the highest temperature that each states, and no further than 2000 K.
EQUATIONS = {
    "N2": "Nitrogen", "CO2": "CO2", "O2": "Oxygen", "CH4": "Methane", "Ar": "Argon", "H2": "Hydrogen", "He": "Helium", "H2O": "Water",
    "CO": "CarbonMonoxide", "N2O": "NitrousOxide", "SF6": "SulfurHexafluoride", "C2H6": "Ethane", "C2H4": "Ethylene", "C3H8": "Propane",
    "SO2": "SulfurDioxide", "NH3": "Ammonia", "Ne": "Neon", "Kr": "Krypton", "Xe": "Xenon", "D2": "Deuterium",
}
# Shomate equations of the NIST Chemistry WebBook (fits of the JANAF tables), by CAS number.
SHOMATE = {
    "N2": "7727-37-9", "O2": "7782-44-7", "CO": "630-08-0", "CO2": "124-38-9", "H2": "1333-74-0", "CH4": "74-82-8", "H2O": "7732-18-5",
    "N2O": "10024-97-2", "NO": "10102-43-9", "NO2": "10102-44-0", "NH3": "7664-41-7", "SO2": "7446-09-5", "SF6": "2551-62-4",
    "CF4": "75-73-0", "C2H2": "74-86-2", "C2H4": "74-85-1",
}
TEMPERATURES = [300, 400, 500, 700, 900, 1000, 1300, 1600, 2000, 2500, 3000, 4000, 5000, 6000]


def main() -> None:
    rows = []
    for species, fluid in EQUATIONS.items():
        highest = min(CP.PropsSI("TMAX", fluid), 2000)
        heat = lambda t: CP.PropsSI("CP0MOLAR", "T", t, "P", 101325, fluid) / R
        for t in TEMPERATURES:
            if t <= highest:
                # Simpson's rule over 2000 parts: better than the digits that are printed.
                n = 2000
                step = (t - 298.15) / n
                total = sum((1 if k in (0, n) else 4 if k % 2 else 2) * heat(298.15 + k * step) for k in range(n + 1))
                rows.append((species, "equation of state", t, heat(t), total * step / 3))
    for species, cas in SHOMATE.items():
        table = thermo.HeatCapacityGas(CASRN=cas)
        if "WEBBOOK_SHOMATE" not in table.all_methods:
            table_methods = [m for m in sorted(table.all_methods) if m.startswith("WEBBOOK_SHOMATE")]
        else:
            table_methods = ["WEBBOOK_SHOMATE"]
        if not table_methods:
            continue
        table.method = table_methods[0]
        low, highest = table.T_limits[table.method]
        for t in TEMPERATURES:
            if max(low, 298) <= t <= highest and low <= 298.15:
                rows.append((species, "Shomate", t, table.T_dependent_property(t) / R, table.T_dependent_property_integral(298.15, t) / R))
    with open("tests/data/heat_capacity_library.csv", "w") as out:
        out.write("# title: Heat capacity and enthalpy of ideal gases from general-purpose property libraries\n")
        out.write(f"# source: `equation of state`: ideal-gas part of the reference equations in CoolProp {CoolProp.__version__}, up to the highest temperature that each states; `Shomate`: equations of the NIST Chemistry WebBook (fits of the JANAF tables) in chemicals {chemicals.__version__} by way of thermo {thermo.__version__}; made by heat_capacity_library.py\n")
        out.write("# digits: eight; enthalpy over R above 298.15 K, in K\n")
        out.write("# status: [CALC] with the libraries; the data inside them were not re-read\n")
        out.write("# licence: facts and numbers; both libraries are under the MIT licence\n")
        out.write("# tolerance: see HEAT_CAPACITY_LIBRARY in tolerances.rs: other spectroscopic data and other fits; what differs more is listed by name in the test\n")
        out.write("species,description,temperature,heat_capacity,enthalpy_rise\n")
        for species, description, t, c, h in rows:
            out.write(f"{species},{description},{t},{c:.8g},{h:.8g}\n")


main()
