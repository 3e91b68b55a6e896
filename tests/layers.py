#!/usr/bin/env python3
# SPDX-License-Identifier: MIT
"""The layer check: reads the sources and says what breaks the rules of the house.

usage: layers.py ROOT          check the tree
       layers.py --self-test   prove that each rule finds its own breach

Rules: a file includes only its own folder or lower levels; physics neither reads nor prints and knows no file format;
foreign units live only where people are spoken to; files stay under 800 lines and folders under 26 sources; every
source carries its licence line and every header `#pragma once`; every test mirrors a folder of the house.
"""
import pathlib
import re
import sys
import tempfile

# Each row may include itself and every row above it; folders of one row do not see each other.
LEVELS = [
    ["core/base"],
    ["core/liquid", "core/pipe", "core/friction"],
    ["core/network"],
    ["core/answers"],
    ["core/steady"],
    ["core/casefile", "core/resultfile", "core/show", "core/report"],
    ["transient/grid"],
    ["transient/line"],
    ["transient/device"],
    ["transient/march"],
    ["transient/lumped"],
    ["montecarlo/sampling"],
    ["montecarlo/bands", "montecarlo/sensitivity"],
    ["montecarlo/propagate"],
    ["montecarlo/closing", "montecarlo/ageing", "montecarlo/matching"],
    ["montecarlo/program"],
]
LEVEL_OF = {folder: i for i, row in enumerate(LEVELS) for folder in row}
# Neighbours of one row that may be seen all the same, each with its reason.
ALLOWED = {
    ("core/report", "core/show"),  # what of a study is told is decided once, for text and page
    ("core/pipe", "core/liquid"),  # the wave speed is that of the mixture of liquid and free gas
}
OUTSIDE = ["core/casefile", "core/resultfile", "core/show", "core/report"]  # speak to people or to files
SPEAKS = set(OUTSIDE) | {"montecarlo/program"}
UNITS_ALLOWED = SPEAKS | {"core/base"}
IO_HEADERS = {"iostream", "fstream", "filesystem", "H5Cpp.h", "hdf5.h", "hdf5_hl.h"}
IO_ALLOWED_FILES = {"core/base/assert.hpp"}  # prints only where it ends the program
IO_WORDS = re.compile(r"\b(std::c(?:out|err|in)|f?printf|fopen|fmt::print)\b")
FOREIGN = re.compile(
    r"\b(?!(?:\w+_)?one_bar\b)\w+_(psi|psig|bar|barg|kpa|mpa|mm|cm|inch|inches|feet|ft|gpm|cfs|mgd|bbl|lps|cst|cp|degc|degf|celsius|fahrenheit|rpm|"
    r"minutes|hours)\b|\bunits::\w+")
ONE_FILE_HEADERS = {"CLI/CLI.hpp": ("montecarlo/program", 1), "H5Cpp.h": ("core/resultfile", 99)}
MOST_LINES, MOST_FILES = 800, 25
SOURCES = (".hpp", ".cpp")


def without_comments(text):
    """Text with comments and string contents blanked, line for line."""
    pattern = re.compile(r'//[^\n]*|/\*.*?\*/|R"(\w*)\(.*?\)\1"|"(?:\\.|[^"\\\n])*"', re.S)
    return pattern.sub(lambda m: re.sub(r"[^\n]", " ", m.group(0)), text)


