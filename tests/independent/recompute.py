"""Recompute the numbers of the demo reports from their site files, by another method in another language.

    python3 tests/independent/recompute.py PATH_TO_EXAMPLE_BINARY

Nothing here comes from the library's code: the inputs are the site files, the reference tables, and what the
report itself prints (the size and device of each circuit, since they are its decision). The network is solved by
plain fixed-point iteration. Assumptions that neither report nor guide states are listed in ASSUMED; each is a gap
of the documentation, and was fitted to the printed figures, so it is checked for consistency only.
"""

import functools
import math
import pathlib
import re
import subprocess
import sys
import tomllib

import report

HERE = pathlib.Path(__file__).resolve().parent
SITES = HERE.parents[1] / "core" / "examples" / "sites"
REFERENCE = HERE.parent / "reference"

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


# -- values with units ------------------------------------------------------------------------------------------

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


# -- conductors -------------------------------------------------------------------------------------------------

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


# -- the site ---------------------------------------------------------------------------------------------------

class Circuit:
    """One run as the report decided it: stated keys from the file, size and device from the report."""

    def __init__(self, site, keys, printed):
        self.keys, self.name = keys, keys["name"]
        self.rules = site["site"]["rules"]
        self.size = keys.get("size", printed["size"])
        self.copper = keys.get("material", "copper") == "copper"
        self.insulation = value(re.search(r"\S+ degC", printed["insulation"])[0])
        self.installed = keys.get("installed", "conduit")
        self.ambient = value(keys.get("ambient", site["site"]["ambient"][1]))
        self.coldest = value(site["site"]["ambient"][0])
        self.bundled = keys.get("bundled", 2)
        self.metres = 2 * value(keys["one_way"])
        self.family, self.rating = printed["family"], printed["rating"]
        lugs = sum(j.get("count", 1) for j in keys.get("joint", [])) or 4
        self.joints = lugs * ASSUMED["lug_ohm"]
        self.joints += sum(ASSUMED["switch_V"] / value(p["rating"]) for p in keys.get("part", []))

    def device_ohm(self):
        if not self.family:
            return 0.0
        breaker = self.family.startswith(("miniature", "molded"))
        return ASSUMED["breaker_V" if breaker else "fuse_V"] / self.rating

    @functools.cache
    def base(self):
        return base_ampacity(self.rules, self.size, self.insulation, self.installed)

    @functools.cache
    def ampacity(self):
        heat, group = factors(self.rules, self.insulation, self.installed, self.ambient, self.bundled)
        return self.base() * heat * group

    def temperature(self, amps):
        """Heat goes with the square of the current; the report stops at the insulation's rating."""
        rise = (self.insulation - self.ambient) * (amps / self.ampacity()) ** 2
        return min(self.ambient + rise, self.insulation)

    def ohms(self, temperature):
        return per_km_20(self.size, self.copper) / 1000 * self.metres * at(temperature) + self.joints + self.device_ohm()

    def cold_ohms(self):
        return COPPER_20 / area(self.size) / 1000 * self.metres * at(self.coldest)

    def opens(self):
        if self.family == "gG":
            rows = table("protection.toml", "iec-60269-gg-conventional")["rows"]
            row = next(r for r in reversed(rows) if self.rating >= r[0] and (r[0] != 4 or self.rating > 4))
            return row[3] * self.rating
        return OPENS[self.family] * self.rating


