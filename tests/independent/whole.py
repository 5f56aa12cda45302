"""A whole plant against its report: energy, bank, array, inverter, charging; circuits and more are in `fitting`."""

import re

import bank as banks
import fitting
import report
import said
import sheet
from complete import Plant
from energy import MONTHS, Sun
from report import NUMBER, amount
from tables import value


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
    fitting.wiring(out, plant, printed, assumed, run, verdict)
    fitting.boards(out, plant, network, charger, text)
    fitting.bearings(out, plant, text)
    fitting.shared(out, plant, network, text)
    fitting.inrush(out, plant, network, text)
    fitting.under_load(out, plant, network, charger, of_array, text)
    fitting.buying(out, plant, printed, network, of_array, text)


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
            "demand of the autonomy": held.autonomy, "margin": held.margin, "capacity needed": held.needed}
    if held.lithium:
        ours |= {"usable window": held.depth, "over the window": held.over_window,
                 "left at the end of life": banks.LITHIUM_LEFT, "left in the cold": banks.LITHIUM_COLD,
                 "at the end of life, in the cold": held.aged_and_cold}
    else:
        ours |= {"greatest depth": held.depth, "a: autonomy over greatest depth": held.a,
                 "daily depth": held.daily_depth, "b: day over daily depth": held.b,
                 "left at the end of life": banks.END_OF_LIFE,
                 "c: autonomy over what is left at the end of life": held.c,
                 "the greatest of a, b, c": max(held.a, held.b, held.c), "temperature factor": held.factor,
                 "drawn in no less than": held.drawn_in,
                 "air to be moved while it gasses": banks.air_m3_per_h(b),
                 "or two openings, one low and one high, of": banks.opening_cm2(b)}
    if hasattr(plant, "battery"):
        battery = plant.battery
        ours |= {"batteries in series": b["series"], "strings": b["strings"]}
        if held.drawn_in < value(battery["rate"]):
            label = f"one battery of {battery['capacity']} at {battery['rate']}, drawn in that time"
            ours[label] = held.holds(battery)
    steps(out, where, told["steps"], ours)
    volts = next((t for t in told["steps"] if t.startswith("nominal voltage")), None)
    if volts:
        out.number(where, "nominal voltage, V", amount(told["steps"][volts]), plant.nominal)
        out.number(where, "all loads together, W", amount(re.search(r"together, (.*? W)", volts)[1]),
                   plant.together(plant.nominal))
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
    passed = re.search(r"R12 bank .*?: ([\d.]+) Ah(?: in ([\d.]+) h, ([\d.]+) Ah by its rating at [\d.]+ h)?, "
                       r"at least ([\d.]+) Ah for ([\d.]+) Ah a day over ([\d.]+) d", text)
    sags = hasattr(plant, "battery") and held.drawn_in < value(plant.battery["rate"])
    gives = b["strings"] * held.holds(plant.battery) if sags else b["capacity"]
    r12 = (gives, held.drawn_in, b["capacity"], held.needed, held.day, held.days)
    for word, printed, ours in zip(("held", "drawn in", "rated", "needed", "a day", "days"), passed.groups(), r12,
                                   strict=True):
        if printed or sags:
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


# Array and inverter.

