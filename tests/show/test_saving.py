"""Files appear whole or not at all."""

from __future__ import annotations

import csv
import json
import math
from dataclasses import replace

import numpy as np
import pytest

from eoscore.answer.record import Interval
from eoscore.show.dataset import dataset
from eoscore.show.saving import appearing, save, unwritable

from .records import answer, finding, report

GRID = answer(
    {"T_c": finding([[1e-7, math.nan], [0.1 + 0.2, 4.0]], sigma=[[1e-9, math.nan], [0.1, 0.2]], why="open")},
    over={"P": [1, 2], "N": [10, 20]},
    units={"P": "W", "N": "1"},
)


def rows(path):
    lines = path.read_text().splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def test_csv_is_long_with_the_first_name_slowest(tmp_path):
    (path,) = save(report(GRID), tmp_path / "scan.csv")
    table = rows(path)
    assert list(table[0]) == ["P (W)", "N (1)", "T_c (K)", "sigma T_c (K)"]
    assert [(row["P (W)"], row["N (1)"]) for row in table] == [
        ("1.0", "10.0"),
        ("1.0", "20.0"),
        ("2.0", "10.0"),
        ("2.0", "20.0"),
    ]
    assert [row["T_c (K)"] for row in table] == ["1e-07", "", "0.30000000000000004", "4.0"]


def test_csv_says_where_it_comes_from(tmp_path):
    (path,) = save(report(GRID), tmp_path / "scan.csv")
    head = [line for line in path.read_text().splitlines() if line.startswith("# ")]
    assert head[0] == "# file: pancake.tarn, line 7"
    assert any("find T_c" in line for line in head)
    assert any("open" in line for line in head)


def test_csv_and_netcdf_carry_what_was_sampled_and_set(tmp_path):
    interval = Interval(*(np.array([x]) for x in (0.9e-7, 1.2e-7, 1.0)), samples=100, coverage=0.6827)
    sampled = replace(finding([1e-7], sigma=[1e-8], error=1e-13), interval=interval)
    told = answer({"T_c": sampled}, over={"P": [1]}, settings=("w = 3 um",))
    (path,) = save(report(told), tmp_path / "scan.csv")
    wanted = ("T_c (K)", "sigma T_c (K)", "low T_c (K)", "high T_c (K)", "answered T_c (1)")
    assert [rows(path)[0][name] for name in wanted] == ["1e-07", "1e-08", "9e-08", "1.2e-07", "1.0"]
    text = path.read_text()
    assert "# T_c lies from low to high in 68.27% of 100 samples\n" in text
    assert "# T_c has a relative numerical error of 1.0e-06 at most\n" in text
    assert "# set from outside: w = 3 um\n" in text
    data = dataset(told)
    assert (data["T_c_low"].item(), data["T_c_high"].item()) == (0.9e-7, 1.2e-7)
    assert (data["T_c_high"].attrs["samples"], data.attrs["set_1"]) == (100, "w = 3 um")


def test_several_grids_give_several_files(tmp_path):
    paths = save(report(GRID, answer({"U": finding([1.0])}, over={"P": [1]}, line=9)), tmp_path / "s.csv")
    assert [path.name for path in paths] == ["s-line7.csv", "s-line9.csv"]
    assert all(path.is_file() for path in paths)


def test_without_a_grid_the_table_has_one_row(tmp_path):
    (path,) = save(report(answer({"freq": finding([1.0, 2.0], "Hz")})), tmp_path / "one.csv")
    assert rows(path) == [{"freq_1 (Hz)": "1.0", "freq_2 (Hz)": "2.0"}]


def test_json_is_the_whole_document(tmp_path):
    save(report(GRID), tmp_path / "all.json")
    assert json.loads((tmp_path / "all.json").read_text())["file"] == "pancake.tarn"


def test_netcdf_reads_back_with_names_and_units(tmp_path):
    xarray = pytest.importorskip("xarray")
    save(report(GRID), tmp_path / "scan.nc")
    with xarray.open_dataset(tmp_path / "scan.nc", engine="h5netcdf") as data:
        assert data["T_c"].dims == ("P", "N")
        assert (data["T_c"].attrs["units"], data["P"].attrs["units"]) == ("K", "W")
        np.testing.assert_array_equal(data["T_c"].values, GRID.found["T_c"].value)


def test_the_dataset_names_the_entries_of_lists():
    data = dataset(answer({"freq": finding([[1.0, 2.0]], "Hz")}, over={"P": [1]}))
    assert data["freq"].dims == ("P", "direction")


def test_a_failure_leaves_the_old_file_and_no_rest(tmp_path):
    target = tmp_path / "scan.csv"
    target.write_text("old")
    with pytest.raises(TypeError, match="must be str"), appearing(target) as path:
        path.write_text(7)
    assert target.read_text() == "old"
    assert list(tmp_path.iterdir()) == [target]


@pytest.mark.parametrize(
    ("name", "reason"),
    [
        ("a.txt", "the formats are"),
        ("a", "ends in nothing"),
        ("none/a.csv", "does not exist"),
        ("d.csv", "folder"),
    ],
)
def test_what_cannot_be_written_is_known_beforehand(tmp_path, name, reason):
    (tmp_path / "d.csv").mkdir()
    assert reason in unwritable(tmp_path / name)
    assert unwritable(tmp_path / "fine.csv") is None