class Network:
    def __init__(self, site, circuits):
        self.site, self.circuits = site, circuits
        self.banks = {b["name"]: b for b in site["bank"]}
        self.loads = {l["name"]: l for l in site.get("load", []) + site.get("inverter", [])}

    def tree(self, root):
        """Circuits outwards from a bank: (circuit, near node, far node), nearest first."""
        order, seen = [], {root}
        grown = True
        while grown:
            grown = False
            for circuit in self.circuits:
                ends = (circuit.keys["from"], circuit.keys["to"])
                for near, far in (ends, ends[::-1]):
                    if near in seen and far not in seen and (near == root or near not in self.banks):
                        order.append((circuit, near, far))
                        seen.add(far)
                        grown = True
        return order

    def draw(self, name, volts, starting):
        load = self.loads.get(name)
        if load is None:
            return 0.0
        if name == starting:
            return value(load["start"])
        if "efficiency" in load:
            return value(load["power"]) / value(load["efficiency"]) / volts
        count = load.get("count", 1)
        if "current" in load:
            return count * value(load["current"])
        return count * value(load["power"]) / volts

    def solve(self, root, starting=None):
        """Currents and volts with one bank at cut-off; conductors at the temperature their current gives them.

        A start is too short to warm a conductor: the temperatures of the running plant stay.
        """
        running = self.solve(root)[0] if starting else None
        order = self.tree(root)
        source = value(self.banks[root]["cut_off"])
        amps = {c.name: 0.0 for c in self.circuits}
        volts = {far: source for _, _, far in order} | {root: source}
        for _ in range(500):
            at_node = {name: self.draw(name, volts[name], starting) for name in volts}
            new = {c.name: 0.0 for c in self.circuits}
            for circuit, near, far in reversed(order):
                new[circuit.name] = at_node[far]
                at_node[near] += at_node[far]
            for circuit, near, far in order:
                ohms = circuit.ohms(circuit.temperature((running or new)[circuit.name]))
                volts[far] = volts[near] - new[circuit.name] * ohms
                if volts[far] <= 0:
                    return None
            if max(abs(new[k] - amps[k]) for k in amps) < 1e-12:
                return new, volts
            amps = new
        return None

    def path(self, root, node):
        steps = {far: (circuit, near) for circuit, near, far in self.tree(root)}
        while node != root:
            circuit, node = steps[node]
            yield circuit

    def fault(self, root, node, least):
        """Ohms and driving volts from one bank to a node."""
        bank = self.banks[root]
        inner, nominal = value(bank["internal_resistance"]), value(bank["nominal"])
        if least:
            ohms = inner * ASSUMED["aged_cold_empty"] + sum(c.ohms(c.insulation) for c in self.path(root, node))
            return ohms, nominal * ASSUMED["empty_per_nominal"]
        return inner + sum(c.cold_ohms() for c in self.path(root, node)), nominal * ASSUMED["full_per_nominal"]

    def fault_amps(self, node, least, without=None, behind=0.0):
        """Current of all banks into a short circuit behind `behind` ohms at a node, none through `without`."""
        conductance, volts = 0.0, 0.0
        for root in self.banks:
            reachable = root == node or any(far == node for _, _, far in self.tree(root))
            if reachable and (without is None or without not in list(self.path(root, node))):
                ohms, volts = self.fault(root, node, least)
                conductance += 1 / ohms
        return volts / (1 / conductance + behind)


# -- comparison -------------------------------------------------------------------------------------------------

class Comparison:
    def __init__(self):
        self.rows, self.passed, self.failed = [], 0, 0

    def number(self, where, what, printed, ours):
        shown, slack = printed
        self.record(where, what, f"{shown:.6g}", f"{ours:.6g}", shown - ours, abs(shown - ours) <= slack * (1 + 1e-9))

    def fact(self, where, what, printed, ours):
        self.record(where, what, printed, ours, "", printed == ours)

    def record(self, where, what, printed, ours, difference, good):
        self.passed += good
        self.failed += not good
        shown = f"{difference:+.2g}" if difference != "" else ""
        self.rows.append((where, what, str(printed), str(ours), shown, "" if good else "DIFFERS"))


def demand(circuit, amps, hours):
    """Current that the device has to carry: 1.25 × continuous + rest under `us`, the design current else."""
    return amps + 0.25 * hours if circuit.rules == "us" else amps


def drop_limit(network, circuit, uses):
    if circuit.rules == "us":
        feeds_board = circuit.keys["to"] in {b["name"] for b in network.site["board"]}
        return 3 if feeds_board else 5
    return 3 if uses & {"lighting", "critical"} else 5


