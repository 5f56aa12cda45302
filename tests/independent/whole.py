"""A whole plant against its report: energy, bank, array, charging, circuits, sheet, purchases."""

import copy
import math
import re

import bank as banks
import report
import said
import sheet
from complete import Plant
from energy import MONTHS, Sun
from expect import ArrayRun, ChargerRun, Expectation
from report import NUMBER, amount
from tables import area, cell, table, value

SHELF = {"us": [f"{n} AWG" for n in (18, 16, 14, 12, 10, 8, 6, 4, 3, 2, 1)],
         "iec": [], "craft_iso": [f"{n} mm2" for n in ("0.75", "1", "1.5", "2.5", "4", "6", "10", "16", "25", "35")]}


def three(text):
    """A figure of three digits, none finer than a thousandth, whole above a thousand."""
    shown = float(text)
    return shown, 0.5 * 10 ** max(-3, min(0, math.floor(math.log10(shown)) - 2))


def two(text):
    shown = float(text)
    return shown, 0.5 * 10 ** max(-2, math.floor(math.log10(shown)) - 1)


def compare(out, site, text, run, verdict):
    printed, assumed, plant_said = report.circuits(text), report.Assumptions(text), said.plant(text)
    bank_name = site["bank"][0]["name"]
    told = plant_said[f"bank {bank_name}"]
    plant = Plant(site)
    energy(out, plant, text)
    bank(out, plant, told, text)
    if plant.array:
        array(out, plant, plant_said[f"array {plant.array['name']}"], text)
    if plant.inverter:
        inverter(out, plant, plant_said[f"inverter {plant.inverter['name']}"], text)
    charging(out, plant, plant_said, told, text)
    network, charger, of_array = plant.network(printed, assumed)
    wiring(out, plant, printed, assumed, run, verdict)
    boards(out, plant, network, charger, text)
    bearings(out, plant, text)
    inrush(out, plant, network, text)
    under_load(out, plant, network, charger, of_array, text)
    buying(out, plant, printed, network, of_array, text)


# Energy.

def energy(out, plant, text):
    rows, year = said.months(text), plant.year
    ours = {"DC loads": lambda m: year.of_loads(m, ac=False), "inverters": year.of_inverters,
            "controllers": lambda m: year.of_controllers(), "wiring": lambda m: year.taken(m) - year.used(m),
            "taken out": year.taken, "from arrays": year.of_arrays, "from others": lambda m: year.of_others(),
            "left over": lambda m: year.given(m) - year.taken(m)}
    for name, row in rows.items():
        for month, printed in enumerate(row):
            if name in ours:
                out.number(f"energy {MONTHS[month]}", f"{name}, Wh", (printed, 0.5), ours[name](month))
    out.fact("energy", "rows", sorted(set(rows) - {"month"}),
             sorted(n for n, f in ours.items() if any(abs(f(m)) > 0.5 for m in range(12))))


# Bank.

def steps(out, where, said_steps, ours):
    for label, held in ours.items():
        if label in said_steps:
            out.number(where, label[:52], amount(said_steps[label]), held)
        else:
            out.fact(where, label[:52], "not printed", "held")


