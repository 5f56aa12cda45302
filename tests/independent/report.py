"""What the printed report says, circuit by circuit, and the assumptions it names."""

import re

NUMBER = r"(-?[\d.]+)"
UNIT = {"kA": 1e3, "mΩ": 1e-3}


def amount(text):
    """Value, half a unit of the last digit it may carry, of a text such as "3.67 kA" or "4.5 mΩ".

    The report prints four digits, at most two decimals from 1 up and three below, and drops zeros at the end.
    """
    number, unit = re.match(NUMBER + r"\s*(\S*)", text).groups()
    shown = float(number)
    decimals = 3 if abs(shown) < 1 else max(0, 2 - max(0, len(str(int(abs(shown)))) - 2))
    scale = UNIT.get(unit.rstrip(",:;"), 1.0)
    return shown * scale, 0.5 * 10**-decimals * scale


def two_digits(text):
    """As `amount`, for a current of two significant digits, the greatest rounded up and the least down."""
    number, unit = re.match(NUMBER + r"\s*(\S*)", text).groups()
    shown = float(number) * UNIT.get(unit, 1.0)
    return shown, 10 ** (len(str(int(shown))) - 2)


class Check:
    """One line: label, value, limit; `path` names another circuit whose check a smaller size fails, `device` one but
    the first of its circuit."""

    def __init__(self, mark, line, devices=()):
        self.mark = mark
        self.device = next((d for d in devices if line.startswith(d["name"] + ": ")), None)
        line = line.removeprefix(f"{self.device['name']}: ") if self.device else line
        self.path, line = re.match(r'(?:path to "(.*?)": )?(.*)', line).groups()
        found = re.match(r"(.*): (-?[\d.]+ ?\S*), at (most|least) (-?[\d.]+ ?[^\s:]*)(.*)", line)
        self.label = found[1] if found else line
        self.actual, self.sense, self.limit = (found[2], found[3], found[4]) if found else (None, None, None)


class Assumptions:
    """Figures from "Taken where the document says nothing"."""

    def __init__(self, text):
        text = text.split("\nTaken where the document says nothing\n", 1)[1].split("\n\n", 1)[0]
        lug = re.search(r"crimped lugs of ([\d.]+) mΩ", text)
        self.lug_ohm = float(lug[1]) / 1000 if lug else None

        def volts(kind):
            return float(re.search(kind + r" (\d+) mV", text)[1]) / 1000

        self.fuse_V, self.breaker_V = volts("fuse with holder"), volts("breaker pole")
        self.part_V = {"switch": volts("switch or selector"), "selector": volts("switch or selector"),
                       "relay": volts("relay"), "shunt": volts("shunt")}
        self.full_cell_V = float(re.search(r"full and warm \(([\d.]+) V a lead-acid cell", text)[1])
        self.empty_cell_V = float(re.search(r"empty \(([\d.]+) V a lead-acid cell", text)[1])
        self.aged_ratio = {kind: float(ratio) for ratio, kind in re.findall(r"([\d.]+) times ([\w-]+)", text)}
        self.installed = {}
        for way, names in re.findall(r"- installed as (.+?): (.*)", text):
            self.installed |= dict.fromkeys(names.split(", "), way)


def device(line):
    """Family, rating, the end it sits at, poles, greatest current of a device line."""
    found = re.match(r"(.+?): (.+?) ([\d.]+) A, ", line)
    if not found:
        return None
    place = re.search(r'(?:at|from) "(.+?)"', line)
    greatest = re.search(r"greatest fault current (\d+) A", line)
    return {"name": found[1], "family": found[2], "rating": float(found[3]), "at": place[1] if place else None,
            "poles": 2 if "both poles" in line else 1, "greatest": greatest and greatest[1]}


def circuits(text):
    """Printed circuits by name: texts of each line, devices, checks and sizes not taken."""
    found, current = {}, None
    detail = text.split("\nCircuits in detail\n", 1)[1].split("\nTo buy")[0].split("\nTaken where")[0]
    table = text.split("\nCircuits\n", 1)[1].split("\n\n", 1)[0].splitlines()[1:]
    for line in detail.splitlines():
        head = re.match(r"  (\d+)  (.+?): (.+) – (.+)$", line)
        if head:
            current = {"name": head[2], "ends": (head[3], head[4]), "row": table[len(found)],
                       "checks": [], "refused": [], "devices": [], "lines": []}
            found[head[2]] = current
            continue
        body = re.match(r"    (to be bought(?= )|\S+(?: \S+)?\s)\s+(.*)$", line)
        if not body or current is None:
            continue
        mark, rest = body[1].strip(), body[2]
        if mark != "governing":
            current["lines"].append(rest)
        if mark in ("passed", "FAILED", "to be bought"):
            current["checks"].append(Check(mark, rest, current["devices"]))
        elif mark == "not taken":
            size, reason = rest.split(": ", 1)
            current["refused"].append((size, Check("FAILED", reason)))
        elif mark == "device":
            current["devices"] += filter(None, [device(rest)])
        else:
            current["capacity" if mark == "ampacity" else mark] = rest
    for circuit in found.values():
        words = circuit["conductor"].split(", ")
        circuit["size"] = re.match(r"\S+ \S+?(?= )", words[0])[0].strip()
        circuit["insulation"] = words[1]
        circuit["designed"] = circuit["conductor"].rstrip().endswith(("designed", "to be bought"))
    return found