class Expectation:
    """All we hold for one circuit, over every bank that may feed alone: the greatest current, the least volts."""

    def __init__(self, network, circuit):
        keys, self.network, self.circuit = circuit.keys, network, circuit
        states = {root: network.solve(root) for root in network.banks}
        self.amps = max([value(keys.get("current", 0))] + [s[0][circuit.name] for s in states.values()])
        served = self.served()
        worst = max(states, key=lambda root: states[root][0][circuit.name])
        self.hours = self.amps if "current" in keys else sum(
            network.draw(n, states[worst][1][n], None) for n in served if network.loads[n].get("continuous", True))
        self.degrees = circuit.temperature(self.amps)
        self.ohms = circuit.ohms(self.degrees)
        # Only ways through this circuit count for its far end. A link leads to a bank, which has no volts to check.
        ends = [s[1][keys["to"]] for root, s in states.items()
                if root != keys["to"] and circuit in list(network.path(root, keys["to"]))]
        self.end = min(ends)
        cut_off = value(network.site["bank"][0]["cut_off"])
        self.nominal = value(network.site["bank"][0]["nominal"])
        self.path = (cut_off - self.end) / self.nominal * 100
        self.start = None
        load = network.loads.get(keys["to"], {})
        if "start" in load:
            self.start = network.solve(next(iter(network.banks)), keys["to"])[1][keys["to"]]
        self.uses = {network.loads[n].get("use", "other") for n in served}
        self.least_supply = load.get("least")
        near = keys["from"]
        before = network.fault_amps(near, False, without=circuit)
        beyond = [1 / network.fault(r, near, False)[0] for r in network.banks if circuit in list(network.path(r, near))]
        self.greatest = max(before, sum(beyond) * self.nominal * ASSUMED["full_per_nominal"])
        self.least = network.fault_amps(near, True, without=circuit, behind=circuit.ohms(circuit.insulation))

    def served(self):
        """Loads that this circuit feeds, seen from the first bank."""
        tree = self.network.tree(next(iter(self.network.banks)))
        below = {self.circuit.keys["to"]}
        for circuit, near, far in tree:
            if near in below:
                below.add(far)
        return [n for n in self.network.loads if n in below]

    def check(self, label):
        """(actual, limit) that we hold for a printed check; None where nothing can be recomputed."""
        c, rating = self.circuit, self.circuit.rating
        device = c.keys.get("device", [{}])
        stated = device[0] if isinstance(device, list) and device else {}
        stock = next((d for d in self.network.site.get("stock", {}).get("device", [])
                      if d["family"] == c.family and rating in map(value, d["ratings"])), {})
        part = stated or stock
        column = re.search(r"(60|75) °C column", label)
        if column:
            return demand(c, self.amps, self.hours), us_ampacity(c.size, column[1] + "C")
        if label.startswith("mechanical minimum"):
            return area(c.size), area("14 AWG") if c.rules == "us" else 1.5          # recalled, not in the reference
        if label.startswith(("design current Ib", "design current against")):
            return self.amps, c.ampacity()
        if label.startswith("rating of the device"):
            return rating, demand(c, self.amps, self.hours)
        if label.startswith("rating not above"):
            return rating, c.ampacity()
        if label.startswith("current at which the device has opened"):
            return c.opens(), 1.45 * c.ampacity()
        if label.startswith("voltage drop"):
            return self.path, self.own_limit()
        if label.startswith("voltage at the far end while it starts"):
            return self.start, value(self.least_supply)
        if label.startswith("voltage at the far end"):
            return self.end, value(self.least_supply)
        if label.startswith("voltage rating"):
            return value(part["dc_voltage"]), max(value(b["highest"]) for b in self.network.site["bank"])
        if label.startswith("breaking capacity"):
            return value(part["breaking"]), self.greatest
        if label.startswith("least prospective"):
            guard = c if c.family else next(g for g in self.network.circuits if g.keys["to"] == c.keys["from"])
            return self.least, guard.opens()
        if label.startswith("let-through"):
            k = cell("protection.toml", "iec-adiabatic-k-line", "PVC ≤ 300 mm2", "copper")
            return value(part["let_through"]), (k * area(c.size)) ** 2
        if label.startswith("greatest conductor"):
            return area(c.size), area(part["terminal_range"][1])
        if label.startswith("next standard rating"):
            ratings = [r[0] for r in table("protection.toml", "nec-240-6-a-standard-ratings")["rows"]]
            return rating, next(r for r in ratings if r >= c.ampacity())
        if label.startswith("limit for small conductors"):
            guard = rating or self.network.circuits[0].rating
            return guard, cell("ampacity.toml", "nec-240-4-d-small-conductors", c.size.removesuffix(" AWG"), "max_ocpd_A")
        return None

    def own_limit(self):
        return drop_limit(self.network, self.circuit, self.uses)


