# SPDX-License-Identifier: MIT
"""Stopped by the user: exit codes, what is left behind, and the same bits when taken up again."""
import signal
import time

from outside import *

DRAWS = 32768
LONG = valve_case(replace=[("draws = 64", f"draws = {DRAWS}"), ("reaches = 10", "reaches = 40"), ('"8 s"', '"40 s"')])


class Stopped(Outside):
    def start(self, *words):
        return subprocess.Popen([str(PROGRAM), *words], cwd=self.folder, stdout=subprocess.PIPE, stderr=subprocess.PIPE,
                                text=True)

    def stop(self, child, what, after):
        time.sleep(after)
        if child.poll() is None:
            child.send_signal(what)
        out, err = child.communicate(timeout=200)
        return child.returncode, out, err

    def test_band_stops_at_a_block_and_resumes_to_the_same_bits(self):
        code, out, err = self.stopped_midway("--threads", "2")
        self.assertEqual(out, "")
        self.assertIn("--resume", err)
        self.assertEqual(self.names(), ["case-band.partial.h5", "case.toml"])
        self.call("band", "--surge", "case.toml", "--resume", "--threads", "1", expect=0)
        self.assertEqual(self.names(), ["case-band.h5", "case.toml"])
        self.call("band", "--surge", "case.toml", "--out", "straight.h5", expect=0)
        straight, resumed = contents(self.folder / "straight.h5"), contents(self.folder / "case-band.h5")
        self.assertEqual(straight.keys(), resumed.keys())
        self.assertEqual([k for k in straight if straight[k] != resumed[k]], [])

    def stopped_midway(self, *words):
        """A band stopped while some draws are done and some are not; sooner on a machine that was through already."""
        self.write("case.toml", LONG)
        for after in (2.0, 1.0, 0.5, 0.25):
            for left in ("case-band.h5", "case-band.partial.h5"):
                (self.folder / left).unlink(missing_ok=True)
            code, out, err = self.stop(self.start("band", "--surge", "case.toml", *words), signal.SIGINT, after)
            if code == 130 and 0 < self.draws_kept() < DRAWS:
                return code, out, err
        self.fail(f"never stopped in the middle: exit {code}, {err}")

    def draws_kept(self):
        import h5py

        with h5py.File(self.folder / "case-band.partial.h5") as file:
            return len(file["bands/run_status"])

    def test_draws_kept_are_taken_up_and_not_drawn_again(self):
        import h5py

        self.stopped_midway()
        # a mark on a kept draw comes back in the finished file
        with h5py.File(self.folder / "case-band.partial.h5", "r+") as file:
            stored = file["bands/output_value"]
            marked = stored[3, -1] = stored[3, -1] * 1.25
        self.call("band", "--surge", "case.toml", "--resume", expect=0)
        with h5py.File(self.folder / "case-band.h5") as file:
            self.assertEqual(file["bands/output_value"][3, -1], marked)

    def test_terminated(self):
        self.write("case.toml", LONG)
        code, _, _ = self.stop(self.start("band", "--surge", "case.toml"), signal.SIGTERM, 1.0)
        self.assertEqual(code, 143)
        self.assertEqual(self.names(), ["case-band.partial.h5", "case.toml"])

    def test_resume_of_another_case_or_of_nothing_is_refused(self):
        self.write("case.toml", LONG)
        self.assertIn("nothing to resume", self.call("band", "--surge", "case.toml", "--resume", expect=66).stderr)
        code, _, _ = self.stop(self.start("band", "--surge", "case.toml"), signal.SIGINT, 1.0)
        self.assertEqual(code, 130)
        self.assertIn("another case", self.call("band", "--surge", "case.toml", "--resume", "--seed", "5", expect=65).stderr)
        self.write("case.toml", LONG.replace("1800 m", "1801 m"))
        self.assertIn("another case", self.call("band", "--surge", "case.toml", "--resume", expect=65).stderr)
        (self.folder / "case-band.partial.h5").write_bytes(b"rubbish")
        self.call("band", "--surge", "case.toml", "--resume", expect=65)

    def test_surge_leaves_nothing_behind(self):
        self.write("case.toml", valve_case(replace=[("reaches = 10", "reaches = 2000"), ('"8 s"', '"300 s"')]))
        code, out, _ = self.stop(self.start("surge", "case.toml"), signal.SIGINT, 0.3)
        self.assertEqual((code, out), (130, ""))
        self.assertEqual(self.names(), ["case.toml"])


if __name__ == "__main__":
    main()