def bank(out, plant, told, text):
    held, where, b = plant.capacity, f"bank {plant.bank['name']}", plant.bank
    ours = {"demand of the greatest day": held.day, "days without charge": held.days,
            "demand of the autonomy": held.autonomy, "margin": banks.MARGIN, "capacity needed": held.needed}
    if held.lithium:
        ours |= {"usable window": banks.WINDOW, "over the window": held.over_window,
                 "left at the end of life": banks.LITHIUM_LEFT, "left in the cold": banks.LITHIUM_COLD,
                 "at the end of life, in the cold": held.aged_and_cold}
    else:
        ours |= {"greatest depth": banks.DEPTH, "a: autonomy over greatest depth": held.a,
                 "daily depth": banks.DAILY_DEPTH, "b: day over daily depth": held.b,
                 "left at the end of life": banks.END_OF_LIFE,
                 "c: autonomy over what is left at the end of life": held.c,
                 "the greatest of a, b, c": max(held.a, held.b, held.c), "temperature factor": held.factor,
                 "drawn in no less than": held.drawn_in,
                 "air to be moved while it gasses": banks.air_m3_per_h(b),
                 "or two openings, one low and one high, of": banks.opening_cm2(b)}
    if hasattr(plant, "battery"):
        battery = plant.battery
        label = f"one battery of {battery['capacity']} at {battery['rate']}, drawn in that time"
        ours |= {label: held.holds(battery), "batteries in series": b["series"], "strings": b["strings"]}
    steps(out, where, told["steps"], ours)
    volts = next((t for t in told["steps"] if t.startswith("nominal voltage")), None)
    if volts:
        out.number(where, "nominal voltage, V", amount(told["steps"][volts]), plant.nominal)
        together = sum(sheet_watts(l, plant.nominal) for l in plant.site["load"])
        out.number(where, "all loads together, W", amount(re.search(r"together, (.*? W)", volts)[1]), together)
    needed, lasts = re.match(r"(\S+) Ah needed; lasts (\S+) d", told["capacity"][0]).groups()
    out.number(where, "capacity needed, Ah", amount(needed), held.needed)
    out.number(where, "lasts, d", said.digits(lasts), held.lasts(b["capacity"]))
    capacity = re.search(r", ([\d.]+) Ah", told["battery"][0])[1]
    out.number(where, "capacity, Ah", amount(capacity), b["capacity"])
    for word, number in (("in series", b.get("series")), ("strings", b.get("strings"))):
        found = re.search(rf"(\d+) {word}", told["battery"][0])
        if found:
            out.fact(where, word, int(found[1]), number)
    for refused in told.get("not taken", []):
        name, money = re.match(r"battery (.*?): passes, ([\d.]+) in all", refused).groups()
        price = next(o[0] for o in plant.offers if o[3]["name"] == name)
        out.number(where, f"battery {name}, price", (float(money), 0.5), price)
    passed = re.search(r"R12 bank .*?: ([\d.]+) Ah, at least ([\d.]+) Ah for ([\d.]+) Ah a day over ([\d.]+) d", text)
    for word, printed, ours in zip(("held", "needed", "a day", "days"), passed.groups(),
                                   (b["capacity"], held.needed, held.day, held.days), strict=True):
        out.number(where, f"R12 {word}", amount(printed), ours)
    if "opening" in b:
        air = re.search(r"R20 bank .*?: two openings of ([\d.]+) cm², at least ([\d.]+) cm²", text)
        out.number(where, "R20 opening stated, cm²", amount(air[1]), value(b["opening"]))
        out.number(where, "R20 opening, cm²", amount(air[2]), banks.opening_cm2(b))
    share = re.search(r"strings share ([\d.]+) A as (.*?) A, links of ([\d.]+) mΩ with their joints, ([\d.]+) mΩ", text)
    if share:
        string = value(b["internal_resistance"]) * b["strings"]
        link = value(b["link"]) + 2 * value(b["joint"])
        out.number(where, "link with joints, mΩ", amount(share[3]), link * 1000)
        out.number(where, "a string, mΩ", amount(share[4]), string * 1000)
        ours = banks.shares(float(share[1]), b["strings"], string, link, b["take_off"] == "diagonal")
        for i, (shown, amps) in enumerate(zip(share[2].split(", "), ours, strict=True)):
            out.number(where, f"string {i + 1}, A", amount(shown), amps)


def sheet_watts(load, nominal):
    each = value(load["current"]) * nominal if "current" in load else value(load["power"])
    return load.get("count", 1) * each


# Array and inverter.

