#!/usr/bin/env python3
# SPDX-License-Identifier: MIT
"""Result files seen by readers that share no code with headband: h5py, netCDF4, xarray and ncdump; and the page that
documents them, compared with a file in both directions.

usage: readers_test.py WRITE_SAMPLE_PROGRAM RESULT_FILE_PAGE
"""
import re
import subprocess
import sys
import tempfile
import time
import unittest
from pathlib import Path

import h5py
import netCDF4
import numpy as np
import xarray as xr

PROGRAM, PAGE = (Path(argument) for argument in sys.argv[1:3])
# What HDF5 itself keeps to join a dataset to its dimensions.
SCALE_ATTRIBUTES = {"CLASS", "NAME", "DIMENSION_LIST", "REFERENCE_LIST"}
FOLDER = tempfile.TemporaryDirectory()
SAMPLE, ELSEWHERE, FLOW, EMPTY, LARGE = (
    Path(FOLDER.name) / name for name in ("sample.h5", "elsewhere.h5", "flow.h5", "empty.h5", "large.h5"))


def setUpModule():
    subprocess.run([PROGRAM, FOLDER.name], check=True)


def text(value):
    """An attribute as text: fixed-length UTF-8 comes as bytes; an empty one as a null dataspace."""
    if isinstance(value, h5py.Empty):
        return ""
    return value.decode() if isinstance(value, bytes) else str(value)


def datasets(file):
    """Path and dataset of everything in the file."""
    found = {}
    file.visititems(lambda name, thing: found.update({"/" + name: thing}) if isinstance(thing, h5py.Dataset) else None)
    return found


def groups(file):
    found = []
    file.visititems(lambda name, thing: found.append(name) if isinstance(thing, h5py.Group) else None)
    return found


def is_text(dataset):
    return h5py.check_string_dtype(dataset.dtype) is not None


def is_scale(dataset):
    return text(dataset.attrs.get("CLASS", "")) == "DIMENSION_SCALE"


def dimensions(dataset):
    if is_scale(dataset):
        return [dataset.name.rsplit("/", 1)[1]]
    return [dimension[0].name.rsplit("/", 1)[1] for dimension in dataset.dims]


def kind(dataset):
    return "text" if is_text(dataset) else str(dataset.dtype)


class Readers(unittest.TestCase):
    def test_root_says_what_it_is(self):
        with h5py.File(SAMPLE) as file:
            root = {name: text(value) for name, value in file.attrs.items()}
        self.assertEqual(root, {
            "Conventions": "CF-1.10", "title": "Hollowmere gravity main (invented, ± test)", "source": "headband 0.1.0",
            "schema": "headband-results", "schema_version": "1.0", "state": "complete"})

    def test_every_dataset_says_what_it_is(self):
        for path in (SAMPLE, FLOW, EMPTY):
            with h5py.File(path) as file:
                for name, dataset in datasets(file).items():
                    self.assertTrue(text(dataset.attrs["long_name"]), name)
                    if not is_text(dataset):
                        self.assertTrue(text(dataset.attrs["units"]), name)
                    if dataset.dtype == np.int8 and "given" not in name:
                        self.assertEqual(len(dataset.attrs["flag_values"]),
                                         len(text(dataset.attrs["flag_meanings"]).split()), name)
                    if dataset.ndim > 0 and not is_scale(dataset):
                        for dimension in dataset.dims:
                            self.assertEqual(len(dimension), 1, name)
                    if dataset.dtype.kind == "f" and not is_scale(dataset):
                        self.assertTrue(np.isnan(dataset.attrs["_FillValue"]), name)

    def test_attributes_are_of_fixed_length(self):
        with h5py.File(SAMPLE) as file:
            for name, dataset in datasets(file).items():
                for attribute in ("units", "long_name", "cell_methods", "flag_meanings"):
                    if attribute in dataset.attrs:
                        kept = h5py.h5a.open(dataset.id, attribute.encode()).get_type()
                        self.assertFalse(kept.is_variable_str(), f"{name} {attribute}")

    def test_units_are_si_names_or_point_to_a_column(self):
        with h5py.File(SAMPLE) as file:
            for name, dataset in datasets(file).items():
                if is_text(dataset):
                    continue
                unit = text(dataset.attrs["units"])
                if unit.startswith("see "):
                    where = unit[4:] if unit[4] == "/" else dataset.parent.name + "/" + unit[4:]
                    self.assertIn(where, datasets(file), name)
                else:
                    self.assertIn(unit, {"1", "m", "s", "Pa", "K", "m3", "m s-1", "m s-2", "m3 s-1", "m2 s-1", "kg m-3",
                                         "Pa s"}, name)

    def test_names_hide_behind_no_method(self):
        with h5py.File(SAMPLE) as file:
            for name in datasets(file):
                self.assertFalse(hasattr(xr.Dataset, name.rsplit("/", 1)[1]), name)

    def test_xarray_reads_each_group(self):
        for path in (SAMPLE, FLOW, EMPTY):
            with h5py.File(path) as file:
                wanted = {name: set(thing for thing, item in file[name].items() if isinstance(item, h5py.Dataset))
                          for name in groups(file)}
            for name, members in wanted.items():
                with xr.open_dataset(path, group=name) as dataset:
                    dataset.load()
                    self.assertEqual(set(dataset.variables), members, name)
        with xr.open_dataset(SAMPLE, group="transient") as run:
            history = run.probe_head.sel(probe_name="Süd-Schacht")
            self.assertEqual(history.dims, ("time",))
            self.assertEqual(history.dtype, np.float64)
            self.assertEqual(float(run.time[0]), 0.0)  # "s" stays a number
            self.assertEqual(run.station_pipe.dtype, np.int32)
            self.assertEqual(set(run.pipe_name.values[run.station_pipe.values]), {"upper main", "lower main"})
            self.assertTrue(bool((run.piezometric_head_max >= run.piezometric_head_min).all()))

    def test_netcdf_reads_the_same_numbers(self):
        with netCDF4.Dataset(SAMPLE) as net, h5py.File(SAMPLE) as file:
            for name, dataset in datasets(file).items():
                variable = net[name]
                variable.set_auto_mask(False)
                self.assertEqual(variable.shape, dataset.shape, name)
                if not is_text(dataset):
                    np.testing.assert_array_equal(variable[...], dataset[...], name)

    def test_ncdump_prints_all_of_it(self):
        for path in (SAMPLE, FLOW, EMPTY, LARGE):
            header = subprocess.run(["ncdump", "-h", path], check=True, capture_output=True, text=True).stdout
            self.assertIn('schema = "headband-results"', header)
        whole = subprocess.run(["ncdump", SAMPLE], check=True, capture_output=True, text=True)
        self.assertEqual(whole.stderr, "")
        self.assertIn("Süd-Schacht", whole.stdout)

    def test_large_data_lie_in_checked_chunks(self):
        with h5py.File(LARGE) as file:
            values = file["/bands/input_value"]
            self.assertIsNotNone(values.chunks)
            self.assertTrue(values.fletcher32)
            self.assertIsNone(values.compression)
            np.testing.assert_array_equal(values[...].ravel(), 0.5 * np.arange(values.size))
            for name in ("input_value", "output_value"):
                self.assertEqual(file["/bands/" + name].attrs["stride"], 20)

    def test_only_provenance_differs_between_equal_runs(self):
        with h5py.File(SAMPLE) as one, h5py.File(ELSEWHERE) as other:
            self.assertEqual(list(datasets(one)), list(datasets(other)))
            differing = set()
            for name, dataset in datasets(one).items():
                twin = datasets(other)[name]
                for attribute in set(dataset.attrs) - SCALE_ATTRIBUTES:
                    self.assertEqual(str(dataset.attrs[attribute]), str(twin.attrs[attribute]), name)
                same = (dataset[...].tolist() == twin[...].tolist() if is_text(dataset)
                        else dataset[...].tobytes() == twin[...].tobytes())
                if not same:
                    differing.add(name)
        self.assertEqual(differing, {"/provenance/" + part
                                     for part in ("threads", "ranks", "command", "started", "wall_time")})

    def test_a_second_later_gives_the_same_bytes(self):
        with tempfile.TemporaryDirectory() as later:
            time.sleep(1.1)  # times of writing are kept in seconds, were they kept
            subprocess.run([PROGRAM, later], check=True)
            self.assertEqual((Path(later) / "sample.h5").read_bytes(), SAMPLE.read_bytes())


