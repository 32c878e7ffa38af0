"""Whole processes: one `isotally step` against a bare program on the same toolkit, and `isotally check` against steps.

start_up.py ISOTALLY BARE_TOOLKIT [ROUNDS]
All are started in turn in one run; the medians, their ratio and the largest memory are printed.
"""

import os
import statistics
import subprocess
import sys
import time

SMILES = "Cc1ccccc1"


def run(command):
    """Wall time in ms and peak resident memory in MB of one process."""
    begin = time.perf_counter()
    process = subprocess.Popen(command, stdin=subprocess.DEVNULL, stdout=subprocess.DEVNULL)
    _, status, usage = os.wait4(process.pid, 0)
    elapsed = 1000 * (time.perf_counter() - begin)
    if os.waitstatus_to_exitcode(status) != 0:
        sys.exit(f"{' '.join(command)}: exit status {os.waitstatus_to_exitcode(status)}")
    return elapsed, usage.ru_maxrss / 1024


def main():
    program, bare = sys.argv[1:3]
    rounds = int(sys.argv[3]) if len(sys.argv) > 3 else 60
    commands = {
        "bare toolkit": [bare, SMILES],
        "isotally step": [program, "step", SMILES, "--reaction", "nitration-mixed-acid"],
        "isotally check": [program, "check"],
        "check --all": [program, "check", "--all"],
    }
    measured = {name: [] for name in commands}
    for turn in range(rounds + 3):
        for name, command in commands.items():
            result = run(command)
            if turn >= 3:  # the first turns fill the page cache
                measured[name].append(result)
    medians = {}
    for name, results in measured.items():
        times = sorted(elapsed for elapsed, _ in results)
        medians[name] = statistics.median(times)
        print(f"{name:14} median {medians[name]:6.2f} ms   fastest {times[0]:6.2f} ms   "
              f"memory {max(memory for _, memory in results):5.1f} MB")
    print(f"ratios of the medians over {rounds} rounds: a step is {medians['isotally step'] / medians['bare toolkit']:.2f} bare "
          f"programs, check {medians['isotally check'] / medians['isotally step']:.1f} steps, "
          f"check --all {medians['check --all'] / medians['isotally step']:.1f} steps")


main()
