"""One site as a network: fixed-point iteration from each bank, nodal equations for faults."""

import functools
import re

from report import NUMBER
from tables import CELLS, COPPER_20, OPENS, area, at, base_ampacity, cell, factors, per_km_20, table, value

WAYS = {"in conduit": "conduit", "in a loom": "loom", "clipped to a surface": "clipped",
        "cable in conduit": "cable_in_conduit", "in a duct in the ground": "duct"}
# Air of an engine space that the factor of the set stands for (tests/reference/ampacity.toml), not printed.
ENGINE_AIR = {"craft_us": 50, "craft_iso": 60}


class Circuit:
    """One run as the report decided it: stated keys from the file; size, insulation, devices from the report."""

    def __init__(self, site, keys, printed, assumed):
        self.keys, self.name, self.assumed = keys, keys["name"], assumed
        self.ends = (keys["from"], keys["to"])
        self.rules = site["site"]["rules"]
        self.size, self.devices = keys.get("size", printed["size"]), printed["devices"]
        self.material = keys.get("material", "copper")
        self.coating = "tinned" if " tinned " in printed["conductor"] else "plain"
        self.compound, degrees = re.match(r"(\S+) (\S+) degC", printed["insulation"]).groups()
        self.insulation = float(degrees)
        self.installed = keys.get("installed") or WAYS[assumed.installed[self.name]]
        self.ambient = value(keys.get("ambient", site["site"]["ambient"][1]))
        self.coldest = value(site["site"]["ambient"][0])
        self.bundled = keys.get("bundled", 2)
        self.metres = sum(value(keys.get(k, keys.get("one_way"))) for k in ("positive_length", "negative_length"))
        self.printed_ohms = float(re.match(NUMBER, printed["loop"])[0]) / 1000
        joints = keys.get("joint", [{"count": 4}])
        self.fixed = sum(j.get("count", 1) * value(j.get("resistance", assumed.lug_ohm)) for j in joints)
        for part in keys.get("part", []):
            generic = "resistance" not in part
            self.fixed += assumed.part_V[part["kind"]] / value(part["rating"]) if generic else value(part["resistance"])
        for device in self.devices:
            breaker = device["family"].startswith(("miniature", "molded"))
            self.fixed += device["poles"] * (assumed.breaker_V if breaker else assumed.fuse_V) / device["rating"]

    @functools.cached_property
    def base(self):
        return base_ampacity(self.rules, self.size, self.insulation, self.installed)

    @functools.cached_property
    def factors(self):
        return factors(self.rules, self.insulation, self.installed, self.ambient, self.bundled, self.keys.get("space"))

    @functools.cached_property
    def ampacity(self):
        """None for a metal without tables."""
        if self.material != "copper":
            return None
        product = self.base
        for factor in self.factors.values():
            product *= factor
        return product

    def temperature(self, amps):
        if self.ampacity is None:
            return self.insulation
        air = max(self.ambient, ENGINE_AIR[self.rules]) if self.keys.get("space") == "engine" else self.ambient
        return air + (self.insulation - air) * (amps / self.ampacity) ** 2

    def ohms(self, temperature):
        """No document holds the resistivity of copper-clad aluminium: its loop is the printed one, and not compared."""
        if self.material != "copper":
            return self.printed_ohms
        return per_km_20(self.size, self.coating) / 1000 * self.metres * at(temperature) + self.fixed

    def cold_ohms(self):
        """Metal of full area. Copper-clad aluminium is not met on the way of a greatest fault here."""
        return COPPER_20 / area(self.size) / 1000 * self.metres * at(self.coldest)


def apparent(loads):
    return sum(l.get("count", 1) * value(l["power"]) / l.get("power_factor", 1.0) for l in loads)


def starting(loads):
    """Apparent power of all AC loads while the one starts that adds most."""
    extra = [(value(l["start_power"]) - value(l["power"])) / l.get("power_factor", 1.0)
             for l in loads if "start_power" in l]
    return apparent(loads) + max(extra, default=0.0)


def carries(device):
    """Lower conventional current of a printed device: it does not open on it."""
    rows = table("protection.toml", "iec-60269-gg-conventional")["rows"]
    return next(r for r in reversed(rows) if device["rating"] >= r[0])[2] * device["rating"]


