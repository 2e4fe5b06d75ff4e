#!/usr/bin/env python3
"""Writes a synthetic market of MOSFETs as CSV: make_market.py FOLDER PARTS [SEED].

parts.csv, soa_points.csv and zth_points.csv, about 50 curve points a part: five or six SOA lines that
follow a made-up Zth and fall faster above a hot-spot knee, a Zth curve, and the gaps that real
catalogues have (no DC line, no Zth, no Rds(on) at low drive, no pulsed current). All of it is
invented; the same seed gives the same files.
"""
import os
import random
import sys

PULSES = [1e-5, 1e-4, 1e-3, 1e-2, 1e-1]
VOLTS = [20, 25, 30, 40, 60, 75, 80, 100, 120, 150, 200]
STEPS = [0.05, 0.1, 0.2, 0.35, 0.6, 1.0]


def zth(rth, tau, time):
    return rth * (time / (time + tau)) ** 0.5


def allowed(part, pulse, vds):
    """Current at 25 degC case: constant power from Zth, less above the knee, cut at the top."""
    rise = part["tj"] - 25
    current = rise / (vds * zth(part["rth"], part["tau"], pulse))
    knee = part["knee"] * (1e-3 / pulse) ** 0.08
    if vds > knee:
        current *= (vds / knee) ** -part["slope"]
    return min(current, part["pulse_A"])


def make(rng, number):
    volts = rng.choice(VOLTS)
    area = 10 ** rng.uniform(-0.5, 0.8)
    return {
        "name": "MX%06d" % number, "maker": "Market %d" % rng.randint(1, 40), "volts": volts,
        "polarity": "N" if rng.random() < 0.85 else "P", "tj": rng.choice([150, 175, 175]),
        "rth": round(1.2 / area ** 0.8 * rng.uniform(0.8, 1.2), 4), "tau": 10 ** rng.uniform(-2.7, -1.3),
        "pulse_A": round(220 * area ** 0.7), "knee": rng.uniform(0.08, 0.4) * volts,
        "slope": rng.uniform(0.2, 1.3), "rdson": 2.2e-5 * volts ** 1.6 / area,
        "dc": rng.random() < 0.8, "zth": rng.random() < 0.95, "low": rng.random() < 0.7,
        "pulsed": rng.random() < 0.97,
    }


def write_part(out, part, rng):
    out.write("%s,%s,%s,PK%d,%g,20,%.4g,%s,%.4g,%s,%.3g,%g,%g,%g,%.4g,%.4g\n" % (
        part["name"], part["maker"], part["polarity"], rng.randint(1, 30), part["volts"],
        part["pulse_A"] / 3.5, "%g" % part["pulse_A"] if part["pulsed"] else "",
        part["rdson"] * 1e3, "%.4g" % (part["rdson"] * 1.4e3) if part["low"] else "",
        rng.uniform(1.5, 2.1), part["tj"], part["rth"], 45, rng.uniform(20, 900),
        rng.uniform(0.2, 6)))


def write_soa(out, part):
    for pulse in PULSES + ([10.0] if part["dc"] else []):
        label = "dc" if pulse == 10 else "%gus" % (pulse * 1e6)
        for step in STEPS:
            vds = step * part["volts"]
            out.write("%s,%s,%s,%.4g,%.4g\n" % (part["name"], part["maker"], label, vds,
                                               allowed(part, pulse, vds)))


def write_zth(out, part):
    for exponent in range(-20, 1):
        time = 10 ** (exponent / 4)
        out.write("%s,%s,%.4g,%.4g\n" % (part["name"], part["maker"], time,
                                         zth(part["rth"], part["tau"], time)))


def main(folder, count, seed=1):
    rng = random.Random(seed)
    os.makedirs(folder, exist_ok=True)
    names = ["parts", "soa_points", "zth_points"]
    parts, soa, zth_file = (open(os.path.join(folder, n + ".csv"), "w") for n in names)
    parts.write("part,maker,polarity,package,vds_max,vgs_max,id_cont,id_pulse,rdson_max @ 10 V [mOhm],"
                "rdson_max @ 4.5 V [mOhm],rdson_hot_ratio,tj_max,rth_jc,rth_ja,"
                "avalanche_energy [mJ],price\n")
    soa.write("part,maker,pulse,vds,id\n")
    zth_file.write("part,maker,time [s],zth\n")
    for number in range(count):
        part = make(rng, number)
        write_part(parts, part, rng)
        write_soa(soa, part)
        if part["zth"]:
            write_zth(zth_file, part)


if __name__ == "__main__":
    main(sys.argv[1], int(sys.argv[2]), *map(int, sys.argv[3:4]))
