"""Tables in HDF5: one group an interaction, separation as the dimension scale of the other columns."""

from __future__ import annotations

import io
import json
from pathlib import Path
from typing import Any

import numpy as np

from ..problems import Problem, UnusableInput
from ..table import Rows, Table
from ..table.model import COLUMNS
from ..units import UnitSystem, unit_system
from .atomic import whole_file
from .provenance import provenance, table_from

ROW_RULES = ("spacing", "interpolation", "ends")


def write(table: Table, path: Path) -> None:
    """Write a table to an HDF5 file; the same table gives the same bytes."""
    import h5py

    # Made in memory: the HDF5 library does not survive a full disk.
    image = io.BytesIO()
    with h5py.File(image, "w", libver=("earliest", "v110")) as file:
        for key, value in provenance(table).items():
            if key != "report":
                file.attrs[key] = value if isinstance(value, str) else json.dumps(value, ensure_ascii=False)
        file["report"] = json.dumps(table.report, indent=1, ensure_ascii=False)
        interactions = file.create_group("interactions", track_order=True)
        for rows in table.interactions:
            _write_rows(interactions.create_group(rows.name), rows, table.units)
    with whole_file(path) as temporary:
        temporary.write_bytes(image.getbuffer())


def copy_group(source: Any, target: Any) -> None:
    """Copy a table from one group of an open HDF5 file to an empty group of another."""
    for key, value in source.attrs.items():
        target.attrs[key] = value
    for name in source:
        source.copy(name, target)
    # References do not outlive a copy: the dimension scales are attached anew.
    for columns in target["interactions"].values():
        scale = columns["separation"]
        del scale.attrs["REFERENCE_LIST"]
        for name, column in columns.items():
            if name != "separation":
                del column.attrs["DIMENSION_LIST"]
                column.dims[0].attach_scale(scale)


def _write_rows(group: Any, rows: Rows, units: UnitSystem) -> None:
    names = {"separation": units.length, "energy": units.energy, "force": units.force, "curvature": units.stiffness}
    for name, column in rows.columns().items():
        dataset = group.create_dataset(name, data=np.ascontiguousarray(column), track_times=False)
        dataset.attrs["units"] = names[name].text
    group["separation"].make_scale("separation")
    for name in rows.columns():
        if name != "separation":
            group[name].dims[0].attach_scale(group["separation"])
            group[name].dims[0].label = "separation"
    for key in ROW_RULES:
        if getattr(rows, key):
            group.attrs[key] = getattr(rows, key)
    if rows.derived:
        group.attrs["derived"] = ",".join(rows.derived)
    for key, value in rows.certificate.items():
        group.attrs[key] = value


def read(path: Path) -> Table:
    """Read a table from an HDF5 file.

    Raises
    ------
    UnusableInput
        If it is no HDF5 file, or not one of ours.
    """
    import h5py

    try:
        with h5py.File(path, "r") as file:
            return read_group(file, path)
    except (OSError, KeyError, ValueError) as error:
        if isinstance(error, UnusableInput):
            raise
        raise _refuse(path, f"It can't be read: {str(error)[:120]}.") from None


def read_group(group: Any, path: Path) -> Table:
    """Read a table from a group of an open HDF5 file; the path is for messages."""
    if "interactions" not in group or not len(group["interactions"]):
        raise _refuse(path, "It has no group /interactions.")
    units = _units(group["interactions"], path)
    rows = tuple(_read_rows(name, columns) for name, columns in group["interactions"].items())
    known = {key: _text(value) for key, value in group.attrs.items()}
    known["report"] = json.loads(_text(group["report"][()])) if "report" in group else {}
    return table_from(known, rows, units)


def _refuse(path: Path, says: str) -> UnusableInput:
    return UnusableInput([Problem("", f"This is no HDF5 table of slopewell. {says}", "Check the file.")], str(path))


def _text(value: Any) -> str:
    return value.decode() if isinstance(value, bytes) else str(value)


def _units(groups: Any, path: Path) -> UnitSystem:
    first = next(iter(groups.values()))
    length = _text(first["separation"].attrs.get("units", ""))
    for name, power in (("energy", 0), ("force", 1)):
        if name in first:
            text = _text(first[name].attrs.get("units", ""))
            return unit_system(text if power == 0 else text.removesuffix(f"/{length}"), length)
    raise _refuse(path, "An interaction has neither energy nor force.")


def _read_rows(name: str, group: Any) -> Rows:
    columns = {key: group[key][()].astype(np.float64) for key in COLUMNS if key in group}
    rules = {key: _text(group.attrs[key]) for key in ROW_RULES if key in group.attrs}
    others = {key: _plain(value) for key, value in group.attrs.items() if key not in (*ROW_RULES, "derived")}
    derived = tuple(filter(None, _text(group.attrs.get("derived", "")).split(",")))
    return Rows(
        name=name,
        separation=columns["separation"],
        energy=columns.get("energy"),
        force=columns.get("force"),
        curvature=columns.get("curvature"),
        certificate=others,
        derived=derived,
        **rules,
    )


def _plain(value: Any) -> Any:
    return value.item() if isinstance(value, np.generic) else value
