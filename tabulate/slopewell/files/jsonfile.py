"""Tables in JSON, by ``schemas/table.schema.json``; numbers are the shortest that read back the same."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import numpy as np

from ..problems import Problem, UnusableInput
from ..schemas import schema
from ..table import Rows, Table
from ..units import unit_system
from .atomic import write_text
from .provenance import provenance, table_from

RULES = ("spacing", "interpolation", "ends")


def write(table: Table, path: Path) -> None:
    """Write a table to a JSON file; the same table gives the same bytes.

    Raises
    ------
    UnusableInput
        If a number is not finite, or the file can't be written.
    """
    head = provenance(table)
    head["units"] = {"energy": table.units.energy.text, "length": table.units.length.text}
    head["interactions"] = {rows.name: _record(rows) for rows in table.interactions}
    try:
        text = json.dumps(head, ensure_ascii=False, allow_nan=False)
    except ValueError:
        says = "The table holds numbers that are not finite, which JSON can't."
        raise UnusableInput([Problem("", says, "Mend the rows, or write HDF5 or CSV.")], str(path)) from None
    write_text(path, f"{text}\n")


def _record(rows: Rows) -> dict[str, Any]:
    record: dict[str, Any] = {name: column.tolist() for name, column in rows.columns().items()}
    record |= {key: getattr(rows, key) for key in RULES if getattr(rows, key)}
    if rows.derived:
        record["derived"] = list(rows.derived)
    if rows.certificate:
        record["certificate"] = rows.certificate
    return record


def read(path: Path) -> Table:
    """Read a table from a JSON file.

    Raises
    ------
    UnusableInput
        If it is no JSON, or does not fit the schema of tables.
    """
    try:
        data = json.loads(path.read_text(encoding="utf-8"))
    except OSError as error:
        raise _refuse(path, "", f"The file can't be read: {error.strerror}.") from None
    except ValueError as error:
        raise _refuse(path, "", f"This is not valid JSON: {error}.") from None
    _check(data, path)
    units = unit_system(data["units"]["energy"], data["units"]["length"])
    rows = tuple(_rows(name, record, path) for name, record in data["interactions"].items())
    return table_from(data, rows, units)


def _check(data: Any, path: Path) -> None:
    from jsonschema import Draft202012Validator

    # The numbers themselves are checked by NumPy below: a validator would visit them one by one.
    shallow = dict(data) if isinstance(data, dict) else data
    if isinstance(shallow, dict) and isinstance(shallow.get("interactions"), dict):
        shallow["interactions"] = {
            name: {k: [] if isinstance(v, list) and k != "derived" else v for k, v in record.items()}
            for name, record in shallow["interactions"].items()
            if isinstance(record, dict)
        }
    for error in Draft202012Validator(schema("table")).iter_errors(shallow):
        raise _refuse(path, ".".join(str(part) for part in error.absolute_path), f"{error.message[:200]}.")


def _rows(name: str, record: dict[str, Any], path: Path) -> Rows:
    try:
        columns = {
            k: np.array(record[k], dtype=np.float64)
            for k in ("separation", "energy", "force", "curvature")
            if k in record
        }
    except (ValueError, TypeError):
        raise _refuse(path, f"interactions.{name}", "A column holds something that is no number.") from None
    if len({column.shape for column in columns.values()}) != 1 or columns["separation"].ndim != 1:
        raise _refuse(path, f"interactions.{name}", "The columns differ in length.")
    return Rows(
        name=name,
        separation=columns["separation"],
        energy=columns.get("energy"),
        force=columns.get("force"),
        curvature=columns.get("curvature"),
        certificate=record.get("certificate", {}),
        derived=tuple(record.get("derived", ())),
        **{key: record.get(key, "") for key in RULES},
    )


def _refuse(path: Path, at: str, says: str) -> UnusableInput:
    return UnusableInput([Problem(at, says, "See slopewell schema table.")], str(path))
