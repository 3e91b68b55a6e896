# SPDX-License-Identifier: MIT
"""What sampling stands on: shared and separate unknowns, correlations, ranges that are not random, a draw replayed.

The trap of the Cedar Flats line (cases/): the same line as 57 half-mile pieces must say what one piece says.
"""
import itertools
import pathlib
import sys

from outside import *

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent.parent / "support"))
from level_line import level_line

PSI = 6894.757293168361
PIECES = 57
LIMIT = 680 * PSI


def pieces_case(kind, design="plain", draws=4096):
    """The line as one pipe ("one"), or as 57 pieces whose bores and roughnesses are shared by `as`, by rank correlation 1
    ("together"), or whose correlation scatter is drawn for each piece ("per pipe")."""
    text = '''[about]
title = "Cedar Flats diesel line in pieces"
[show]
units = "us"
[liquid]
name = "diesel"
density = "844.155 kg/m3 ± 0.5 %"
viscosity = "3.6 cSt ± 10 %"
bulk_modulus = "1.4 GPa"
[[basin]]
name = "origin header"
level = "0 ft"
surface_pressure = "900 psi g"
'''
    count = 1 if kind == "one" else PIECES
    for i in range(count):
        start = "origin header" if i == 0 else f"milepost {i}"
        end = "terminal" if i == count - 1 else f"milepost {i + 1}"
        length = 28.5 / count
        bore, roughness = "12.00 in ± 0.5 %", "0.0018 in x/ 2"
        if kind != "together" and i > 0:
            bore, roughness = "as piece 0 bore", "as piece 0 roughness"
        text += f'''[[pipe]]
name = "piece {i}"
from = "{start}"
to = "{end}"
length = "{length!r} mile"
profile = [["0 mile", "{120 * i / count!r} ft"], ["{length!r} mile", "{120 * (i + 1) / count!r} ft"]]
bore = "{bore}"
roughness = "{roughness}"
'''
    shared = 'shared = "per pipe"\n' if kind == "per pipe" else ""
    text += f'''[[draw_off]]
name = "delivery"
at = "terminal"
flow = "3200 bbl/h"
[friction]
scatter = "± 10 %"
{shared}[band]
draws = {draws}
design = "{design}"
seed = 7
answers = [{{ pressure_drop = ["origin header", "terminal"], name = "drop" }}]
[[limit]]
name = "available pressure"
pressure_drop = ["origin header", "terminal"]
not_over = "680 psi"
at_most = "5 %"
'''
    if kind == "together":
        pairs = [(a, b) for a, b in itertools.combinations(range(count), 2)]
        text += "[together]\n"
        for key in ("bore", "roughness"):
            text += "".join(f'"piece {a} {key}, piece {b} {key}" = 1.0\n' for a, b in pairs)
    return text


def drop_by_numpy(shares):
    """The same line from outside: its 95 % band [psi] and the chance of more than the limit, the correlation scatter
    drawn for `shares` equal pieces. Colebrook (1939) by fixed-point iteration."""
    import numpy

    chance, n = numpy.random.default_rng(5), 200_000
    spread = lambda value, share: value * (1 + share / 1.959964 * chance.standard_normal(n))
    bore, viscosity, density = spread(0.3048, 0.005), spread(3.6e-6, 0.1), spread(844.155, 0.005)
    roughness = 0.0018 * 0.0254 * numpy.exp(numpy.log(2) / 1.959964 * chance.standard_normal(n))
    scatter = 1 + 0.1 / 1.959964 / shares**0.5 * chance.standard_normal(n)
    velocity = 4 * 3200 * 0.158987294928 / 3600 / numpy.pi / bore**2
    factor = numpy.full(n, 0.02)
    for _ in range(20):
        factor = (-2 * numpy.log10(roughness / bore / 3.7 + 2.51 * viscosity / velocity / bore / numpy.sqrt(factor)))**-2
    drop = density * (factor * scatter * 28.5 * 1609.344 / bore * velocity**2 / 2 + 9.80665 * 120 * 0.3048) / PSI
    return *numpy.quantile(drop, [0.025, 0.975]), (drop > 680).mean()


RANGES = """\
[liquid]
name = "water"
temperature = "15 degC"
""" + level_line("60 m", "300 mm", 'roughness = "0.1 mm .. 0.4 mm, not random"',
                 'fittings = [{ name = "bends", k = "2 .. 6, not random" }]') + """\
[[draw_off]]
name = "out"
at = "end"
flow = "100 L/s"
[friction]
scatter = "± 10 %"
[band]
draws = 1024
seed = 3
answers = [{ pressure_drop = ["tank", "end"], name = "drop" }]
[[limit]]
name = "available"
pressure_drop = ["tank", "end"]
not_over = "LIMIT bar"
at_most = "10 %"
"""


