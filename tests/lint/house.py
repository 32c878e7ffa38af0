"""House rules: house.py RULE FOLDER [COMPILER] prints every fault and exits 1 if there is one."""

import re
import subprocess
import sys
from pathlib import Path

VISIBLE = {
    "CMakeLists.txt", "CMakePresets.json", "DEVELOPERS.md", "LICENSE", "README.md",
    "include", "src", "tables", "tests", "validation", "build",
}
LONGEST_FILE = 600
# Folders of src that are no modules: what stands in front may be included by what stands behind.
PROGRAMS = ["pack", "page", "cli"]
STANDARD_HEADERS = set(
    """algorithm any array atomic barrier bit bitset charconv chrono cmath compare complex concepts
    condition_variable cstddef cstdint cstdio cstdlib cstring deque exception filesystem forward_list fstream
    functional future initializer_list iomanip ios iosfwd iostream istream iterator latch limits list locale map
    memory memory_resource mutex new numbers numeric optional ostream queue random ranges ratio regex semaphore set
    shared_mutex source_location span sstream stack stdexcept stop_token streambuf string string_view
    system_error thread tuple type_traits typeindex typeinfo unordered_map unordered_set utility valarray
    variant vector version""".split()
)
INCLUDE = re.compile(r'^\s*#\s*include\s*([<"])([^">]+)[">]')
NOT_CODE = re.compile(
    r'//[^\n]*|/\*.*?\*/|R"([^\s()\\]*)\(.*?\)\1"|"(?:\\.|[^"\\\n])*"|(?<![0-9a-fA-F])\'(?:\\.|[^\'\\\n])+\'', re.DOTALL
)
FLOATING = re.compile(r"(?<![\w.])(?:\d[\d']*\.[\d']*(?:[eE][+-]?\d+)?|\.\d+(?:[eE][+-]?\d+)?|\d+[eE][+-]?\d+)")


def sources(folder, *tops):
    for top in tops:
        yield from sorted(p for p in (folder / top).rglob("*") if p.suffix in (".cpp", ".hpp", ".inc"))


def includes(path):
    """(line number, bracket, file) of every include."""
    for number, line in enumerate(path.read_text().splitlines(), 1):
        if match := INCLUDE.match(line):
            yield number, match[1], match[2]


def modules(folder):
    """The modules in order: first column of the table in DEVELOPERS.md that starts with 'module'."""
    names = []
    inside = False
    for line in (folder / "DEVELOPERS.md").read_text().splitlines():
        first = line.split("|")[1].strip() if line.startswith("|") else None
        if first is None:
            inside = False
        elif first == "module":
            inside = True
        elif inside and not first.startswith("-"):
            names.append(first)
    return names


def home(folder, path, order):
    """The module or program a file belongs to, or None."""
    parts = path.relative_to(folder).parts
    if parts[0] == "src" and len(parts) > 2 and parts[1] in order:
        return parts[1]
    fitting = [m for m in order if path.stem == m]
    if parts[0] == "src":  # names_parts or name_parts: a private part of names
        fitting += [m for m in order if path.stem.startswith((m + "_", m.removesuffix("s") + "_"))]
    return max(fitting, key=len, default=None)


def top_level(folder, _):
    for entry in sorted(folder.iterdir()):
        if not entry.name.startswith(".") and entry.name not in VISIBLE:
            yield f"{entry.name}: not one of the visible entries of the top level"


def layers(folder, _):
    order = modules(folder) + PROGRAMS
    for path in sources(folder, "include", "src"):
        own = home(folder, path, order)
        if own is None:
            yield f"{path.relative_to(folder)}: belongs to no module of the table in DEVELOPERS.md"
            continue
        for line, bracket, name in includes(path):
            if bracket == "<":
                continue
            where = f"{path.relative_to(folder)}:{line}"
            found = [d / name for d in (path.parent, folder / "src", folder / "include") if (d / name).is_file()]
            other = home(folder, found[0].resolve(), order) if found else None
            if other is None:
                yield f'{where}: "{name}" is no file of a module'
            elif order.index(other) > order.index(own):
                yield f"{where}: {own} includes {other}, which stands below it"


def mirrors(folder, _):
    for header in sources(folder, "include"):
        if not (folder / "tests" / f"{header.stem}_test.cpp").is_file():
            yield f"{header.relative_to(folder)}: has no tests/{header.stem}_test.cpp"


def sizes(folder, _):
    for path in sources(folder, "include", "src", "tests"):
        lines = len(path.read_text().splitlines())
        if lines > LONGEST_FILE:
            yield f"{path.relative_to(folder)}: {lines} lines, {LONGEST_FILE} at most"


def headers(folder, compiler):
    for path in sources(folder, "include"):
        for line, bracket, name in includes(path):
            if name not in STANDARD_HEADERS if bracket == "<" else not name.startswith("isotally/"):
                yield f"{path.relative_to(folder)}:{line}: includes {name}; the standard library and isotally/ only"
        command = [compiler, "-std=c++20", "-fsyntax-only", "-x", "c++", "-I", folder / "include", path]
        result = subprocess.run(command, capture_output=True, text=True)
        errors = [line for line in result.stderr.splitlines() if "error" in line]
        if result.returncode != 0:
            yield f"{path.relative_to(folder)}: does not compile alone: {(errors or ['no reason given'])[0]}"


def numbers(folder, _):
    allowed = {}
    listing = folder / "tests" / "lint" / "allowed_numbers.txt"
    for number, line in enumerate(listing.read_text().splitlines(), 1):
        if not line.strip() or line.startswith("#"):
            continue
        fields = line.split(maxsplit=2)
        if len(fields) < 3:
            yield f"{listing.name}:{number}: file, number and reason expected"
            continue
        allowed[fields[0], float(fields[1])] = number
    used = set()
    for path in sources(folder, "include", "src"):
        name = str(path.relative_to(folder))
        code = NOT_CODE.sub(lambda m: "\n" * m[0].count("\n"), path.read_text())
        for line, text in enumerate(code.splitlines(), 1):
            for literal in FLOATING.findall(text):
                value = float(literal.replace("'", ""))
                if (name, value) in allowed:
                    used.add((name, value))
                elif ("*", value) not in allowed:
                    yield f"{name}:{line}: {literal} belongs in tables/, or in {listing.name} with its reason"
    for key, number in allowed.items():
        if key[0] != "*" and key not in used:
            yield f"{listing.name}:{number}: {key[1]} no longer stands in {key[0]}"


def marks(folder, _):
    words = re.compile(r"\b(TO" r"DO|FIX" r"ME|XX" r"X|HA" r"CK|GTEST_S" r"KIP|DISABL" r"ED_\w*)\b")
    for path in sources(folder, "include", "src", "tests"):
        for number, line in enumerate(path.read_text().splitlines(), 1):
            if match := words.search(line):
                yield f"{path.relative_to(folder)}:{number}: {match[0]}"


RULES = {f.__name__: f for f in (top_level, layers, mirrors, sizes, headers, numbers, marks)}

if __name__ == "__main__":
    found = list(RULES[sys.argv[1]](Path(sys.argv[2]).resolve(), sys.argv[3] if len(sys.argv) > 3 else "c++"))
    sys.exit("\n".join(found) if found else 0)
