"""What the printed report says beyond its circuits: plant, months, passed lines, purchases, commissioning sheet."""

import re


def plant(text):
    """Entries of "Bank, array and sources" by header: lists of texts by label, steps by their own label."""
    body = text.split("\nBank, array and sources\n", 1)[1].split("\nCircuits\n", 1)[0]
    found, entry = {}, None
    for line in body.splitlines():
        if re.match(r"  \S", line):
            entry = found.setdefault(line.strip(), {"steps": {}})
            continue
        line = re.match(r"    (\S+(?: \S+)*?)\s{2,}(.*)$", line)
        if not line or entry is None:
            continue
        if line[1] == "step":
            label, rest = line[2].rsplit(": ", 1)
            entry["steps"][label] = rest
        else:
            entry.setdefault(line[1], []).append(line[2])
    return found


def months(text):
    """Rows of the energy table by name."""
    rows = {}
    inside = False
    for line in text.splitlines():
        if line.startswith("  energy of bank"):
            inside = True
        elif inside and not line.strip():
            break
        elif inside:
            found = re.match(r"    (\S+(?: \S+)*)((?:\s+-?\d+){12})$", line)
            if found:
                rows[found[1]] = [int(n) for n in found[2].split()]
    return rows


def lines(text, begin, end):
    return text.split(f"\n{begin}", 1)[1].split(f"\n{end}", 1)[0].splitlines()


def purchases(text):
    """(count or metres, unit, what, price or None) of every line, and the total line."""
    found, total = [], None
    for line in lines(text, "To buy\n", "\nCommissioning"):
        item = re.match(r"\s+([\d.]+) (m|pcs)\s+(.*?)(?:  ([\d.]+))?$", line)
        if item:
            found.append((float(item[1]), item[2], item[3], item[4] and float(item[4])))
        elif " in all" in line:
            total = line
    return found, total


def loaded(text, names):
    """Rows of the sheet under load: (amps, tolerance or None, mV, most mV, most mV/A, (low, high) or None)."""
    body = lines(text, "  Under load", "    joint in")
    found = []
    for line in body:
        row = re.match(r"    .{18} \s*(up to )?([\d.]+)(?: ± ([\d.]+))?\s+([\d.]+)\s+([\d.]+)\s+([\d.]+)"
                       r"(?:\s+([\d.]+) to ([\d.]+))?", line)
        if row:
            found.append(tuple(row.groups()))
    return dict(zip(names, found, strict=True))


def joints(text):
    """Rows of the joints: (circuit or "", which, mV each, refused over, ampere of 1 mΩ, ampere of a refusal, star)."""
    body = lines(text, "    joint in", "\nSwitching on")
    found = []
    for line in body:
        row = re.match(r"    (.{18}) (.{18})\s*([\d.]+)\s+([\d.]+)\s+([\d.]+) A\s+([\d.]+) A( \*)?", line)
        if row:
            found.append((row[1].strip(), row[2].strip(), *row.groups()[2:]))
    return found


def labels(text):
    body = text.split("\nLabels, by the line\n", 1)[1].split("\n\n", 1)[0]
    return sum(int(re.match(r"\s*(\d+) ×", line)[1]) for line in body.splitlines())


def digits(text):
    """A figure and half a unit of its last printed digit."""
    decimals = len(text.partition(".")[2])
    return float(text), 0.5 * 10**-decimals
