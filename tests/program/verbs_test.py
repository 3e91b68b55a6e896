# SPDX-License-Identifier: MIT
"""Each verb from outside: what is printed where, exit codes, files, the overwrite rule."""
import resource

from outside import *


class Verbs(Outside):
    def setUp(self):
        super().setUp()
        self.write("case.toml", valve_case())

    def test_check_writes_no_file_and_echoes_values(self):
        answer = self.json("check", "case.toml")
        self.assertEqual(self.names(), ["case.toml"])
        self.assertEqual(answer["verb"], "check")
        self.assertIsNone(answer["verdict"])
        by_name = {v["name"]: v for v in answer["values"] if v["name"]}
        self.assertAlmostEqual(by_name["main wall"]["value"], 0.008, places=12)
        self.assertNotIn("pipes", answer)

    def test_flow(self):
        answer = self.json("flow", "case.toml")
        self.assertEqual(self.names(), ["case-flow.h5", "case.toml"])
        self.assertAlmostEqual(answer["pipes"]["main"]["flow_m3_per_s"], 0.1, places=9)
        self.assertEqual(answer["case"], "case.toml")
        self.assertEqual(set(answer["places"]), {"tank", "chamber"})
        # (d): pressure drop of a level pipe = head loss times density and gravity
        pipe = answer["pipes"]["main"]
        weight = answer["liquid"]["density_kg_per_m3"] * 9.80665
        self.assertAlmostEqual(pipe["pressure_drop_Pa"] / (pipe["head_loss_m"] * weight), 1.0, places=9)
        # in a case with events the peak is not the steady one's to judge
        self.assertEqual(answer["verdict"], "CANNOT TELL")
        self.assertNotIn("extremes", answer)

    def test_flow_without_events_judges(self):
        text = valve_case(limit=9)
        start, rest = text.split("[[event]]")
        self.write("still.toml", start + rest[rest.index("[friction]"):])
        self.assertEqual(self.json("flow", "still.toml")["verdict"], "OK")

    def test_flow_tells_not_ok_from_the_steady_state(self):
        self.write("low.toml", valve_case(limit=2))
        self.assertEqual(self.json("flow", "low.toml")["verdict"], "NOT OK")

    def test_surge(self):
        answer = self.json("surge", "case.toml")
        self.assertEqual(self.names(), ["case-surge.h5", "case.toml"])
        e = answer["extremes"]
        self.assertGreater(e["max_pressure_Pa"], 11e5)
        self.assertLess(e["min_pressure_Pa"], 1e5)
        self.assertEqual(answer["verdict"], "OK")
        self.assertIn("max_pressure_Pa", answer["places"]["chamber"])
        self.assertIsNone(answer["limits"][0]["probability"])
        self.assertGreater(answer["limits"][0]["margin"], 0)

    def test_band_steady_lists_the_others_on_standard_error(self):
        done = self.call("band", "case.toml", "--json", expect=0)
        answer = json.loads(done.stdout)
        self.assertIn("drop", answer["answers"])
        self.assertNotIn("peak", answer["answers"])
        self.assertIn("peak", done.stderr)
        self.assertEqual(answer["verdict"], "CANNOT TELL")
        q = answer["answers"]["drop"]["quantiles"]
        self.assertLessEqual({"0.025", "0.05", "0.5", "0.95", "0.975"}, set(q))

    def test_band_surge(self):
        answer = self.json("band", "case.toml", "--surge")
        self.assertEqual(set(answer["answers"]), {"drop", "peak"})
        self.assertEqual(answer["answers"]["peak"]["draws"], 64)
        limit = answer["limits"][0]
        self.assertLessEqual(limit["probability_lower"], limit["probability"])
        self.assertGreaterEqual(limit["probability_upper"], limit["probability"])

    def test_summary_goes_to_standard_output_and_remarks_to_standard_error(self):
        done = self.call("surge", "case.toml", expect=0)
        self.assertIn("case-surge.h5", done.stderr)
        self.assertNotIn("case-surge.h5", done.stdout)
        self.assertNotIn("\x1b", done.stdout + done.stderr)  # no terminal: no colour, no progress
        self.assertIn("licensed engineer", done.stdout)
        low = done.stdout.lower()
        self.assertIn("highest", low)
        self.assertIn("lowest", low)

    def test_quiet_says_nothing_on_standard_error(self):
        self.assertEqual(self.call("flow", "case.toml", "--quiet", expect=0).stderr, "")

    def test_units_change_the_summary_alone(self):
        si = self.call("flow", "case.toml", "--units", "si", expect=0).stdout
        us = self.call("flow", "case.toml", "--units", "us", expect=0).stdout
        self.assertIn("psi", us)
        self.assertNotIn("psi", si)
        a, b = self.json("flow", "case.toml", "--units", "si"), self.json("flow", "case.toml", "--units", "us")
        self.assertEqual(a, b)

    def test_standard_input(self):
        answer = json.loads(self.call("flow", "-", "--json", stdin=valve_case(), expect=0).stdout)
        self.assertAlmostEqual(answer["pipes"]["main"]["flow_m3_per_s"], 0.1, places=9)
        self.assertEqual(self.names(), ["case.toml", "stdin-flow.h5"])

    def test_json_of_the_run_is_that_of_the_file(self):
        for verb, words in [("flow", []), ("surge", []), ("band", []), ("band", ["--surge"])]:
            run = self.call(verb, "case.toml", "--json", *words, expect=0).stdout
            again = self.call("report", f"case-{verb}.h5", "--json", expect=0).stdout
            self.assertEqual(run, again, f"{verb} {words}")

    def test_gate(self):
        self.call("surge", "case.toml", "--gate", expect=0)
        self.call("flow", "case.toml", "--gate", expect=2)  # needs surge
        self.write("low.toml", valve_case(limit=9))
        self.call("surge", "low.toml", expect=0)
        self.call("surge", "low.toml", "--gate", expect=1)
        self.call("band", "low.toml", "--surge", "--gate", expect=1)

    def test_seed_changes_the_draws(self):
        one = self.json("band", "case.toml", "--seed", "1")["answers"]["drop"]
        two = self.json("band", "case.toml", "--seed", "2")["answers"]["drop"]
        self.assertEqual(one["central"], two["central"])
        self.assertNotEqual(one["mean"], two["mean"])
        self.assertEqual(one, self.json("band", "case.toml", "--seed", "1")["answers"]["drop"])


