"""Runs the command in a folder of its own.

    python3 test_x.py PASSFET SOURCE_FOLDER

Every test is a claim; each gets an empty folder as its working folder.
"""
import os
import pathlib
import subprocess
import sys
import tempfile
import unittest

PASSFET = os.path.abspath(sys.argv[1])
SOURCE = pathlib.Path(sys.argv[2]).resolve()
DEMO = SOURCE / "data" / "demo"
RATINGS = [DEMO / name for name in ("parts.csv", "soa_points.csv", "zth_points.csv", "foster.csv")]
CARD = DEMO / "line_card_48v.csv"

# A part that is all stated, and one card for it; tests change single lines of them.
PART = {
    "part": "T1", "maker": "Test", "polarity": "N", "package": "P8", "vds_max [V]": "100",
    "vgs_max [V]": "20", "id_cont [A]": "100", "id_pulse [A]": "400",
    "rdson_max @ 10 V [mOhm]": "2", "rdson_hot_ratio": "1.8", "tj_max [degC]": "175",
    "rth_jc [K/W]": "0.5", "rth_ja [K/W]": "40",
    "soa": "1ms 1:400 10:100 80:8 | 10ms 1:400 10:60 80:4 | dc 1:100 10:10 80:0.6",
    "zth": "1us:0.003 10us:0.01 100us:0.03 1ms:0.1 10ms:0.3 100ms:0.45 1s:0.5",
}
PROFILE = {
    "supply_voltage": "10.8,12,13.2,V", "polarity": ",N,,", "switch_side": ",high,,",
    "output_capacitance": ",1000,,uF", "start_control": ",current_limit,,",
    "current_limit": ",5,,A", "running_current": ",3,,A", "fault_time": ",5,,ms",
    "ambient_temperature": ",50,,degC", "gate_drive": ",10,,V",
}


def parts_csv(*parts):
    """A parts table; each part is a dictionary of what differs from PART."""
    rows = [PART | part for part in parts]
    names = list(rows[0])
    quoted = [['"' + row.get(name, "").replace('"', '""') + '"' for name in names] for row in rows]
    return "\n".join(",".join(cells) for cells in [[f'"{n}"' for n in names]] + quoted) + "\n"


def profile_csv(**changed):
    """A profile; None leaves a line out."""
    lines = {name: text for name, text in (PROFILE | changed).items() if text is not None}
    return "parameter,min,typ,max,unit\n" + "".join(f"{n},{t}\n" for n, t in lines.items())


class CommandTest(unittest.TestCase):
    maxDiff = None

    def setUp(self):
        folder = tempfile.TemporaryDirectory(prefix="passfet-test-")
        self.addCleanup(folder.cleanup)
        self.folder = pathlib.Path(folder.name)

    def write(self, name, text):
        (self.folder / name).write_bytes(text if isinstance(text, bytes) else text.encode())
        return name

    def start(self, *arguments, environment=None, **more):
        known = {k: v for k, v in os.environ.items() if k != "PASSFET_DB"}
        return subprocess.run([PASSFET, *map(str, arguments)], cwd=self.folder, timeout=300,
                              env=known | (environment or {}), **more)

    def run_it(self, *arguments, status=0, text_in="", environment=None):
        """Runs it, expects the exit status, returns (stdout, stderr)."""
        done = self.start(*arguments, environment=environment, capture_output=True,
                          input=text_in.encode())
        out, err = done.stdout.decode(), done.stderr.decode()
        self.assertEqual(done.returncode, status, f"{arguments}\n{out[-2000:]}\n{err[-2000:]}")
        return out, err

    def import_demo(self):
        self.run_it("import", *RATINGS, "--by", "ann")

    def import_parts(self, *parts):
        self.run_it("import", self.write("parts.csv", parts_csv(*parts)), "--by", "ann")

    def card(self, **changed):
        return self.write("card.csv", profile_csv(**changed))


def main():
    unittest.main(argv=[sys.argv[0], "-v", *sys.argv[3:]])
