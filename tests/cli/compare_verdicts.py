#!/usr/bin/env python3
"""The commands of a design review: verdicts, exit statuses, JSON, and what they refuse.

usage: compare_verdicts.py PASSFET DEMO_FOLDER
"""
import json
import subprocess
import sys
import tempfile

# Parts A and B of the fixture (invented), with what a verdict needs; C lacks Zth, D is a P-channel part.
HEAD = ("part,maker,polarity,package,vds_max,vgs_max,id_cont,id_pulse,rdson_max @ 10 V [Ohm],tj_max,"
        "rth_jc,rth_ja,soa,zth,datasheet,datasheet_date\n")
A = "1ms 10:150 50:25 100:9 | 10ms 10:60 50:4 100:1.2 | 100ms 10:20 50:1.0 100:0.30"
B = "1ms 10:150 50:14 100:4 | 10ms 10:60 50:1.6 100:0.45 | 100ms 10:20 50:0.4 100:0.10"
ZTH = "100us:0.02 1ms:0.03 100ms:0.05"
ROW = "%s,Invented,%s,LFP8,100,20,100,400,0.004,175,0.5,40,%s,%s,S-%s,2024-0%d\n"
PARTS = (HEAD + ROW % ("A", "N", A, ZTH, "A", 1) + ROW % ("B", "N", B, ZTH, "B", 2)
         + ROW % ("C", "N", A, "", "C", 3) + ROW % ("D", "P", A, ZTH, "D", 4))
CARD = """parameter,min,typ,max,unit,note
polarity,,N,,,
start_control,,current_limit,,,
supply_voltage,,%g,,V,
output_capacitance,,%g,,F,
current_limit,,4,,A,
running_current,,4,,A,
fault_time,,%g,,s,
ambient_temperature,,40,,degC,
gate_drive,,10,,V,
"""


class Bench:
    def __init__(self, passfet, folder):
        self.passfet, self.folder = passfet, folder
        self.database = folder + "/t.db"

    def card(self, name, *values):
        path = "%s/%s.csv" % (self.folder, name)
        with open(path, "w") as file:
            file.write(CARD % values)
        return path

    def run(self, status, *arguments):
        done = subprocess.run([self.passfet, "--db", self.database, *arguments],
                              capture_output=True, text=True)
        assert done.returncode == status, (arguments, done.returncode, done.stdout, done.stderr)
        return done

    def compare(self, status, card, *arguments):
        done = self.run(status, "compare", *arguments, "--profile", card, "--format", "json")
        return json.loads(done.stdout)["comparisons"]


def check_compare(b):
    low, high = b.card("twelve", 12, 1e-4, 5e-3), b.card("fortyeight", 48, 4e-4, 5e-3)
    timer = b.card("timer", 48, 1e-4, 5e-3)
    found = b.compare(0, low, "A", "B")[0]
    assert found["acceptance"] == "acceptable" and found["verdict"] == "acceptable for twelve"
    assert (found["candidate"], found["in_place_of"]) == ("B", "A")
    assert found["candidate_datasheet_date"] == "2024-02", found
    refused = b.compare(1, high, "A", "B")[0]
    assert refused["acceptance"] == "not acceptable" and refused["decided_by"], refused
    conditional = b.compare(0, timer, "A", "B")[0]
    assert conditional["verdict"] == "acceptable for timer with conditions"
    assert conditional["conditions"][0].startswith("fault time at most"), conditional
    open_ = b.compare(1, low, "A", "C")[0]
    assert open_["acceptance"] == "cannot decide" and "Zth" in open_["missing"][0], open_
    assert b.compare(1, low, "A", "D")[0]["decided_by"].startswith("polarity")
    every = b.compare(0, low, "A", "--all")
    assert [(one["candidate"], one["acceptance"]) for one in every] == [
        ("B", "acceptable"), ("C", "cannot decide")], every
    text = b.run(0, "compare", "A", "B", "--profile", low).stdout
    assert "B in place of A: acceptable for twelve" in text and "revision" in text
    assert "equivalent" not in text
    assert max(map(len, text.splitlines())) <= 100, text


def check_headroom(b):
    card = b.card("fortyeight", 48, 1e-4, 5e-3)
    rooms = json.loads(b.run(0, "headroom", "A", card, "--format", "json").stdout)["headroom"]
    solved = json.loads(b.run(0, "headroom", card, "--solve", "fault_time", "--format",
                              "json").stdout)["parts"]
    alone = [r for r in rooms if r["parameter"] == "fault_time" and r["passes"] == "at most"][0]
    same = [p for p in solved if p["part"] == "A"][0]
    assert abs(alone["value"] / same["value"] - 1) < 1e-5, (alone, same)
    for value, verdict in ((same["value"], "pass"), (same["beyond"], "fail")):
        put_in = b.card("put_in", 48, 1e-4, 1)
        with open(put_in) as file:
            text = file.read().replace("fault_time,,1,", "fault_time,,%r," % value)
        with open(put_in, "w") as file:
            file.write(text)
        done = subprocess.run([b.passfet, "--db", b.database, "explain", "A", put_in, "--format",
                               "json"], capture_output=True, text=True)
        data = json.loads(done.stdout)
        assert data["verdict"] == verdict, (value, data["verdict"])
        assert abs(data["soa_margin"] / 1.3 - 1) < 0.001, data["soa_margin"]
    b.run(2, "headroom", card)
    b.run(2, "headroom", card, "--solve", "supply_voltage")
    b.run(2, "compare", "A", "B")
    b.run(2, "compare", "A", "--profile", card)


def check_rank(b):
    card = b.card("twelve", 12, 1e-4, 5e-3)
    first = b.run(0, "rank", card, "--trials", "300", "--seed", "5", "--format", "json").stdout
    again = b.run(0, "rank", card, "--trials", "300", "--seed", "5", "--format", "json").stdout
    assert first == again
    parts = {part["part"]: part for part in json.loads(first)["parts"]}
    for part in parts.values():  # no interval is open: every trial is the worst case
        assert part["trials"]["margin_p50"] == part["soa_margin"], part["part"]
        assert part["trials"]["share"] == (part["verdict"] == "pass"), part["part"]
    assert parts["A"]["unbeaten"] and not parts["C"]["unbeaten"] and not parts["D"]["unbeaten"]
    window = parts["A"]["timer_window"]
    assert window["slowest_start_s"] < window["timer_min_s"] < window["longest_fault_s"], window
    assert not window["no_timer_value"]
    b.run(2, "rank", card, "--seed", "5")


def main(passfet, _demo):
    with tempfile.TemporaryDirectory() as folder:
        b = Bench(passfet, folder)
        with open(folder + "/parts.csv", "w") as file:
            file.write(PARTS)
        b.run(0, "import", "--accept", folder + "/parts.csv")
        check_compare(b)
        check_headroom(b)
        check_rank(b)


if __name__ == "__main__":
    main(sys.argv[1], sys.argv[2])