class Asking(Outside):
    """The verbs that read results."""

    def setUp(self):
        super().setUp()
        self.write("case.toml", valve_case(limit=12))

    def test_one_draw_replayed_gives_the_bits_of_the_batch(self):
        import h5py

        self.call("band", "case.toml", "--surge", expect=0)
        with h5py.File(self.folder / "case-band.h5") as file:
            bands = file["bands"]
            names = [n.decode() if isinstance(n, bytes) else n for n in bands["output_name"][()]]
            values = bands["output_value"][()]
        peak, drop = names.index("peak"), names.index("drop")
        self.assertEqual(len(set(values[:, peak])), 64)  # every draw its own
        for draw in (0, 5, 37, 63):
            self.call("replay", "case-band.h5", draw, "--out", f"draw-{draw}.toml", expect=0)
            run = self.json("surge", f"draw-{draw}.toml")
            self.assertEqual(run["places"]["chamber"]["max_pressure_Pa"], values[draw, peak], draw)
            chamber, tank = run["places"]["chamber"]["pressure_Pa"], run["places"]["tank"]["pressure_Pa"]
            self.assertAlmostEqual((tank - chamber) / values[draw, drop], 1.0, places=9)

    def test_worst_draws_come_in_order(self):
        import h5py

        self.call("band", "case.toml", "--surge", expect=0)
        with h5py.File(self.folder / "case-band.h5") as file:
            names = [n.decode() if isinstance(n, bytes) else n for n in file["bands/output_name"][()]]
            peaks = sorted(file["bands/output_value"][()][:, names.index("peak")], reverse=True)
        for rank in (1, 2, 7):
            case = self.call("replay", "case-band.h5", "worst", rank, expect=0).stdout
            run = json.loads(self.call("surge", "-", "--json", "-f", stdin=case, expect=0).stdout)
            self.assertEqual(run["places"]["chamber"]["max_pressure_Pa"], peaks[rank - 1])
        self.call("replay", "case-band.h5", "worst", 65, expect=64)
        self.call("replay", "case-band.h5", 64, expect=64)
        self.call("replay", "case-band.h5", "-1", expect=64)

    def test_replay_of_a_single_run_is_refused(self):
        self.call("surge", "case.toml", expect=0)
        self.assertIn("no draws", self.call("replay", "case-surge.h5", 0, expect=64).stderr)

    def test_at_a_place_and_along_a_pipe(self):
        run = self.json("surge", "case.toml")
        spot = self.json("at", "case-surge.h5", "chamber")
        for key in ["head_m", "pressure_Pa", "max_pressure_Pa", "min_pressure_Pa", "time_of_max_s"]:
            self.assertEqual(spot[key], run["places"]["chamber"][key])
        end = self.json("at", "case-surge.h5", "main @ 1800 m")
        self.assertAlmostEqual(end["max_head_m"], run["places"]["chamber"]["max_head_m"], places=9)
        middle, feet = self.json("at", "case-surge.h5", "main @ 900 m"), self.json("at", "case-surge.h5", "main @ 2952.7559055118 ft")
        self.assertAlmostEqual(middle["max_head_m"], feet["max_head_m"], places=6)
        tank = self.json("at", "case-surge.h5", "tank")
        self.assertAlmostEqual(middle["head_m"], 0.5 * (tank["head_m"] + spot["head_m"]), places=9)
        whole = self.json("at", "case-surge.h5", "main")
        self.assertEqual(whole["max_pressure_Pa"], run["extremes"]["max_pressure_Pa"])
        text = self.call("at", "case-surge.h5", "chamber", expect=0).stdout
        self.assertIn("highest", text)
        self.assertIn("lowest", text)
        self.assertIn("surge limit", text)
        self.assertIn("did you mean chamber", self.call("at", "case-surge.h5", "chambr", expect=64).stderr)
        self.call("at", "case-surge.h5", "main @ 1801 m", expect=64)
        self.call("at", "case-surge.h5", "main @ 900", expect=64)

    def test_compare_subtracts_the_same_draws_only(self):
        self.write("slow.toml", valve_case(limit=12, replace=[('over = "1 s"', 'over = "6 s"')]))
        self.call("band", "case.toml", "--surge", expect=0)
        self.call("band", "slow.toml", "--surge", expect=0)
        both = self.json("compare", "case-band.h5", "slow-band.h5")
        self.assertTrue(both["paired"])
        peak = both["numbers"]["peak"]
        self.assertLess(peak["difference"], -2e5)
        low, median, high = peak["difference_band"]
        self.assertTrue(low <= median <= high < 0)
        self.assertEqual(peak["pairs"], 64)
        self.call("band", "slow.toml", "--surge", "--seed", 21, expect=0)
        apart = self.json("compare", "case-band.h5", "slow-band.h5")
        self.assertFalse(apart["paired"])
        self.assertEqual(apart["numbers"]["peak"]["difference_band"], [None, None, None])
        self.assertIn("seeds differ", self.call("compare", "case-band.h5", "slow-band.h5", expect=0).stdout)
        same = self.json("compare", "case-band.h5", "case-band.h5")
        self.assertEqual(same["numbers"]["peak"]["difference_band"], [0, 0, 0])


