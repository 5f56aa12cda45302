"""Reference tables, values with units, and what a conductor of a size is and carries."""

import functools
import math
import pathlib
import tomllib

REFERENCE = pathlib.Path(__file__).resolve().parents[1] / "reference"

# Not printed and not in the guide: fitted.
ASSUMED = {
    "fuse_V": 0.1,            # resistance of a fuse: this over its rating
    "breaker_V": 0.2,         # of a breaker
    "switch_V": 0.05,         # of a switch
    "lug_ohm": 1e-4,          # printed: "four crimped lugs of 0.1 mΩ"
    "copper_class_5": 19.95,  # Ω·mm²/km at 20 °C for sizes IEC 60228 does not list: the greatest product of its table
    "clad_class_5": 31.82,    # the same of copper-clad aluminium
    "full_per_nominal": 1.1,  # driving voltage of the greatest fault current
    "empty_per_nominal": 0.99,  # of the least
    "aged_cold_empty": 4.5,   # internal resistance then, over that of the full, warm, new bank
}
# Upper conventional currents over the rating. gG and breakers: tests/reference/protection.toml; class T and molded
# case: not in the reference, fitted (1.35).
OPENS = {"miniature B": 1.45, "miniature C": 1.45, "class T": 1.35, "molded case": 1.35}
COPPER_20 = 1000 / 58        # Ω·mm²/km, IEC 60028
ZERO = 234.5                 # IEC 60028, inferred zero-resistance temperature, sign changed


@functools.cache
def table(file, name):
    with open(REFERENCE / file, "rb") as handle:
        return next(t for t in tomllib.load(handle)["table"] if t["id"] == name)


def cell(file, name, row, column):
    found = table(file, name)
    at = found["columns"].index(column)
    return next((r[at] for r in found["rows"] if r[0] == row), "")


PREFIX = {"k": 1e3, "m": 1e-3, "": 1.0}


def value(text):
    """Number in base units (A, V, W, m, ohm, degC, mm2) of a text such as "7.2 mohm"."""
    if isinstance(text, (int, float)):
        return float(text)
    number, _, unit = text.partition(" ")
    if unit == "%":
        return float(number) / 100
    if unit in ("mm2", "AWG", "kcmil"):
        return area(text)
    for base in ("ohm", "Ah", "A2s", "degC", "A", "V", "W", "m"):
        if unit.endswith(base) and unit[: -len(base)] in PREFIX and unit != "mm":
            return float(number) * PREFIX[unit[: -len(base)]]
    if unit == "mm":
        return float(number) / 1000
    raise ValueError(text)


def area(size):
    number, unit = size.split()
    if unit == "mm2":
        return float(number)
    if unit == "kcmil":
        return float(number) * 0.5067075
    gauge = 1 - int(number[0]) if number.endswith("/0") else int(number)
    return math.pi / 4 * (0.127 * 92 ** ((36 - gauge) / 39)) ** 2      # ASTM B258


def per_km_20(size, copper=True):
    """Ω/km at 20 °C of a class 5 plain conductor."""
    if not copper:
        return ASSUMED["clad_class_5"] / area(size)
    if size == "35 mm2":
        return 0.554                                    # blank in the reference: IEC 60228:2004, Table 3, recalled
    found = cell("conductors.toml", "iec-60228-class-5", area(size), "plain") if size.endswith("mm2") else ""
    return found or ASSUMED["copper_class_5"] / area(size)


def at(temperature):
    return (ZERO + temperature) / (ZERO + 20)


def base_ampacity(rules, size, insulation, installed):
    if rules == "us":
        column = "90C" if insulation >= 90 else "75C" if insulation >= 75 else "60C"
        return us_ampacity(size, column)
    if installed == "free_air":
        found = cell("ampacity.toml", "iec-b52-10-pvc-free-air", area(size), "F_two_touching")
        if found:
            return found
    column = {"free_air": "C", "clipped": "C", "cable_in_conduit": "B2", "duct": "D1"}[installed]
    return cell("ampacity.toml", "iec-b52-2-pvc-two", area(size), column)


def us_ampacity(size, column):
    if (size, column) == ("4 AWG", "75C"):
        return 85                                       # blank in the reference: NFPA 70 Table 310.16, recalled
    return cell("ampacity.toml", "nec-310-16-copper", size.removesuffix(" AWG"), column)


def factors(rules, insulation, installed, ambient, bundled):
    if rules == "us":
        rows = table("ampacity.toml", "nec-310-15-b-1-ambient-30c")
        heat = next(r[rows["columns"].index(f"{insulation:.0f}C")] for r in rows["rows"] if r[0] >= ambient)
        group = next(r[1] for r in table("ampacity.toml", "nec-310-15-c-1-bundling")["rows"] if bundled <= r[0])
        return heat, group
    if installed == "duct":                             # Table B.52.15 is not in the reference: its formula, base 20 °C
        heat = round(math.sqrt((insulation - ambient) / (insulation - 20)), 2)
    else:
        heat = cell("ampacity.toml", "iec-b52-14-ambient", ambient, "PVC")
    column = "single_layer_wall_floor" if installed == "clipped" else "bunched"
    return heat, cell("ampacity.toml", "iec-b52-17-grouping", math.ceil(bundled / 2), column)