def check(root):
    problems = []
    seen_headers = {}
    folders = {}
    files = [p for top in ("core", "transient", "montecarlo", "tests") for p in sorted((root / top).rglob("*"))
             if p.suffix in SOURCES]
    for path in files:
        name = path.relative_to(root).as_posix()
        folder = path.parent.relative_to(root).as_posix()
        text = path.read_text(encoding="utf-8")
        lines = text.count("\n")
        folders.setdefault(folder, []).append(name)
        if lines > MOST_LINES:
            problems.append(f"{name}: {lines} lines, at most {MOST_LINES}")
        if "SPDX-License-Identifier: MIT" not in "\n".join(text.splitlines()[:4]):
            problems.append(f"{name}: no SPDX line in its first lines")
        if path.suffix == ".hpp" and "#pragma once" not in text:
            problems.append(f"{name}: no #pragma once")
        includes = re.findall(r'^\s*#\s*include\s*[<"]([^>"]+)[>"]', text, re.M)
        for header in includes:
            seen_headers.setdefault(header, []).append(name)
        if folder.startswith("tests"):
            mirror = folder[len("tests/"):] if folder != "tests" else ""
            if mirror.split("/")[0] in ("core", "transient", "montecarlo") and path.name.endswith("_test.cpp"):
                if not (root / mirror).is_dir():
                    problems.append(f"{name}: mirrors no folder of the house")
            continue
        house = "/".join(folder.split("/")[:2])
        if house not in LEVEL_OF:
            if path.name != "anchor.cpp":
                problems.append(f"{name}: {house} is no room of the house (design: the levels)")
            continue
        for header in includes:
            target = "/".join(header.split("/")[:2])
            if target not in LEVEL_OF:
                if header.split("/")[0] in ("tests", "core", "transient", "montecarlo"):
                    problems.append(f"{name}: includes {header}, which is no room of the house")
                continue
            if target == house or (house, target) in ALLOWED:
                continue
            if LEVEL_OF[target] >= LEVEL_OF[house]:
                problems.append(f"{name}: includes {header}, which is not below {house}")
            elif target in OUTSIDE and house not in SPEAKS:
                problems.append(f"{name}: physics includes {header}")
            elif target in OUTSIDE and house in OUTSIDE:
                problems.append(f"{name}: includes its neighbour {header}")
        code = without_comments(text)
        if house not in SPEAKS and name not in IO_ALLOWED_FILES:
            for header in includes:
                if header in IO_HEADERS:
                    problems.append(f"{name}: <{header}> in a folder that neither reads nor prints")
            for found in IO_WORDS.finditer(code):
                problems.append(f"{name}:{code.count(chr(10), 0, found.start()) + 1}: {found.group(0)} in a folder that neither reads nor prints")
        if house not in UNITS_ALLOWED:
            for found in FOREIGN.finditer(code):
                problems.append(f"{name}:{code.count(chr(10), 0, found.start()) + 1}: foreign unit in {found.group(0)}")
    for folder, names in folders.items():
        stems = {n.rsplit(".", 1)[0] for n in names}
        if len(stems) > MOST_FILES:
            problems.append(f"{folder}: {len(stems)} sources, at most {MOST_FILES}")
    for header, (home, most) in ONE_FILE_HEADERS.items():
        users = [n for n in seen_headers.get(header, []) if not n.startswith("tests/")]
        strangers = [n for n in users if not n.startswith(home + "/")]
        for stranger in strangers:
            problems.append(f"{stranger}: <{header}> belongs to {home}")
        if len(users) > most:
            problems.append(f"<{header}> is included by {len(users)} files, at most {most}: {', '.join(users)}")
    return files, problems


def self_test():
    licence = "// SPDX-License-Identifier: MIT\n"
    breaches = {
        "upward include": ("core/pipe/a.cpp", licence + '#include "core/network/case.hpp"\n', "not below"),
        "neighbour include": ("core/pipe/a.cpp", licence + '#include "core/friction/law.hpp"\n', "not below"),
        "physics sees files": ("transient/grid/a.cpp", licence + '#include "core/show/show.hpp"\n', "physics includes"),
        "core sees transient": ("core/steady/a.cpp", licence + '#include "transient/grid/grid.hpp"\n', "not below"),
        "printing physics": ("core/steady/a.cpp", licence + '#include <iostream>\n', "neither reads nor prints"),
        "printing word": ("transient/line/a.cpp", licence + 'void f() { std::printf("x"); }\n', "neither reads nor prints"),
        "foreign unit": ("core/pipe/a.cpp", licence + "double f(double wall_mm) { return wall_mm; }\n", "foreign unit"),
        "too long": ("core/pipe/a.cpp", licence + "\n" * 900, "lines, at most"),
        "no licence": ("core/pipe/a.cpp", "int a;\n", "SPDX"),
        "no pragma": ("core/pipe/a.hpp", licence, "pragma"),
        "unknown room": ("core/helpers/a.cpp", licence, "no room"),
        "second user of the option reader": ("core/show/a.cpp", licence + "#include <CLI/CLI.hpp>\n", "belongs to"),
        "test without a room": ("tests/core/nowhere/a_test.cpp", licence, "mirrors no folder"),
    }
    bad = 0
    for what, (name, text, expected) in breaches.items():
        with tempfile.TemporaryDirectory() as folder:
            path = pathlib.Path(folder) / name
            path.parent.mkdir(parents=True)
            path.write_text(text)
            _, problems = check(pathlib.Path(folder))
        if not any(expected in p for p in problems):
            print(f"self-test: {what} was not found: {problems}")
            bad += 1
    with tempfile.TemporaryDirectory() as folder:
        path = pathlib.Path(folder) / "core/steady/a.cpp"
        path.parent.mkdir(parents=True)
        path.write_text(licence + '#include "core/network/case.hpp"\n// std::cout, 3 bar\nconst char* a = "printf wall_mm";\n')
        _, problems = check(pathlib.Path(folder))
    if problems:
        print(f"self-test: a clean file was blamed: {problems}")
        bad += 1
    print(f"layers: self-test of {len(breaches)} rules, {bad} failed")
    return bad


if __name__ == "__main__":
    if sys.argv[1:] == ["--self-test"]:
        sys.exit(1 if self_test() else 0)
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    checked, found = check(pathlib.Path(sys.argv[1]))
    for line in found:
        print(line)
    print(f"layers: {len(checked)} files, {len(found)} problem(s)")
    sys.exit(1 if found or not checked else 0)
