"""What we hold for one circuit of a network, and for each check that the report prints of it."""

import re

from plant import carries, opens
from tables import LEAST, area, cell, next_standard, us_ampacity, value, withstand_k


class Expectation:
    """Over every bank that may feed alone, at cut-off and at the highest voltage: greatest currents, least volts."""

    def __init__(self, network, circuit, frozen=None):
        """With `frozen`, currents stay those of another network with the same circuits."""
        self.network, self.circuit, self.keys = network, circuit, circuit.keys
        low = {root: network.solve(root, frozen=frozen) for root in network.banks}
        high = {root: network.solve(root, "highest") for root in network.banks}
        name, self.is_link = circuit.name, circuit in network.links
        load = network.loads.get(self.keys["to"], {})
        # Only ways through this circuit count for its far end; a bank may be the far end too.
        self.far = {} if self.is_link else {root: far for root in network.banks
                                            for c, _, far in network.grown(root, network.links) if c is circuit}
        stated = value(self.keys.get("current", 0))
        if self.is_link:
            self.amps = self.hours = self.low_amps = stated
        else:
            spared = {root: (frozen or network).spare(root) for root in network.banks}
            states = [(*low[root], spared[root]) for root in low] + [(*high[root], {}) for root in high]
            worst = max(states, key=lambda s: s[0][name])
            self.amps = max(worst[0][name], stated)
            self.hours = self.amps * self.share(*worst[1:])
        given = network.charged.get(name, 0.0)
        if given > self.amps:                          # what sources give to the bank, for hours
            self.amps = self.hours = given
        self.degrees = circuit.temperature(self.amps)
        self.ohms = circuit.ohms(self.degrees)
        if self.is_link:
            near = next(e for e in circuit.ends if e not in network.banks)
            self.path = self.low_amps * self.ohms / network.nominal * 100
            self.end = min(s[1][near] for s in low.values() if near in s[1]) - self.low_amps * self.ohms
        else:
            # Its own drop is that of no less than its stated current, in the state in which its end is lowest.
            ends = []
            for root, far in self.far.items():
                drawn, volts = low[root][0][name], low[root][1][far]
                if drawn > 0:
                    amps = max(drawn, stated)
                    ends.append((volts - (amps - drawn) * self.ohms, amps, value(network.banks[root]["cut_off"])))
            self.path = max((cut_off - end) / network.nominal * 100 for end, _, cut_off in ends)
            self.end, self.low_amps, _ = min(ends)
        self.start = None
        if "start" in load or "surge" in load:
            self.start = min(network.solve(r, starting=self.keys["to"], frozen=frozen)[1][self.keys["to"]]
                             for r in network.banks if self.keys["to"] in low[r][1])
        self.frozen = frozen
        self.uses = {network.loads[n].get("use", "other") for n in self.served()}
        self.least_supply = load.get("least")
        # A device at an end guards against what that end feeds.
        guarded = {d["at"] for d in circuit.devices} or {circuit.ends[0]}
        self.greatest = {end: network.greatest(end, circuit) for end in guarded}
        fed = [end for end in guarded if self.fed_from(end)]
        self.least_by_end = {end: network.least(end, circuit) for end in fed}
        self.least = min(self.least_by_end.values(), default=None)

    def fed_from(self, end):
        return end in self.network.banks or any(
            far == end for root in self.network.banks for _, _, far in self.network.grown(root, [self.circuit]))

    def beyond(self):
        """Nodes that this circuit feeds, from any bank."""
        names = set()
        for root, beyond in self.far.items():
            below = {beyond}
            for _, near, far in self.network.grown(root, self.network.links):
                below |= {far} if near in below else set()
            names |= below
        return names

    def served(self):
        return self.beyond() & set(self.network.loads)

    def share(self, volts, spare):
        """Share of the current that is drawn for hours."""
        parts = [(self.network.draw(n, volts[n], None), self.network.loads[n].get("continuous", True))
                 for n in self.served() if n in volts]
        links = sum(value(link.keys["current"]) for link in self.network.links
                    if any(self.circuit in self.network.path(r, e) for r in self.network.banks for e in link.ends))
        steady = links + sum(spare.get(node, 0) for node in self.beyond())
        total = sum(p[0] for p in parts) + steady
        return (sum(amps for amps, hours in parts if hours) + steady) / total

    def demand(self, device):
        """Current that a device has to carry, by rule set and family."""
        if self.circuit.rules == "us":
            return self.amps + 0.25 * self.hours
        if not device["family"].startswith(("gG", "miniature")):       # carries 80 % for hours: R5
            return self.hours / 0.8 + self.amps - self.hours
        return self.amps

    def starting_amps(self):
        """Greatest current while any one load behind starts, at the volts that it leaves (R3, R16)."""
        starters = [n for n in self.served() if {"start", "surge", "start_power"} & set(self.network.loads[n])]
        return max(self.network.solve(r, starting=n, frozen=self.frozen)[0][self.circuit.name]
                   for r in self.network.banks for n in starters if n in self.network.solve(r)[1])

    def column(self):
        """60 °C up to 100 A, 75 °C above or where everything is marked for it; never above the insulation."""
        marks = [self.keys.get("terminal")] + [d.get("terminal") for d in stated_devices(self.keys)]
        marked = all(m and value(m) >= 75 for m in marks)
        return "75C" if (marked or self.amps > 100) and self.circuit.insulation >= 75 else "60C"

    def device_limit(self):
        c = self.circuit
        if c.rules in ("iec", "craft_iso"):
            return c.ampacity
        if c.rules == "craft_us":
            return min(next_standard(c.ampacity), 1.5 * c.ampacity)
        carried = min(c.ampacity, us_ampacity(c.size, self.column()))
        small = cell("ampacity.toml", "nec-240-4-d-small-conductors", c.size.removesuffix(" AWG"), "max_ocpd_A")
        return min(next_standard(carried), small or float("inf"))

    def drop_limit(self):
        boards = {b["name"] for b in self.network.site["board"]}
        feeds_board = not self.is_link and bool(set(self.far.values()) & boards)
        if self.circuit.rules == "us":
            return 3 if feeds_board or self.keys["to"] in self.network.loads and "critical" in self.uses else 5
        if self.circuit.rules == "iec":
            return 3 if self.uses & {"lighting", "critical"} else 5
        return 3 if feeds_board or self.keys["to"] in self.network.loads and "critical" in self.uses else 10

    def check(self, label, other=None):
        """(actual, limit) that we hold for a printed check of the first device or another; None where there is
        nothing to recompute."""
        c = self.circuit
        device = other or next(iter(c.devices), None)
        if device is None and label.startswith(("device", "least")):
            return None                                # guarded by the device of another circuit
        column = re.search(r"(60|75) °C column", label)
        simple = {
            "mechanical minimum": lambda: (area(c.size), area(LEAST[c.rules])),
            "design current": lambda: (self.amps, c.ampacity),
            "rating of the device": lambda: (device["rating"], self.demand(device)),
            "device against its conductor": lambda: (device["rating"], self.device_limit()),
            "current I2 at which": lambda: (opens(device), 1.45 * c.ampacity),
            "current at which the device opens": lambda: (opens(device), 1.45 * c.ampacity),
            "voltage drop": lambda: (self.path, self.drop_limit()),
            "voltage at the far end while": lambda: (self.start, value(self.least_supply)),
            "voltage at the far end": lambda: (self.end, value(self.least_supply)),
            "voltage rating": lambda: (value(self.part(device)["dc_voltage"]), self.highest()),
            "breaking capacity": lambda: (value(self.part(device)["breaking"]), self.greatest[device["at"]]),
            "interrupting rating": lambda: (value(self.part(device)["breaking"]), self.greatest[device["at"]]),
            "least prospective": lambda: (self.least_by_end[device["at"]], opens(device)),
            "let-through": lambda: (value(self.part(device)["let_through"]),
                                    (withstand_k(c.rules, c.insulation, c.compound) * area(c.size)) ** 2),
            "greatest conductor": lambda: (area(c.size), area(self.part(device)["terminal_range"][1])),
            "current while it starts against": lambda: (self.starting_amps(), carries(device)),
            "current while it starts": lambda: (
                value(self.network.loads[self.keys["to"]]["start"]),
                cell("protection.toml", "iec-60898-3-dc-trip-bands", device["family"][-1], "no_trip")
                * device["rating"]),
        }
        if column:
            return self.amps + 0.25 * self.hours, us_ampacity(c.size, self.column())
        return next((held() for begin, held in simple.items() if label.startswith(begin)), None)

    def highest(self):
        return max(value(b["highest"]) for b in self.network.site["bank"])

    def part(self, device):
        """The device as the file states it, or the one on the shelf."""
        alike = [d for d in stated_devices(self.keys) if "rating" in d
                 and (d["family"], value(d["rating"])) == (device["family"], device["rating"])]
        shelf = self.network.site.get("stock", {}).get("device", [])
        alike += [d for d in shelf if d["family"] == device["family"] and device["rating"] in map(value, d["ratings"])]
        to_be_bought = {"dc_voltage": self.highest(), "breaking": self.greatest[device["at"]]}
        return next(iter(alike), to_be_bought)


