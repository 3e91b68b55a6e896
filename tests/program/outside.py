# SPDX-License-Identifier: MIT
"""What the tests of the program from outside share: an empty folder for each test, calls, small invented cases."""
import json
import os
import pathlib
import re
import shutil
import subprocess
import sys
import tempfile
import unittest

PROGRAM = pathlib.Path(os.environ["HEADBAND_PROGRAM"]).resolve()
CASES = pathlib.Path(os.environ["HEADBAND_CASES"]).resolve()
SANITIZED = os.environ.get("HEADBAND_SANITIZED") == "1"

# An invented gravity main, small enough to be marched many times.
VALVE = """\
[about]
title = "Small gravity main"
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "tank"
level = "100 m"
[[pipe]]
name = "main"
from = "tank"
to = "chamber"
length = "1800 m"
profile = [["0 m", "40 m"], ["1800 m", "40 m"]]
outside = "508 mm"
wall = "8 mm between 7.2 mm and 8.4 mm"
material = "steel"
roughness = "0.1 mm x/ 3"
[[valve]]
name = "end valve"
from = "chamber"
to = "air"
flow = "100 L/s"
[[event]]
at = "0 s"
valve = "end valve"
to = "0 %"
over = "1 s"
[friction]
scatter = "± 10 %"
[surge]
duration = "8 s"
reaches = 10
[band]
draws = 64
seed = 20
answers = [
  { pressure_drop = ["tank", "chamber"], name = "drop" },
  { highest_pressure = "chamber", name = "peak" },
]
[[limit]]
name = "surge limit"
highest_pressure = "LIMIT bar g"
where = "chamber"
at_most = "5 %"
"""


def valve_case(limit="20", **changes):
    """The small case with its limit and, for each change, one text replaced by another."""
    text = VALVE.replace("LIMIT", str(limit))
    for old, new in changes.get("replace", []):
        assert old in text, old
        text = text.replace(old, new)
    return text


class Outside(unittest.TestCase):
    """Each test stands in an empty folder of its own."""

    def setUp(self):
        self.folder = pathlib.Path(tempfile.mkdtemp(prefix="headband-"))
        self.addCleanup(shutil.rmtree, self.folder, ignore_errors=True)

    def call(self, *words, stdin=None, environment=None, expect=None, **kwargs):
        env = {k: v for k, v in os.environ.items() if k not in ("NO_COLOR", "TERM")}
        env.update({"TERM": "xterm", "LC_ALL": "C.UTF-8"})
        env.update(environment or {})
        done = subprocess.run([str(PROGRAM), *map(str, words)], cwd=self.folder, input=stdin, capture_output=True,
                              text=True, encoding="utf-8", env=env, timeout=240, **kwargs)
        if expect is not None:
            self.assertEqual(done.returncode, expect, f"{words}\nstdout: {done.stdout[-1500:]}\nstderr: {done.stderr[-1500:]}")
        return done

    def write(self, name, text):
        path = self.folder / name
        path.write_text(text, encoding="utf-8")
        return path

    def names(self):
        return sorted(p.name for p in self.folder.iterdir())

    def json(self, *words, expect=0, **kwargs):
        return json.loads(self.call(*words, "--json", expect=expect, **kwargs).stdout)


def contents(path):
    """Every dataset and attribute of a result file outside /provenance, as bytes."""
    import h5py
    import numpy

    found = {}

    def add(name, item):
        if name.split("/")[0] == "provenance":
            return
        for key, value in item.attrs.items():
            if key in ("REFERENCE_LIST", "DIMENSION_LIST"):  # addresses inside the file
                continue
            found[f"{name}@{key}"] = numpy.asarray(value).tobytes() if not isinstance(value, h5py.Empty) else b""
        if isinstance(item, h5py.Dataset):
            data = item[()]
            if item.dtype.hasobject:
                data = repr(numpy.asarray(data).tolist()).encode()
            found[name] = data if isinstance(data, bytes) else numpy.asarray(data).tobytes()

    with h5py.File(path, "r") as file:
        for key, value in file.attrs.items():
            found[f"@{key}"] = numpy.asarray(value).tobytes() if not isinstance(value, h5py.Empty) else b""
        file.visititems(add)
    return found


def main():
    unittest.main(argv=[sys.argv[0], "-v", *sys.argv[1:]])


__all__ = ["CASES", "PROGRAM", "SANITIZED", "Outside", "contents", "json", "main", "os", "re", "subprocess", "unittest",
           "valve_case"]