def array(out, plant, told, text):
    where, sun, year = f"array {plant.array['name']}", Sun(plant, plant.year), plant.year
    modules = re.match(r"(\d+) of .*?, (\d+) in series, (\d+) strings?: ([\d.]+) W", told["modules"][0])
    for word, printed, ours in zip(("modules", "in series", "strings", "W"), modules.groups(),
                                   (sun.series * sun.strings, sun.series, sun.strings, sun.watts()), strict=True):
        out.number(where, word, (float(printed), 0.05), ours)
    out.number(where, "controller, A", amount(re.search(r"([\d.]+) A", told["controller"][0])[1]),
               value(plant.controller["output"]))
    line = re.match(r"open circuit at its coldest ([\d.]+) V, maximum power at its hottest ([\d.]+) V; short circuit of "
                    r"the array in bright sun ([\d.]+) A", told["string"][0])
    for word, printed, ours in zip(("cold Voc, V", "hot Vmp, V", "bright Isc, A"), line.groups(),
                                   (sun.cold_Voc(), sun.hot_Vmp(), sun.bright_Isc()), strict=True):
        out.number(where, word, amount(printed), ours)
    out.fact(where, "string devices", "no string" not in told["devices"][0], sun.needs_string_devices())
    if told["steps"]:
        needed, month = sun.needed(), year.worst_month()
        steps(out, where, told["steps"], {
            "demand of a mean day in the worst month": year.taken(month), "sun-hours of a day there": year.sun[month],
            "array-to-load ratio": needed["ratio"], "lost to dirt, mismatch and wiring": 0.1,
            "efficiency of the controller": value(plant.controller["efficiency"]),
            "charge efficiency of the bank": year.stored(),
            "energy that the array must give in a day": needed["energy"],
            "power that gives it in those sun-hours": needed["power"],
            "power of a module with the cells of that month": needed["each"],
            "modules, before rounding up": needed["modules"], "modules, in whole strings": sun.series * sun.strings})
        worst = re.match(r"(\w+): ([\d.]+) times", told["worst month"][0])
        out.fact(where, "worst month", worst[1], MONTHS[month])
        out.number(where, "worst month, times", amount(worst[2]), year.given(month) / year.taken(month))
        others = [(o[1]["series"], o[1]["strings"]) for o in plant.offered_arrays[1:]]
        if "no other arrangement passes" in told.get("why so", []):
            out.fact(where, "other arrangements that pass", [], others)
    margin = value(plant.controller["start_margin"])
    checks = {
        "against the module's greatest system voltage": (sun.cold_Voc(), value(sun.module["greatest_voltage"])),
        "against the controller's greatest input voltage": (sun.cold_Voc(), value(plant.controller["greatest_input"])),
        "against the bank's highest charge voltage and the controller's margin": (
            sun.hot_Vmp(), plant.cold_absorption() + margin),
        "against the controller's input": (sun.bright_Isc(), value(plant.controller["input_current"])),
        "against the controller's output": (sun.watts() / plant.nominal, value(plant.controller["output"])),
    }
    limit = {"us": 600, "iec": 1000}[plant.site["site"]["rules"]]      # 690.7 and IEC 62548: recalled, as printed
    checks["against the greatest that the rule set admits"] = (sun.cold_Voc(), limit)
    found = re.search(r"LIVE IN DAYLIGHT \| max. ([\d.]+) V DC, Isc ([\d.]+) A", text)
    out.number(where, "label, V", amount(found[1]), sun.cold_Voc())
    out.number(where, "label, Isc, A", amount(found[2]), sun.strings * value(sun.module["isc"]))
    if "isolator" in plant.array:
        checks["against the isolator"] = (sun.cold_Voc(), value(plant.array["isolator"]))
    for label, (actual, limit) in checks.items():
        found = re.search(rf"R10 array .*{label}: ([\d.]+) \S+, at (?:most|least) ([\d.]+)", text)
        out.number(where, label[:52], amount(found[1]), actual)
        out.number(where, "  at", amount(found[2]), limit)


