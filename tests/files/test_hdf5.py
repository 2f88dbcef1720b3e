"""HDF5 as other programs see it."""

from __future__ import annotations

import json
import shutil
import subprocess
from dataclasses import replace
from pathlib import Path

import h5py
import numpy as np
import pytest
from slopewell.files import hdf5
from tables import small_table


@pytest.fixture
def path(tmp_path: Path) -> Path:
    hdf5.write(small_table(report={"schema": "slopewell/report/1"}), tmp_path / "pair.h5")
    return tmp_path / "pair.h5"


def test_columns_stand_in_a_group_an_interaction_with_their_units(path: Path) -> None:
    with h5py.File(path) as file:
        group = file["interactions/A-B"]
        assert {name: (column.dtype, column.attrs["units"]) for name, column in group.items()} == {
            "separation": (np.float64, "angstrom"),
            "energy": (np.float64, "eV"),
            "force": (np.float64, "eV/angstrom"),
        }


def test_separation_is_the_scale_of_the_other_columns(path: Path) -> None:
    with h5py.File(path) as file:
        group = file["interactions/A-B"]
        for name in ("energy", "force"):
            assert group[name].dims[0][0] == group["separation"]


def test_provenance_stands_at_the_root(path: Path) -> None:
    with h5py.File(path) as file:
        wanted = {"schema", "title", "source", "document", "document_sha256", "constants", "writer"}
        assert wanted <= set(file.attrs)
        assert file.attrs["schema"] == "slopewell/table/1"
        assert json.loads(file["report"].asstr()[()]) == {"schema": "slopewell/report/1"}


def test_xarray_opens_it_with_labelled_coordinates_that_carry_units(path: Path) -> None:
    xarray = pytest.importorskip("xarray")
    with xarray.open_dataset(path, group="interactions/A-B", engine="h5netcdf") as dataset:
        assert dataset["energy"].dims == ("separation",)
        assert dataset["separation"].attrs["units"] == "angstrom"
        assert dataset["force"].attrs["units"] == "eV/angstrom"
        assert float(dataset["energy"].sel(separation=1.0)) == 0.0


@pytest.mark.skipif(shutil.which("h5dump") is None, reason="h5dump is not installed")
def test_h5dump_opens_it(path: Path) -> None:
    shown = subprocess.run(["h5dump", "-H", str(path)], capture_output=True, text=True, check=True).stdout
    assert 'GROUP "A-B"' in shown


def test_interactions_keep_their_order(tmp_path: Path) -> None:
    (rows,) = small_table().interactions
    names = ("W-W", "P-P", "A-A")
    table = small_table(interactions=tuple(replace(rows, name=name) for name in names))
    hdf5.write(table, tmp_path / "pair.h5")
    assert tuple(found.name for found in hdf5.read(tmp_path / "pair.h5").interactions) == names


def test_a_foreign_hdf5_file_is_refused(tmp_path: Path) -> None:
    with h5py.File(tmp_path / "other.h5", "w") as file:
        file["numbers"] = [1.0, 2.0]
    with pytest.raises(ValueError, match="It has no group /interactions"):
        hdf5.read(tmp_path / "other.h5")
