#!/usr/bin/env python3
"""Works every line of every demo part's sheet again from what the line prints.

usage: explain_recompute.py PASSFET DEMO_FOLDER

A line reads `label = formula = value unit`; the formula's numbers have 9 digits, the value 6. Recomputed,
the formula must round to the printed value (half a unit of its last digit, and the rounding of the
formula's own numbers). The sheet's numbers must be the ranking's, and for every fourth part text and
JSON must hold the same lines.
"""
import json
import math
import re
import subprocess
import sys
import tempfile

NUMBER = r"-?[0-9][0-9.]*(?:e[+-][0-9]+)?"
VALUE = re.compile(r"^(.*) = (.+) = (%s)(?: (\S.*))?$" % NUMBER)
FORMULA = re.compile(r"^[-+*/^(), 0-9.eE]*(?:(?:ln|sqrt|exp|min|max)\(|[-+*/^(), 0-9.eE])*$")
NAMES = {"ln": math.log, "sqrt": math.sqrt, "exp": math.exp, "min": min, "max": max}


def run(passfet, *arguments):
    done = subprocess.run([passfet, *arguments], capture_output=True, text=True)
    assert done.returncode in (0, 1), (arguments, done.returncode, done.stderr)
    return done.stdout


def lines_of(text):
    """Logical lines: one that begins with the sign of equality goes on from the one before."""
    joined = []
    for line in text.splitlines():
        if line.startswith("        = "):
            joined[-1] += " " + line.strip()
        else:
            joined.append(line)
    return [line.strip() for line in joined]


def last_digit(printed):
    """What one unit of the last printed digit is worth."""
    digits, _, power = printed.lstrip("-").partition("e")
    decimals = len(digits.partition(".")[2])
    significant = len(digits.replace(".", "").lstrip("0"))
    spare = max(0, 6 - significant)  # 25 stands for 25.0000
    return 10.0 ** (-decimals - spare + int(power or 0))


def recompute(formula):
    assert FORMULA.match(formula), formula
    return eval(formula.replace("^", "**"), {"__builtins__": {}}, NAMES)


def check(label, formula, printed):
    value, unit = recompute(formula), last_digit(printed)
    slack = 0.5 * unit * (1 + 1e-3) + 2e-8 * largest(formula)
    assert abs(value - float(printed)) <= slack, (label, formula, printed, value)


def largest(formula):
    """A sum is no better known than its largest number; products are better."""
    if "+" not in formula.replace("e+", "") and " - " not in formula:
        return 0
    return max(abs(float(number)) for number in re.findall(NUMBER, formula)) * 1e-1


def check_sheet(passfet, database, row, card, with_json):
    part = row["maker"] + "/" + row["part"]
    text = run(passfet, "--db", database, "explain", part, card)
    assert "\n  Verdict: %s" % row["verdict"] in text, part
    found = [VALUE.match(line) for line in lines_of(text)]
    found = [(m.group(1), m.group(2), m.group(3)) for m in found if m]
    for label, formula, printed in found:
        check(label, formula, printed)
    if not with_json:
        return len(found)
    data = json.loads(run(passfet, "--db", database, "explain", part, card, "--format", "json"))
    for key in ("verdict", "soa_margin", "running_junction_C", "conduction_loss_W"):
        assert data[key] == row[key], (part, key)
    again = [(line["label"], line["formula"], line["value"])
             for section in data["sheet"] for line in section["lines"] if line.get("formula")]
    assert [(a, b) for a, b, _ in found] == [(a, b) for a, b, _ in again], part
    for (_, _, printed), (_, _, value) in zip(found, again):
        assert float(printed) == value, (part, printed, value)
    margins = [event["soa_margin"] for event in data["events"] if event["soa_margin"] is not None]
    assert data["soa_margin"] == (min(margins) if margins else None), part
    return len(found)


def main(passfet, demo):
    cards = ["accelerator_card_12v.csv", "line_card_48v.csv", "drive_controller_24v.csv"]
    files = ["parts.csv", "soa_points.csv", "zth_points.csv", "foster.csv"]
    with tempfile.TemporaryDirectory() as folder:
        database = folder + "/demo.db"
        run(passfet, "--db", database, "import", *[demo + "/" + name for name in files])
        lines = sheets = 0
        for card in cards:
            ranking = json.loads(run(passfet, "--db", database, "rank", demo + "/" + card,
                                     "--format", "json"))
            for row in ranking["parts"]:
                lines += check_sheet(passfet, database, row, demo + "/" + card, sheets % 4 == 0)
                sheets += 1
    assert sheets == 132 and lines > 10 * sheets, (sheets, lines)
    print("%d lines of %d sheets agree" % (lines, sheets))


if __name__ == "__main__":
    main(sys.argv[1], sys.argv[2])