def inverter(out, plant, told, text):
    where, i = f"inverter {plant.inverter['name']}", plant.inverter
    line = re.match(r"([\d.]+) W, surge ([\d.]+) W; its loads ([\d.]+) W together, ([\d.]+) VA", told["power"][0])
    for word, printed, ours in zip(("power, W", "surge, W", "loads, W", "starting, VA"), line.groups(),
                                   (value(i["power"]), value(i["surge"]), plant.ac_watts(), plant.starting()),
                                   strict=True):
        out.number(where, word, amount(printed), ours)
    found = re.search(r"continuous power against its loads: ([\d.]+) W, at least ([\d.]+) W", text)
    out.number(where, "loads together, VA", amount(found[2]), plant.apparent())
    volts, farads = plant.bank["highest"], value(i["capacitance"])
    ohm, seconds, joules = sheet.precharge(volts, farads)
    found = re.search(r"resistor of ([\d.]+) Ω for ([\d.]+) s", text)
    out.number(where, "pre-charge, Ω", amount(found[1]), ohm)
    out.number(where, "pre-charge, s", amount(found[2]), seconds)
    out.number(where, "held, J", amount(re.search(r"closes, ([\d.]+) J", text)[1]), joules)


# Charging.

def charging(out, plant, plant_said, told, text):
    where, b = f"bank {plant.bank['name']}", plant.bank
    points = plant.set_points()
    words = {"absorption": "absorption", "float": "float", "equalising": "equalize"}
    for word, shown in re.findall(r"(absorption|float|equalising) ([\d.]+) V", told["voltages"][0]):
        out.number(where, f"{word}, V", amount(shown), points.get(words[word]))
    out.number(where, "highest, V", amount(re.search(r"([\d.]+) V at its highest", told["voltages"][0])[1]), b["highest"])
    low, reconnect = re.match(r"loads at ([\d.]+) V, reconnect at ([\d.]+) V", told["disconnect"][0]).groups()
    out.number(where, "disconnect, V", amount(low), value(b.get("disconnect", b["cut_off"])))
    out.number(where, "reconnect, V", amount(reconnect), value(b.get("reconnect", 2.1 * banks.cells(b))))
    out.number(where, "at least, V", amount(re.search(r"([\d.]+) V at least", told["voltages"][0])[1]), b["cut_off"])
    found = re.search(r"R14 bank .*?(?:disconnected at [\d.]+ V, at least|°C ask for) ([\d.]+) V", text)
    if found:
        out.number(where, "disconnect, at least, V", amount(found[1]), plant.least_disconnect)
    most, hours = plant.charge_amps()
    capacity = b["capacity"]
    found = re.search(r"R11 bank .*?: ([\d.]+) A of all sources, at most ([\d.]+) A", text)
    out.number(where, "sources, A", amount(found[1]), hours if plant.controller else most)
    limit = value(b["greatest_charge"]) if "greatest_charge" in b else banks.rate(b, "recommended_high") * capacity
    out.number(where, "  at most", amount(found[2]), limit)
    found = re.search(r"([\d.]+) A of all sources for hours, ([\d.]+) A mix and fill", text)
    enough = b["chemistry"] == "lfp" or hours >= banks.rate(b, "recommended_low") * capacity
    out.fact(where, "too little to mix", bool(found), not enough)
    if found:
        out.number(where, "sources for hours, A", amount(found[1]), hours)
        out.number(where, "  at least", amount(found[2]), banks.rate(b, "recommended_low") * capacity)
    for word, shown, low, high in re.findall(r"(absorption|float) ([\d.]+) V, usual ([\d.]+) to ([\d.]+) V", text):
        out.number(where, f"R11 {word}, V", amount(shown), points[word])
        for end, printed, ours in zip(("low", "high"), (low, high), banks.usual(b, word), strict=True):
            out.number(where, f"  usual {word}, {end}", amount(printed), ours)
    if "source alternator" in plant_said:
        told = plant_said["source alternator"]
        found = re.match(r"([\d.]+) A at most, ([\d.]+) A for hours", told["gives"][0])
        out.number("alternator", "most, A", amount(found[1]), most)
        out.number("alternator", "for hours, A", amount(found[2]), hours)
        depth = banks.WINDOW if b["chemistry"] == "lfp" else banks.DEPTH
        out.number("alternator", "recharge, h", said.digits(re.match(NUMBER, told["recharge"][0])[0]),
                   banks.recharge_h(b, hours, plant.year.stored(), 1 - depth))
    into = re.search(r"current into the bank, at most ([\d.]+) A", text)[1]
    out.number(where, "current into the bank, A", said.digits(into), most + sheet.meter_A(most))


