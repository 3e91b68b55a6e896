#!/usr/bin/env python3
# SPDX-License-Identifier: MIT
"""Every source of a build folder through clang++-19 -fsyntax-only with the house's warnings as errors.

usage: clang_syntax.py BUILD_FOLDER [--jobs N]
"""
import argparse
import concurrent.futures
import json
import pathlib
import shlex
import subprocess
import sys

DROPPED = {"-c", "-Wno-psabi", "-Werror", "-mmove-max=256", "-mstore-max=256"}  # known to g++ alone


def command_of(entry):
    words = shlex.split(entry["command"])
    while words and not words[0].endswith(("++", "c++", "g++")) and "g++" not in words[0]:
        words.pop(0)  # the compiler launcher
    # libstdc++ 12 itself uses what it marks as deprecated (the buffer of std::stable_sort).
    kept, skip = ["clang++-19", "-fsyntax-only", "-Werror", "-Wno-deprecated-declarations"], False
    for word in words[1:]:
        if skip or word in DROPPED:
            skip = False
            continue
        if word in ("-o", "-MF", "-MT", "-MQ"):
            skip = True
            continue
        if word in ("-MD", "-MMD"):
            continue
        kept.append(word)
    return kept


def main():
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("build", type=pathlib.Path)
    parser.add_argument("--jobs", type=int, default=2)
    options = parser.parse_args()
    entries = json.loads((options.build / "compile_commands.json").read_text())
    entries = [e for e in entries if e["file"].endswith(".cpp")]

    def run(entry):
        done = subprocess.run(command_of(entry), cwd=entry["directory"], capture_output=True, text=True)
        return entry["file"], done.returncode, done.stderr

    failed = 0
    with concurrent.futures.ThreadPoolExecutor(options.jobs) as pool:
        for file, code, text in pool.map(run, entries):
            if code != 0:
                failed += 1
                print(f"{file}\n{text}", file=sys.stderr)
    print(f"clang 19: {len(entries) - failed} sources clean, {failed} not")
    return 1 if failed or not entries else 0


sys.exit(main())
