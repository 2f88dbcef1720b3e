"""The verb ``compare``: how far two tables, or a table and a document, lie apart, and what explains it."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .checks import TableFacts
from .conversion import completed, in_units
from .document import read_document
from .explaining import Explained, explain, explain_force, length_ratio
from .problems import Problem, UnusableInput
from .table import Rows, Table, tabulate_rows
from .table.interpolation import interpolant
from .table.rows import evaluate
from .tables import Reading, is_table, load
from .units import UnitSystem

Array = NDArray[np.float64]
Reader = Callable[[Array], tuple[Array, Array]]
"""From separations to energies and forces."""

TOLERANCE = 1e-6
"""Largest difference of energy over the energy scale that counts as none."""
LANDMARKS = ("equilibrium_separation", "well_depth", "stiffness", "zero_crossing")
ULPS = 8 * float(np.finfo(np.float64).eps)
ROWS = 1001


@dataclass(frozen=True, slots=True)
class Difference:
    """How far one interaction lies apart in two files, in the first file's units.

    Attributes
    ----------
    interaction : str
    energy, force : (float, float) or None
        Largest difference and where.
    relative : float
        Largest difference of energy over the energy scale.
    force_relative : float
        Largest difference of force over the force that leads from row to row over the energy scale, or over the
        force itself where it is larger; 0 where a file states no force.
    explained_by : Explained or None
    landmarks : mapping
        By name, the value in the first and in the second file.
    start, end : float
        The range that both cover.
    """

    interaction: str
    energy: tuple[float, float]
    force: tuple[float, float] | None
    relative: float
    force_relative: float
    explained_by: Explained | None
    landmarks: dict[str, tuple[float | None, float | None]]
    start: float
    end: float

    def record(self) -> dict[str, Any]:
        """Return the difference as JSON data."""
        found = self.explained_by
        return {
            "interaction": self.interaction,
            "from": self.start,
            "to": self.end,
            "energy": {"largest": self.energy[0], "at": self.energy[1]},
            "force": None if self.force is None else {"largest": self.force[0], "at": self.force[1]},
            "relative": self.relative,
            "force_relative": self.force_relative,
            "explained_by": None if found is None else {"name": found.name, "factor": found.factor, "says": found.says},
            "landmarks": {name: {"first": one, "second": other} for name, (one, other) in self.landmarks.items()},
        }


@dataclass(frozen=True, slots=True)
class Comparison:
    """What ``compare`` found: every interaction that both files have, and the names that only one has."""

    differences: tuple[Difference, ...]
    units: UnitSystem
    tolerance: float = TOLERANCE
    only_first: tuple[str, ...] = ()
    only_second: tuple[str, ...] = ()

    @property
    def within(self) -> bool:
        """Whether every relative difference of energy and force keeps the tolerance."""
        return all(max(one.relative, one.force_relative) <= self.tolerance for one in self.differences)

    def record(self) -> dict[str, Any]:
        """Return the comparison as JSON data."""
        return {
            "interactions": [difference.record() for difference in self.differences],
            "units": {"energy": self.units.energy.text, "length": self.units.length.text},
            "tolerance": self.tolerance,
            "only_first": list(self.only_first),
            "only_second": list(self.only_second),
            "within": self.within,
        }


@dataclass(frozen=True, slots=True)
class _Side:
    """One file: its rows in the first file's units, and how each interaction is read between them."""

    rows: dict[str, Rows]
    units: UnitSystem
    readers: dict[str, Reader] = field(default_factory=dict)

    def reader(self, name: str) -> Reader:
        if name in self.readers:
            return self.readers[name]
        between = interpolant(self.rows[name])
        return lambda r: (between.energy(r), between.force(r))


def compare(
    first: str | Path | Table,
    second: str | Path | Table,
    *,
    tolerance: float = TOLERANCE,
    reading: Reading | None = None,
) -> Comparison:
    """Compare two tables, or a table and a document.

    Parameters
    ----------
    first, second : path or Table
    tolerance : float
        Largest difference of energy over the energy scale that counts as none.
    reading : Reading, optional
        How tables that slopewell did not write are to be read.

    Returns
    -------
    Comparison
        In the units of the first.

    Raises
    ------
    UnusableInput
        If a file can't be used, or they share no interaction or no range.
    """
    chosen = reading or Reading()
    one = _side(first, chosen, None)
    other = _side(second, chosen, one.units)
    pairs = _pairs(list(one.rows), list(other.rows))
    if not pairs:
        says = f"They share no interaction: {', '.join(one.rows)} and {', '.join(other.rows)}."
        raise UnusableInput([Problem("", says, "Compare files that hold the same pair.")])
    found = tuple(_difference(one, other, mine, theirs, tolerance) for mine, theirs in pairs)
    matched_first, matched_second = {mine for mine, _ in pairs}, {theirs for _, theirs in pairs}
    return Comparison(
        differences=found,
        units=one.units,
        tolerance=tolerance,
        only_first=tuple(name for name in one.rows if name not in matched_first),
        only_second=tuple(name for name in other.rows if name not in matched_second),
    )


def _pairs(first: Sequence[str], second: Sequence[str]) -> list[tuple[str, str]]:
    if len(first) == len(second) == 1:
        return [(first[0], second[0])]
    both = [(name, name) for name in first if name in second]
    turned = [(name, "-".join(reversed(name.split("-")))) for name in first if name not in second]
    return both + [(name, other) for name, other in turned if other in second]