class Page(unittest.TestCase):
    """docs/result-file.md, group by group: | `name` | type | dimensions | units | meaning |"""

    @classmethod
    def setUpClass(cls):
        cls.text = PAGE.read_text(encoding="utf-8")
        cls.rows = {}
        group = ""
        for line in cls.text.splitlines():
            heading = re.match(r"#+ `(/[^`]*)`", line)
            if heading:
                group = heading[1]
            row = re.match(r"\| `([^`]+)` \| ([^|]*) \| ([^|]*) \| ([^|]*) \| ([^|]*) \|$", line)
            if row and group != "/":
                cls.rows[f"{group}/{row[1]}"] = [cell.strip() for cell in row.groups()[1:]]

    def test_page_and_file_hold_the_same_datasets(self):
        with h5py.File(SAMPLE) as file:
            self.assertEqual(set(self.rows), set(datasets(file)))

    def test_types_dimensions_and_units_are_as_written(self):
        with h5py.File(SAMPLE) as file:
            for name, dataset in datasets(file).items():
                documented_type, documented_dimensions, documented_units, meaning = self.rows[name]
                self.assertEqual(documented_type, kind(dataset), name)
                self.assertEqual(documented_dimensions, ", ".join(dimensions(dataset)), name)
                self.assertEqual(documented_units, "" if is_text(dataset) else text(dataset.attrs["units"]), name)
                self.assertTrue(meaning, name)

    def test_every_attribute_is_documented(self):
        listed = set(re.findall(r"^- `(\w+)`", self.text, re.MULTILINE))
        with h5py.File(SAMPLE) as file:
            seen = set(file.attrs)
            for dataset in datasets(file).values():
                seen |= set(dataset.attrs)
        self.assertEqual(listed, seen)

    def test_codes_are_listed(self):
        with h5py.File(SAMPLE) as file:
            for name, dataset in datasets(file).items():
                if "flag_meanings" not in dataset.attrs:
                    continue
                words = text(dataset.attrs["flag_meanings"]).split()
                listed = ", ".join(f"{code} {word}" for code, word in zip(dataset.attrs["flag_values"], words))
                self.assertTrue(listed in " ".join(self.text.split()), f"{name}: {listed}")

    def test_the_version_is_the_one_written(self):
        with h5py.File(SAMPLE) as file:
            self.assertTrue(f"Format version {text(file.attrs['schema_version'])}." in self.text)


if __name__ == "__main__":
    unittest.main(argv=sys.argv[:1], verbosity=1)