# Wiring.

def expectations(plant, printed, assumed):
    network, charger, of_array = plant.network(printed, assumed)
    sun = Sun(plant, plant.year) if plant.array else None
    for circuit in [*network.circuits, *filter(None, [of_array])]:
        if circuit is charger:
            yield ChargerRun(network, circuit)
        elif circuit is of_array:
            yield ArrayRun(network, circuit, sun)
        else:
            yield None if circuit.name not in printed else Expectation(network, circuit)


def wiring(out, plant, printed, assumed, run, verdict):
    routes = plant.routes()
    out.fact("report", "circuits", sorted(printed), sorted(routes))
    for ours in expectations(plant, printed, assumed):
        circuit, told = ours.circuit, printed[ours.circuit.name]
        out.fact(circuit.name, "ends", told["ends"], circuit.ends)
        lengths = re.findall(r"; ([\d.]+) m \+ ([\d.]+) m;", told["conductor"])
        if lengths:
            out.number(circuit.name, "length, m", (sum(map(float, lengths[0])), 0.01), circuit.metres)
        run(out, circuit, told, ours)
        protective(out, circuit, told)
        shelf(out, plant, circuit, told)
        for size, reason in told["refused"]:
            smaller(out, plant, printed, assumed, ours, size, reason, verdict)


def shelf(out, plant, circuit, told):
    """Every smaller size that can be had is refused."""
    if told["designed"]:
        sizes = [c["size"] for c in plant.stock.get("cable", [])] or SHELF[circuit.rules]
        out.fact(circuit.name, "sizes not taken", [s for s, _ in told["refused"]],
                 [s for s in sizes if area(s) < area(circuit.size) - 1e-6])


def smaller(out, plant, printed, assumed, finished, size, reason, verdict):
    name = finished.circuit.name
    changed = printed | {name: printed[name] | {"size": size}}
    network, _, of_array = plant.network(changed, assumed)
    circuit = next(c for c in [*network.circuits, *filter(None, [of_array])] if c.name == name)
    if reason.label.startswith(("voltage", "least")):
        ours = Expectation(network, circuit, finished.network)
    else:
        ours = copy.copy(finished)                        # told with the currents of the size that was taken
        ours.circuit = circuit
    verdict(out, f"{name}: {size}", reason, ours)


def protective(out, circuit, told):
    if "protective" not in told:
        return
    printed = re.search(r"at least (\S+ \S+)", told["protective"])[1]
    if circuit.rules == "us":
        rows = table("protection.toml", "nec-250-122-egc")["rows"]
        ours = next(r[1] for r in rows if r[0] >= circuit.devices[0]["rating"]) + " AWG"
        ours = min(ours, circuit.size, key=area)
    else:
        rows = table("protection.toml", "iec-pe-minimum-size")["rows"]
        word = next(r[1] for r in rows if r[0] == "more" or area(circuit.size) <= r[0])
        size = {"S": area(circuit.size), "S/2": area(circuit.size) / 2}.get(word, word)
        ours = f"{size:g} mm2"
    out.fact(circuit.name, "protective conductor", printed, ours)


def boards(out, plant, network, charger, text):
    """A busbar carries the sum of its sources or of its loads: each no more than its device lets pass."""
    for board in network.site["board"]:
        into = past = 0.0
        for circuit in network.circuits:
            if board["name"] in circuit.ends:
                let = min([d["rating"] for d in circuit.devices])
                if circuit is charger:
                    into += min(let, network.charged[circuit.name])
                elif plant.bank["name"] in circuit.ends:
                    into += let
                else:
                    past += let
        found = re.search(rf'board "{board["name"]}".*?(?:bought for at least|let) ([\d.]+) A', text)
        out.number(f"board {board['name']}", "busbar, A", amount(found[1]), max(into, past))
        found = re.search(rf"busbar for at least ([\d.]+) A: {board['name']}", text)
        if found:
            out.number("to buy", "busbar, A", amount(found[1]), max(into, past))