class Shared(Outside):
    def band(self, text, *words):
        self.write("case.toml", text)
        return self.json("band", "case.toml", "-f", "--quiet", *words)

    def assert_bands_equal(self, one, other, relative):
        a, b = one["answers"]["drop"], other["answers"]["drop"]
        for key in ("central", "mean", "sd"):
            self.assertAlmostEqual(a[key] / b[key], 1.0, delta=relative, msg=key)
        self.assertEqual(a["quantiles"].keys(), b["quantiles"].keys())
        for key in a["quantiles"]:
            for x, y in zip(a["quantiles"][key], b["quantiles"][key]):
                self.assertAlmostEqual(x / y, 1.0, delta=relative, msg=key)
        for key in ("probability", "probability_lower", "probability_upper"):
            self.assertEqual(one["limits"][0][key], other["limits"][0][key])

    def test_pieces_that_share_their_unknowns_are_one_piece(self):
        # plain draws hang on the names alone: the unknowns of the first piece are named alike in both
        one = self.band(pieces_case("one"))
        self.assert_bands_equal(one, self.band(pieces_case("pieces")), 1e-9)
        # a Sobol' design keys its dimensions by rank: the shared unknowns come in the same order
        self.assert_bands_equal(self.band(pieces_case("one", "sobol")), self.band(pieces_case("pieces", "sobol")), 1e-9)

    def test_rank_correlation_one_is_one_lot(self):
        # the first unknown of a lot leads it: all others have its score, so the draws are those of one piece
        self.assert_bands_equal(self.band(pieces_case("one", draws=1024)), self.band(pieces_case("together", draws=1024)), 1e-9)

    def test_one_piece_has_the_band_of_the_scenario(self):
        drop = self.band(pieces_case("one", "sobol", 16384))
        low, high = (drop["answers"]["drop"]["quantiles"][key][0] / PSI for key in ("0.025", "0.975"))
        self.assertAlmostEqual(low, 577, delta=3)
        self.assertAlmostEqual(high, 711, delta=3)
        self.assertAlmostEqual(drop["limits"][0]["probability"], 0.137, delta=0.01)

    def test_scatter_drawn_for_each_piece_is_the_trap(self):
        drop = self.band(pieces_case("per pipe", "plain", 16384))
        low, high = (drop["answers"]["drop"]["quantiles"][key][0] / PSI for key in ("0.025", "0.975"))
        expected_low, expected_high, expected_probability = drop_by_numpy(shares=PIECES)
        self.assertAlmostEqual(0.5 * (expected_high - expected_low), 31, delta=1)  # the scenario's "about ± 31 psi, P about 0.01"
        self.assertAlmostEqual(expected_probability, 0.01, delta=0.01)
        self.assertAlmostEqual(low, expected_low, delta=0.8)
        self.assertAlmostEqual(high, expected_high, delta=0.8)
        self.assertAlmostEqual(drop["limits"][0]["probability"], expected_probability, delta=0.004)

    def test_correlations_that_cannot_be_are_refused_with_the_nearest_that_can(self):
        text = pieces_case("one") + '''[together]
"piece 0 bore, piece 0 roughness" = 0.9
"piece 0 roughness, liquid viscosity" = 0.9
"piece 0 bore, liquid viscosity" = -0.9
'''
        self.write("case.toml", text)
        done = self.call("band", "case.toml", "--json", expect=65)
        problem = json.loads(done.stdout)["problems"][0]
        self.assertIn("at the same time", problem["what"])
        offered = re.findall(r'"([^"]+, [^"]+)" = (-?[0-9.]+)', problem["hint"])
        self.assertEqual(len(offered), 3, problem["hint"])
        self.assertEqual(self.names(), ["case.toml"])
        mended = pieces_case("one", draws=256) + "[together]\n" + "".join(f'"{pair}" = {r}\n' for pair, r in offered)
        self.band(mended)


class NotRandom(Outside):
    def setUp(self):
        super().setUp()
        self.write("case.toml", RANGES.replace("LIMIT", "0.75"))

    def test_probabilities_are_ranges_and_the_worst_corner_is_named(self):
        limit = self.json("band", "case.toml")["limits"][0]
        for key in ("probability", "probability_lower", "probability_upper"):
            least, most = limit[key]
            self.assertLess(least, most, key)
        self.assertIn("main roughness = 0.0004 m", limit["worst_corner"])
        self.assertIn("main fitting bends k = 6", limit["worst_corner"])
        # the same as writing the corner down
        for corner, which in ((("0.1 mm", "2"), 0), (("0.4 mm", "6"), 1)):
            text = RANGES.replace("LIMIT", "0.75").replace("0.1 mm .. 0.4 mm, not random", corner[0]).replace("2 .. 6, not random", corner[1])
            self.write("corner.toml", text)
            alone = self.json("band", "corner.toml", "-f")["limits"][0]
            self.assertEqual(alone["probability"], limit["probability"][which])
            self.assertEqual(alone["probability_upper"], limit["probability_upper"][which])

    def test_verdict_holds_at_every_outer_point_or_cannot_be_told(self):
        for bound, verdict in (("2", "OK"), ("0.1", "NOT OK"), ("0.75", "CANNOT TELL")):
            self.write("case.toml", RANGES.replace("LIMIT", bound))
            self.assertEqual(self.json("band", "case.toml", "-f")["limits"][0]["verdict"], verdict, bound)

    def test_a_single_run_takes_the_middle_as_a_guess(self):
        run = self.json("flow", "case.toml")
        self.assertAlmostEqual(run["pipes"]["main"]["roughness_m"], 0.25e-3, delta=1e-15)
        self.assertTrue(any("roughness" in guess for guess in run["guesses"]), run["guesses"])

    def test_the_worst_draw_replayed(self):
        self.call("band", "case.toml", expect=0)
        case = self.call("replay", "case-band.h5", "worst", "1", expect=0).stdout
        run = json.loads(self.call("flow", "-", "--json", stdin=case, expect=0).stdout)
        import h5py
        with h5py.File(self.folder / "case-band.h5") as file:
            worst = file["bands/output_value"][()][:, 0].max()
        places = run["places"]
        self.assertEqual(places["tank"]["pressure_Pa"] - places["end"]["pressure_Pa"], worst)


if __name__ == "__main__":
    main()
