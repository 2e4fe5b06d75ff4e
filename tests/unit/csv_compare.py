#!/usr/bin/env python3
"""The table reader held against Python's csv module and against csv-spectrum.

usage: csv_compare.py TABLE_DUMP

Random texts over a small alphabet of trouble: wherever both readers accept a text, they must read the
same fields. Differences that are meant are taken out on Python's side: blanks around unquoted cells,
blank lines, comment lines; texts with a delimiter other than the one both use are not made.
csv-spectrum (npm, parser cases with the JSON that they must become) is fetched when npm and the
registry are there; else that part says so and is passed over.
"""
import csv, io, json, os, random, shutil, subprocess, sys, tarfile, tempfile

dump = sys.argv[1]


def ours(texts):
    """The rows of each text by the table reader, None where it refuses."""
    framed = b"".join(b"%d\n" % len(text) + text for text in texts)
    done = subprocess.run([dump], input=framed, capture_output=True)
    if done.returncode != 0:
        sys.exit(f"the table reader ended with {done.returncode}: {done.stderr}")
    results, rows = [], []
    for line in done.stdout.decode("utf-8").split("\n")[:-1]:
        if line in ".!":
            results.append(rows if line == "." else None)
            rows = []
        else:
            rows.append(json.loads(line))
    if len(results) != len(texts):
        sys.exit(f"{len(results)} results for {len(texts)} texts")
    return results


def theirs(text):
    """Python's rows, or None where it refuses or the column count is not constant."""
    try:
        rows = [row for row in csv.reader(io.StringIO(text, newline=""), strict=True) if row]
    except csv.Error:
        return None
    if not rows or any(len(row) != len(rows[0]) for row in rows):
        return None
    return [[cell.strip(" \t") for cell in row] for row in rows]


def random_text(rng):
    columns = rng.randint(2, 4)
    cell = lambda: rng.choice(
        ["a", "4.7", "", " x ", '"q"', '"a,b"', '"a ""b"" c"', '"two\nlines"', "ä", "1 2", '"', 'x"y', '""']
    )
    end = rng.choice(["\n", "\r\n", "\n", "\r"])
    rows = [",".join(f"h{i}" for i in range(columns))]
    for _ in range(rng.randint(1, 4)):
        count = columns if rng.random() < 0.9 else rng.randint(1, 5)
        rows.append(",".join(cell() for _ in range(count)))
    return end.join(rows) + (end if rng.random() < 0.8 else "")


def compare_with_python(count):
    rng = random.Random(20240229)
    both = only_python = only_ours = 0
    texts = [random_text(rng) for _ in range(count)]
    for text, mine in zip(texts, ours([text.encode("utf-8") for text in texts])):
        other = theirs(text)
        if mine is None or other is None:
            only_python += mine is None and other is not None
            only_ours += mine is not None and other is None
            continue
        both += 1
        mine = [[cell.strip(" \t") for cell in row] for row in mine]
        if mine != other:
            sys.exit(f"read otherwise than Python's csv: {text!r}: {mine} instead of {other}")
    if both < count // 10:
        sys.exit(f"only {both} of {count} texts were read by both")
    print(f"{count} texts: {both} read alike by both, {only_python} refused here alone, "
          f"{only_ours} refused by Python alone, 0 read differently")


def fetch_spectrum(folder):
    if not shutil.which("npm"):
        return None
    try:
        done = subprocess.run(["npm", "pack", "csv-spectrum", "--silent"], cwd=folder,
                              capture_output=True, timeout=60)
    except subprocess.TimeoutExpired:
        return None
    packs = [name for name in os.listdir(folder) if name.endswith(".tgz")]
    if done.returncode != 0 or not packs:
        return None
    with tarfile.open(os.path.join(folder, packs[0])) as pack:
        pack.extractall(folder)
    return os.path.join(folder, "package")


def compare_with_spectrum():
    with tempfile.TemporaryDirectory() as folder:
        package = fetch_spectrum(folder)
        if not package:
            print("csv-spectrum: passed over, npm or its registry is not reachable")
            return
        done = 0
        for name in sorted(os.listdir(os.path.join(package, "csvs"))):
            data = open(os.path.join(package, "csvs", name), "rb").read()
            wanted = json.load(open(os.path.join(package, "json", name[:-4] + ".json"), encoding="utf-8"))
            rows = ours([data])[0]
            if name == "location_coordinates.csv":
                # quotes inside an unquoted cell, which RFC 4180 rules out, and the JSON beside it is
                # of other data (another telephone number): to be refused
                if rows is not None:
                    sys.exit(f"csv-spectrum {name}: a quote inside an unquoted cell was read")
                continue
            if rows is None:
                sys.exit(f"csv-spectrum {name}: refused")
            found = [dict(zip(rows[0], row)) for row in rows[1:]]
            if found != wanted:
                sys.exit(f"csv-spectrum {name}: {found} instead of {wanted}")
            done += 1
        if done < 10:
            sys.exit(f"csv-spectrum: only {done} cases")
        print(f"csv-spectrum: {done} cases as their JSON says, 1 with stray quotes refused")


compare_with_python(5000)
compare_with_spectrum()
