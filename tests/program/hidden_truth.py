#!/usr/bin/python3
# SPDX-License-Identifier: MIT
"""Coverage counted from outside: 200 generated case files whose sampled answer has a closed form.

A held friction factor makes the drop of a level pipe f s (L/D) rho V^2/2 with V = 4Q/(pi D^2): with lognormal factors only it
is lognormal, so every quantile and every probability is known. The intervals printed by `headband band --json` are
counted. Seeds are fixed; the acceptance bounds let a sound program fail with a chance under 1e-4 (binomial tail).

Then one case in which about one draw in a hundred has no steady flow: the same draws are judged with and without them.

Usage: hidden_truth.py PROGRAM [N]
"""
import json
import math
import pathlib
import random
import subprocess
import sys
import tempfile

import h5py
import numpy
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


def band_and_runs(text):
    """The JSON of a band and the draws in its file."""
    with tempfile.TemporaryDirectory() as folder:
        case = pathlib.Path(folder) / "case.toml"
        case.write_text(text)
        done = subprocess.run([PROGRAM, "band", str(case), "--json", "--quiet"], cwd=folder, capture_output=True, text=True)
        if done.returncode != 0:
            raise SystemExit(f"band ended with {done.returncode}: {done.stderr}\n{text}")
        with h5py.File(pathlib.Path(folder) / "case-band.h5") as file:
            runs = {name: file["bands"][name][()] for name in ("run_status", "limit_value")}
    return json.loads(done.stdout), runs


def band(text):
    return band_and_runs(text)[0]


# Invented. The drop hangs on the scatter alone; the level decides whether the end stands over the outlet, so that the valve
# passes anything. A draw-off in the valve's place takes the same flow from every draw.
FAILING = '''
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "tank"
level = "LEVEL m ± 2 m"
[[pipe]]
name = "line"
from = "tank"
to = "end"
length = "1000 m"
bore = "300 mm"
friction_factor = 0.02
[[place]]
name = "end"
elevation = "0 m"
OUTLET
[friction]
scatter = "± 10 %"
[surge]
duration = "1 s"
cavities = "off"
[band]
draws = 2048
design = "DESIGN"
seed = 11
answers = [{ pressure_drop = ["tank", "end"], name = "drop" }]
[[limit]]
name = "available"
pressure_drop = ["tank", "end"]
not_over = "LIMIT Pa"
at_most = "6 %"
confidence = "95 %"
'''
VALVE = '[[valve]]\nname = "out"\nfrom = "end"\nto = "air"\nflow = "100 L/s"'
DRAW_OFF = '[[draw_off]]\nname = "out"\nat = "end"\nflow = "100 L/s"'


def upper_bound(broken, draws, confidence):
    return stats.beta.ppf(confidence, broken + 1, draws - broken) if broken < draws else 1.0


def lower_bound(broken, draws, confidence):
    return stats.beta.ppf(1 - confidence, broken, draws - broken + 1) if broken > 0 else 0.0


def with_failing_draws(design):
    """Yields what must hold and whether it does."""
    velocity = 4 * 0.1 / (math.pi * 0.3**2)
    loss = 0.02 * 1000 / 0.3 * velocity**2 / (2 * 9.80665)
    # level - loss x scatter < 0 in 1 % of the draws
    sd = math.hypot(2 / Z95, loss * 0.1 / Z95)
    level = loss - sd * stats.norm.ppf(0.01)
    # the drop is density g (loss - level) by its spread in both: a limit broken by about 4 %
    density = 999.1
    limit = density * 9.80665 * (loss - level + stats.norm.ppf(0.96) * sd)
    text = FAILING.replace("LEVEL", repr(level)).replace("LIMIT", repr(limit)).replace("DESIGN", design)
    kept, whole = (band_and_runs(text.replace("OUTLET", outlet)) for outlet in (VALVE, DRAW_OFF))
    (answer, runs), (all_answer, all_runs) = kept, whole
    draws, failed = 2048, int(numpy.count_nonzero(runs["run_status"]))
    finished = runs["run_status"] == 0
    yield f"about 1 % of the draws fail ({failed})", stats.binom.ppf(1e-4, draws, 0.01) <= failed <= stats.binom.ppf(1 - 1e-4, draws, 0.01)
    yield "no draw fails without the valve", not all_runs["run_status"].any() and all_answer["answers"]["drop"]["failed"] == 0
    yield "failed is counted", answer["answers"]["drop"]["failed"] == failed and answer["answers"]["drop"]["draws"] == draws
    drop, all_drop = runs["limit_value"][:, 0], all_runs["limit_value"][:, 0]
    yield "the other draws are the same", bool((drop[finished] == all_drop[finished]).all()) and bool(numpy.isnan(drop[~finished]).all())
    broken = int(numpy.count_nonzero(drop[finished] > limit))
    all_broken = int(numpy.count_nonzero(all_drop > limit))
    judged, all_judged = answer["limits"][0], all_answer["limits"][0]
    near = lambda a, b: abs(a - b) <= 1e-12 * max(abs(a), abs(b))
    yield f"probability is the share of the finished draws ({broken})", near(judged["probability"], broken / (draws - failed))
    yield "upper bound: exactly the failed draws are added", near(judged["probability_upper"], upper_bound(broken + failed, draws, 0.95))
    yield "lower bound: none of them is", near(judged["probability_lower"], lower_bound(broken, draws, 0.95))
    yield "judged with all draws", (near(all_judged["probability_upper"], upper_bound(all_broken, draws, 0.95))
                                    and near(all_judged["probability_lower"], lower_bound(all_broken, draws, 0.95)))
    yield "the bounds hold what all draws say", judged["probability_lower"] <= all_broken / draws <= judged["probability_upper"]
    for key, (value, low, high) in answer["answers"]["drop"]["quantiles"].items():
        truth = numpy.quantile(all_drop, float(key), method="hazen")
        open_end = high is None  # with the failed draws above all others the end may lie beyond the last one
        yield f"quantile {key} holds that of all draws", (low is None or low <= truth) and (open_end or truth <= high)
        yield f"quantile {key} is that of the finished draws", near(value, numpy.quantile(drop[finished], float(key)))


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
    for design in ("plain", "sobol"):
        for what, good in with_failing_draws(design):
            failures += not good
            print(f"{'ok  ' if good else 'FAIL'} {design}, some draws fail: {what}")
    return 1 if failures else 0


if __name__ == "__main__":
    sys.exit(main())
