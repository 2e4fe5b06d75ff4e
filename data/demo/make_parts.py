#!/usr/bin/env python3
"""Writes the demo ratings (parts.csv, soa_points.csv, zth_points.csv, foster.csv) next to itself.

Each invented part follows from its die: on-resistance from area and voltage, Zth from a Foster
network that ends at rth_jc, SOA from that Zth with a hot-spot knee. The spread of each part is drawn
from its name, so the files come out the same on every machine and a new line in catalogue.py leaves
the other parts as they are. The SOA curves are computed, as those of most real sheets are.
"""
import csv
import math
import os
import random

from catalogue import PARTS

PULSES = [("10us", 1e-5), ("100us", 1e-4), ("1ms", 1e-3), ("10ms", 1e-2), ("100ms", 0.1)]
ZTH_TIMES = ["10us", "30us", "100us", "300us", "1ms", "3ms", "10ms", "30ms", "100ms", "300ms", "1s"]
MILLIOHM_MM2 = {25: 7, 30: 8.5, 40: 12, 60: 22, 80: 34, 100: 48, 150: 105, 200: 190}
# kind: on-resistance times, least gate charge per mm2, knee at 1 ms over V_DS,max, first and last slope
DIE = {"trench": (1.0, 5.5, 0.26, 1.8, 2.6),
       "planar": (2.2, 3.5, 0.55, 1.6, 2.2),
       "linear": (1.7, 4.5, 0.80, 1.6, 1.9)}
# package: limit of current in A, rth_ja in K/W, resistance in mOhm, price of the case
CASE = {"LFP8": (120, 50, 0.35, 0.25), "MLF33": (60, 60, 0.6, 0.18), "DPK3": (75, 62, 0.8, 0.22),
        "DQK7": (180, 40, 0.5, 0.6), "TOX8": (300, 40, 0.25, 0.9), "THT3": (120, 62, 1.2, 0.8)}


def seconds(text):
    number, unit = text.rstrip("mus"), text.lstrip("0123456789")
    return float(number) * {"us": 1e-6, "ms": 1e-3, "s": 1.0}[unit]


def digits(value, count=3):
    """The value as read off a chart: three significant digits, never with an exponent."""
    text = f"{float(f'{value:.{count}g}'):.9f}"
    return text.rstrip("0").rstrip(".")


def make_die(line):
    name, maker, package, polarity, volts, area, kind, *flags = line.split()
    die = dict(name=name, maker=maker, package=package, polarity=polarity, vds=int(volts),
               area=float(area), kind=kind, flags=set(flags), random=random.Random(name))
    spread = die["random"].uniform
    times, _, knee, first, last = DIE[kind]
    die["ron"] = (MILLIOHM_MM2[die["vds"]] * times * (2.6 if polarity == "P" else 1.0) / die["area"]
                  * spread(0.9, 1.1) + CASE[package][2]) * 1e-3
    die["hot"] = spread(1.5, 1.8) if die["vds"] <= 60 else spread(1.8, 2.2)
    die["tj_max"] = 175 if die["random"].random() < 0.55 else 150
    die["rth_jc"] = float(digits(4.6 / die["area"] ** 0.7 * spread(0.9, 1.1), 2))
    shares = [s * spread(0.9, 1.1) for s in (0.012, 0.06, 0.21, 0.40, 0.318)]
    taus = [t * spread(0.8, 1.2) for t in (8e-6, 7e-5, 6e-4, 5e-3, 4e-2)]
    die["foster"] = [(float(digits(die["rth_jc"] * s / sum(shares))), float(digits(t)))
                     for s, t in zip(shares, taus)]
    die["knee"] = knee * spread(0.85, 1.15)
    die["slopes"] = (first, last)
    die["id_cont"] = min(CASE[package][0],
                         math.sqrt((die["tj_max"] - 25) / (die["rth_jc"] * die["ron"] * die["hot"])))
    die["id_pulse"] = die["id_cont"] * spread(3.5, 4.0)
    return die


def zth(die, time):
    return sum(r * (1 - math.exp(-time / tau)) for r, tau in die["foster"])


def current_allowed(die, volts, time, case_degC):
    """Constant junction rise, and above the knee the faster fall of a hot spot."""
    power = (die["tj_max"] - case_degC) / zth(die, time)
    if "high_soa" in die["flags"]:
        power *= 1.3
    decades = min(max(math.log10(time / 1e-5), 0), 5)
    first, last = die["slopes"]
    slope = first + (last - first) * decades / 5
    knee = knee_volts(die, time)
    return power / volts if volts <= knee else power / knee * (knee / volts) ** slope


def knee_volts(die, time):
    return max(die["vds"] * die["knee"] * (time / 1e-3) ** -0.14, 3.0)


def soa_curve(die, time, case_degC, is_dc):
    """The points one would read: where the curve bends, and its right end."""
    top = float(digits(die["id_cont"] if is_dc else die["id_pulse"]))
    end = 40 if "short_soa" in die["flags"] else die["vds"]
    hot_ohm = die["ron"] * die["hot"]
    low, high = 1e-3, float(end)
    for _ in range(60):  # where the curve leaves its highest current
        middle = math.sqrt(low * high)
        limit = min(top, middle / hot_ohm) if "flank" in die["flags"] else top
        low, high = (middle, high) if current_allowed(die, middle, time, case_degC) > limit else (low, middle)
    corner = float(digits(low))
    voltages = {corner, end, *(v for v in (10, knee_volts(die, time)) if corner * 1.2 < v < end * 0.95)}
    at_corner = min(top, corner / hot_ohm) if "flank" in die["flags"] else top
    curve = [(corner, at_corner)] + [(v, min(top, current_allowed(die, v, time, case_degC)))
                                     for v in sorted(voltages - {corner})]
    if "flank" in die["flags"]:
        return [(v, v / hot_ohm) for v in (0.05, top * hot_ohm) if v < corner * 0.98] + curve
    return ([(1.0, top)] if corner > 1.2 else []) + curve


