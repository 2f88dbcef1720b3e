"""The verb: sets in a folder or in one file, a summary, and going on after a stop."""

from __future__ import annotations

import csv
from pathlib import Path

import h5py
import numpy as np
import pytest
from documents import text
from ensembles import DOCUMENT, GRID, depths, files, lay_out
from slopewell.cli import main
from slopewell.ensemble import tabulate_sets
from slopewell.files import hdf5
from slopewell.problems import UnusableInput
from slopewell.tabulating import tabulate
from tables import assert_same

MIXED = "set,A-A.epsilon,A-A.sigma [nm]\ngood,0.01,0.34\nbad,x,0.34\nlow,0.0001,0.34\n"


def test_a_folder_holds_for_each_set_what_its_own_document_gives(tmp_path: Path) -> None:
    document, sets = lay_out(tmp_path, MIXED)
    made = tabulate_sets(document, sets, workers=1)
    assert made.verdicts == {"pass": 1, "unusable": 1, "fail": 1}
    assert sorted(files(made.tables)) == ["bad/set.json", "good/pair.h5", "good/set.json", "low/set.json"]
    own = tmp_path / "good.json"
    own.write_text(hdf5.read(made.tables / "good" / "pair.h5").document, encoding="utf-8")
    tabulate(own, into=tmp_path / "own")
    assert (tmp_path / "own" / "pair.h5").read_bytes() == (made.tables / "good" / "pair.h5").read_bytes()


def test_the_summary_has_a_line_a_set_in_the_order_of_the_file(tmp_path: Path) -> None:
    document, sets = lay_out(tmp_path, MIXED)
    made = tabulate_sets(document, sets, workers=1)
    with made.summary.open(encoding="utf-8", newline="") as file:
        good, bad, low = csv.DictReader(file)
    assert float(good["A-A.well_depth [eV]"]) == pytest.approx(0.01, rel=1e-12)
    assert bad["worst finding"] == 'line 3, column A-A.epsilon: "x" is not a number.'
    assert low["worst finding"].startswith("error first-row-energy (A-A): ")


def test_one_file_holds_all_sets_and_an_index(tmp_path: Path) -> None:
    document, sets = lay_out(tmp_path, MIXED)
    made = tabulate_sets(document, sets, into=tmp_path / "all.h5", workers=1)
    assert sorted(path.name for path in tmp_path.iterdir()) == [
        "all-summary.csv",
        "all.h5",
        "pair.toml",
        "sets.csv",
    ]
    folder = tabulate_sets(document, sets, into=tmp_path / "folder", workers=1)
    with h5py.File(made.tables) as file:
        assert list(file["sets"]) == ["good", "bad", "low"]
        assert list(file["index/verdict"].asstr()) == ["pass", "unusable", "fail"]
        assert file["index/A-A.well_depth"].attrs["units"] == "eV"
        assert np.isnan(file["index/A-A.well_depth"][1])
        stored = hdf5.read_group(file["sets/good"], made.tables)
        energy = file["sets/good/interactions/A-A/energy"]
        assert energy.dims[0][0].name == "/sets/good/interactions/A-A/separation"
    alone = hdf5.read(folder.tables / "good" / "pair.h5").interactions[0]
    np.testing.assert_array_equal(stored.interactions[0].energy, alone.energy)


@pytest.mark.parametrize("into", ["folder", "all.h5"])
def test_only_what_is_new_is_done(into: str, tmp_path: Path) -> None:
    document, sets = lay_out(tmp_path, depths(2))
    tabulate_sets(document, sets, into=tmp_path / into, workers=1)
    before = files(tmp_path)
    again = tabulate_sets(document, sets, into=tmp_path / into, workers=1)
    assert (again.before, files(tmp_path)) == (2, before)
    lay_out(tmp_path, depths(3))
    assert tabulate_sets(document, sets, into=tmp_path / into, workers=1).before == 2
    lay_out(tmp_path, depths(3), DOCUMENT.replace("rows = 21", "rows = 22"))
    assert tabulate_sets(document, sets, into=tmp_path / into, workers=1).before == 0


def test_a_file_that_grew_holds_what_the_file_of_all_sets_holds(tmp_path: Path) -> None:
    document, sets = lay_out(tmp_path, depths(2))
    tabulate_sets(document, sets, into=tmp_path / "grown.h5", workers=1)
    lay_out(tmp_path, depths(3))
    tabulate_sets(document, sets, into=tmp_path / "grown.h5", workers=1)
    tabulate_sets(document, sets, into=tmp_path / "once.h5", workers=1)
    with h5py.File(tmp_path / "grown.h5") as grown, h5py.File(tmp_path / "once.h5") as once:
        assert list(grown["sets"]) == list(once["sets"]) == ["draw-0", "draw-1", "draw-2"]
        for name in once["sets"]:
            assert grown["sets"][name].attrs["record"] == once["sets"][name].attrs["record"]
            one, other = (hdf5.read_group(file["sets"][name], tmp_path) for file in (grown, once))
            assert_same(one, other)


def test_what_would_overwrite_something_is_refused(tmp_path: Path) -> None:
    document, sets = lay_out(tmp_path, depths(1))
    sets = sets.rename(tmp_path / "summary.csv")
    with pytest.raises(UnusableInput, match="The summary would overwrite"):
        tabulate_sets(document, sets)
    outputs = '[[output]]\nfile = "set.json"\n'
    document, sets = lay_out(tmp_path, depths(1), text(grid=GRID, outputs=outputs))
    with pytest.raises(UnusableInput, match=r'"set.json" is taken'):
        tabulate_sets(document, sets)


@pytest.mark.parametrize(
    ("sets", "options", "status"),
    [
        (depths(1), [], 0),
        (depths(1), ["--workers", "0"], 2),
        ("A-A.epsilon\n0.0001\n", [], 1),
        ("A-A.epsilon\n0.0001\n", ["--accept", "first-row-energy"], 0),
        ("A-A.epsilon\n0.0001\n", ["--accept", "first-row-energy", "--strict"], 1),
        ("A-A.epsilon\nx\n0.01\n", [], 2),
    ],
)
def test_the_exit_status_is_that_of_the_worst_set(
    sets: str, options: list[str], status: int, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    document, path = lay_out(tmp_path, sets)
    arguments = ["tabulate", str(document), "--parameters", str(path), "--into", str(tmp_path / "new")]
    assert main([*arguments, "--workers", "1", *options]) == status
    written = (tmp_path / "new" / "summary.csv").exists()
    assert written == ("wrote" in capsys.readouterr().out) == ("0" not in options)
