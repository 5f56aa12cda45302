"""Commissioning sheet: currents and millivolts that a meter shall read, their tolerances, joints, pre-charge.

The sheet names its meter: 0.5 % and two last digits; 0.1 mV up to 600 mV, 10 mV up to 60 V, 100 mV above (the last not
printed); current in line 1 % and two of 0.01 A up to 10 A, clamp 2 % and two of 0.1 A. A load may draw 10 % more or
less (not printed).
"""

import math

from tables import value

SPREAD = 0.1


def meter_V(volts):
    digit = 1e-4 if volts <= 0.6 else 1e-2 if volts <= 60 else 1e-1
    return 0.005 * volts + 2 * digit


def meter_A(amps):
    return 0.01 * amps + 0.02 if amps <= 10 else 0.02 * amps + 0.2


def span(low, high):
    """What the meter may show of volts between two bounds."""
    return low - meter_V(low), high + meter_V(high)


def tested(network, to):
    """Amperes, at the nominal voltage of the bank, of the loads that `to` feeds, alone; metal at 20 °C, joints in."""
    root = next(iter(network.banks))
    order = network.grown(root)
    below = {to}
    for _, near, far in order:
        below |= {far} if near in below else set()
    return solve(network, root, order, below & set(network.loads), lambda c: c.ohms(20))


def solve(network, root, order, running, ohms):
    volts = dict.fromkeys([root, *(far for _, _, far in order)], network.nominal)
    for _ in range(300):
        amps = {n: network.draw(n, volts[n], None) if n in running else 0.0 for n in volts}
        through = {}
        for circuit, near, far in reversed(order):
            through[circuit.name] = amps[far]
            amps[near] += amps[far]
        for circuit, near, far in order:
            volts[far] = volts[near] - through[circuit.name] * ohms(circuit)
    return through, volts


class Row:
    """One circuit under load. `hot`: resistance of its path at the temperatures of the worst hour."""

    def __init__(self, network, circuit, ohms_hot, up_to=None):
        self.up_to = up_to
        name, root = circuit.name, next(iter(network.banks))
        if up_to:
            self.amps, self.tolerance = up_to, None
            most = up_to + meter_A(up_to)
            self.volts = None
        else:
            through, volts = tested(network, circuit.ends[1])
            self.amps = through[name]
            self.tolerance = SPREAD * self.amps + meter_A(self.amps)
            most = self.amps + meter_A(self.amps)
            path = list(network.path(root, circuit.ends[1]))
            lowest = network.nominal - sum(through[c.name] * hot(network, c) for c in path)
            highest = network.nominal - sum(through[c.name] * c.cold_ohms() for c in path)
            error = meter_V(volts[circuit.ends[1]])       # that of the expected reading
            self.volts = (lowest - error, highest + error)
        self.millivolts = 1000 * self.amps * circuit.ohms(20)
        # The meter's error of volts is that of the expected reading, not of the reading at the greater current.
        self.most = 1000 * (most * ohms_hot + meter_V(self.amps * ohms_hot))
        self.most_per_A = self.most / self.amps


def hot(network, circuit):
    return circuit.ohms(circuit.temperature(network.greatest_amps[circuit.name]))


def joints(circuit):
    """(label, count, ohm each) as the report lists them: lugs, parts, devices."""
    found = [("4 lug", circuit.assumed.lug_ohm)]
    for part in circuit.keys.get("part", []):
        found.append((part["name"], circuit.assumed.part_V[part["kind"]] / value(part["rating"])))
    for device in circuit.devices:
        breaker = device["family"].startswith(("miniature", "molded"))
        volts = circuit.assumed.breaker_V if breaker else circuit.assumed.fuse_V
        found.append((device["name"], volts / device["rating"]))
    return found


def up(amps):
    """Upwards to a hundredth below one ampere, to a tenth above."""
    step = 100 if amps < 1 else 10
    return math.ceil(amps * step - 1e-9) / step


def shows_at(ohm):
    """Current from which one milliohm more than a good joint is beyond the meter's error."""
    return up(2e-4 / (1e-3 - 0.005 * (ohm + 1e-3)))


def refusal_at(ohm):
    """Current from which twice a good joint's millivolts are beyond the meter's error."""
    return up(2e-4 / (ohm - 0.005 * 2 * ohm))


def precharge(volts, farads):
    """Ohm for one ampere at most, seconds of five time constants, joules held."""
    ohm = volts / 1.0
    return ohm, 5 * ohm * farads, farads * volts**2 / 2
