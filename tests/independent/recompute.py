"""Recompute the numbers of the demo reports from their site files, by another method in another language.

    python3 tests/independent/recompute.py PATH_TO_EXAMPLE_BINARY

Nothing here comes from the library's code: the inputs are the site files, the reference tables, and what the
report itself prints (the size and device of each circuit, since they are its decision). The network is solved by
plain fixed-point iteration, once for each bank that may feed alone: currents are the greatest, volts the least of
these. Assumptions that neither report nor guide states are listed in `tables.ASSUMED`; each is a gap of the
documentation and was fitted to the printed figures, so it is checked for consistency only.
"""

import pathlib
import re
import subprocess
import sys
import tomllib

import report
from plant import Circuit, Network
from tables import ASSUMED, area, cell, factors, table, us_ampacity, value

SITES = pathlib.Path(__file__).resolve().parents[2] / "core" / "examples" / "sites"


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
    """Per cent: lighting, electronics and what feeds them 3, else 5; boards under `us` 3."""
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
        # Only ways through this circuit count for its far end; a link ends at a bank, which has no volts to check.
        ends = [s[1][keys["to"]] for root, s in states.items() if circuit in list(network.path(root, keys["to"]))]
        bank = network.site["bank"][0]
        self.nominal, self.is_link = value(bank["nominal"]), keys["to"] in network.banks
        self.end = min(ends)
        self.path = (value(bank["cut_off"]) - self.end) / self.nominal * 100
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
        if self.is_link and label.startswith("voltage drop"):
            return None
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
        out.number(name, "lost, W", report.amount(drop[3]), ours.amps**2 * ours.ohms)
        fault = re.search(r"greatest fault current (\d+) A", said["device"])
        if fault:
            out.number(name, "greatest fault current, A", report.two_digits(fault[1]), ours.greatest)
        if not ours.is_link:
            volts(out, name, said, drop, ours)
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


def volts(out, name, said, drop, ours):
    row = re.search(r"([\d.]+)%\s+([\d.]+)$", said["row"])
    out.number(name, "path drop, %", (float(drop[2]), 0.005), ours.path)
    out.number(name, "volts at the end, V", (float(drop[4]), 0.005), ours.end)
    out.number(name, "path drop in the table, %", (float(row[1]), 0.05), ours.path)
    out.number(name, "volts in the table, V", (float(row[2]), 0.005), ours.end)


def shopping(out, site, printed, text):
    """Metres and money of the cable to buy."""
    prices = {c["size"]: c.get("price", 0) for c in site.get("stock", {}).get("cable", [])}
    metres = {}
    for keys in site["circuit"]:
        if printed[keys["name"]]["designed"]:
            size = printed[keys["name"]]["size"]
            metres[size] = metres.get(size, 0) + 2 * value(keys["one_way"])
    for size, length in metres.items():
        line = re.search(rf"^ +([\d.]+) m +{re.escape(size)} .*  ([\d.]+)$", text, re.M)
        out.number("to buy", f"{size}, m", (float(line[1]), 0.05), length)
        out.number("to buy", f"{size}, price", (float(line[2]), 0.005), length * prices[size])


def smaller(out, site, printed, circuit):
    """The next smaller size on the shelf must fail in the network as it was designed in the end."""
    shelf = sorted((area(c["size"]), c["size"]) for c in site["stock"]["cable"])
    below = [s for mm2, s in shelf if mm2 < area(circuit.size)]
    if not below:
        return
    refused = printed[circuit.name]["refused"]
    out.fact(circuit.name, "last size not taken", refused[-1][0] if refused else "none", below[-1])
    reasons = failing(site, printed, circuit.name, below[-1])
    out.fact(circuit.name, f"{below[-1]} fails as the rest is", "yes", "yes" if reasons else "no")


def failing(site, printed, name, size):
    """Checks that fail in the whole network when one circuit has another size.

    The device stays, unless the smaller conductor's greater current asks for the next rating on the shelf.
    """
    family, rating = printed[name]["family"], printed[name]["rating"]
    shelf = [value(r) for d in site["stock"]["device"] if d["family"] == family for r in d["ratings"]]
    failed = ["no device on the shelf"]
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
        printed = report.circuits(text)
        compare(out, site, printed)
        shopping(out, site, printed, text)
    for row in out.rows:
        print("{:15} {:48} {:>12} {:>12} {:>10} {}".format(*row).rstrip())
    print(f"{out.passed} passed, {out.failed} failed")
    sys.exit(out.failed > 0)


if __name__ == "__main__":
    main()
