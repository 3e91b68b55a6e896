# SPDX-License-Identifier: MIT
"""Words and options of the call: help, version, spelling, numbers; nothing is written when the call is wrong."""
from outside import *

READY = ["new", "check", "flow", "surge", "band", "report", "liquid", "at", "compare", "replay"]
LATER = ["fastest", "age", "match", "doubt"]


class Help(Outside):
    def test_help_is_narrow_begins_with_examples_and_carries_the_cautions(self):
        for words in [["--help"], ["-h"], *[[verb, "--help"] for verb in READY]]:
            done = self.call(*words, expect=0)
            self.assertEqual(done.stderr, "")
            for line in done.stdout.splitlines():
                self.assertLessEqual(len(line), 80, line)
            self.assertIn("licensed engineer", done.stdout)
            self.assertIn("Not modelled", done.stdout)
            self.assertIn("headband ", done.stdout.splitlines()[2])

    def test_help_names_every_verb_and_those_of_later_versions(self):
        text = self.call("--help", expect=0).stdout
        for verb in READY:
            self.assertRegex(text, rf"(?m)^  {verb} ")
        later = text.split("does not compute yet")[1].split("\n\n")[0]
        for verb in LATER:
            self.assertIn(verb, later)

    def test_every_option_of_a_verb_is_in_its_help(self):
        for verb, options in {"band": ["--out", "--report", "--threads", "--seed", "--units", "--quiet", "--json",
                                       "--no-color", "-f", "--gate", "--resume", "--surge"],
                              "report": ["--svg", "--csv", "--json"],
                              "liquid": ["--temperature", "--pressure"]}.items():
            text = self.call(verb, "--help", expect=0).stdout
            for option in options:
                self.assertRegex(text, rf"(?m)^  {option}\b")

    def test_version_is_one_line(self):
        self.assertRegex(self.call("--version", expect=0).stdout, r"\Aheadband \d+\.\d+\.\d+\n\Z")


class WrongCalls(Outside):
    def wrong(self, *words, says):
        self.write("c.toml", valve_case())
        before = self.names()
        done = self.call(*words, expect=64)
        self.assertEqual(done.stdout, "")
        self.assertTrue(done.stderr.startswith("headband: "), done.stderr)
        self.assertRegex(done.stderr, says)
        self.assertEqual(self.names(), before)

    def test_no_verb(self):
        self.wrong(says="--help")

    def test_misspelt_verb(self):
        self.wrong("flwo", "c.toml", says="did you mean flow")
        self.wrong("bnad", "c.toml", says="did you mean band")
        self.wrong("xylophone", "c.toml", says="--help")

    def test_misspelt_option(self):
        self.wrong("flow", "c.toml", "--treads", "2", says="did you mean --threads")
        self.wrong("flow", "c.toml", "--jsno", says="did you mean --json")

    def test_option_of_another_verb(self):
        self.wrong("flow", "c.toml", "--seed", "2", says="flow has no option --seed")
        self.wrong("check", "c.toml", "--out", "a.h5", says="check has no option --out")

    def test_words_too_few_and_too_many(self):
        self.wrong("flow", says="needs CASE")
        self.wrong("flow", "c.toml", "d.toml", says="'d.toml' is one word too many")
        self.wrong("report", says="needs RESULT")
        self.wrong("check", "", says="empty")

    def test_numbers_are_plain_digits_in_range(self):
        for text in ["-1", "0", "1025", "010", "+2", "2.0", "1e2", "nan", "inf", "0x2", "two", " 2",
                     "99999999999999999999"]:
            self.wrong("flow", "c.toml", f"--threads={text}", says=r"--threads takes a whole number from 1 to 1024")
        for text in ["-1", "18446744073709551616", "1e6", "007"]:
            self.wrong("band", "c.toml", f"--seed={text}", says=r"--seed takes a whole number from 0 to 18446744073709551615")

    def test_units(self):
        self.wrong("flow", "c.toml", "--units", "metric", says="si or us")

    def test_option_without_value(self):
        self.wrong("flow", "c.toml", "--out", says="--out")
        self.wrong("flow", "c.toml", "--out=", says="--out")

    def test_option_twice(self):
        self.wrong("flow", "c.toml", "--out", "a.h5", "--out", "b.h5", says="--out")

    def test_words_of_later_versions_say_so(self):
        for verb in LATER:
            self.wrong(verb, "c.toml", says="not computed yet by this version")

    def test_option_before_the_verb(self):
        self.wrong("--json", "flow", "c.toml", says="verb comes first")


class Liquid(Outside):
    def test_water(self):
        answer = self.json("liquid", "water", "--temperature", "20 degC")
        # IAPWS SR6-08(2011), 0.1 MPa, 20 degC: the release's table, to its digits
        self.assertAlmostEqual(answer["liquid"]["density_kg_per_m3"], 998.2065, places=3)
        self.assertEqual(answer["verb"], "liquid")
        self.assertIsNone(answer["verdict"])

    def test_spellings_of_a_temperature_agree(self):
        one = self.json("liquid", "water", "--temperature", "15 degC")["liquid"]
        for text in ["59 degF", "288.15 K"]:
            other = self.json("liquid", "water", "--temperature", text)["liquid"]
            for key in one:
                self.assertAlmostEqual(other[key] / one[key], 1.0, places=9)

    def test_table_holds_source_and_spread(self):
        text = self.call("liquid", "water", expect=0).stdout
        self.assertIn("IAPWS", text)
        self.assertIn("±", text)

    def test_wrong_words(self):
        for words, says in [(["watr"], "did you mean water"), (["water", "--temperature", "15"], "unit is missing"),
                            (["water", "--temperature", "15 bar"], "no unit of it"),
                            (["water", "--pressure", "10 bar"], "absolute"), (["water", "--pressure", "10 bar g"], "absolute"),
                            (["water", "--temperature", "nan degC"], "no number")]:
            done = self.call("liquid", *words, expect=64)
            self.assertIn(says, done.stderr)


class New(Outside):
    def test_list_alone(self):
        text = self.call("new", expect=0).stdout
        kinds = [line.split()[0] for line in text.splitlines()[1:]]
        self.assertIn("valve", kinds)
        self.assertEqual(self.names(), [])

    def test_every_kind_is_a_case_that_checks(self):
        kinds = [line.split()[0] for line in self.call("new", expect=0).stdout.splitlines()[1:]]
        for kind in kinds:
            self.call("new", kind, expect=0)
            self.call("check", f"{kind}.toml", expect=0)
        self.assertEqual(self.names(), sorted(f"{kind}.toml" for kind in kinds))

    def test_never_over_the_users_work(self):
        self.write("valve.toml", "mine")
        self.assertIn("-f", self.call("new", "valve", expect=73).stderr)
        self.assertEqual((self.folder / "valve.toml").read_text(), "mine")
        self.call("new", "valve", "-f", expect=0)
        self.assertNotEqual((self.folder / "valve.toml").read_text(), "mine")
        self.call("new", "valve", "other.toml", expect=0)

    def test_unknown_kind(self):
        self.assertIn("did you mean valve", self.call("new", "vlave", expect=64).stderr)
        self.assertEqual(self.names(), [])


if __name__ == "__main__":
    main()
