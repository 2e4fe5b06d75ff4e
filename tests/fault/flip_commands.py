"""flip_commands.py PASSFET DEMO-FOLDER: every command on a database with one flipped byte.

Each command must say what it says of the good database, or refuse with a message and a status other
than 0; it may neither crash nor hang. PF_FAULT_FULL set: 2,000 flips; else 20.
"""

import os
import random
import shutil
import subprocess
import sys
import tempfile

passfet, demo = os.path.abspath(sys.argv[1]), os.path.abspath(sys.argv[2])
memory = "/dev/shm" if os.access("/dev/shm", os.W_OK) else None  # syncs cost nothing there
folder = tempfile.mkdtemp(prefix="passfet-", dir=memory)
good = os.path.join(folder, "good.db")
database = os.path.join(folder, "team.db")
card = os.path.join(demo, "line_card_48v.csv")


def run(*arguments):
    """Exit status, output, message of one command; the name of the database is the same for all."""
    done = subprocess.run([passfet, "--db", "team.db", *arguments], cwd=folder, capture_output=True,
                          timeout=60, check=False)
    return done.returncode, done.stdout, done.stderr


files = [os.path.join(demo, name) for name in ("parts.csv", "soa_points.csv", "zth_points.csv",
                                               "foster.csv")]
status, output, message = run("import", "--by", "ana", *files)
assert status == 0, message
part = next(line.split(b",")[0].decode() for line in open(files[0], "rb").readlines()[1:])
assert run("review", part, "--by", "ben", "--accept", "--why", "read")[0] == 0
shutil.copy(database, good)

reading = [["rank", card], ["rank", card, "--format", "json", "--as-of", "2999-01-01"], ["parts"],
           ["show", part], ["explain", part, card], ["history", part], ["audit"],
           ["export", "exported"]]
writing = [["review", part, "--by", "cem", "--question", "--why", "?"], ["undo", "1", "--by", "cem"],
           ["import", "--by", "ana", *files], ["backup", "copy.db"]]


def fresh(image):
    with open(database, "wb") as file:
        file.write(image)
    shutil.rmtree(os.path.join(folder, "exported"), ignore_errors=True)
    for name in ("copy.db", "team.db-journal"):
        if os.path.exists(os.path.join(folder, name)):
            os.remove(os.path.join(folder, name))


image = open(good, "rb").read()
expected = []
for command in reading:
    fresh(image)
    expected.append(run(*command))
for command in writing:
    fresh(image)
    assert run(*command)[0] == 0, (command, run(*command))

random.seed(20250303)
right = refused = 0
for _ in range(2000 if os.environ.get("PF_FAULT_FULL") else 20):
    at, flip = random.randrange(len(image)), random.randrange(1, 256)
    flipped = image[:at] + bytes([image[at] ^ flip]) + image[at + 1:]
    for command, before in zip(reading + writing, expected + [None] * len(writing)):
        fresh(flipped)
        after = run(*command)
        case = f"byte {at} ^ {flip}: {' '.join(command[:2])}: {after}"
        if after[0] == 0 or (before and after == before):
            assert before is None or after[:2] == before[:2], case
            right += 1
        else:
            assert after[0] in (1, 3, 4) and after[2] + after[1], case
            refused += 1
print(f"{right} answers as before, {refused} refused with a message")
shutil.rmtree(folder)
assert right and refused
