#!/usr/bin/python3
# SPDX-License-Identifier: MIT
"""The printed grid bound against a finer grid, on 20 generated networks (10 with cavities).

The bound of each extreme must contain the finer grid's value in at least 18 of them. The bound itself uses grids up to four
times finer, so the judge is eight times finer (the second argument changes that). A run called "not converging" counts
neither way; at most 4 of the 20 may be, at least one. The same count with every bound multiplied by 0.1 must fall under
18: the check can fail. Usage: grid_bound.py PROGRAM [FINER]
"""
import json
import pathlib
import subprocess
import sys
import tempfile

from networks import Network

PROGRAM = sys.argv[1]
STEP = 0.02
FINER = int(sys.argv[2]) if len(sys.argv) > 2 else 8


def surge(text):
    with tempfile.TemporaryDirectory() as folder:
        case = pathlib.Path(folder) / "case.toml"
        case.write_text(text)
        done = subprocess.run([PROGRAM, "surge", str(case), "--json", "--quiet"], cwd=folder, capture_output=True, text=True)
    if done.returncode != 0:
        raise SystemExit(f"surge ended with {done.returncode}: {done.stderr}\n{text}")
    return json.loads(done.stdout)


def main():
    held = held_by_a_tenth = not_converging = networks = 0
    seed = 100
    for cavities in (False, True):
        found = 0
        while found < 10:
            seed += 1
            network = Network(seed, cavities, STEP)
            coarse = surge(network.case(time_step=STEP))
            if cavities and not coarse["cavities"]:
                continue  # this one stayed above vapour pressure: not of the kind asked for
            found += 1
            networks += 1
            fine = surge(network.case(time_step=STEP / FINER, grid_check=False))["extremes"]
            extremes = coarse["extremes"]
            bounds = {end: extremes[f"{end}_grid_bound_Pa"] for end in ("max", "min")}
            if None in bounds.values():
                not_converging += 1
                print(f"seed {seed}: not converging")
                continue
            errors = {end: abs(extremes[f"{end}_pressure_Pa"] - fine[f"{end}_pressure_Pa"]) for end in bounds}
            holds = all(errors[end] <= bounds[end] + 1e-6 for end in bounds)
            held += holds
            held_by_a_tenth += all(errors[end] <= 0.1 * bounds[end] + 1e-6 for end in bounds)
            print(f"seed {seed}: {'holds' if holds else 'DOES NOT HOLD'} "
                  + ", ".join(f"{end} off by {errors[end]:.0f} Pa, bound {bounds[end]:.0f} Pa" for end in bounds))
    print(f"{networks} networks: bound holds in {held}, a tenth of it in {held_by_a_tenth}, not converging {not_converging}")
    good = held >= 18 and 1 <= not_converging <= 4 and held_by_a_tenth < 18
    return 0 if good else 1


if __name__ == "__main__":
    sys.exit(main())
