"""The verb ``convert``: carry a table over to other units, rows, formats and layouts, and mend it."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace
from fractions import Fraction
from functools import partial
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from . import __version__
from .checks import ERROR, TABLE_CHECKS, TableFacts
from .checks.mistakes import MISTAKES, diagnose
from .checks.table_facts import integral
from .files import Layout, format_of, layout, read_layout
from .formula.pairs import converted
from .outputs import Target, compare_written
from .problems import Problem, UnusableInput, nearest
from .reports import Report
from .resampling import NewRows, resampled
from .table import Rows, Table
from .tables import Loaded, Reading, check_loaded, load, parse_units
from .units import UnitSystem, quantity, ratio
from .units.constants import CODATA

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Changes:
    """What to change in a table.

    Attributes
    ----------
    units : str
        New units of energy and length, such as ``"kJ/mol,nm"``; those of the table by default.
    layout : str
        Layout file of the new text.
    rows : int or None
        New number of rows.
    tolerance : str
        Largest error of energy that new rows may add: a number in the new units, or with its own.
    spacing : str
        Spacing of the new rows.
    complete : bool
        Add the column that is missing.
    mend : str
        Name of the mistake to undo.
    accept : tuple of str
        Checks whose errors do not stop the writing.
    """

    units: str = ""
    layout: str = ""
    rows: int | None = None
    tolerance: str = ""
    spacing: str = ""
    complete: bool = False
    mend: str = ""
    accept: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Converted:
    """What ``convert`` did.

    Attributes
    ----------
    report : Report
        What the checks say of the table before conversion (after mending).
    table : Table
        The new table.
    written : tuple of Path
        The file; none where an error stands.
    added : mapping
        By interaction, the largest errors of energy and force that new rows added, in the new units.
    """

    report: Report
    table: Table
    written: tuple[Path, ...] = ()
    added: dict[str, tuple[float, float]] = field(default_factory=dict)


def convert(
    source: str | Path | Table,
    new: str | Path | None = None,
    changes: Changes | None = None,
    *,
    reading: Reading | None = None,
) -> Converted:
    """Convert a table and write it.

    Parameters
    ----------
    source : path or Table
    new : path, optional
        The file to write; its ending names the format unless a layout is given. None: write nothing.
    changes : Changes, optional
    reading : Reading, optional
        How a table that slopewell did not write is to be read.

    Raises
    ------
    UnusableInput
        If the table can't be read, mended or written.
    """
    wanted = changes or Changes()
    chosen = reading or Reading()
    _known_accepted(wanted.accept)
    name = "" if isinstance(source, Table) else str(source)
    loaded = Loaded(source, "") if isinstance(source, Table) else _read(source, chosen)
    if wanted.mend:
        loaded = mended(loaded, wanted.mend)
    subject = check_loaded(loaded, name)
    errors = {finding.check for finding in subject.findings if finding.level == ERROR}
    accepted = tuple(name for name in wanted.accept if name in errors)
    subject = replace(subject, accepted=accepted)
    stored = Report((replace(subject, file=Path(name).name),))
    if errors - set(wanted.accept):
        return Converted(Report((subject,)), loaded.table)
    table, added = changed(loaded.table, wanted)
    if accepted:
        table = replace(
            table,
            history=(*table.history, f"written although these checks found errors: {', '.join(accepted)}"),
        )
    table = replace(
        table, writer=f"slopewell {__version__}", constants=table.constants or CODATA, report=stored.record()
    )
    if new is None:
        return Converted(Report((subject,)), table, (), added)
    write(table, Path(new), wanted.layout)
    return Converted(Report((subject,)), table, (Path(new),), added)


def _read(path: str | Path, reading: Reading) -> Loaded:
    """Read a table, and note in its history where it came from."""
    loaded = load(path, reading)
    source = f"read from {Path(path).name} (sha256 {loaded.sha256})"
    return replace(loaded, table=replace(loaded.table, history=(*loaded.table.history, source)))


def changed(table: Table, changes: Changes) -> tuple[Table, dict[str, tuple[float, float]]]:
    """Complete a table, convert its units, and give it new rows, as asked.

    Returns
    -------
    (Table, dict)
        The new table, and by interaction the largest errors of energy and force that new rows added.
    """
    if changes.complete:
        table = completed(table)
    described = read_layout(Path(changes.layout)) if changes.layout else None
    units = parse_units(changes.units) if changes.units else (described.units if described else None)
    if units is not None and units != table.units:
        table = in_units(table, units)
    if changes.rows is None and not changes.tolerance and not changes.spacing:
        return table, {}
    wanted = NewRows(changes.rows, _tolerance(changes.tolerance, table.units), changes.spacing)
    rows, added = [], {}
    for old in table.interactions:
        made, errors = resampled(old, wanted, table.units.length)
        rows.append(made)
        added[old.name] = errors
    counts = ", ".join(f"{made.separation.size} new rows of {made.name}" for made in rows)
    rule = rows[0].interpolation
    says = f"{counts} even in {rows[0].spacing}, read from the old ones by {rule}"
    return replace(table, interactions=tuple(rows), history=(*table.history, says)), added


def _tolerance(text: str, units: UnitSystem) -> float | None:
    if not text:
        return None
    try:
        return float(text)
    except ValueError:
        value = quantity(text)
        if value.dimension != units.energy.dimension:
            says = f'"{text}" is no energy.'
            raise UnusableInput([Problem("--tolerance", says, 'Write it like "1e-6 kJ/mol".')]) from None
        return float(value.value / units.energy.factor)


def in_units(table: Table, units: UnitSystem) -> Table:
    """Return a table in other units: each number multiplied once by the exact ratio of the units."""
    length, energy = ratio(table.units.length, units.length), ratio(table.units.energy, units.energy)
    factors = {
        "separation": length,
        "energy": energy,
        "force": energy / length,
        "curvature": energy / length**2,
    }
    rows = tuple(_scaled(old, factors) for old in table.interactions)
    says = (
        f"units {table.units.energy.text}, {table.units.length.text} to {units.energy.text}, "
        f"{units.length.text}: each "
        "number multiplied once"
    )
    return replace(table, interactions=rows, units=units, history=(*table.history, says))


def _scaled(rows: Rows, factors: dict[str, Fraction]) -> Rows:
    columns: dict[str, Any] = {
        name: column if factors[name] == 1 else converted(column, factors[name]).rounded()
        for name, column in rows.columns().items()
    }
    return replace(rows, **columns, certificate={})


def completed(table: Table) -> Table:
    """Return a table with energy and force, the missing one derived and marked so."""
    rows, says = [], []
    for old in table.interactions:
        if old.force is None and old.energy is not None:
            from scipy.interpolate import CubicSpline

            force = 0.0 - CubicSpline(old.separation, old.energy)(old.separation, 1)
            rows.append(replace(old, force=force, derived=(*old.derived, "force")))
            says.append(f"force of {old.name} derived: minus the slope of a spline through the energies")
        elif old.energy is None and old.force is not None:
            energy = integral(old.separation, old.force)
            rows.append(replace(old, energy=energy, derived=(*old.derived, "energy")))
            says.append(f"energy of {old.name} derived: the integral of the force, zero at the last row")
        else:
            rows.append(old)
    return replace(table, interactions=tuple(rows), history=(*table.history, *says))


def mended(loaded: Loaded, name: str) -> Loaded:
    """Return a table with a mistake undone in every interaction that shows it.

    Raises
    ------
    UnusableInput
        If no mistake has this name, or no interaction shows it.
    """
    known = {mistake.name: mistake for mistake in MISTAKES}
    if name not in known:
        raise UnusableInput([Problem("--mend", f'"{name}" can\'t be mended.', nearest(name, known))])
    rows, says, seen = [], [], set()
    for old in loaded.table.interactions:
        facts = TableFacts(old, loaded.table.units, loaded.table.purpose, loaded.stored)
        found = diagnose(facts.evidence) if facts.evidence is not None else []
        seen |= {diagnosis.mistake for diagnosis in found}
        chosen = next((diagnosis for diagnosis in found if diagnosis.mistake == name), None)
        if chosen is None or facts.evidence is None:
            rows.append(old)
            continue
        columns = known[name].mend(facts.evidence, chosen.explanation)
        derived = tuple(dict.fromkeys((*old.derived, *columns.derived)))
        new = replace(old, separation=columns.separation, energy=columns.energy, force=columns.force)
        rows.append(replace(new, curvature=None, derived=derived, certificate={}))
        says.append(f"mended {name} in {old.name}: {columns.says}")
    if not says:
        shown = f"The checks find {', '.join(sorted(seen))}." if seen else "The checks find no mistake to mend."
        raise UnusableInput([Problem("--mend", f"No interaction shows {name}.", shown)])
    table = replace(loaded.table, interactions=tuple(rows), history=(*loaded.table.history, *says))
    stored = {} if name in ("columns-exchanged", "rows-offset") else loaded.stored
    return replace(loaded, table=table, stored=stored)


def write(table: Table, path: Path, layout_file: str = "") -> None:
    """Write a table, read it back, and compare.

    Raises
    ------
    UnusableInput
        If it can't be written, or the format holds one interaction and the table has several.
    """
    target = _target(table, path, layout_file)
    if (target.layout is not None or not format_of(path).holds_all) and len(table.interactions) > 1:
        says = f"{path.name} holds one interaction; the table has {len(table.interactions)}."
        raise UnusableInput([Problem("", says, "Write HDF5 or JSON.")], str(path))
    target.write(table, path)
    compare_written(table, target.read(path), target)


def _target(table: Table, path: Path, layout_file: str) -> Target:
    names = tuple(rows.name for rows in table.interactions)
    if not layout_file:
        known = format_of(path)
        return Target(path, names, table.units, None, known.write, known.read)
    described: Layout = read_layout(Path(layout_file))
    writer, reader = (
        partial(layout.write, layout=described),
        partial(layout.read, layout=described, units=table.units),
    )
    return Target(path, names, table.units, described, writer, reader)


def _known_accepted(names: Iterable[str]) -> None:
    known = [check.name for check in TABLE_CHECKS]
    problems = [
        Problem("--accept", f'There is no check "{name}".', nearest(name, known)) for name in names if name not in known
    ]
    if problems:
        raise UnusableInput(problems)
