"""What is fitted and bought, against the report: circuits, busbars, commissioning sheet, purchases, labels."""

import copy
import math
import re

import bank as banks
import report
import said
import sheet
from energy import Sun
from expect import ArrayRun, ChargerRun, Expectation
from report import amount
from tables import area, table, value

SHELF = {"us": [f"{n} AWG" for n in (18, 16, 14, 12, 10, 8, 6, 4, 3, 2, 1)],
         "iec": [f"{n} mm2" for n in ("1.5", "2.5", "4", "6", "10", "16", "25", "35")],
         "craft_iso": [f"{n} mm2" for n in ("0.75", "1", "1.5", "2.5", "4", "6", "10", "16", "25", "35")]}


def three(text):
    """A figure of three digits, none finer than a thousandth, whole above a thousand."""
    shown = float(text)
    return shown, 0.5 * 10 ** max(-3, min(0, math.floor(math.log10(shown)) - 2))


def two(text):
    shown = float(text)
    return shown, 0.5 * 10 ** max(-2, math.floor(math.log10(shown)) - 1)


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
    network, charger, of_array = plant.network(changed, assumed)
    circuit = next(c for c in [*network.circuits, *filter(None, [of_array])] if c.name == (reason.path or name))
    if reason.path and circuit is charger:
        ours = ChargerRun(network, circuit)
    elif reason.path:
        ours = Expectation(network, circuit, finished.network)
    elif not reason.label.startswith(("voltage", "least")):
        ours = copy.copy(finished)                        # told with the currents of the size that was taken
        ours.circuit = circuit
    elif isinstance(finished, ArrayRun):
        ours = ArrayRun(network, circuit, Sun(plant, plant.year))
    elif isinstance(finished, ChargerRun):
        ours = ChargerRun(network, circuit)
    else:
        ours = Expectation(network, circuit, finished.network)
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
        found = re.search(rf'board "{board["name"]}".*?(?:at least|let) ([\d.]+) A', text)
        out.number(f"board {board['name']}", "busbar, A", amount(found[1]), max(into, past))
        found = re.search(rf"busbar for at least ([\d.]+) A: {board['name']}", text)
        if found:
            out.number("to buy", "busbar, A", amount(found[1]), max(into, past))


def bearings(out, plant, text):
    """What loads and sources bear and reach."""
    highest = plant.bank["highest"]
    line = r'R3 (load|inverter) "(.*?)": bears ([\d.]+) V, the bank reaches ([\d.]+) V'
    for kind, name, bears, reaches in re.findall(line, text):
        item = plant.inverter if kind == "inverter" else next(l for l in plant.site["load"] if l["name"] == name)
        out.number(f"{kind} {name}", "bears, V", amount(bears), value(item["greatest"]))
        out.number(f"{kind} {name}", "the bank reaches, V", amount(reaches), highest)
    head = re.search(r'^bank ".*?": .*? ([\d.]+) V, ([\d.]+) Ah, from ([\d.]+) V at cut-off to ([\d.]+) V', text, re.M)
    held = (plant.nominal, plant.bank["capacity"], plant.bank["cut_off"], highest)
    for word, printed, ours in zip(("nominal, V", "capacity, Ah", "cut-off, V", "highest, V"), head.groups(), held,
                                   strict=True):
        out.number("head", word, amount(printed), ours)
    cold = re.search(r'into ".*?": reaches ([\d.]+) V cold', text)
    if cold:
        out.number("head", "charger reaches cold, V", amount(cold[1]), plant.cold_absorption())


def shared(out, plant, network, text):
    """Strings share the greatest current of the bank, into it or out of it."""
    found = re.search(r"strings share ([\d.]+) A as", text)
    if found:
        first = next(c for c in network.circuits if plant.bank["name"] in c.ends)
        out.number(f"bank {plant.bank['name']}", "current that strings share, A", amount(found[1]),
                   network.greatest_amps[first.name])


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
        out.number("sheet", "array in full sun, A", amount(re.search(r"gives about ([\d.]+) A", text)[1]),
                   sun.Imp() / sun.gain())


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
    for count, size in re.findall(r"(\d+) for ([\d./]+ \S+?)(?:,|$)", next(l[2] for l in lines if "sleeve" in l[2])):
        out.number("to buy", f"sleeves for {size}", (int(count), 0), lugs.get(size, 0))
    for volts in re.findall(r"max\. ([\d.]+) V DC?(?! , Isc)", text.split("\nLabels, by the line\n", 1)[1]):
        if not plant.array or abs(float(volts) - Sun(plant, plant.year).cold_Voc()) > 0.05:
            out.number("label", "greatest volts", amount(volts), plant.bank["highest"])
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
    labels = count_labels(plant, printed)
    out.number("to buy", "labels", (next(l[0] for l in lines if l[2].startswith("label")), 0), labels)
    out.number("to buy", "labels listed", (said.labels(text), 0), labels)
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
            for l in lines:
                if l[2].startswith(f"{kind},") and "spare" in l[2]:
                    out.number("to buy", f"{kind}, spare, price", (l[3], 0.005), l[0] * price)


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
