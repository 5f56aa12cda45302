"""A site of which parts are left open, completed: what can be bought is judged and the cheapest that passes is taken.

Taken from the report are sizes and devices of circuits.
"""

import bank as banks
from energy import Sun, Year, watts
from plant import Circuit, Network, apparent, starting
from tables import value

TOGETHER_A = 100.0                                # most that all loads at once may draw: printed
UNSTATED_EFFICIENCY = 0.85                        # of an inverter, before any is taken: printed nowhere
ROUTES = {"controller": 1.5, "array": 10.0}       # m, where none is stated: printed among the assumptions


class Plant:
    """The site with everything chosen."""

    def __init__(self, site):
        self.site, self.stock = site, site.get("stock", {})
        self.bank = dict(site["bank"][0])
        self.bank.setdefault("chemistry", self.stock["battery"][0]["chemistry"] if "battery" in self.stock else None)
        self.array = self.controller = self.inverter = None
        self.refused = {}
        self.nominal = value(self.bank["nominal"]) if "nominal" in self.bank else self.least_nominal()
        self.bank["nominal"] = self.nominal
        if "inverter" in site:
            self.take_inverter()
        if "weather" in site:
            self.controller = dict(next(iter(site.get("controller", [])), {}))
            self.array = dict(next(iter(site.get("array", [])), {}))
            if not self.controller:
                # Idle draw differs between controllers, so energy is known only once one is taken.
                self.controller = self.stock["controller"][-1] | {"name": "charge controller"}
            if "module" in self.array:
                self.array["module"] = next(m for m in self.stock["module"] if m["name"] == self.array["module"])
        self.take_bank()
        if {"cut_off", "disconnect"} & set(self.bank):
            self.bank["cut_off"] = value(self.bank.get("cut_off", self.bank.get("disconnect")))
        self.bank["highest"] = value(self.bank["highest"]) if "highest" in self.bank else self.highest()
        if self.array is not None and "module" not in self.array:
            self.take_array()
        self.year = Year(self)
        self.capacity = banks.Capacity(self, self.year)
        self.least_disconnect = banks.least_disconnect(self.bank, self.running_amps())
        if not {"cut_off", "disconnect"} & set(site["bank"][0]):
            # Set for the mean current of the greatest day, since few loads alone must not empty it.
            self.bank["cut_off"] = banks.least_disconnect(self.bank, self.capacity.day / 24)

    # What is left open.

    def least_nominal(self):
        """Least of 12, 24, 48 V that every load's range admits and that keeps all loads together within 100 A."""
        loads = [l for l in self.site["load"] if not l.get("ac")]
        fit = [nominal for nominal in (12.0, 24.0, 48.0)
               if all(value(l["least"]) < nominal < value(l["greatest"]) for l in loads)]
        return next((v for v in fit if self.together(v) <= TOGETHER_A * v), fit[-1])

    def together(self, nominal):
        """Watts that all loads take from a bank of a nominal voltage, those of AC through an inverter yet to come."""
        inverter = next(iter(self.site.get("inverter", [])), {})
        through = value(inverter.get("efficiency", UNSTATED_EFFICIENCY))
        return sum(watts(l, nominal) / (through if l.get("ac") else 1.0) for l in self.site["load"])

    def take_inverter(self):
        keys = dict(self.site["inverter"][0])
        fit = [i for i in self.stock["inverter"] if value(i["nominal"]) == self.nominal
               and value(i["power"]) >= self.apparent() and value(i["surge"]) >= self.starting()]
        self.inverter = min(fit, key=lambda i: i["price"]) | keys
        self.other_inverters = [i["name"] for i in fit if i["name"] != min(fit, key=lambda i: i["price"])["name"]]

    def take_bank(self):
        if "unit" in self.bank:
            strings = self.bank["strings"]
            self.bank["capacity"] = strings * value(self.bank["unit_capacity"])
            self.bank["series"] = round(self.nominal / value(self.bank["unit"]))
        if "capacity" in self.bank:
            self.bank["capacity"] = value(self.bank["capacity"])
            return
        self.array = self.array or {}
        capacity = banks.Capacity(self, Year(self))
        offers = []
        for battery in self.stock["battery"]:
            series, strings = capacity.layout(battery, self.nominal)
            offers.append((series * strings * battery["price"], series, strings, battery))
        offers.sort(key=lambda o: o[0])
        self.offers = offers
        price, series, strings, battery = offers[0]
        self.battery = battery
        self.bank |= {"series": series, "strings": strings, "capacity": strings * value(battery["capacity"]),
                      "stud": battery["stud"], "price": price,
                      "internal_resistance": value(battery["internal_resistance"]) * series / strings}

    def highest(self):
        points = self.set_points()
        return banks.compensated(self.bank, max(points.values()), self.per_K(), value(self.bank["temperature"][0]))

    def cold_absorption(self):
        return banks.compensated(self.bank, self.set_points()["absorption"], self.per_K(),
                                 value(self.bank["temperature"][0]))

    def take_array(self):
        """Fewest modules that give what is needed, at least cost with their controller; every voltage in range."""
        offers, passing, self.cut_off_W = [], set(), {}
        year = Year(self)
        for controller in self.stock["controller"]:
            self.controller = controller | {"name": "charge controller"}
            for module in self.stock["module"]:
                for series in range(1, 20):
                    self.array = {"name": "array", "module": module, "series": series, "strings": 1}
                    need = Sun(self, year).needed()["modules"]
                    strings = max(1, -int(-(need - 1e-9) // series))
                    self.array["strings"] = strings
                    sun = Sun(self, year)
                    if self.admitted(sun) and self.too_strong(sun):
                        names = (module["name"], controller["name"])
                        self.cut_off_W[names] = min(sun.watts(), self.cut_off_W.get(names, sun.watts()))
                    elif self.admitted(sun):
                        offers.append((series * strings * module["price"] + controller["price"], self.array,
                                       self.controller))
                        passing.add((module["name"], controller["name"]))
        self.cut_off_W = {names: least for names, least in self.cut_off_W.items() if names not in passing}
        self.offered_arrays = sorted(offers, key=lambda o: o[0])
        _, self.array, self.controller = self.offered_arrays[0]

    def admitted(self, sun):
        c = self.controller
        return (sun.cold_Voc() <= min(value(c["greatest_input"]), value(sun.module["greatest_voltage"]))
                and sun.hot_Vmp() >= self.cold_absorption() + value(c["start_margin"])
                and sun.bright_Isc() <= value(c["input_current"]))

    def too_strong(self, sun):
        """More than a quarter above what the controller gives would be cut off."""
        return sun.watts() / self.nominal > 1.25 * value(self.controller["output"])

    # Loads of the inverter.

    def ac_loads(self):
        return [l for l in self.site["load"] if l.get("ac")]

    def ac_watts(self):
        return sum(watts(l, self.nominal) for l in self.ac_loads())

    def apparent(self):
        return apparent(self.ac_loads())

    def starting(self):
        return starting(self.ac_loads())

    def running_amps(self):
        """All loads at once at the nominal voltage."""
        dc = sum(watts(l, self.nominal) for l in self.site["load"] if not l.get("ac"))
        ac = self.ac_watts() / value(self.inverter["efficiency"]) if self.inverter else 0.0
        return (dc + ac) / self.nominal

    # Charging.

    def charger(self):
        return self.controller or self.site["generator"][0]

    def set_points(self):
        stated = {k: value(self.charger()[k]) for k in ("absorption", "float") if k in self.charger()}
        if stated:
            return stated
        return banks.set_points(self.bank)

    def per_K(self):
        return value(self.charger()["compensation"])

    def charge_amps(self):
        """Most that sources give, and what they give for hours."""
        if self.controller:
            most = value(self.controller["output"])
            return most, min(most, Sun(self, self.year).watts() / self.nominal)
        output = value(self.charger()["output"])
        return output, output * value(self.charger()["hot_output"])

    # The network.

    def routes(self):
        """Circuits as the file tells them: keys by name, ends as printed."""
        bank, found = self.bank["name"], {}
        if "circuit" in self.site:
            return {c["name"]: c for c in self.site["circuit"]}
        charger = self.charger()
        found[f"{bank} main"] = {"from": bank, "to": "main", "one_way": self.bank["route"]}
        if self.inverter:
            found["inverter feed"] = {"from": "main", "to": self.inverter["name"], "one_way": self.inverter["route"]}
        for load in self.site["load"]:
            if not load.get("ac"):
                found[load["name"]] = {"from": "main", "to": load["name"], "one_way": load["route"]}
        found[f"{charger['name']} output"] = {"from": charger["name"], "to": "main",
                                              "one_way": charger.get("route", ROUTES["controller"])}
        found[f"{self.array['name']} feed"] = {"from": self.array["name"], "to": charger["name"],
                                               "one_way": self.array.get("route", ROUTES["array"])}
        return {name: {"name": name, **keys} for name, keys in found.items()}

    def network(self, printed, assumed):
        """All circuits but the array's: (network, circuit of the array)."""
        boards = self.site.get("board", [{"name": "main"}])
        site = {"site": self.site["site"], "bank": [self.bank], "board": boards, "load": self.site["load"],
                "inverter": [self.inverter] if self.inverter else [], "stock": self.stock,
                "circuit": list(self.routes().values())}
        circuits = [Circuit(site, keys, printed[keys["name"]], assumed) for keys in site["circuit"]]
        of_array = next((c for c in circuits if self.array and c.ends[0] == self.array["name"]), None)
        network = Network(site, [c for c in circuits if c is not of_array], assumed)
        charger = next(c for c in network.circuits if c.ends[0] == self.charger()["name"])
        most, _ = self.charge_amps()
        network.charged = {c.name: most for c in (charger, *network.path(self.bank["name"], charger.ends[1]))}
        return network, charger, of_array