class Unfinished(Outside):
    def test_no_steady_state_is_three_with_a_file(self):
        # the crest lies far over the tank: below the vapour limit before anything moves
        text = valve_case(replace=[('[["0 m", "40 m"], ["1800 m", "40 m"]]',
                                    '[["0 m", "40 m"], ["900 m", "130 m"], ["1800 m", "40 m"]]')])
        self.write("crest.toml", text)
        for verb in ["flow", "surge", "band"]:
            done = self.call(verb, "crest.toml", "--json", expect=3)
            answer = json.loads(done.stdout)
            self.assertEqual(answer["verdict"], "CANNOT TELL")
            self.assertTrue(any("vapour" in w for w in answer["warnings"]), answer["warnings"])
            self.assertIn(f"crest-{verb}.h5", self.names())
            self.call(verb, "crest.toml", "--gate", expect=3)
            self.assertEqual(self.call("report", f"crest-{verb}.h5", "--json", expect=0).stdout, done.stdout)


class Wrong(Outside):
    def test_missing_case(self):
        for verb in ["check", "flow", "surge", "band"]:
            self.assertIn("no.toml", self.call(verb, "no.toml", expect=66).stderr)
        self.assertIn("no.h5", self.call("report", "no.h5", expect=66).stderr)
        self.assertEqual(self.names(), [])

    def test_wrong_case_is_told_with_its_place_and_nothing_is_written(self):
        self.write("bad.toml", valve_case(replace=[('roughness = "0.1 mm x/ 3"', 'roughnes = "0.1 mm"')]))
        for verb in ["check", "flow", "surge", "band"]:
            done = self.call(verb, "bad.toml", "--json", expect=65)
            self.assertRegex(done.stderr, r"bad\.toml:\d+:\d+:")
            self.assertIn("roughness", done.stderr)
            problems = json.loads(done.stdout)
            self.assertEqual(set(problems), {"headband", "problems"})
            self.assertEqual(set(problems["problems"][0]), {"line", "column", "path", "what", "value", "bound", "hint"})
            self.assertGreater(problems["problems"][0]["line"], 0)
            plain = self.call(verb, "bad.toml", expect=65)
            self.assertEqual(plain.stdout, "")
        self.assertEqual(self.names(), ["bad.toml"])

    def test_folder_for_a_case(self):
        self.call("check", ".", expect=66)

    def test_device_this_version_does_not_compute_is_refused(self):
        text = valve_case() + '[[air_vessel]]\nname = "vessel"\nat = "chamber"\ngas_volume = "7 m3"\n'
        self.write("vessel.toml", text)
        done = self.call("surge", "vessel.toml", expect=65)
        self.assertIn("not computed yet by this version", done.stderr)
        self.assertEqual(self.names(), ["vessel.toml"])

    def test_too_many_reaches_is_an_error_with_words(self):
        self.write("huge.toml", valve_case(replace=[("reaches = 10", "reaches = 200000000")]))
        done = self.call("surge", "huge.toml", expect=65)
        self.assertNotEqual(done.stderr, "")
        self.assertEqual(self.names(), ["huge.toml"])


