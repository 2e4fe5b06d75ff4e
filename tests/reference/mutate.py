#!/usr/bin/env python3
"""Breaks the physics one line at a time and requires that a test notices.

    python3 tests/reference/mutate.py [NUMBER …]     the mutations of mutations.tsv, from 1

Works on a copy of the tree in a temporary folder. Not part of ctest: it builds once per mutation
and takes some minutes. Status 1 when a mutation survives or its text is not found.
"""
import pathlib
import re
import shutil
import subprocess
import sys
import tempfile

ROOT = pathlib.Path(__file__).resolve().parents[2]
FOLDERS = ["src", "include", "tests", "schema", "data", "docs"]
SLOW = "test_cross_hot_spot|test_properties"


def mutations():
    lines = (ROOT / "tests/reference/mutations.tsv").read_text().splitlines()
    return [line.split("\t") for line in lines if line and not line.startswith("#")]


def physics_tests():
    """The tests of tests/physics.cmake, by name."""
    text = (ROOT / "tests/physics.cmake").read_text()
    return re.findall(r"^pf_test\((\w+)", text, re.M)


def run(*command):
    return subprocess.run(command, capture_output=True, text=True)


def failing_tests(build, select):
    done = run("ctest", "--test-dir", str(build), "-j2", *select)
    return re.findall(r"\d+ - (\w+) \(", done.stdout)


def judge(build, tests):
    """The tests that fail; the slow ones are only asked when no other does."""
    made = run("cmake", "--build", str(build), "-j2", "--target", *tests)
    if made.returncode:
        return None, made.stdout[-2000:]
    exact = "^(" + "|".join(tests) + ")$"
    failed = failing_tests(build, ["-R", exact, "-E", SLOW])
    return failed or failing_tests(build, ["-R", SLOW]), ""


def copy_tree(to):
    for name in FOLDERS:
        if (ROOT / name).is_dir():
            shutil.copytree(ROOT / name, to / name)
    shutil.copy(ROOT / "CMakeLists.txt", to)


def try_one(tree, build, tests, mutation):
    name, text, instead, meaning = mutation
    file = tree / name
    before = file.read_text()
    if before.count(text) != 1:
        print(f"NOT FOUND  {name}: {text}")
        return False
    file.write_text(before.replace(text, instead))
    failed, trouble = judge(build, tests)
    file.write_text(before)
    if failed is None:
        print(f"NO BUILD   {meaning}\n{trouble}")
        return False
    print(f"{'noticed ' if failed else 'SURVIVED'}   {meaning} ({name}): {', '.join(failed)}", flush=True)
    return bool(failed)


def main():
    wanted = [int(number) for number in sys.argv[1:]]
    tests = physics_tests()
    with tempfile.TemporaryDirectory() as folder:
        tree, build = pathlib.Path(folder) / "tree", pathlib.Path(folder) / "build"
        tree.mkdir()
        copy_tree(tree)
        configured = run("cmake", "-S", str(tree), "-B", str(build), "-DPF_WERROR=OFF")
        if configured.returncode:
            sys.exit(configured.stderr)
        failed, trouble = judge(build, tests)
        if failed is None or failed:
            sys.exit(f"the tree itself does not pass: {failed} {trouble}")
        good = [try_one(tree, build, tests, mutation)
                for number, mutation in enumerate(mutations(), 1)
                if not wanted or number in wanted]
    print(f"{sum(good)} of {len(good)} noticed")
    sys.exit(0 if all(good) else 1)


main()