def bearings(out, plant, text):
    """What loads and sources bear and reach."""
    highest = plant.bank["highest"]
    for kind, name, bears, reaches in re.findall(r'R3 (load|inverter) "(.*?)": bears ([\d.]+) V, the bank reaches ([\d.]+) V',
                                                 text):
        item = plant.inverter if kind == "inverter" else next(l for l in plant.site["load"] if l["name"] == name)
        out.number(f"{kind} {name}", "bears, V", amount(bears), value(item["greatest"]))
        out.number(f"{kind} {name}", "the bank reaches, V", amount(reaches), highest)
    head = re.search(r'^bank ".*?": .*? ([\d.]+) V, ([\d.]+) Ah, from ([\d.]+) V at cut-off to ([\d.]+) V', text, re.M)
    for word, printed, ours in zip(("nominal, V", "capacity, Ah", "cut-off, V", "highest, V"), head.groups(),
                                   (plant.nominal, plant.bank["capacity"], plant.bank["cut_off"], highest), strict=True):
        out.number("head", word, amount(printed), ours)
    cold = re.search(r'into ".*?": reaches ([\d.]+) V cold', text)
    if cold:
        out.number("head", "charger reaches cold, V", amount(cold[1]), plant.cold_absorption())


def inrush(out, plant, network, text):
    """Bound of the current into an empty input, as R6 bounds what can flow: metal cold, no joints."""
    found = re.search(r"up to ([\d.]+) A flow into", text)
    if found:
        feed = next(c for c in network.circuits if c.ends[1] == plant.inverter["name"])
        ohms = [c.cold_ohms() for c in network.path(plant.bank["name"], feed.ends[1])]
        ohm = value(plant.bank["internal_resistance"]) + sum(ohms)
        out.number(f"inverter {plant.inverter['name']}", "inrush, A", report.two_digits(found[1]),
                   plant.bank["highest"] / ohm)


# Sheet.

def under_load(out, plant, network, charger, of_array, text):
    sun = Sun(plant, plant.year) if plant.array else None
    circuits = {c.name: c for c in [*network.circuits, *filter(None, [of_array])]}
    rows = said.loaded(text, list(report.circuits(text)))
    joint_rows, tested = said.joints(text), {}
    for name, (up_to, amps, tolerance, mv, most, per_A, low, high) in rows.items():
        circuit, where = circuits[name], f"sheet {name}"
        if circuit is charger or circuit is of_array:
            limit = network.charged[name] if circuit is charger else sun.bright_Isc()
            ohms = circuit.ohms(circuit.temperature(limit))
            ours = sheet.Row(network, circuit, ohms, up_to=limit)
        else:
            ours = sheet.Row(network, circuit, sheet.hot(network, circuit))
        tested[name] = ours.amps
        out.fact(where, "up to", bool(up_to), bool(ours.up_to))
        out.number(where, "A", amount(amps), ours.amps)
        if tolerance:
            out.number(where, "± A", two(tolerance), ours.tolerance)
        out.number(where, "mV", three(mv), ours.millivolts)
        out.number(where, "most mV", three(most), ours.most)
        out.number(where, "most mV/A", three(per_A), ours.most_per_A)
        if low:
            out.number(where, "V, low", (float(low), 0.005), ours.volts[0])
            out.number(where, "V, high", (float(high), 0.005), ours.volts[1])
    expected = [(c.name, label, ohm) for c in (circuits[n] for n in rows) for label, ohm in sheet.joints(c)]
    out.fact("sheet", "joints", [r[1] for r in joint_rows], [e[1] for e in expected])
    for row, (name, label, ohm) in zip(joint_rows, expected):
        where, amps = f"joint {name}", tested[name]
        out.number(where, f"{label}, mV", three(row[2]), 1000 * amps * ohm)
        out.number(where, f"{label}, refused over, mV", three(row[3]), 2000 * amps * ohm)
        out.number(where, f"{label}, 1 mΩ shows at, A", said.digits(row[4]), sheet.shows_at(ohm))
        out.number(where, f"{label}, refusal needs, A", said.digits(row[5]), sheet.refusal_at(ohm))
        out.fact(where, f"{label}, too little current", bool(row[6]), sheet.refusal_at(ohm) > amps)
    rested(out, plant, network, text)
    if sun:
        found = re.search(r"each string open, .*?, ([\d.]+) to ([\d.]+) V", text)
        for word, shown, held in zip(("low", "high"), found.groups(), sheet.span(sun.hot_Voc(), sun.cold_Voc())):
            out.number("sheet", f"open string, {word}, V", amount(shown), held)
        out.number("sheet", "array in full sun, A", amount(re.search(r"gives about ([\d.]+) A", text)[1]), sun.Imp())


