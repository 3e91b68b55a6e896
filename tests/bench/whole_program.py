#!/usr/bin/python3
# SPDX-License-Identifier: MIT
"""What a draw of a sampled surge costs the whole program on one thread, result file included: t(2n) - t(n), and
linearity (t(4n) - t(2n)) / (t(2n) - t(n)). CPU time, the least of some rounds (other work only adds to it). The figures
are printed only where the stored runs of the longest band have the peaks of a plain loop over the same inputs.

    tests/bench/whole_program.py build/release/montecarlo/program/headband [n] [rounds] [fixed|reynolds] [off|vapour]
"""
import math
import os
import pathlib
import resource
import subprocess
import sys
import tempfile

import h5py
import numpy as np

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent.parent / "support"))
from level_line import level_line

CASE = """
[about]
title = "sampled closing valve"
[site]
gravity = "9.81 m/s2"
[liquid]
name = "test liquid"
density = "1000 kg/m3"
viscosity = "1e-06 m2/s"
bulk_modulus = "2.2 GPa"
vapour_pressure = "1000 Pa abs"
""" + level_line("50 m", "0.5 m", 'wave_speed = "1000 m/s ± 5.88 %"', "{friction}") + """\
[[valve]]
name = "gate"
from = "end"
to = "air"
flow = "0.2945243112740431 m3/s"
law = "linear"
[[event]]
at = "0 s"
valve = "gate"
to = "0 %"
over = "3 s ± 19.6 %"
[friction]
scatter = "x/ 1.2165"
[surge]
duration = "8 s"
reaches = 64
cavities = "{cavities}"
friction_in_time = "{mode}"
[band]
draws = {draws}
answers = [{{ highest_pressure = "end", name = "peak" }}]
"""
AREA, FLOW, REACHES = 0.25 * math.pi * 0.25, 0.2945243112740431, 64


def plain_peaks(wave_speed, factor, closing):
    """Peak pressure at the valve [Pa], one run a column, the semi-implicit scheme step by step."""
    reach = 1000.0 / REACHES
    b, k = wave_speed / (9.81 * AREA), factor * reach / (2 * 9.81 * 0.5 * AREA**2)
    dt = reach / wave_speed
    head = 50.0 - np.outer(np.arange(REACHES + 1), k * FLOW**2)
    flow = np.full_like(head, FLOW)
    open_ = FLOW / np.sqrt(head[-1])
    peak = head[-1].copy()
    last = np.ceil(8.0 / dt - 1e-9)
    for step in range(1, int(last.max()) + 1):
        on, back, damp = head + b * flow, head - b * flow, b + k * np.abs(flow)
        new_flow = (on[:-2] - back[2:]) / (damp[:-2] + damp[2:])
        new_head = on[:-2] - damp[:-2] * new_flow
        c = open_ * np.maximum(0.0, 1.0 - step * dt / closing)
        z = damp[-2] * c * c
        out = np.where(on[-2] > 0.0, 0.5 * (-z + np.sqrt(z * z + 4 * c * c * np.maximum(on[-2], 0.0))), 0.0)
        flow[0] = (50.0 - back[1]) / damp[1]
        flow[-1], head[-1] = out, on[-2] - damp[-2] * out
        flow[1:-1], head[1:-1] = new_flow, new_head
        peak = np.where(step <= last, np.maximum(peak, head[-1]), peak)
    return peak * 1000.0 * 9.81


def worst_error(file):
    """Largest relative distance of stored peaks from the plain loop's."""
    with h5py.File(file) as f:
        bands = f["bands"]
        names = [n.decode() for n in bands["input_name"][:]]
        value, peak = bands["input_value"][:64], bands["output_value"][:64, 0]

    def column(*words):
        return value[:, next(i for i, n in enumerate(names) if all(w in n for w in words))]

    plain = plain_peaks(column("wave_speed"), 0.018 * column("scatter"), column("over"))
    return float(np.max(np.abs(peak / plain - 1.0)))


def main():
    program, options = os.path.abspath(sys.argv[1]), sys.argv[2:] + [None] * 4
    n, rounds = int(options[0] or 8192), int(options[1] or 5)
    mode, cavities = options[2] or "fixed", options[3] or "off"
    friction = 'friction_factor = "0.018"' if mode == "fixed" else 'roughness = "0.4 mm"'
    least = {}
    with tempfile.TemporaryDirectory() as folder:
        for _ in range(rounds):
            for times in (1, 2, 4):
                case = f"{folder}/{times}.toml"
                with open(case, "w", encoding="utf-8") as f:
                    f.write(CASE.format(friction=friction, cavities=cavities, mode=mode, draws=times * n))
                before = resource.getrusage(resource.RUSAGE_CHILDREN)
                subprocess.run(
                    [program, "band", "--surge", case, "--threads", "1", "-f"],
                    check=True, cwd=folder, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
                after = resource.getrusage(resource.RUSAGE_CHILDREN)
                taken = after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime
                least[times] = min(least.get(times, taken), taken)
        checked = (mode, cavities) == ("fixed", "off")
        worst = worst_error(f"{folder}/4-band.h5") if checked else math.nan
    if checked and not worst <= 1e-9:
        sys.exit(f"the peaks are not those of the plain loop: {worst:.3g}")
    half, whole = least[2] - least[1], least[4] - least[2]
    print(f"{1e6 * half / n:.2f} us a draw (second half of {2 * n}), {1e6 * whole / (2 * n):.2f} us (of {4 * n}), "
          f"linearity {whole / half:.3f}; check_worst " + (f"{worst:.2g}" if checked else "none for this form"))


if __name__ == "__main__":
    main()
