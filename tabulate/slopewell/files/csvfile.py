"""Tables in CSV (RFC 4180), one interaction a file, with a sidecar of metadata.

The sidecar follows the W3C recommendation "Metadata Vocabulary for Tabular Data" (17 December 2015).
"""

from __future__ import annotations

import io
import json
from pathlib import Path
from typing import Any

import numpy as np

from ..problems import Problem, UnusableInput
from ..table import Rows, Table
from ..units import UnitSystem, unit_system
from .atomic import whole_file
from .provenance import provenance, table_from

RULES = ("spacing", "interpolation", "ends")
NAMESPACE = "urn:slopewell:"
"""Prefix of our own annotations, which the recommendation wants to be URLs or prefixed names."""
MEANINGS = {
    "separation": "Separation of the two particles",
    "energy": "Potential energy of the pair",
    "force": "Force, -dU/dr: negative pulls together, positive pushes apart",
    "curvature": "Second derivative of the energy, d2U/dr2",
}


def write(table: Table, path: Path) -> None:
    """Write the table's one interaction to a CSV file and its sidecar."""
    (rows,) = table.interactions
    columns = rows.columns()
    lines = [",".join(columns)]
    lines += map(",".join, zip(*(map(repr, column.tolist()) for column in columns.values()), strict=True))
    metadata = json.dumps(_metadata(table, rows, path), indent=1, ensure_ascii=False) + "\n"
    # Both are written before either takes its place: one without the other would be worth little.
    with whole_file(sidecar(path)) as beside, whole_file(path) as temporary:
        beside.write_text(metadata, encoding="utf-8", newline="\n")
        temporary.write_text("\r\n".join(lines) + "\r\n", encoding="utf-8", newline="")


def sidecar(path: Path) -> Path:
    """Return the name of the metadata file of a CSV file."""
    return path.with_name(f"{path.name}-metadata.json")


def _metadata(table: Table, rows: Rows, path: Path) -> dict[str, Any]:
    units = {
        "separation": table.units.length,
        "energy": table.units.energy,
        "force": table.units.force,
        "curvature": table.units.stiffness,
    }
    stored = provenance(table) | {
        "interaction": rows.name,
        "certificate": rows.certificate,
        "derived": list(rows.derived),
    }
    stored |= {key: getattr(rows, key) for key in RULES}
    return {
        "@context": ["http://www.w3.org/ns/csvw", {"@language": "en"}],
        "url": path.name,
        "dc:title": table.title,
        "dc:source": table.source,
        "dialect": {"header": True, "delimiter": ",", "lineTerminators": ["\r\n"]},
        "tableSchema": {
            "columns": [
                {
                    "name": name,
                    "titles": name,
                    "datatype": "double",
                    "required": True,
                    "dc:description": MEANINGS[name],
                    f"{NAMESPACE}unit": units[name].text,
                }
                for name in rows.columns()
            ]
        },
        **{f"{NAMESPACE}{key}": value for key, value in stored.items()},
    }


def read(path: Path) -> Table:
    """Read a CSV file by its sidecar.

    Raises
    ------
    UnusableInput
        If either file can't be read, or the columns are not the ones described.
    """
    try:
        metadata = json.loads(sidecar(path).read_text(encoding="utf-8"))
        text = path.read_text(encoding="utf-8")
        described = {c["name"]: c[f"{NAMESPACE}unit"] for c in metadata["tableSchema"]["columns"]}
    except FileNotFoundError:
        says = f"The metadata file {sidecar(path).name} is missing beside it."
        raise UnusableInput([Problem("", says, "Name columns and units instead.")], str(path)) from None
    except (OSError, ValueError, KeyError, TypeError) as error:
        raise UnusableInput(
            [Problem("", f"The file can't be read: {error}.", "Check both files.")], str(path)
        ) from None
    numbers = _numbers(text, list(described), path)
    stored = {key.removeprefix(NAMESPACE): value for key, value in metadata.items() if key.startswith(NAMESPACE)}
    rows = Rows(
        name=str(stored.get("interaction", path.stem)),
        separation=numbers["separation"],
        energy=numbers.get("energy"),
        force=numbers.get("force"),
        curvature=numbers.get("curvature"),
        certificate=stored.get("certificate", {}),
        derived=tuple(stored.get("derived", ())),
        **{key: str(stored.get(key, "")) for key in RULES},
    )
    return table_from(stored, (rows,), _units(described))


def _units(described: dict[str, str]) -> UnitSystem:
    length = described["separation"]
    energy = described.get("energy") or described["force"].removesuffix(f"/{length}")
    return unit_system(energy, length)


def _numbers(text: str, names: list[str], path: Path) -> dict[str, np.ndarray[Any, np.dtype[np.float64]]]:
    head, _, body = text.partition("\n")
    if head.strip().split(",") != names or "separation" not in names:
        says = f'The header is "{head.strip()[:60]}", its metadata say "{",".join(names)}".'
        raise UnusableInput([Problem("line 1", says, "Restore the header.")], str(path))
    try:
        numbers = np.loadtxt(io.StringIO(body), delimiter=",", ndmin=2, comments=None)
    except ValueError as error:
        raise UnusableInput([Problem("", f"A row can't be read: {error}.", "Mend that line.")], str(path)) from None
    return {name: np.ascontiguousarray(numbers[:, index]) for index, name in enumerate(names)}