def array(out, plant, told, text):
    where, sun, year = f"array {plant.array['name']}", Sun(plant, plant.year), plant.year
    modules = re.match(r"(\d+) of .*?, (\d+) in series, (\d+) strings?: ([\d.]+) W", told["modules"][0])
    for word, printed, ours in zip(("modules", "in series", "strings", "W"), modules.groups(),
                                   (sun.series * sun.strings, sun.series, sun.strings, sun.watts()), strict=True):
        out.number(where, word, (float(printed), 0.05), ours)
    out.number(where, "controller, A", amount(re.search(r"([\d.]+) A", told["controller"][0])[1]),
               value(plant.controller["output"]))
    line = re.match(r"open circuit at its coldest ([\d.]+) V, maximum power at its hottest ([\d.]+) V; short circuit "
                    r"of the array in bright sun ([\d.]+) A", told["string"][0])
    for word, printed, ours in zip(("cold Voc, V", "hot Vmp, V", "bright Isc, A"), line.groups(),
                                   (sun.cold_Voc(), sun.hot_Vmp(), sun.bright_Isc()), strict=True):
        out.number(where, word, amount(printed), ours)
    out.fact(where, "string devices", "no string" not in told["devices"][0], sun.needs_string_devices())
    if told["steps"]:
        needed, month = sun.needed(), year.worst_month()
        steps(out, where, told["steps"], {
            "demand of a mean day in the worst month": year.taken(month), "sun-hours of a day there": year.sun[month],
            "array-to-load ratio": needed["ratio"], "lost to dirt, mismatch, wiring and shade": 0.1,
            "efficiency of the controller": value(plant.controller["efficiency"]),
            "part of the energy that the bank gives back": year.given_back(),
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
        refused = {}
        for line in told.get("not taken", []):
            found = re.match(r"module (.*?) with controller (.*?): ([\d.]+) W of modules over an output of", line)
            if found:
                refused[found[1], found[2]] = float(found[3])
        out.fact(where, "controllers that cut off too much, W", refused, plant.cut_off_W)
    margin = value(plant.controller["start_margin"])
    checks = {
        "against the module's greatest system voltage": (sun.cold_Voc(), value(sun.module["greatest_voltage"])),
        "against the controller's greatest input voltage": (sun.cold_Voc(), value(plant.controller["greatest_input"])),
        "against the bank's highest charge voltage and the controller's margin": (
            sun.hot_Vmp(), plant.cold_absorption() + margin),
        "against the controller's input": (sun.bright_Isc(), value(plant.controller["input_current"])),
        "against the controller's output": (
            sun.watts() * sun.gain() / plant.nominal, value(plant.controller["output"])),
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
    found = re.search(r"continuous power against its loads: ([\d.]+) VA, at least ([\d.]+) VA", text)
    out.number(where, "power, R16, VA", amount(found[1]), value(i["power"]))
    out.number(where, "loads together, VA", amount(found[2]), plant.apparent())
    found = re.search(r"while the largest load starts: ([\d.]+) VA, at least ([\d.]+) VA", text)
    if found:
        out.number(where, "surge, R16, VA", amount(found[1]), value(i["surge"]))
        out.number(where, "starting, R16, VA", amount(found[2]), plant.starting())
    passing = [m[1] for m in (re.match(r"inverter (.*?): passes", t) for t in told.get("not taken", [])) if m]
    out.fact(where, "others that pass", passing, plant.other_inverters)
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
    told_points = told["voltages"][0].split(" at 25 °C")[0]
    words = {"absorption": "absorption", "float": "float", "equalising": "equalize"}
    for word, shown in re.findall(r"(absorption|float|equalising) ([\d.]+) V", told["voltages"][0]):
        out.number(where, f"{word}, V", amount(shown), points.get(words[word]))
    shown = re.search(r"([\d.]+) V at its highest", told["voltages"][0])[1]
    out.number(where, "highest, V", amount(shown), b["highest"])
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
    out.number(where, "sources, A", amount(found[1]), most)
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
        out.number("alternator", "recharge, h", said.digits(re.match(NUMBER, told["recharge"][0])[0]),
                   banks.recharge_h(b, hours, plant.year.stored(), plant.capacity.depth))
    set_to = re.search(r"R11 .*: to be set to (.*) at 25 °C", text)
    if set_to:
        out.fact(where, "set points repeated", set_to[1], told_points)
    found = re.search(r"R14 bank .*?: to be disconnected at ([\d.]+) V and reconnected at ([\d.]+) V", text)
    if found:
        out.number(where, "R14 disconnect, V", amount(found[1]), b["cut_off"])
        out.number(where, "R14 reconnect, V", amount(found[2]), 2.1 * banks.cells(b))
    into = re.search(r"current into the bank, at most ([\d.]+) A", text)[1]
    out.number(where, "current into the bank, A", said.digits(into), most + sheet.meter_A(most))
