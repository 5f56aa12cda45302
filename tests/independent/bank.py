"""One bank: what it must hold after IEEE 1013, how its batteries are laid out, what charges it, what air it needs."""

import math

from plant import solved
from tables import between, cell, table, value

DEPTH, DAILY_DEPTH, END_OF_LIFE, MARGIN = 0.5, 0.2, 0.8, 0.1
WINDOW, LITHIUM_LEFT, LITHIUM_COLD = 0.8, 0.8, 0.9        # lithium: printed
SAGS_TO = {"flooded": "flooded lead-acid"}                # row of the Peukert exponents
# IEC 62485-2, mA/Ah: recalled, not printed. Equalising or absorption counts.
GAS_mA_per_Ah = {"flooded": 20.0, "agm": 8.0}
# Rest volts of a cell at the charge that a disconnect leaves (flooded 20 %, agm and lfp 10 %); volts that it sags per
# C-rate at 25 °C, twice as much so many K below. Printed nowhere, found by varying a file: comparing proves their use.
LEFT_V = {"flooded": 2.0044, "agm": 1.9934, "lfp": 3.18}
SAG_Vh = {"flooded": 0.72, "agm": 0.45, "lfp": 0.167}
DOUBLES_IN_K = {"flooded": 60, "agm": 60, "lfp": 20}
ROWS = {"flooded": "flooded, deep cycle", "agm": "AGM", "gel": "gel"}
RATES = {"flooded": "flooded lead-acid", "agm": "AGM lead-acid", "lfp": "lithium iron phosphate"}
LFP_CELL_V = {"absorption": (3.45, 3.6), "float": (3.3, 3.4)}       # recalled, printed beside the set points


def cells(bank):
    return round(value(bank["nominal"]) / (3.2 if bank["chemistry"] == "lfp" else 2.0))


def temperature_factor(celsius):
    found = table("battery.toml", "ieee-485-temperature-factor")
    return between([(r[1], r[2]) for r in found["rows"]], celsius)


class Capacity:
    """Steps of the capacity; Ah at the nominal voltage."""

    def __init__(self, plant, year):
        self.bank, site = plant.bank, plant.site
        self.margin = value(site["site"].get("margin", MARGIN))
        self.depth = value(self.bank.get("depth", WINDOW if self.bank["chemistry"] == "lfp" else DEPTH))
        self.daily_depth = value(self.bank.get("daily_depth", DAILY_DEPTH))
        self.day = year.greatest_day_Ah()
        self.days = value(site["site"]["autonomy"])
        self.autonomy = self.day * self.days
        self.coldest = value(self.bank["temperature"][0])
        self.lithium = self.bank["chemistry"] == "lfp"
        if self.lithium:
            self.over_window = self.autonomy / self.depth
            self.aged_and_cold = self.over_window / LITHIUM_LEFT / LITHIUM_COLD
            self.needed = self.aged_and_cold * (1 + self.margin)
        else:
            self.a = self.autonomy / self.depth
            self.b = self.day / self.daily_depth
            self.c = self.autonomy / END_OF_LIFE
            self.factor = temperature_factor(self.coldest)
            self.needed = max(self.a, self.b, self.c) * self.factor * (1 + self.margin)
        self.drawn_in = self.needed / plant.running_amps()

    def lasts(self, held):
        return held * self.depth / self.day

    def holds(self, battery):
        """A battery's capacity drawn in the functional hours, never above its rating; Peukert, greatest exponent."""
        row = SAGS_TO[battery["chemistry"]]
        exponent = cell("battery.toml", "peukert-exponent-ranges", row, "high")
        ratio = min(1.0, self.drawn_in / value(battery["rate"]))
        return value(battery["capacity"]) * ratio ** (1 - 1 / exponent)

    def layout(self, battery, nominal):
        """Batteries in series and strings."""
        series = round(nominal / value(battery["nominal"]))
        return series, math.ceil(self.needed / self.holds(battery) - 1e-9)


def least_disconnect(bank, amps):
    """Volts at which loads are taken off: rest volts of what shall be left, less what the current takes in the cold.

    Freezing, which asks for more in deep cold, governs at no site here.
    """
    cold = 2 ** ((25 - value(bank["temperature"][0])) / DOUBLES_IN_K[bank["chemistry"]])
    sag = SAG_Vh[bank["chemistry"]] * amps / bank["capacity"] * cold
    return cells(bank) * (LEFT_V[bank["chemistry"]] - sag)


def set_points(bank):
    """Middle of the usual range, volts at 25 °C, where none is stated."""
    found = {}
    for stage in ("absorption", "float", "equalize"):
        low, high = usual(bank, stage)
        found[stage] = (low + high) / 2
    return found


def usual(bank, stage):
    if bank["chemistry"] == "lfp":
        low, high = LFP_CELL_V[stage]
    else:
        row, name = ROWS[bank["chemistry"]], "lead-acid-charge-voltages"
        low, high = (cell("battery.toml", name, row, f"{stage}_{end}") for end in ("low", "high"))
    return cells(bank) * low, cells(bank) * high


def compensated(bank, volts, per_K, celsius):
    return volts - cells(bank) * per_K * (25 - celsius)


def air_m3_per_h(bank):
    """IEC 62485-2: Q = 0.05 · n · Igas · C / 1000."""
    return 0.05 * cells(bank) * GAS_mA_per_Ah[bank["chemistry"]] * value(bank["capacity"]) / 1000


def opening_cm2(bank):
    return 28 * air_m3_per_h(bank)


def rate(bank, column):
    return cell("battery.toml", "charge-rates", RATES[bank["chemistry"]], column)


def recharge_h(bank, amps, efficiency, depth):
    """Hours from a depth of discharge to full at constant current: no tail, which no report of a plant here has."""
    return depth * bank["capacity"] / (efficiency * amps)


def shares(amps, strings, string_ohm, link_ohm, diagonal=True):
    """Currents of parallel strings between two ladders of links, by nodal equations.

    Unknown: volts of all nodes of both bars; the take-off of plus is at the first string, that of minus at the last
    (diagonal) or at the first. Volts of the last node of minus are zero.
    """
    count = 2 * strings
    exit_at = strings + (strings - 1 if diagonal else 0)
    matrix = [[0.0] * (count + 1) for _ in range(count)]

    def join(a, b, ohm, emf=0.0):
        for one, other, sign in ((a, b, 1), (b, a, -1)):
            matrix[one][one] += 1 / ohm
            matrix[one][other] -= 1 / ohm
            matrix[one][-1] += sign * emf / ohm

    for i in range(strings):
        join(i, strings + i, string_ohm, emf=1.0)
        if i:
            join(i - 1, i, link_ohm)
            join(strings + i - 1, strings + i, link_ohm)
    matrix[0][-1] -= amps
    matrix[exit_at] = [0.0] * (count + 1)
    matrix[exit_at][exit_at] = 1.0
    volts = solved(matrix)
    return [(1.0 - (volts[i] - volts[strings + i])) / string_ohm for i in range(strings)]
