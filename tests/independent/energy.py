"""Energy of a mean day of each month, from loads to what is left over.

Per cents and temperatures without a source are those that the report names under "Taken where the document says
nothing"; where it names none they are marked: not printed.
"""

import re

from tables import cell, value

MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"]
DUTY_AT = 20.0                     # °C of the stated duty
LOST_IN_WIRING = 0.03              # of what is taken out
LOST_BEFORE_CONTROLLER = 0.1       # dirt, mismatch, wiring
LOST_VOLTS, AGED_VOLTS = 0.03, 0.05
IRRADIANCE = cell("protection.toml", "continuous-load-factors", "PV source circuit maximum current, 690.8(A)(1): × Isc",
                  "factor")
MEAN_SUN, BRIGHT_SUN = 0.8, 1.0    # kW/m²
# Part that a bank gives back: of a charge counted at nominal voltage (not printed), and of an energy, since it goes in
# at a higher voltage than it comes out (recalled; that of flooded printed, the others not).
CHARGE_EFFICIENCY = {"flooded": 0.85, "agm": 0.9, "lfp": 0.99}
ENERGY_EFFICIENCY = {"flooded": 0.75, "agm": 0.8, "lfp": 0.93}
LOW_SUN = 3.0                      # h, of the worst month; below it the sun counts as low: not printed


def hours(load):
    if "hours" in load:
        return value(load["hours"])
    if "at" in load:
        return sum(span(s) for s in load["at"])
    return 24.0 if load.get("standing") else None


def span(text):
    begin, end = (int(h) + int(m) / 60 for h, m in re.findall(r"(\d+):(\d+)", text))
    return (end - begin) % 24 or 24.0


def duty(load, mean, hottest):
    low = value(load.get("duty", 1.0))
    high = value(load.get("duty_hot", low))
    part = min(1.0, max(0.0, (mean - DUTY_AT) / (hottest - DUTY_AT)))
    return low + part * (high - low)


def watts(load, nominal):
    each = value(load["current"]) * nominal if "current" in load else value(load["power"])
    return load.get("count", 1) * each


def share_of_week(load):
    return load.get("days_per_week", 7) / 7


class Year:
    """Twelve mean days, Wh, of one bank."""

    def __init__(self, plant):
        self.plant, site = plant, plant.site
        self.nominal = plant.nominal
        self.hottest = value(site["site"]["ambient"][1])
        self.loads = site.get("load", [])
        weather = site.get("weather", {})
        self.means = [value(t) for t in weather.get("temperature", [])] or [DUTY_AT] * 12
        self.sun = [value(s) for s in weather.get("in_plane", [])] or [0.0] * 12

    def of_loads(self, month, ac, every_day=False):
        return sum(watts(load, self.nominal) * hours(load) * duty(load, self.means[month], self.hottest)
                   * (1.0 if every_day else share_of_week(load))
                   for load in self.loads
                   if load.get("ac", False) == ac and MONTHS[month] in load.get("months", MONTHS))

    def of_inverters(self, month, every_day=False):
        """The stated efficiency is at full power, the idle draw in it; no load in a month, no draw."""
        inverter = self.plant.inverter
        out = self.of_loads(month, True, every_day)
        if not inverter or not out:
            return 0.0
        power, idle = value(inverter["power"]), value(inverter.get("idle", 0.0))
        return out * (power / value(inverter["efficiency"]) - idle) / power + 24 * idle

    def of_controllers(self):
        controller = self.plant.controller
        return 24 * value(controller["idle"]) if controller else 0.0

    def used(self, month, every_day=False):
        return self.of_loads(month, False, every_day) + self.of_inverters(month, every_day) + self.of_controllers()

    def taken(self, month, every_day=False):
        """With `every_day`, of a day on which every load of the month runs."""
        return self.used(month, every_day) / (1 - value(self.plant.site["site"].get("losses", LOST_IN_WIRING)))

    def of_arrays(self, month):
        array, controller = self.plant.array, self.plant.controller
        if not array:
            return 0.0
        power = value(array["module"]["power"]) * array["series"] * array["strings"]
        lit = 1 - value(array.get("shade", 0.0))
        return power * lit * self.sun[month] * self.warm(month) * self.efficiency()

    def efficiency(self):
        return (1 - LOST_BEFORE_CONTROLLER) * value(self.plant.controller["efficiency"]) * self.given_back()

    def given_back(self):
        """A tracking controller hands on energy; no site here has another."""
        assert self.plant.controller["kind"] == "mppt"
        return ENERGY_EFFICIENCY[self.plant.bank["chemistry"]]

    def stored(self):
        """Of a current for hours, counted at nominal voltage."""
        return CHARGE_EFFICIENCY[self.plant.bank["chemistry"]]

    def warm(self, month):
        """Share of a module's power with its cells as warm as on the mean day; never above one (not printed)."""
        module = self.plant.array["module"]
        cells = cell_temperature(module, self.means[month], MEAN_SUN)
        return min(1.0, 1 + value(module["power_coefficient"]) * (cells - 25))

    def of_others(self):
        return sum(value(g["output"]) * value(g["hot_output"]) * value(g["hours"]) * self.nominal * self.stored()
                   for g in self.plant.site.get("generator", []))

    def given(self, month):
        return self.of_arrays(month) + self.of_others()

    def greatest_day_Ah(self):
        return max(self.taken(m, every_day=True) for m in range(12)) / self.nominal

    def worst_month(self):
        return min(range(12), key=lambda m: self.given(m) / self.taken(m))