def opens(device):
    """Upper conventional current of a printed device."""
    family, rating = device["family"], device["rating"]
    if family == "gG":
        rows = table("protection.toml", "iec-60269-gg-conventional")["rows"]
        return next(r for r in reversed(rows) if rating >= r[0] and (r[0] != 4 or rating > 4))[3] * rating
    if family.startswith("miniature"):
        return cell("protection.toml", "iec-breaker-conventional-currents", "IEC 60898-1, In ≤ 63 A",
                    "tripping") * rating
    return OPENS[family] * rating


class Network:
    def __init__(self, site, circuits, assumed):
        self.site, self.circuits, self.assumed = site, circuits, assumed
        self.banks = {b["name"]: b for b in site["bank"]}
        behind = [l for l in site.get("load", []) if l.get("ac")]
        self.loads = {l["name"]: l for l in site.get("load", []) if not l.get("ac")}
        for inverter in site.get("inverter", []):
            asked = {"start_power": min(starting(behind), value(inverter.get("surge", 1e9)))} if behind else {}
            self.loads[inverter["name"]] = asked | inverter
        self.nominal = value(site["bank"][0]["nominal"])
        # What sources of charge give at most, by circuit: it warms the conductor, and drives no fault.
        self.charged = {}
        # A link with a stated current is a load of that current at either end.
        self.links = [c for c in circuits if "current" in c.keys and self.joins_banks(c)]

    def joins_banks(self, circuit):
        def banks(start):
            reached = {start} | {far for _, _, far in self.grown(start, [circuit])}
            return reached & set(self.banks)

        return all(banks(end) for end in circuit.ends)

    def grown(self, root, without=()):
        """Circuits outwards from a node: (circuit, near node, far node), nearest first."""
        order, seen, growing = [], {root}, True
        while growing:
            growing = False
            for circuit in self.circuits:
                for near, far in (circuit.ends, circuit.ends[::-1]):
                    if circuit not in without and near in seen and far not in seen:
                        order.append((circuit, near, far))
                        seen.add(far)
                        growing = True
        return order

    def draw(self, name, volts, starting):
        amps = sum(value(c.keys["current"]) for c in self.links if name in c.ends)
        load = self.loads.get(name)
        if load is None:
            return amps
        if name == starting and "start" in load:
            return amps + value(load["start"])
        if "efficiency" in load:
            power = load.get("start_power", load.get("surge")) if name == starting else load["power"]
            return amps + value(power) / value(load["efficiency"]) / volts
        count = load.get("count", 1)
        if "current" in load:
            return amps + count * value(load["current"])
        power = count * value(load["power"])
        if load.get("kind") == "resistive":
            return amps + volts * power / self.nominal**2
        return amps + power / volts

    def solve(self, root, level="cut_off", starting=None, frozen=None):
        """Currents and volts with one bank alone at a level; conductors at the temperature of their greatest current.

        A start is too short to warm a conductor. Loads draw what they draw in a `frozen` network, if given, running.
        """
        spare = (frozen or self).spare(root) if level == "cut_off" else {}
        theirs = frozen.solve(root, level)[1] if frozen else None
        return self.state(root, level, (frozen or self).greatest_amps, spare, starting, theirs)

    def spare(self, root, warming=None):
        """What stated currents hold beyond the loads at cut-off, by the node that it is drawn at.

        The document leaves open what draws it: taken as constant, for hours and during starts, the difference to what
        the loads draw without it.
        """
        found = {}
        for circuit, _, far in reversed(self.grown(root, self.links)):
            if "current" in circuit.keys:
                drawn = self.state(root, "cut_off", warming or self.greatest_amps, found)[0][circuit.name]
                found[far] = max(0.0, value(circuit.keys["current"]) - drawn) if drawn else 0.0
        return found

    @functools.cached_property
    def greatest_amps(self):
        """Greatest current of each circuit over all banks and both levels: what warms its conductor."""
        floor = {c.name: max(value(c.keys.get("current", 0)), self.charged.get(c.name, 0)) for c in self.circuits}
        amps = floor
        for _ in range(200):
            states = [self.state(root, "cut_off", amps, self.spare(root, amps)) for root in self.banks]
            states += [self.state(root, "highest", amps, {}) for root in self.banks]
            new = {c.name: max([floor[c.name], *(s[0][c.name] for s in states)]) for c in self.circuits}
            if max(abs(new[k] - amps[k]) for k in amps) < 1e-11:
                break
            amps = new
        return amps

    def state(self, root, level, warming, spare, starting=None, theirs=None):
        """As `solve`, each conductor at the temperature that its current in `warming` gives it; `theirs`: volts that
        tell what loads draw, in place of its own."""
        order = self.grown(root, self.links)
        source = value(self.banks[root][level])
        volts = {far: source for _, _, far in order} | {root: source}
        amps = dict.fromkeys((c.name for c in self.circuits), 0.0)
        for _ in range(500):
            at_node = {name: self.draw(name, (theirs or volts)[name], starting) + spare.get(name, 0)
                       for name in volts}
            new = dict.fromkeys(amps, 0.0)
            for circuit, near, far in reversed(order):
                at_node[near] += at_node[far]
                new[circuit.name] = at_node[far]
            for circuit, near, far in order:
                ohms = circuit.ohms(circuit.temperature(warming[circuit.name]))
                volts[far] = volts[near] - new[circuit.name] * ohms
                if volts[far] <= 0:
                    raise ArithmeticError(f"no volts at {far} from bank {root}")
            if max(abs(new[k] - amps[k]) for k in amps) < 1e-12:
                return new, volts
            amps = new
        raise ArithmeticError(f"no solution from bank {root}")

    def path(self, root, node):
        steps = {far: (circuit, near) for circuit, near, far in self.grown(root)}
        while node != root:
            circuit, node = steps[node]
            yield circuit

    def cell_volts(self, bank):
        """Volts of all cells in series, full and empty; figures for lead-acid as the report prints them."""
        nominal, full, empty = CELLS.get(bank["chemistry"], (2.0, self.assumed.full_cell_V, self.assumed.empty_cell_V))
        cells = round(value(bank["nominal"]) / nominal)
        return cells * full, cells * empty

    def greatest(self, node, through):
        """Greater of the two currents that may flow through a device at one end of a circuit, the end shorted.

        All banks full and warm, or at their highest voltage, behind their resistance, conductors cold: nodal equations.
        """
        emf = {n: max(self.cell_volts(b)[0], value(b["highest"])) for n, b in self.banks.items()}
        names = sorted({e for c in self.circuits for e in c.ends} | set(self.banks))
        free = [n for n in names if n != node]
        index = {name: i for i, name in enumerate(free)}
        matrix = [[0.0] * (len(free) + 1) for _ in free]

        def conductance(siemens, a, b=None):
            for one, other in ((a, b), (b, a)):
                if one in index:
                    matrix[index[one]][index[one]] += siemens
                    if other in index:
                        matrix[index[one]][index[other]] -= siemens

        for circuit in self.circuits:
            conductance(1 / circuit.cold_ohms(), *circuit.ends)
        for name, bank in self.banks.items():
            siemens = 1 / value(bank["internal_resistance"])
            conductance(siemens, name)
            if name in index:
                matrix[index[name]][-1] += siemens * emf[name]
        volts = dict(zip(free, solved(matrix), strict=True))
        inward = {c: volts[c.ends[0] if c.ends[1] == node else c.ends[1]] / c.cold_ohms()
                  for c in self.circuits if node in c.ends}
        own = emf[node] / value(self.banks[node]["internal_resistance"]) if node in self.banks else 0.0
        beyond = inward[through]
        return max(beyond, own + sum(inward.values()) - beyond)

    def least(self, near, circuit):
        """Of the banks that reach an end not through the circuit, each alone, the least into its other end."""
        found = []
        for root, bank in self.banks.items():
            if root != near and all(far != near for _, _, far in self.grown(root, [circuit])):
                continue
            full, empty = self.cell_volts(bank)
            own = value(bank["internal_resistance"])
            if "short_circuit" in bank:
                own = max(own, full / value(bank["short_circuit"]))
            ohms = own * self.assumed.aged_ratio["lithium" if bank["chemistry"] in CELLS else "lead-acid"]
            ohms += sum(c.ohms(c.insulation) for c in [*self.path(root, near), circuit])
            found.append(empty / ohms)
        return min(found)


def solved(rows):
    """Gauss with the greatest pivot; each row ends with its right side."""
    n = len(rows)
    for i in range(n):
        pivot = max(range(i, n), key=lambda r: abs(rows[r][i]))
        rows[i], rows[pivot] = rows[pivot], rows[i]
        for r in range(n):
            if r != i:
                factor = rows[r][i] / rows[i][i]
                rows[r] = [a - factor * b for a, b in zip(rows[r], rows[i], strict=True)]
    return [rows[i][-1] / rows[i][i] for i in range(n)]
