"""One site as a network: a tree of runs from each bank, solved by fixed-point iteration."""

import functools
import math
import re

from tables import ASSUMED, COPPER_20, OPENS, area, at, base_ampacity, factors, per_km_20, table, value


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