def _side(source: str | Path | Table, reading: Reading, units: UnitSystem | None) -> _Side:
    if isinstance(source, Table) or is_table(source, reading):
        table = source if isinstance(source, Table) else load(source, reading).table
        _ascending(table, source)
        table = completed(table)
        if units is not None and units != table.units:
            table = in_units(table, units)
        return _Side({rows.name: rows for rows in table.interactions}, table.units)
    return _document_side(source, units)


def _ascending(table: Table, source: object) -> None:
    for rows in table.interactions:
        sound = all(np.isfinite(column).all() for column in rows.columns().values())
        if rows.separation.size < 4 or not sound or not np.all(np.diff(rows.separation) > 0):
            says = f"The rows of {rows.name} are not finite numbers at ascending separations."
            file = "" if isinstance(source, Table) else str(source)
            raise UnusableInput([Problem("", says, "slopewell check says which.")], file)


def _document_side(source: str | Path, units: UnitSystem | None) -> _Side:
    document = read_document(source)
    chosen = units or document.units
    rows: dict[str, Rows] = {}
    readers: dict[str, Reader] = {}
    for interaction in document.interactions:
        potential = interaction.potential
        rows[potential.name] = tabulate_rows(potential, interaction.grid, interaction.grid.rows or ROWS, chosen)

        def exact(r: Array, treated: Any = potential.treated) -> tuple[Array, Array]:
            energy, slope = evaluate(treated, r, 1, chosen)
            return energy, 0.0 - slope

        readers[potential.name] = exact
    return _Side(rows, chosen, readers)


def _difference(one: _Side, other: _Side, mine: str, theirs: str, tolerance: float) -> Difference:
    first, second = one.rows[mine], other.rows[theirs]
    # A document is exact everywhere, so it is read at the rows of the table.
    base = second if mine in one.readers and theirs not in other.readers else first
    r = base.separation
    slack = ULPS * r
    low = max(first.separation[0], second.separation[0])
    high = min(first.separation[-1], second.separation[-1])
    r = np.clip(r[(r >= low - slack) & (r <= high + slack)], low, high)
    if r.size < 2:
        ratio = length_ratio(first, second, one.units)
        if ratio is not None:
            return _apart(one, mine, theirs, other, ratio)
        says = f"{mine} and {theirs} share no range of separations."
        raise UnusableInput([Problem("", says, "Are the units named right?")])
    energies, forces = one.reader(mine)(r)
    others, other_forces = _read(other, theirs, r)
    scale = TableFacts(first, one.units).energy_scale
    energy = _largest(r, energies, others)
    force = _largest(r, forces, other_forces)
    relative = energy[0] / scale
    found, force_relative, force_scale = None, 0.0, scale / float(np.median(np.diff(r)))
    if "force" not in (*first.derived, *second.derived):
        force_relative = _largest(r, *(x / np.maximum(np.abs(forces), force_scale) for x in (forces, other_forces)))[0]
    if relative <= tolerance < force_relative:
        found = explain_force(forces, other_forces, one.units, force_scale * tolerance)
    if relative > tolerance:
        found = explain(r, energies, others, first, second, other.reader(theirs), one.units, scale * tolerance)
    return Difference(
        interaction=mine,
        energy=energy,
        force=force,
        relative=relative,
        force_relative=force_relative,
        explained_by=found,
        landmarks=_landmarks(replace(first, name=mine), second, one.units),
        start=float(r[0]),
        end=float(r[-1]),
    )


def _apart(one: _Side, mine: str, theirs: str, other: _Side, found: Explained) -> Difference:
    """Return the difference of two curves of which one has nothing where the other is."""
    first = one.rows[mine]
    r = first.separation
    nothing = np.zeros(r.size)
    energy = _largest(r, one.reader(mine)(r)[0], nothing)
    return Difference(
        interaction=mine,
        energy=energy,
        force=_largest(r, one.reader(mine)(r)[1], nothing),
        relative=energy[0] / TableFacts(first, one.units).energy_scale,
        force_relative=0.0,
        explained_by=found,
        landmarks=_landmarks(first, other.rows[theirs], one.units),
        start=float(r[0]),
        end=float(r[-1]),
    )


def _read(side: _Side, name: str, r: Array) -> tuple[Array, Array]:
    """Read at separations; where they are the rows themselves, to rounding, take the rows as they are."""
    rows = side.rows[name]
    energy, force = side.reader(name)(r)
    if name in side.readers or rows.energy is None or rows.force is None:
        return energy, force
    near = np.clip(np.searchsorted(rows.separation, r), 0, rows.separation.size - 1)
    near -= (near > 0) & (np.abs(rows.separation[near - 1] - r) < np.abs(rows.separation[near] - r))
    same = np.abs(rows.separation[near] - r) <= ULPS * r
    return np.where(same, rows.energy[near], energy), np.where(same, rows.force[near], force)


def _largest(r: Array, first: Array, second: Array) -> tuple[float, float]:
    """Return the largest difference beyond rounding, and where."""
    gap = np.abs(first - second)
    gap = np.where(gap <= ULPS * np.maximum(np.abs(first), np.abs(second)), 0.0, gap)
    place = int(np.argmax(gap))
    return float(gap[place]), float(r[place])


def _landmarks(first: Rows, second: Rows, units: UnitSystem) -> dict[str, tuple[float | None, float | None]]:
    one, other = TableFacts(first, units).landmarks, TableFacts(second, units).landmarks
    return {name: (getattr(one, name), getattr(other, name)) for name in LANDMARKS}