def rested(out, plant, network, text):
    b = plant.bank
    full, empty = network.cell_volts(b)
    found = re.search(r"terminals, (\d+) \S+ cells.*?, ([\d.]+) to ([\d.]+) V", text)
    out.fact("sheet", "cells", int(found[1]), banks.cells(b))
    for word, shown, held in zip(("empty", "full"), found.groups()[1:], sheet.span(empty, full)):
        out.number("sheet", f"bank {word}, V", amount(shown), held)
    found = re.search(r"each of its (\d+) batteries alone, ([\d.]+) to ([\d.]+) V", text)
    if found:
        out.fact("sheet", "batteries", int(found[1]), b["series"] * b["strings"])
        for word, shown, held in zip(("empty", "full"), found.groups()[1:],
                                     sheet.span(empty / b["series"], full / b["series"])):
            out.number("sheet", f"battery {word}, V", amount(shown), held)
    found = re.search(r"differ by (\d+) mV or less", text)
    if found:
        out.number("sheet", "strings apart, mV", (float(found[1]), 0.5), 10.0 * banks.cells(b))


# Purchases.

def buying(out, plant, printed, network, of_array, text):
    lines, total = said.purchases(text)
    stock = {c["size"]: c.get("price") for c in plant.stock.get("cable", [])}
    metres, lugs = {}, {}
    for circuit in [*network.circuits, *filter(None, [of_array])]:
        told = printed[circuit.name]
        if told["designed"]:
            key = (circuit.size, circuit.compound, circuit.insulation)
            metres[key] = metres.get(key, 0.0) + circuit.metres
            lugs[circuit.size] = lugs.get(circuit.size, 0) + 4
    for (size, _, _), length in metres.items():
        mine = [l for l in lines if l[1] == "m" and l[2].startswith(size + " ")]
        for (count, _, what, price), ours in zip(mine, (length, math.ceil(length / 10 - 1e-9)), strict=True):
            kind = "allowance" if "allowance" in what else "cable"
            out.number("to buy", f"{size} {kind}, m", (count, 0.005), ours)
            if stock.get(size) is not None:
                out.number("to buy", f"{size} {kind}, price", (price or 0.0, 0.005), ours * stock[size])
        shown = sum(l[0] for l in lines if l[2].startswith("lug ") and f"for {size}" in l[2])
        out.number("to buy", f"lugs for {size}", (shown, 0), lugs[size])
    sleeves = sum(l[0] for l in lines if l[2].startswith("heat-shrink"))
    out.number("to buy", "sleeves", (sleeves, 0), sum(lugs.values()))
    found = re.search(r"load-break isolator, at least ([\d.]+) V DC, ([\d.]+) A", text)
    if found:
        out.number("to buy", "isolator, V", amount(found[1]), Sun(plant, plant.year).cold_Voc())
        out.number("to buy", "isolator, A", amount(found[2]), Sun(plant, plant.year).bright_Isc())
    found = re.search(r"(\d+) pcs  device for one string, at least ([\d.]+) A, ([\d.]+) V DC", text)
    if found:
        out.fact("to buy", "string devices", int(found[1]), plant.bank["strings"])
        out.number("to buy", "string device, V", amount(found[3]), plant.bank["highest"])
        # 1.25 times an equal share of what the bank gives or takes (the factor is not printed).
        out.number("to buy", "string device, A", amount(found[2]),
                   1.25 * max(network.greatest_amps.values()) / plant.bank["strings"])
    devices(out, plant, printed, lines)
    chosen(out, plant, lines)
    out.number("to buy", "labels", (next(l[0] for l in lines if l[2].startswith("label")), 0), count_labels(plant, printed))
    out.number("to buy", "labels listed", (said.labels(text), 0), count_labels(plant, printed))
    if total:
        priced = [l[3] for l in lines if l[3] is not None]
        found = re.match(r"\s*([\d.]+) in all for what has a price; (\d+) of (\d+) lines have none", total)
        out.number("to buy", "in all", (float(found[1]), 0.005), sum(priced))
        out.fact("to buy", "lines without a price", int(found[2]), len(lines) - len(priced))
        out.fact("to buy", "lines", int(found[3]), len(lines))


