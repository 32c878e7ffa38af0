"""Every house rule must pass a small sound tree and name the fault of a broken one: house_test.py COMPILER."""

import sys
import tempfile
from pathlib import Path

import house

SOUND = {
    "DEVELOPERS.md": "| module | answers |\n|---|---|\n| error | a |\n| names | b |\n\n| other |\n|---|\n| cli |\n",
    "include/isotally/error.hpp": "#pragma once\n#include <string>\n",
    "include/isotally/names.hpp": '#pragma once\n#include "isotally/error.hpp"\n',
    "src/names.cpp": '#include "isotally/names.hpp"\nconst double kelvin = 273.15;  // not 9.5\nauto s = "1.5";\n',
    "src/name_parts.hpp": "const int rings = 1;\n",
    "src/names/words.hpp": '#include "isotally/error.hpp"\nconst int big = 1\'000;\n',
    "src/cli/main.cpp": '#include "isotally/names.hpp"\n#include "names/words.hpp"\nconst double none = 0.0;\n',
    "tests/error_test.cpp": "",
    "tests/names_test.cpp": "",
    "tests/lint/allowed_numbers.txt": "# file number reason\n* 0.0 nothing\nsrc/names.cpp 273.15 zero of the scale\n",
}
# rule, file, its text, what the fault must name
BROKEN = [
    ("top_level", "notes.txt", "", "notes.txt"),
    ("layers", "include/isotally/error.hpp", '#include "isotally/names.hpp"\n', "error includes names"),
    ("layers", "src/names/words.hpp", '#include "cli/a.hpp"\n', "no file of a module"),
    ("layers", "src/stray.cpp", "", "src/stray.cpp"),
    ("layers", "src/stray/part.cpp", "", "src/stray/part.cpp"),
    ("layers", "include/isotally/stray.hpp", "", "include/isotally/stray.hpp"),
    ("mirrors", "include/isotally/shares.hpp", "", "tests/shares_test.cpp"),
    ("sizes", "src/names.cpp", "\n" * 601, "601 lines"),
    ("headers", "include/isotally/error.hpp", "#include <fmt/format.h>\n", "fmt/format.h"),
    ("headers", "include/isotally/error.hpp", "std::string text;\n", "does not compile alone"),
    ("numbers", "src/cli/main.cpp", "int a = 1;\ndouble rho = -6.5;\n", "main.cpp:2: 6.5"),
    ("numbers", "src/cli/main.cpp", "double tiny = 1e-9;\n", "1e-9"),
    ("numbers", "src/names.cpp", "int a = 1;\n", "273.15 no longer stands"),
    ("numbers", "tests/lint/allowed_numbers.txt", "* 0.0 nothing\nsrc/names.cpp 273.15\n", "reason expected"),
    ("marks", "src/names.cpp", "// TO" "DO\n", "src/names.cpp:1"),
]


def faults(rule, changes):
    with tempfile.TemporaryDirectory() as folder:
        for name, text in {**SOUND, **changes}.items():
            path = Path(folder).resolve() / name
            path.parent.mkdir(parents=True, exist_ok=True)
            path.write_text(text)
        return list(house.RULES[rule](Path(folder).resolve(), sys.argv[1]))


bad = [f"{rule}: the sound tree is called faulty: {faults(rule, {})}" for rule in house.RULES if faults(rule, {})]
for rule, name, text, expected in BROKEN:
    found = faults(rule, {name: text})
    if not any(expected in fault for fault in found):
        bad.append(f"{rule}: {name} {text!r}: expected '{expected}', found {found}")
bad += [f"{rule}: no broken tree" for rule in house.RULES if rule not in {b[0] for b in BROKEN}]
sys.exit("\n".join(bad) if bad else 0)
