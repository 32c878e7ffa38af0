"""Lists: `isotally step -` against a bare loop on the same toolkit, and two threads against one.

lists.py ISOTALLY BARE_LIST [MOLECULES] [ROUNDS]
The bare loop parses and canonicalises each SMILES, then builds, sanitises and canonicalises the same products. All are
started in turn in one run; medians and ratios are printed.
"""

import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

HERE = Path(__file__).resolve().parent


def timed(command, molecules):
    begin = time.perf_counter()
    with open(molecules, "rb") as file:
        subprocess.run(command, stdin=file, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, check=True)
    return time.perf_counter() - begin


def main():
    program, bare = sys.argv[1:3]
    count = sys.argv[3] if len(sys.argv) > 3 else "5000"
    rounds = int(sys.argv[4]) if len(sys.argv) > 4 else 7
    question = [program, "step", "-", "--reaction", "nitration-mixed-acid", "--quiet", "--threads"]
    commands = {"bare loop": [bare], "one thread": [*question, "1"], "two threads": [*question, "2"]}
    measured = {name: [] for name in commands}
    with tempfile.TemporaryDirectory() as folder:
        molecules = Path(folder) / "molecules.smi"
        with open(molecules, "wb") as file:
            subprocess.run([sys.executable, HERE / "list_molecules.py", count], stdout=file, check=True)
        for _ in range(rounds):
            for name, command in commands.items():
                measured[name].append(timed(command, molecules))
    medians = {name: statistics.median(times) for name, times in measured.items()}
    for name, median in medians.items():
        print(f"{name:12} {median:6.2f} s, {int(count) / median:7.0f} molecules/s")
    # neighbours in time are compared, as the speed of a shared machine drifts
    ratio = lambda one, other: statistics.median(a / b for a, b in zip(measured[one], measured[other]))
    print(f"medians of the ratios in {rounds} rounds of {count} molecules: one thread runs at "
          f"{100 * ratio('bare loop', 'one thread'):.0f} % of the bare loop, two threads "
          f"{ratio('one thread', 'two threads'):.2f} times as fast as one")


main()