def compare(out, site, printed):
    circuits = [Circuit(site, keys, printed[keys["name"]]) for keys in site["circuit"]]
    network = Network(site, circuits)
    for circuit in circuits:
        said, name = printed[circuit.name], circuit.name
        ours = Expectation(network, circuit)
        amps = re.match(r"([\d.]+) A in the worst hour, ([\d.]+) A", said["current"])
        out.number(name, "current, A", report.amount(amps[1]), ours.amps)
        out.number(name, "current for hours, A", report.amount(amps[2]), ours.hours)
        capacity = re.match(r"([\d.]+) A.* × ([\d.]+) ambient × ([\d.]+) bundled conductors = ([\d.]+) A", said["capacity"])
        for what, text, mine in zip(
            ("table ampacity, A", "ambient factor", "grouping factor", "ampacity, A"), capacity.groups(),
            (circuit.base(), *factors(circuit.rules, circuit.insulation, circuit.installed, circuit.ambient,
                                      circuit.bundled), circuit.ampacity()), strict=True):
            out.number(name, what, report.amount(text), mine)
        loop = re.match(r"([\d.]+) mΩ with joints, conductor at (\d+) °C; least fault current (\d+) A", said["loop"])
        out.number(name, "loop, mΩ", report.amount(loop[1]), ours.ohms * 1000)
        out.number(name, "conductor, °C", (float(loop[2]), 0.5), ours.degrees)
        out.number(name, "least fault current, A", report.two_digits(loop[3]), ours.least)
        drop = re.match(r"([\d.]+) V here, ([\d.]+) % of.*; ([\d.]+) W lost; ([\d.]+) V at the end", said["drop"])
        out.number(name, "drop here, V", report.amount(drop[1]), ours.amps * ours.ohms)
        out.number(name, "path drop, %", (float(drop[2]), 0.005), ours.path)
        out.number(name, "lost, W", report.amount(drop[3]), ours.amps**2 * ours.ohms)
        out.number(name, "volts at the end, V", (float(drop[4]), 0.005), ours.end)
        row = re.search(r"([\d.]+)%\s+([\d.]+)$", said["row"])
        out.number(name, "path drop in the table, %", (float(row[1]), 0.05), ours.path)
        out.number(name, "volts in the table, V", (float(row[2]), 0.005), ours.end)
        fault = re.search(r"greatest fault current (\d+) A", said["device"])
        if fault:
            out.number(name, "greatest fault current, A", report.two_digits(fault[1]), ours.greatest)
        for check in said["checks"]:
            held = ours.check(check.label) if check.actual else None
            if held is None:
                continue
            out.number(name, check.label[:46], report.amount(check.actual), held[0])
            out.number(name, "  at " + check.sense, report.amount(check.limit), held[1])
            good = held[0] <= held[1] * (1 + 1e-9) if check.sense == "most" else held[0] >= held[1] * (1 - 1e-9)
            out.fact(name, "  verdict", check.mark, "passed" if good else "FAILED")
        if said["designed"]:
            smaller(out, site, printed, circuit)


def smaller(out, site, printed, circuit):
    """The next smaller size on the shelf must fail in the network as it was designed in the end."""
    shelf = sorted((area(c["size"]), c["size"]) for c in site["stock"]["cable"])
    below = [s for mm2, s in shelf if mm2 < area(circuit.size)]
    if not below:
        return
    out.fact(circuit.name, "last size not taken", circuit_refused(printed, circuit), below[-1])
    reasons = failing(site, printed, circuit.name, below[-1])
    out.fact(circuit.name, f"{below[-1]} fails as the rest is", "yes", "yes" if reasons else "no")


def circuit_refused(printed, circuit):
    return printed[circuit.name]["refused"][-1][0] if printed[circuit.name]["refused"] else "none"


def failing(site, printed, name, size):
    """Checks that fail in the whole network when one circuit has another size.

    The device stays, unless the smaller conductor's greater current asks for the next rating on the shelf.
    """
    family, rating = printed[name]["family"], printed[name]["rating"]
    shelf = [value(r) for d in site["stock"]["device"] if d["family"] == family for r in d["ratings"]]
    failed = []
    for rating in sorted(r for r in shelf if r >= rating):
        changed = printed | {name: printed[name] | {"size": size, "rating": rating}}
        circuits = [Circuit(site, keys, changed[keys["name"]]) for keys in site["circuit"]]
        network = Network(site, circuits)
        held = {circuit.name: Expectation(network, circuit) for circuit in circuits}
        ours, circuit = held[name], next(c for c in circuits if c.name == name)
        if ours.amps <= rating:
            failed = [f"drop of {n}, {e.path:.2f} %" for n, e in held.items() if e.path > e.own_limit()]
            failed += [f"start of {n}, {e.start:.2f} V" for n, e in held.items()
                       if e.start is not None and e.start < value(e.least_supply)]
            if ours.amps > circuit.ampacity() or rating > circuit.ampacity():
                failed.append("ampacity")
            if circuit.opens() > 1.45 * circuit.ampacity():
                failed.append("device opens late")
            break
    return failed


def main():
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    out = Comparison()
    for name in ("heron_point", "badly_built"):
        with open(SITES / f"{name}.toml", "rb") as handle:
            site = tomllib.load(handle)
        text = subprocess.run([sys.argv[1], SITES / f"{name}.toml"], capture_output=True, text=True, check=False).stdout
        out.rows.append((name, "", "report", "ours", "difference", ""))
        compare(out, site, report.circuits(text))
    for row in out.rows:
        print("{:15} {:48} {:>12} {:>12} {:>10} {}".format(*row).rstrip())
    print(f"{out.passed} passed, {out.failed} failed")
    sys.exit(out.failed > 0)


if __name__ == "__main__":
    main()
