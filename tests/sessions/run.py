"""Runs the ```console blocks of documents and compares what they show with what comes out.

run.py [--rewrite] [--program PATH] [DOCUMENT ...]     (all documents, the newest program under build/)

In a block a line "$ ..." is a command, lines "> ..." after it continue it, and the rest is its output,
standard output and standard error together. A command that fails ends in the line "(exit status N)".
The commands of one document run in order in a folder of their own that holds copies of tables/,
validation/ and tests/validation/. A document without any command is a fault.
"""

import argparse
import difflib
import os
import re
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
BLOCK = re.compile(r"(?<=^```console\n)(.*?)(?=^```$)", re.DOTALL | re.MULTILINE)
COMMAND = re.compile(r"^\$ .*\n(?:^>(?: .*)?\n)*", re.MULTILINE)


def run(command, folder, program):
    """What a terminal would show after the command, as lines without trailing blanks."""
    environment = {
        "PATH": f"{program.parent}:{os.environ.get('PATH', '/usr/bin:/bin')}",
        "HOME": str(folder),
        "LC_ALL": "C.UTF-8",
        "NO_COLOR": "1",
    }
    if "ASAN_OPTIONS" in os.environ:
        environment["ASAN_OPTIONS"] = os.environ["ASAN_OPTIONS"]
    text = "\n".join(line[2:] for line in command.splitlines())
    result = subprocess.run(
        ["bash", "-c", text], cwd=folder, env=environment, timeout=300,
        stdin=subprocess.DEVNULL, stdout=subprocess.PIPE, stderr=subprocess.STDOUT,
    )
    lines = [line.rstrip() for line in result.stdout.decode("utf-8", "replace").splitlines()]
    if result.returncode != 0:
        lines.append(f"(exit status {result.returncode})")
    return "".join(line + "\n" for line in lines)


def replay(document, program):
    """The text of the document with the output that its commands have now, and their number."""
    count = 0
    with tempfile.TemporaryDirectory() as folder:
        for name in ("tables", "validation", "tests/validation"):
            if (ROOT / name).is_dir():
                shutil.copytree(ROOT / name, Path(folder) / name)

        def replay_block(block):
            nonlocal count
            shown = COMMAND.findall(block[0])
            count += len(shown)
            return "".join(command + run(command, Path(folder), program) for command in shown)

        return BLOCK.sub(replay_block, document.read_text()), count


def newest_program():
    built = [p for p in (ROOT / "build").glob("*/isotally") if p.is_file()]
    if not built:
        sys.exit("no program under build/: build one first, or name it with --program")
    return max(built, key=lambda p: p.stat().st_mtime)


def main():
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--rewrite", action="store_true", help="write what comes out into the documents")
    parser.add_argument("--program", type=Path, help="the isotally to run")
    parser.add_argument("documents", nargs="*", type=Path)
    options = parser.parse_args()
    program = (options.program or newest_program()).resolve()
    bad = False
    for document in options.documents or [ROOT / "README.md", ROOT / "DEVELOPERS.md"]:
        before = document.read_text()
        after, count = replay(document, program)
        if count == 0:
            print(f"{document.name}: no command in any console block")
            bad = True
        if after != before and options.rewrite:
            document.write_text(after)
            print(f"{document.name}: rewritten")
        elif after != before:
            bad = True
            print("".join(difflib.unified_diff(before.splitlines(True), after.splitlines(True),
                                               f"{document.name} as written", f"{document.name} as run", n=1)))
    sys.exit(1 if bad else 0)


main()
