"""The verbs of tables: read one from any file, and check it."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .checks import TABLE_CHECKS, Finding, TableFacts, run_checks
from .checks.digits import digits
from .checks.row_landmarks import RowLandmarks
from .files import format_of, read_layout
from .files.columns import read_columns
from .files.csvfile import sidecar
from .files.quantities import rows_of
from .problems import Problem, UnusableInput
from .reports import Subject
from .table import Table
from .units import UnitSystem, unit_system

Array = NDArray[np.float64]

SNIFFED = 4096
HDF5_MARK = b"\x89HDF\r\n\x1a\n"
TABLE_SCHEMA = re.compile(rb'"schema"\s*:\s*"slopewell/table/')


@dataclass(frozen=True, slots=True)
class Reading:
    """How a table that slopewell did not write is to be read.

    Attributes
    ----------
    columns : tuple of str
        What each column holds, from left to right.
    units : str
        Energy and length, such as ``"eV,angstrom"``.
    layout : str
        Name of a layout file, instead of columns.
    block : int or None
        Which block of rows, from 1.
    purpose : str
        What the table is for, where it does not say so itself.
    """

    columns: tuple[str, ...] = ()
    units: str = ""
    layout: str = ""
    block: int | None = None
    purpose: str = ""

    @property
    def foreign(self) -> bool:
        """Whether it describes columns of a text."""
        return bool(self.columns or self.layout)


@dataclass(frozen=True, slots=True)
class Loaded:
    """A table as read, with the hash of its file and the rounding of columns whose digits do not show it."""

    table: Table
    sha256: str
    stored: Mapping[str, Array] = field(default_factory=dict)


def read_table(
    path: str | Path,
    *,
    columns: Sequence[str] = (),
    units: str = "",
    layout: str | Path = "",
    block: int | None = None,
) -> Table:
    """Read a table from HDF5, CSV, JSON, or any text whose columns are described.

    Parameters
    ----------
    path : path
    columns : sequence of str
        What each column of a text holds: ``row``, ``separation``, ``separation-squared``, ``energy``,
        ``force``, ``slope``, ``force-over-separation``, ``curvature`` or ``skip``.
    units : str
        Units of energy and length of a text, such as ``"kJ/mol,nm"``.
    layout : path
        A layout file that describes the text instead.
    block : int, optional
        Which block of rows of a text, from 1.

    Returns
    -------
    Table
        Its rows hold arrays ``separation``, ``energy`` and ``force`` in the table's own units.

    Raises
    ------
    UnusableInput
        If the file can't be read so.
    """
    return load(path, Reading(tuple(columns), units, str(layout), block)).table


def load(path: str | Path, reading: Reading) -> Loaded:
    """Read a table and what is known about it.

    Raises
    ------
    UnusableInput
        If the file can't be read so.
    """
    file = Path(path)
    try:
        digest = hashlib.sha256(file.read_bytes()).hexdigest()
    except OSError as error:
        says = f"The file can't be read: {error.strerror or error}."
        raise UnusableInput([Problem("", says, "Check its name and permissions.")], str(path)) from None
    if not is_own(file, reading):
        table, stored = _foreign(file, reading)
        return Loaded(table, digest, stored)
    table = format_of(file).read(file)
    purpose = reading.purpose or table.purpose
    return Loaded(replace(table, purpose=purpose), digest)


def is_own(path: Path, reading: Reading) -> bool:
    """Whether a file is a table that slopewell wrote: HDF5, JSON, or CSV with its metadata beside it."""
    name = path.name.lower()
    if name.endswith(".csv"):
        return not reading.foreign and sidecar(path).exists()
    return name.endswith((".h5", ".hdf5", ".json"))


def is_table(path: str | Path, reading: Reading) -> bool:
    """Whether a file is a table rather than a potential document."""
    file = Path(path)
    name = file.name.lower()
    if name.endswith(".toml"):
        return False
    try:
        with file.open("rb") as opened:
            start = opened.read(SNIFFED)
    except OSError:
        return False
    if start.startswith(HDF5_MARK) or name.endswith((".h5", ".hdf5", ".csv")):
        return True
    if start.lstrip()[:1] == b"{":
        return bool(TABLE_SCHEMA.search(start))
    return reading.foreign or not re.search(rb"(?m)^\s*(?:\[|[A-Za-z][\w.-]*\s*=)", start)


def _foreign(path: Path, reading: Reading) -> tuple[Table, dict[str, Array]]:
    names, spacing, interpolation = reading.columns, "", ""
    units = parse_units(reading.units) if reading.units else None
    if reading.layout:
        described = read_layout(Path(reading.layout))
        names, spacing, interpolation = described.quantities, described.spacing, described.interpolation
        units = units or described.units
    if not names or units is None:
        missing = "columns" if not names else "units"
        says = f"Its {missing} are not named."
        remedy = "Add --columns separation,energy,force --units eV,angstrom (or what they are), or --layout FILE."
        raise UnusableInput([Problem(f"--{missing}", says, remedy)], str(path))
    columns = read_columns(path, names, reading.block)
    with np.errstate(all="ignore"):
        rows = rows_of(path.stem, columns, spacing, interpolation)
        stored = _rounding(columns, rows.separation)
    return Table((rows,), units, purpose=reading.purpose), stored


def parse_units(text: str) -> UnitSystem:
    """Return the units that a text such as "kJ/mol,nm" names."""
    energy, comma, length = text.partition(",")
    if not comma:
        raise UnusableInput([Problem("--units", f'"{text}" is not energy,length.', "Write it like eV,angstrom.")])
    return unit_system(energy.strip(), length.strip())


def _rounding(columns: Mapping[str, Array], separation: Array) -> dict[str, Array]:
    """Return the rounding of what was computed from a column, whose digits no longer show it."""
    found: dict[str, Array] = {}
    if "separation" not in columns:
        square = columns["separation-squared"]
        found["separation"] = digits(square).rounding(square) / np.maximum(2 * separation, 1e-300)
    if "force" not in columns and "slope" not in columns and "force-over-separation" in columns:
        quotient = columns["force-over-separation"]
        found["force"] = digits(quotient).rounding(quotient) * separation
    return found


def check_loaded(loaded: Loaded, file: str) -> Subject:
    """Run every check of a table over every interaction."""
    findings: list[Finding] = []
    landmarks: list[dict[str, Any]] = []
    ran: dict[str, None] = {}
    table = loaded.table
    for rows in table.interactions:
        facts = TableFacts(rows, table.units, table.purpose, loaded.stored)
        found, names = run_checks(TABLE_CHECKS, facts, rows.name)
        findings += found
        ran |= dict.fromkeys(names)
        sound = "last-row" in names
        landmarks.append(landmark_record(rows.name, table.units, facts.landmarks if sound else None))
    return Subject(
        file=file,
        sha256=loaded.sha256,
        kind="table",
        findings=tuple(findings),
        landmarks=tuple(landmarks),
        checked=tuple(ran),
        title=table.title,
    )


def landmark_record(name: str, units: UnitSystem, landmarks: RowLandmarks | None) -> dict[str, Any]:
    """Return landmarks of rows as JSON data; nothing but nulls where the rows are not sound enough."""
    pull = landmarks.largest_attraction if landmarks else None
    keys = ("equilibrium_separation", "well_depth", "stiffness", "zero_crossing")
    return {
        "interaction": name,
        "units": {"energy": units.energy.text, "length": units.length.text},
        **{key: getattr(landmarks, key) if landmarks else None for key in keys},
        "largest_attraction": None if pull is None else {"separation": pull[0], "force": pull[1]},
        "stationary_points": landmarks.stationary_points if landmarks else None,
        "proved": False,
    }
