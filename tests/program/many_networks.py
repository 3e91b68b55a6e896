#!/usr/bin/python3
# SPDX-License-Identifier: MIT
"""Random valid networks march 60 s: no number is missing that should be there, none hangs, every bad status is explained.

Usage: many_networks.py PROGRAM [N]
"""
import json
import math
import pathlib
import subprocess
import sys
import tempfile

from networks import Network

PROGRAM = sys.argv[1]
COUNT = int(sys.argv[2]) if len(sys.argv) > 2 else 500


def main():
    failures = unfinished = marched = refused = 0
    seed = -1
    while marched < COUNT:
        seed += 1
        text = Network(seed, seed % 2 == 1).case(reaches=12, duration=60.0)
        with tempfile.TemporaryDirectory() as folder:
            case = pathlib.Path(folder) / "case.toml"
            case.write_text(text)
            done = subprocess.run([PROGRAM, "surge", str(case), "--json", "--quiet"], cwd=folder, capture_output=True, text=True,
                                  timeout=60)
        if done.returncode == 65 and ("no head drives this flow" in done.stdout or "wave speed" in done.stdout):
            refused += 1  # the generator asked for more flow than the heads allow, or a grid that is refused: not valid
            continue
        marched += 1
        answer = json.loads(done.stdout) if done.stdout else {}
        if done.returncode == 3:
            unfinished += 1
            if not answer.get("warnings"):
                failures += 1
                print(f"seed {seed}: did not finish and does not say why")
            continue
        extremes = answer.get("extremes", {})
        numbers = [extremes.get("max_pressure_Pa"), extremes.get("min_pressure_Pa"), extremes.get("max_head_m")]
        numbers += [p.get("max_head_m") for p in answer.get("places", {}).values()]
        if done.returncode != 0 or any(n is None or not math.isfinite(n) for n in numbers):
            failures += 1
            print(f"seed {seed}: exit {done.returncode} {done.stderr[:300]}\n{text if failures < 3 else ''}")
    print(f"{marched} networks marched, {refused} refused, {unfinished} unfinished and explained, {failures} failures")
    return 1 if failures or unfinished > COUNT // 50 or refused > COUNT // 2 else 0


if __name__ == "__main__":
    sys.exit(main())
