"""Writes core/src/gas/species/table.rs from tests/data/nasa_glenn_2002.json, digit for digit. Run from the root; then `cargo fmt`."""
import json
import re

SHAPES = {
    "Atom": ["Ar", "H", "He", "Kr", "N", "Ne", "O", "Xe"],
    "Linear": ["CO", "CO2", "C2H2", "D2", "H2", "HD", "N2", "N2O", "NO", "O2", "OH"],
    "Other": ["CF4", "CH4", "C2H4", "C2H6", "C3H8", "H2O", "NH3", "NO2", "SF6", "SO2"],
}


def grouped(n: int) -> str:
    return f"{n:_}"


def decimal(text: str) -> str:
    mantissa, _, exponent = text.partition("E")
    whole, _, fraction = mantissa.partition(".")
    number, power = int(whole + fraction), int(exponent or 0) - len(fraction)
    while number and number % 10 == 0:
        number, power = number // 10, power + 1
    return "ZERO" if number == 0 else f"d({grouped(number)}, {power})"


def limit(text: str) -> str:
    number = repr(float(text))
    whole, _, fraction = number.partition(".")
    return f"{grouped(int(whole))}.{fraction}"


def main() -> None:
    data = json.load(open("tests/data/nasa_glenn_2002.json"))["species"]
    lines = [
        "//! Nine-coefficient polynomials of NASA/TP-2002-211556, each coefficient as printed. Made by `tests/data/species_tables.py`; a test",
        "//! compares every digit with the data file beside it.",
        "",
        "use super::{Coefficient, Shape, Species, SpeciesRange};",
        "",
        "const ZERO: Coefficient = Coefficient::new(0, 0);",
        "",
        "const fn d(mantissa: i64, exponent: i32) -> Coefficient {",
        "    Coefficient::new(mantissa, exponent)",
        "}",
        "",
    ]
    names = []
    for shape, members in SHAPES.items():
        for key in members:
            species = data[key]
            name = key.upper()
            names.append((key, name))
            lines.append(f"/// {key}.")
            lines.append(f"pub static {name}: Species<'static> = Species {{")
            lines.append(f'    name: "{key}",')
            grams = species["molar_mass_g_mol"]
            whole, _, fraction = grams.partition(".")
            mass = decimal(f"{whole}.{fraction}E-3")
            lines.append(f"    molar_mass: {mass},")
            lines.append(f"    shape: Shape::{shape},")
            lines.append("    ranges: &[")
            for part in species["ranges"]:
                lines.append("        SpeciesRange {")
                lines.append(f"            low: {limit(part['Tmin'])},")
                lines.append(f"            high: {limit(part['Tmax'])},")
                lines.append("            heat_capacity: [" + ", ".join(decimal(text) for text in part["a"]) + "],")
                lines.append(f"            enthalpy: {decimal(part['b'][0])},")
                lines.append("        },")
            lines.append("    ],")
            lines.append("};")
            lines.append("")
    names.sort(key=lambda pair: re.sub(r"(\d+)", lambda match: match[0].zfill(3), pair[0]))
    lines.append("/// Every species of the table, by name.")
    lines.append(f"pub static ALL: [&Species<'static>; {len(names)}] = [" + ", ".join(f"&{name}" for _, name in names) + "];")
    open("core/src/gas/species/table.rs", "w").write("\n".join(lines) + "\n")


main()