def stated_devices(keys):
    found = keys.get("device", [])
    return found if isinstance(found, list) else []


class ChargerRun(Expectation):
    """A circuit from a source of charge: its current is all that the source gives, its drop counts up to the bank."""

    def __init__(self, network, circuit, bank=None, source=None):
        self.network, self.circuit, self.keys, self.is_link = network, circuit, circuit.keys, False
        self.senses_bank = (source or {"sense": "bank"}).get("sense") == "bank"
        self.amps = self.hours = self.low_amps = network.charged[circuit.name]
        self.degrees, self.ohms = circuit.temperature(self.amps), circuit.ohms(circuit.temperature(self.amps))
        root = bank or next(iter(network.banks))
        onward = [c.ohms(c.temperature(network.greatest_amps[c.name])) * network.charged[c.name]
                  for c in network.path(root, circuit.ends[1])]
        self.path = (self.amps * self.ohms + sum(onward)) / network.nominal * 100
        self.end = value(network.banks[root]["highest"]) - self.amps * self.ohms
        self.start, self.least_supply, self.uses, self.far = None, None, set(), {}
        at = {d["at"] for d in circuit.devices} or {circuit.ends[1]}
        self.greatest = {end: network.greatest(end, circuit) for end in at}
        self.least_by_end = {end: network.least(end, circuit) for end in at}
        self.least = min(self.least_by_end.values(), default=None)

    def drop_limit(self):
        usual = {"us": 5, "iec": 5}.get(self.circuit.rules, 10)
        return usual if self.senses_bank else 1        # R11: sense at the bank, or 1 %


class ArrayRun(ChargerRun):
    """A circuit from an array: bright sun loads it, the current at maximum power drops, of the array's own volts."""

    def __init__(self, network, circuit, sun):
        self.network, self.circuit, self.keys, self.is_link = network, circuit, circuit.keys, False
        self.senses_bank = True
        self.amps = self.hours = sun.bright_Isc()
        self.low_amps = sun.Imp()
        self.degrees, self.ohms = circuit.temperature(self.amps), circuit.ohms(circuit.temperature(self.amps))
        self.path = self.low_amps * self.ohms / sun.nominal_Vmp() * 100
        self.end = sun.hot_Vmp() - self.low_amps * self.ohms
        self.start, self.least_supply, self.greatest, self.least_by_end = None, None, {}, {}
        self.least = None