def cell_temperature(module, air, sun):
    """Tc = Ta + (NOCT − 20) G/800, IEC 61215."""
    rise = value(module["noct"]) - cell("pv.toml", "noct-conditions", 800.0, "ambient_C")
    return air + rise * sun / 0.8


class Sun:
    """Voltages and currents of an array, and how many modules it needs."""

    def __init__(self, plant, year, series=None, strings=None):
        self.plant, self.year = plant, year
        self.module = plant.array["module"]
        self.series = series or plant.array["series"]
        self.strings = strings or plant.array["strings"]

    def per_K(self, key):
        return value(self.module[key])

    def cold_Voc(self):
        coldest = value(self.plant.site["weather"]["coldest_morning"])
        return self.series * value(self.module["voc"]) * (1 + self.per_K("voc_coefficient") * (coldest - 25))

    def hot_cells(self):
        return cell_temperature(self.module, self.year.hottest, BRIGHT_SUN)

    def hot_Voc(self):
        return self.series * value(self.module["voc"]) * (1 + self.per_K("voc_coefficient") * (self.hot_cells() - 25))

    def hot_Vmp(self):
        """Power falls as volts times amperes, so volts by the difference of both coefficients; aged, less wiring."""
        slope = self.per_K("power_coefficient") - self.per_K("isc_coefficient")
        warm = 1 + slope * (self.hot_cells() - 25)
        return self.series * value(self.module["vmp"]) * warm * (1 - LOST_VOLTS) * (1 - AGED_VOLTS)

    def nominal_Vmp(self):
        return self.series * value(self.module["vmp"])

    def bright_Isc(self):
        return self.strings * value(self.module["isc"]) * self.gain() * IRRADIANCE

    def gain(self):
        """From the rear: counted in currents, not in energy."""
        return 1 + value(self.module.get("rear_gain", 0.0))

    def Imp(self):
        return self.strings * value(self.module["imp"]) * self.gain()

    def watts(self):
        return self.series * self.strings * value(self.module["power"])

    def needs_string_devices(self):
        """What the other strings drive into a faulty one, above what its module bears."""
        return (self.strings - 1) * IRRADIANCE * value(self.module["isc"]) > value(self.module["series_fuse"])

    def needed(self):
        """Steps of the IEEE 1562 way: ratio, with a stated margin, energy, power, power of a warm module, modules."""
        year, month = self.year, self.year.worst_month()
        critical = self.plant.site["site"].get("critical", False) or year.sun[month] < LOW_SUN
        ratio = cell("battery.toml", "array-to-load-ratio", next(
            r for r in ("critical load, or low sun", "non-critical load, or high and consistent sun")
            if r.startswith("critical") == critical), "high")
        ratio *= 1 + value(self.plant.site["site"].get("margin", 0.0))
        energy = year.taken(month) * ratio / year.efficiency()
        power = energy / year.sun[month]
        each = value(self.module["power"]) * year.warm(month)
        return {"ratio": ratio, "energy": energy, "power": power, "each": each, "modules": power / each}
