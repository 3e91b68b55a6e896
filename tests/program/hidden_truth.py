#!/usr/bin/python3
# SPDX-License-Identifier: MIT
"""Coverage counted from outside: 200 generated case files whose sampled answer has a closed form.

A held friction factor makes the drop of a level pipe f s (L/D) rho V^2/2 with V = 4Q/(pi D^2): with lognormal factors only it
is lognormal, so every quantile and every probability is known. The intervals printed by `headband band --json` are
counted. Seeds are fixed; the acceptance bounds let a sound program fail with a chance under 1e-4 (binomial tail).

Usage: hidden_truth.py PROGRAM [N]
"""
import json
import math
import pathlib
import random
import subprocess
import sys
import tempfile

from scipy import stats

PROGRAM = sys.argv[1]
CASES = int(sys.argv[2]) if len(sys.argv) > 2 else 200
Z95 = stats.norm.ppf(0.975)


def make_case(chance, design):
    """One case with its truth: (text, median [Pa], log standard deviation, limit [Pa])."""
    length, bore, flow, factor = (chance.uniform(300, 5000), chance.uniform(0.1, 0.8), chance.uniform(0.01, 0.6),
                                  chance.uniform(0.01, 0.04))
    flow = min(flow, 2.5 * math.pi * bore**2 / 4)
    density = chance.uniform(750, 1100)
    spread = {key: chance.uniform(1.02, top) for key, top in (("scatter", 1.25), ("bore", 1.02), ("density", 1.03), ("length", 1.05))}
    log_sd = math.sqrt(sum((power * math.log(spread[key]) / Z95)**2
                           for key, power in (("scatter", 1), ("bore", 5), ("density", 1), ("length", 1))))
    median = 8 * factor * length * density * flow**2 / (math.pi**2 * bore**5)
    limit = median * math.exp(log_sd * stats.norm.ppf(chance.uniform(0.90, 0.99)))
    text = f'''
[liquid]
name = "generated liquid"
density = "{density!r} kg/m3 x/ {spread['density']!r}"
viscosity = "1 cSt"
bulk_modulus = "2 GPa"
[[basin]]
name = "start"
level = "0 m"
surface_pressure = "{20 * median + 1e6!r} Pa g"
[[pipe]]
name = "line"
from = "start"
to = "end"
length = "{length!r} m x/ {spread['length']!r}"
bore = "{bore!r} m x/ {spread['bore']!r}"
friction_factor = {factor!r}
[[draw_off]]
name = "delivery"
at = "end"
flow = "{flow!r} m3/s"
[friction]
scatter = "x/ {spread['scatter']!r}"
[band]
draws = 512
design = "{design}"
seed = {chance.randrange(1, 10**9)}
answers = [{{ pressure_drop = ["start", "end"], name = "drop" }}]
[[limit]]
name = "available"
pressure_drop = ["start", "end"]
not_over = "{limit!r} Pa"
at_most = "5 %"
'''
    return text, median, log_sd, limit


def band(text):
    with tempfile.TemporaryDirectory() as folder:
        case = pathlib.Path(folder) / "case.toml"
        case.write_text(text)
        done = subprocess.run([PROGRAM, "band", str(case), "--json", "--quiet"], cwd=folder, capture_output=True, text=True)
    if done.returncode != 0:
        raise SystemExit(f"band ended with {done.returncode}: {done.stderr}\n{text}")
    return json.loads(done.stdout)


def lowest_fair(n, share):
    """Fewest hits a sound program gives with a chance over 1e-4."""
    return int(stats.binom.ppf(1e-4, n, share))


def main():
    chance = random.Random(20261201)
    failures = 0
    for design in ("plain", "sobol"):
        n = CASES // 2
        hits = {"0.05": 0, "0.5": 0, "0.95": 0}
        upper = lower = 0
        for _ in range(n):
            text, median, log_sd, limit = make_case(chance, design)
            answer = band(text)
            for key in hits:
                truth = median * math.exp(log_sd * stats.norm.ppf(float(key)))
                _, low, high = answer["answers"]["drop"]["quantiles"][key]
                hits[key] += low <= truth <= high
            probability = stats.norm.sf(math.log(limit / median) / log_sd)
            judged = answer["limits"][0]
            upper += probability <= judged["probability_upper"]
            lower += probability >= judged["probability_lower"]
        for what, count in [(f"quantile {key}", hits[key]) for key in hits] + [("upper bound", upper), ("lower bound", lower)]:
            good = count >= lowest_fair(n, 0.95)
            failures += not good
            print(f"{'ok  ' if good else 'FAIL'} {design} {what}: {count} of {n} intervals hold the truth")
    return 1 if failures else 0


if __name__ == "__main__":
    sys.exit(main())
