#!/usr/bin/python3
# SPDX-License-Identifier: MIT
"""What a sampled pressure drop costs the whole program on one thread, result file included: t(2n) - t(n), linearity
(t(4n) - t(2n)) / (t(2n) - t(n)), and the same million drops by NumPy with SciPy's Wright omega. CPU time; the sizes and
NumPy take turns in an order drawn anew each round. Other work on the same core slows a run by up to a half without any
clock showing it: a fixed loop is timed before and after each run, and medians are told of the runs between two loops
within 10 % of the fastest one, beside medians and lower quartiles of all runs. The figures are printed only where the stored runs have the
drops of the plain formula and the quantiles are NumPy's within their sampling errors.

    tests/bench/pressure_drops.py build/release/montecarlo/program/headband [n] [rounds]
"""
import math
import os
import random
import resource
import subprocess
import sys
import tempfile
import time

import h5py
import numpy as np
from scipy import special

CASE = """
[about]
title = "sampled pressure drop"
[liquid]
name = "test oil"
density = "850 kg/m3"
viscosity = "1e-05 m2/s ± 19.6 %"
[[basin]]
name = "source"
level = "500 m"
[[pipe]]
name = "line"
from = "source"
to = "end"
profile = [["0 m", "20 m"], ["10000 m", "20 m"]]
length = "10000 m"
bore = "0.5 m ± 0.98 %"
roughness = "0.05 mm x/ 1.2165"
[[draw_off]]
name = "out"
at = "end"
flow = "0.25 m3/s"
[friction]
scatter = "1 ± 9.8 %"
[band]
draws = {draws}
design = "plain"
seed = 42
answers = [{{ pressure_drop = ["source", "end"], name = "drop" }}]
"""
FLOW, LENGTH, DENSITY, Z95 = 0.25, 1e4, 850.0, 1.959963984540054


def drop(bore, roughness, viscosity, scatter):
    """Pressure drop [Pa] by the exact root of Colebrook-White: with 10^(-x/2) as the unknown it is Wright's omega."""
    speed = FLOW / (0.25 * math.pi * bore**2)
    k, a, b = 2.0 / math.log(10.0), roughness / bore / 3.7, 2.51 * viscosity / (speed * bore)
    x = k * special.wrightomega(a / (b * k) - np.log(b * k)) - a / b
    return scatter / x**2 * LENGTH / bore * DENSITY * speed**2 / 2.0


def sampled(n):
    """2.5, 50 and 97.5 % of n drops."""
    z = np.random.Generator(np.random.Philox(7)).standard_normal((4, n))
    bore, viscosity = 0.5 * (1.0 + 0.0098 / Z95 * z[0]), 1e-5 * (1.0 + 0.196 / Z95 * z[1])
    roughness, scatter = 5e-5 * np.exp(math.log(1.2165) / Z95 * z[2]), 1.0 + 0.098 / Z95 * z[3]
    return np.quantile(drop(bore, roughness, viscosity, scatter), [0.025, 0.5, 0.975])


def fixed_loop(field=np.linspace(1.0, 2.0, 2048), out=np.empty(2048)):
    """CPU time of a loop in the first-level cache [s]."""
    start = time.process_time()
    for _ in range(20000):
        np.multiply(field, 1.0000001, out=out)
    return time.process_time() - start


def run(program, folder, draws):
    """CPU time of one band [s]."""
    with open(f"{folder}/{draws}.toml", "w", encoding="utf-8") as f:
        f.write(CASE.format(draws=draws))
    before = resource.getrusage(resource.RUSAGE_CHILDREN)
    subprocess.run([program, "band", f"{draws}.toml", "--threads", "1", "-f"],
                   check=True, cwd=folder, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    after = resource.getrusage(resource.RUSAGE_CHILDREN)
    return after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime


def check(file, numpy_quantiles):
    """Largest relative distance of a stored drop from the formula; ends the program where the answers are others."""
    with h5py.File(file) as f:
        bands = f["bands"]
        names = [name.decode() for name in bands["input_name"][:]]
        value, told = bands["input_value"][:], bands["output_value"][:, 0]
    column = {name: value[:, i] for i, name in enumerate(names)}
    plain = drop(column["line bore"], column["line roughness"], column["liquid viscosity"], column["friction scatter"])
    worst = float(np.max(np.abs(told / plain - 1.0)))
    apart = np.abs(np.quantile(told, [0.025, 0.5, 0.975]) / numpy_quantiles - 1.0)
    if not worst <= 1e-9 or not np.all(apart <= 2e-3):  # 100 000 stored runs: four standard errors of the ends
        sys.exit(f"other pressure drops than the plain formula's: {worst:.3g}, {apart}")
    return worst


def main():
    program, options = os.path.abspath(sys.argv[1]), sys.argv[2:] + [None] * 2
    n, rounds = int(options[0] or 1000000), int(options[1] or 15)
    taken = {}
    with tempfile.TemporaryDirectory() as folder:
        loop = fixed_loop()
        for _ in range(rounds):
            for size in random.sample([0, n, 2 * n, 4 * n], 4):
                start = time.process_time()
                if size:
                    cost = run(program, folder, size)
                else:
                    quantiles = sampled(n)
                    cost = time.process_time() - start
                before, loop = loop, fixed_loop()
                taken.setdefault(size, []).append((cost, max(before, loop)))
        worst = check(f"{folder}/{4 * n}-band.h5", quantiles)
    fastest = min(loop for times in taken.values() for _, loop in times)
    undisturbed = {size: [cost for cost, loop in times if loop <= 1.1 * fastest] for size, times in taken.items()}
    every = {size: [cost for cost, _ in times] for size, times in taken.items()}
    for words, kept, share in (("undisturbed runs, medians", undisturbed, 0.5), ("all runs, medians", every, 0.5),
                               ("all runs, lower quartiles", every, 0.25)):
        counts = sorted(map(len, kept.values()))
        if counts[0] < 3:
            print(f"{words}: too few of them, {counts}")
            continue
        t = {size: float(np.quantile(costs, share)) for size, costs in kept.items()}
        half, whole = t[2 * n] - t[n], t[4 * n] - t[2 * n]
        print(f"{words} ({counts[0]} or more of each): {1e9 * half / n:.1f} ns a draw (second half of {2 * n}), "
              f"{1e9 * whole / (2 * n):.1f} ns (of {4 * n}), {1e9 * (half + whole) / (3 * n):.1f} ns over all, "
              f"linearity {whole / half:.2f}; NumPy {1e9 * t[0] / n:.0f} ns, "
              f"{3.0 * t[0] / (half + whole):.2f} times as much; check_worst {worst:.2g}")


if __name__ == "__main__":
    main()