def soa_curves(die, case_degC):
    if "no_soa" in die["flags"]:
        return []
    pulses = PULSES + ([("1s", 1.0)] if "1s" in die["flags"] else [])
    curves = [(label, soa_curve(die, time, case_degC, False)) for label, time in pulses]
    if "no_dc" not in die["flags"]:
        curves.append(("dc", soa_curve(die, 10.0, case_degC, True)))
    if "touch" in die["flags"]:
        curves[3][1][-1] = curves[2][1][-1]
    return [(label, [(digits(v), digits(i)) for v, i in curve]) for label, curve in curves]


def zth_points(die):
    if "no_zth" in die["flags"] or "foster" in die["flags"]:
        return []
    return [(label, digits(zth(die, seconds(label)))) for label in ZTH_TIMES]


def ratings(die):
    flags, area, spread = die["flags"], die["area"], die["random"].uniform
    sign = "-" if "neg" in flags else ""
    vth_min = 1.2 if "no_low_gate" not in flags else 2.0
    charge = DIE[die["kind"]][1] * area * spread(0.9, 1.1) * (0.8 + die["vds"] / 250)
    ciss = charge * 62
    energy = area * spread(6, 11) * (1.5 if die["kind"] == "planar" else 1)
    rth_jc = die["rth_jc"] / (1.1 if "zth_end" in flags else 1)
    year, month = die["random"].randint(2017, 2025), die["random"].randint(1, 12)
    row = {
        "part": die["name"], "maker": die["maker"], "polarity": die["polarity"],
        "package": die["package"],
        "status": die["random"].choice(["active", "active", "active", "not-for-new"]),
        "vds_max [V]": f"{sign}{die['vds']}", "vgs_max [V]": f"{sign}20",
        "id_cont [A]": sign + digits(die["id_cont"]), "id_pulse [A]": sign + digits(die["id_pulse"]),
        "rdson_max @ 10 V [mOhm]": digits(die["ron"] * 1e3),
        "rdson_max @ 4.5 V [mOhm]": digits(die["ron"] * 1e3 * spread(1.3, 1.55)),
        "rdson_hot_ratio": digits(die["hot"]),
        "vth_min [V]": f"{sign}{vth_min}", "vth_max [V]": f"{sign}{digits(vth_min * 1.9, 2)}",
        "gate_charge [nC]": digits(charge), "ciss [pF]": digits(ciss),
        "crss [pF]": digits(ciss * spread(0.01, 0.03), 2), "tj_max [degC]": die["tj_max"],
        "rth_jc [K/W]": digits(rth_jc), "rth_ja [K/W]": CASE[die["package"]][1],
        "avalanche_energy [mJ]": digits(energy),
        "avalanche_current [A]": digits(die["id_cont"] * spread(0.45, 0.65), 2),
        "price": digits(CASE[die["package"]][3] + area * spread(0.03, 0.06), 2),
        "datasheet": f"{die['maker'][0]}D-{die['random'].randint(1000, 9999)}",
        "datasheet_date": f"{year}-{month:02d}", "soa": "", "zth": ""}
    lacks = {"no_low_gate": ["rdson_max @ 4.5 V [mOhm]"], "no_crss": ["crss [pF]"],
             "no_rth_ja": ["rth_ja [K/W]"], "no_eas": ["avalanche_energy [mJ]", "avalanche_current [A]"]}
    for flag in flags & lacks.keys():
        row.update((column, "") for column in lacks[flag])
    if "cell" in flags:
        row["soa"] = " | ".join(f"{label} " + " ".join(f"{v}:{i}" for v, i in curve)
                                for label, curve in soa_curves(die, 25))
        row["zth"] = " ".join(f"{label}:{z}" for label, z in zth_points(die))
    return row


def write(name, columns, rows):
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), name)
    with open(path, "w", newline="", encoding="utf-8") as file:
        out = csv.writer(file, lineterminator="\n")
        out.writerows([columns, *rows])


def main():
    dies = [make_die(line) for line in PARTS.strip().splitlines()]
    rows = [ratings(die) for die in dies]
    write("parts.csv", list(rows[0]), [list(row.values()) for row in rows])
    listed = [die for die in dies if "cell" not in die["flags"]]
    write("soa_points.csv", ["part", "maker", "pulse", "vds [V]", "id [A]", "case_temperature [degC]"],
          [(die["name"], die["maker"], label, v, i, case)
           for die in listed for case in ((25, 75) if "hot" in die["flags"] else (25,))
           for label, curve in soa_curves(die, case) for v, i in curve])
    write("zth_points.csv", ["part", "maker", "time [s]", "zth [K/W]"],
          [(die["name"], die["maker"], digits(seconds(label)), z)
           for die in listed for label, z in zth_points(die)])
    write("foster.csv", ["part", "maker", "foster_r [K/W]", "foster_tau [s]"],
          [(die["name"], die["maker"], digits(r), digits(tau))
           for die in dies if "foster" in die["flags"] for r, tau in die["foster"]])


if __name__ == "__main__":
    main()