def devices(out, plant, printed, lines):
    shelf = plant.stock.get("device", [])
    wanted, fuses = {}, {}
    for told in printed.values():
        for device in told["devices"]:
            if not device["name"].startswith(("fuse", "breaker")):
                continue                                  # stated, so it is there
            kind = f"{device['family']} {device['rating']:g} A"
            wanted[kind] = wanted.get(kind, 0) + 1
            fuses[kind] = not device["family"].startswith(("miniature", "molded"))
    for kind, count in wanted.items():
        plain = [l for l in lines if l[2].startswith(f"{kind},") and "spare" not in l[2]]
        out.number("to buy", kind, (sum(l[0] for l in plain), 0), count)
        spare = sum(l[0] for l in lines if l[2].startswith(f"{kind},") and "spare" in l[2])
        out.number("to buy", f"{kind}, spare", (spare, 0), 1 if fuses[kind] else 0)
        holders = sum(l[0] for l in lines if l[2].startswith(f"holder for {kind},"))
        out.number("to buy", f"{kind}, holders", (holders, 0), count if fuses[kind] else 0)
        family, rating = kind.rsplit(" ", 2)[0], float(kind.rsplit(" ", 2)[1])
        price = next((d["price"] for d in shelf if d["family"] == family and rating in map(value, d["ratings"])), None)
        if price is not None:
            out.number("to buy", f"{kind}, price", (sum(l[3] for l in plain), 0.005), count * price)


def chosen(out, plant, lines):
    sun = Sun(plant, plant.year) if plant.array else None
    ours = {}
    if hasattr(plant, "battery"):
        count = plant.bank["series"] * plant.bank["strings"]
        ours[f"battery {plant.battery['name']}"] = (count, count * plant.battery["price"])
    if sun and "price" in sun.module:
        count = sun.series * sun.strings
        ours[f"module {sun.module['name']}"] = (count, count * sun.module["price"])
        ours["charge controller"] = (1, plant.controller["price"])
    if plant.inverter:
        ours["inverter "] = (1, plant.inverter["price"])
    for begin, (count, price) in ours.items():
        line = next(l for l in lines if l[2].startswith(begin))
        out.number("to buy", begin, (line[0], 0), count)
        out.number("to buy", f"{begin}, price", (line[3], 0.005), price)


def count_labels(plant, printed):
    """Two a circuit, one a device, one each for bank, array, board, inverter."""
    things = len(plant.site["bank"]) + len(plant.site.get("board", [1])) + bool(plant.array) + bool(plant.inverter)
    return things + 2 * len(printed) + sum(len(told["devices"]) for told in printed.values())