class Files(Outside):
    def setUp(self):
        super().setUp()
        self.write("case.toml", valve_case())

    def test_own_result_is_replaced_but_not_a_strangers_file(self):
        self.call("flow", "case.toml", expect=0)
        self.call("flow", "case.toml", expect=0)
        self.write("case-flow.h5", "someone's notes")
        self.assertIn("-f", self.call("flow", "case.toml", expect=73).stderr)
        self.assertEqual((self.folder / "case-flow.h5").read_text(), "someone's notes")
        self.call("flow", "case.toml", "-f", expect=0)
        self.call("report", "case-flow.h5", "--json", expect=0)

    def test_a_name_given_by_the_user_needs_force(self):
        self.call("flow", "case.toml", "--out", "mine.h5", expect=0)
        self.call("flow", "case.toml", "--out", "mine.h5", expect=73)
        self.call("flow", "case.toml", "--out", "mine.h5", "-f", expect=0)
        self.call("flow", "case.toml", "--report", "mine.html", expect=0)
        self.call("flow", "case.toml", "--report", "mine.html", expect=73)
        self.assertEqual(self.names(), ["case-flow.h5", "case.toml", "mine.h5", "mine.html"])

    def test_folder_that_is_not_there(self):
        self.call("flow", "case.toml", "--out", "nowhere/a.h5", expect=73)
        self.call("surge", "case.toml", "--report", "nowhere/a.html", expect=73)
        self.call("flow", "case.toml", "--out", ".", expect=73)
        self.assertEqual(self.names(), ["case.toml"])

    def test_report_writes_page_tables_and_pictures(self):
        self.call("band", "case.toml", "--surge", expect=0)
        done = self.call("report", "case-band.h5", expect=0)
        self.assertEqual(done.stdout, "")
        self.assertIn("case-band.html", done.stderr)
        self.assertIn("licensed engineer", (self.folder / "case-band.html").read_text())
        self.call("report", "case-band.h5", expect=0)  # its own page is replaced
        self.write("case-band.html", "mine")
        self.call("report", "case-band.h5", expect=73)
        self.call("report", "case-band.h5", "--csv", "tables", "--svg", "pictures", expect=0)
        self.assertEqual((self.folder / "case-band.html").read_text(), "mine")
        self.assertTrue(list((self.folder / "tables").glob("*.csv")))
        for picture in (self.folder / "pictures").glob("*.svg"):
            self.assertTrue(picture.read_text().lstrip().startswith("<"))
        self.assertTrue(list((self.folder / "pictures").glob("*.svg")))

    def test_damaged_results_are_told(self):
        self.call("surge", "case.toml", expect=0)
        whole = (self.folder / "case-surge.h5").read_bytes()
        (self.folder / "cut.h5").write_bytes(whole[: len(whole) // 2])
        self.write("text.h5", "not a result")
        self.write("empty.h5", "")
        for name in ["cut.h5", "text.h5", "empty.h5", "case.toml"]:
            done = self.call("report", name, "--json", expect=65)
            self.assertEqual(done.stdout, "")
            self.assertIn(name, done.stderr)

    def test_bytes_changed_at_random_never_crash_the_program(self):
        import random

        self.call("flow", "case.toml", expect=0)
        whole = bytearray((self.folder / "case-flow.h5").read_bytes())
        dice = random.Random(7)
        for _ in range(40):
            broken = bytearray(whole)
            for _ in range(8):
                broken[dice.randrange(len(broken))] = dice.randrange(256)
            (self.folder / "broken.h5").write_bytes(broken)
            self.assertIn(self.call("report", "broken.h5", "--json").returncode, (0, 65))

    @unittest.skipIf(SANITIZED, "the checker of addresses writes files of its own")
    def test_full_disk(self):
        def small():
            resource.setrlimit(resource.RLIMIT_FSIZE, (4096, 4096))

        for words in [("flow", "case.toml"), ("surge", "case.toml"), ("new", "oil")]:
            if words[0] == "new":
                continue
            done = self.call(*words, expect=74, preexec_fn=small)
            self.assertIn("h5", done.stderr)
        self.assertEqual(self.names(), ["case.toml"])

    def test_full_standard_output(self):
        with open("/dev/full", "wb") as full:
            done = subprocess.run([str(PROGRAM), "check", "case.toml"], cwd=self.folder, stdout=full, stderr=subprocess.PIPE)
        self.assertEqual(done.returncode, 74, done.stderr)

    def test_reader_that_went_away(self):
        for stdout_of in ["pipe", "closed"]:
            if stdout_of == "pipe":
                read, write = os.pipe()
                os.close(read)
                done = subprocess.run([str(PROGRAM), "flow", "case.toml"], cwd=self.folder, stdout=write, stderr=subprocess.PIPE)
                os.close(write)
            else:
                done = subprocess.run(["/bin/sh", "-c", f"exec '{PROGRAM}' flow case.toml >&-"], cwd=self.folder,
                                      stderr=subprocess.PIPE)
            self.assertEqual(done.returncode, 0, done.stderr)
            self.call("report", "case-flow.h5", "--json", expect=0)
            (self.folder / "case-flow.h5").unlink()

    def test_no_color_and_dumb_terminals(self):
        import pty

        def on_terminal(environment):
            master, slave = pty.openpty()
            env = {k: v for k, v in os.environ.items() if k not in ("NO_COLOR",)}
            env.update({"TERM": "xterm", "LC_ALL": "C.UTF-8"}, **environment)
            child = subprocess.Popen([str(PROGRAM), "surge", "case.toml"], cwd=self.folder, stdout=slave, stderr=subprocess.DEVNULL,
                                     stdin=subprocess.DEVNULL, env=env)
            os.close(slave)
            text = b""
            while True:
                try:
                    part = os.read(master, 65536)
                except OSError:
                    break
                if not part:
                    break
                text += part
            os.close(master)
            self.assertEqual(child.wait(), 0)
            return text

        self.assertIn(b"\x1b[", on_terminal({}))
        self.assertNotIn(b"\x1b[", on_terminal({"NO_COLOR": "1"}))
        self.assertNotIn(b"\x1b[", on_terminal({"TERM": "dumb"}))
        self.assertIn(b"\x1b[", on_terminal({"NO_COLOR": ""}))


class Bits(Outside):
    def test_threads_change_nothing_outside_provenance(self):
        self.write("case.toml", valve_case())
        for words in [["band"], ["band", "--surge"], ["surge"]]:
            files = {}
            for threads in (1, 2, 3):
                name = f"{''.join(words)}-{threads}.h5"
                self.call(words[0], "case.toml", *words[1:], "--threads", threads, "--out", name, expect=0)
                files[threads] = contents(self.folder / name)
            self.assertGreater(len(files[1]), 20)
            for threads in (2, 3):
                self.assertEqual(files[1].keys(), files[threads].keys())
                different = [k for k in files[1] if files[1][k] != files[threads][k]]
                self.assertEqual(different, [])

    def test_a_file_holds_no_folder_of_the_machine(self):
        self.write("case.toml", valve_case())
        self.call("flow", self.folder / "case.toml", "--out", self.folder / "a.h5", expect=0)
        data = (self.folder / "a.h5").read_bytes()
        self.assertNotIn(str(self.folder).encode(), data)
        self.assertNotIn(str(PROGRAM.parent).encode(), data)


if __name__ == "__main__":
    main()
