"""What the printed report says, circuit by circuit."""

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
    """As `amount`, for a number rounded to two significant digits."""
    shown = float(text)
    return shown, 0.5 * 10 ** (len(str(int(shown))) - 2)


class Check:
    def __init__(self, mark, line):
        self.mark = mark
        found = re.match(r"(.*): (-?[\d.]+ ?\S*), at (most|least) (-?[\d.]+ ?[^\s:]*)(.*)", line)
        self.label = found[1] if found else line
        self.actual, self.sense, self.limit = (found[2], found[3], found[4]) if found else (None, None, None)


def circuits(text):
    """Printed circuits by name: texts of each line, and checks."""
    found, current = {}, None
    in_detail = text.split("\nCircuits in detail\n", 1)[1].split("\nTaken where")[0].split("\nTo buy")[0]
    table = text.split("\nCircuits\n", 1)[1].split("\n\n", 1)[0].splitlines()[1:]
    for line in in_detail.splitlines():
        head = re.match(r"  (\d+)  (.+?): (.+) – (.+)$", line)
        if head:
            current = {"name": head[2], "checks": [], "refused": [], "row": table[len(found)]}
            found[head[2]] = current
            continue
        body = re.match(r"    (\S+(?: \S+)?)\s{2,}(.*)$", line)
        if not body or current is None:
            continue
        mark, rest = body[1], body[2]
        if mark in ("passed", "FAILED"):
            current["checks"].append(Check(mark, rest))
        elif mark == "not taken":
            size, reason = rest.split(": ", 1)
            current["refused"].append((size, reason))
        else:
            current[mark] = rest
    for circuit in found.values():
        conductor = circuit["conductor"]
        circuit["size"] = re.match(r"\S+ \S+?(?= )", conductor)[0].strip()
        circuit["insulation"] = conductor.split(", ")[1]
        device = re.match(r"\S+: (.+?) ([\d.]+) A, ", circuit["device"])
        circuit["family"], circuit["rating"] = (device[1], float(device[2])) if device else (None, None)
        circuit["designed"] = conductor.endswith("designed")
    return found
