"""Reference tables, values with units, and what a conductor of a size is and carries.

What neither the reference nor the report holds is marked recalled; each such value is a figure that the reader of a
report cannot redo from it.
"""

import functools
import math
import pathlib
import tomllib

REFERENCE = pathlib.Path(__file__).resolve().parents[1] / "reference"

# Upper conventional current over the rating, families that the reference does not hold: recalled. The report prints
# only the product, at the least prospective current.
OPENS = {"class T": 1.35, "blade": 1.35, "molded case": 1.35}
# Least cross-section, mm²: recalled, as the reports say.
LEAST = {"us": "14 AWG", "iec": "1.5 mm2", "craft_us": "16 AWG", "craft_iso": "1 mm2"}
# Nominal, full and empty volts of a lithium cell: recalled, the report prints those of lead-acid only.
CELLS = {"lfp": (3.2, 3.65, 2.5)}
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
PLAIN = {"%": 0.01, "%/K": 0.01, "mV/K": 1e-3, "h": 1.0, "d": 1.0, "s": 1.0, "kWh/m2": 1.0, "cm2": 1.0, "uF": 1e-6}


def value(text):
    """Number in base units (A, V, W, m, ohm, degC, mm2, h, d, cm2) of a text such as "7.2 mohm"."""
    if isinstance(text, (int, float)):
        return float(text)
    number, _, unit = text.partition(" ")
    if unit in PLAIN:
        return float(number) * PLAIN[unit]
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


@functools.cache
def greatest_product(coating):
    """Ω·mm²/km at 20 °C: the greatest that IEC 60228, class 5, allows to any size."""
    found = table("conductors.toml", "iec-60228-class-5")
    at = found["columns"].index(coating)
    return max(r[0] * r[at] for r in found["rows"] if r[at] != "")


def per_km_20(size, coating):
    """Ω/km at 20 °C of a class 5 copper conductor."""
    if (size, coating) == ("35 mm2", "plain"):
        return 0.554                                    # blank in the reference: IEC 60228:2004, Table 3, recalled
    if size.endswith("mm2"):
        return cell("conductors.toml", "iec-60228-class-5", area(size), coating)
    stranded = cell("conductors.toml", "nec-ch9-table-8-stranded", size.split()[0], "ohm_per_km") / at(75)
    return max(stranded, greatest_product(coating) / area(size))


def at(temperature):
    return (ZERO + temperature) / (ZERO + 20)


def withstand_k(rules, insulation, compound):
    """k of copper between its rating and the limit of short circuit; as tabulated under `iec`."""
    if rules == "iec" and (insulation, compound) == (70, "PVC"):
        return cell("protection.toml", "iec-adiabatic-k-line", "PVC ≤ 300 mm2", "copper")
    end = 160 if compound == "PVC" else 250
    return 226 * math.sqrt(math.log(1 + (end - insulation) / (ZERO + insulation)))


def base_ampacity(rules, size, insulation, installed):
    if rules == "us":
        column = "90C" if insulation >= 90 else "75C" if insulation >= 75 else "60C"
        if installed == "free_air":
            return cell("ampacity.toml", "nec-310-17-copper", size.split()[0], column)
        return us_ampacity(size, column)
    if rules == "craft_us":
        return cell("ampacity.toml", "cfr-33-183-425-table-5", size.split()[0], f"{insulation:.0f}C")
    if rules == "craft_iso":
        return craft_iso_ampacity(area(size), f"{insulation:.0f}C")
    if installed == "free_air":
        found = cell("ampacity.toml", "iec-b52-10-pvc-free-air", area(size), "F_two_touching")
        if found:
            return found
    column = {"free_air": "C", "clipped": "C", "cable_in_conduit": "B2", "duct": "D1"}[installed]
    return cell("ampacity.toml", "iec-b52-2-pvc-two", area(size), column)


def craft_iso_ampacity(mm2, column):
    """Three recalled cells are lowered to the US craft table, 75 °C, at the same area: its note says how."""
    if column == "70C" and mm2 in (1, 2.5, 4):
        rows = [(area(f"{r[0]} AWG"), r[2]) for r in table("ampacity.toml", "cfr-33-183-425-table-5")["rows"]]
        (low, less), (high, more) = next(p for p in zip(rows, rows[1:]) if p[0][0] <= mm2 <= p[1][0])
        return round(less * (more / less) ** (math.log(mm2 / low) / math.log(high / low)), 1)
    return cell("ampacity.toml", "iso-10133-table-a1", mm2, column)


def us_ampacity(size, column):
    if (size, column) == ("4 AWG", "75C"):
        return 85                                       # blank in the reference: NFPA 70 Table 310.16, recalled
    return cell("ampacity.toml", "nec-310-16-copper", size.split()[0], column)


def next_standard(amps):
    ratings = [r[0] for r in table("protection.toml", "nec-240-6-a-standard-ratings")["rows"]]
    return next(r for r in ratings if r >= amps)


def between(rows, at):
    """Straight line between the rows (x, y) of a table; none beyond its ends."""
    (low, less), (high, more) = next(p for p in zip(rows, rows[1:]) if p[0][0] <= at <= p[1][0])
    return less + (at - low) / (high - low) * (more - less)


def up_to(file, name, amount):
    return next(r[1] for r in table(file, name)["rows"] if r[0] == "more" or amount <= r[0])


def factors(rules, insulation, installed, ambient, bundled, space):
    """Factors by the word that the report gives them."""
    if rules == "us":
        rows = table("ampacity.toml", "nec-310-15-b-1-ambient-30c")
        heat = next(r[rows["columns"].index(f"{insulation:.0f}C")] for r in rows["rows"] if r[0] >= ambient)
        return {"ambient": heat, "bundled conductors": up_to("ampacity.toml", "nec-310-15-c-1-bundling", bundled)}
    if rules.startswith("craft"):
        heat = {"ambient": math.sqrt((insulation - ambient) / (insulation - 30)) if ambient > 30 else 1.0}
        if space == "engine":
            heat = {"engine space": cell("ampacity.toml", "cfr-33-183-425-engine-space", insulation, "factor")}
            if rules == "craft_iso":                    # below the factors of its note, by the air that the note names
                heat = {"engine space": math.sqrt((insulation - 60) / (insulation - 30))}
        name = "cfr-33-183-425-bundling" if rules == "craft_us" else "iso-13297-bundling"
        return heat | {"bundled conductors": up_to("ampacity.toml", name, bundled)}
    if installed == "duct":                             # Table B.52.15 is not in the reference: its formula, base 20 °C
        heat = round(math.sqrt((insulation - ambient) / (insulation - 20)), 2)
    else:
        heat = cell("ampacity.toml", "iec-b52-14-ambient", ambient, "PVC")
    column = "single_layer_wall_floor" if installed == "clipped" else "bunched"
    return {"ambient": heat,
            "bundled conductors": cell("ampacity.toml", "iec-b52-17-grouping", math.ceil(bundled / 2), column)}
