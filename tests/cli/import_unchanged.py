#!/usr/bin/env python3
"""No input changes the database when any file of its run is refused.

usage: import_unchanged.py PASSFET NASTY_FILES.TSV CLEAN_PARTS.CSV

Every refused text of the table is imported behind a sound one, into a database that holds parts
already. The run must end with status 3, name the line of the defect, and leave the database file as it
was, byte for byte. A text that the table calls good must be imported (status 0).
"""
import hashlib, os, subprocess, sys, tempfile

passfet, table, clean = sys.argv[1:4]


def unescape(text):
    out, i = bytearray(), 0
    data = text.encode("utf-8")
    while i < len(data):
        if data[i : i + 2] == b"\\x":
            out.append(int(data[i + 2 : i + 4], 16))
            i += 4
        elif data[i : i + 1] == b"\\":
            out += {b"n": b"\n", b"r": b"\r", b"t": b"\t", b"\\": b"\\"}[data[i + 1 : i + 2]]
            i += 2
        else:
            out.append(data[i])
            i += 1
    return bytes(out)


def cases():
    for line in open(table, encoding="utf-8"):
        if line.strip() and not line.startswith("#"):
            name, options, content, outcome = line.rstrip("\n").split("\t")
            yield name, options, unescape(content), outcome


def arguments(options):
    if options == "accept":
        return ["--accept"]
    key, _, value = options.partition("=")
    return {"part": ["--part", value], "encoding": ["--encoding", value], "-": []}[key]


def run(database, *words):
    return subprocess.run([passfet, "--db", database, "import", *words], capture_output=True, text=True,
                          errors="replace")


def digest(path):
    return hashlib.sha256(open(path, "rb").read()).hexdigest()


def complain(name, done, words):
    sys.exit(f"{name}: {words} (status {done.returncode})\n{done.stdout}{done.stderr}")


def check_refused(folder, database, name, options, outcome):
    before = digest(database)
    sound = os.path.join(folder, "sound.csv")
    done = run(database, sound, os.path.join(folder, "nasty.csv"), *options)
    line = outcome.split()[1].rstrip(":")
    if done.returncode != 3:
        complain(name, done, "not refused")
    if digest(database) != before:
        complain(name, done, "refused, and the database has changed")
    if line != "0" and f"nasty.csv:{line}:" not in done.stderr:
        complain(name, done, f"line {line} is not named")


def main():
    refused = good = 0
    with tempfile.TemporaryDirectory() as folder:
        database = os.path.join(folder, "ratings.db")
        done = run(database, clean)
        if done.returncode != 0:
            complain("the clean file", done, "not imported")
        with open(os.path.join(folder, "sound.csv"), "w") as file:
            file.write("part,polarity,vds_max,tj_max\nSOUND1,N,80,175\n")
        for name, options, content, outcome in cases():
            with open(os.path.join(folder, "nasty.csv"), "wb") as file:
                file.write(content)
            if outcome.startswith("refused"):
                check_refused(folder, database, name, arguments(options), outcome)
                refused += 1
            elif "polarity" in content.decode("utf-8", "replace"):
                fresh = os.path.join(folder, "fresh.db")
                done = run(fresh, os.path.join(folder, "nasty.csv"), *arguments(options))
                if done.returncode != 0:
                    complain(name, done, "not imported")
                os.path.exists(fresh) and os.remove(fresh)
                good += 1
    print(f"{refused} refused runs left the database as it was; {good} good files imported")
    if refused < 50 or good < 20:
        sys.exit("too few cases")


main()
