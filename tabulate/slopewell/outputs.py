"""Write the outputs of a document: compute each table once per system of units, write it, read it back."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import partial
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from . import __version__
from .checks import PotentialFacts
from .document import Document, Output
from .files import Layout, format_of, layout, read_layout
from .files.csvfile import sidecar
from .problems import Problem, UnusableInput
from .table import Rows, Table, tabulate_rows
from .table.proof import last_places_off, rows_to_prove
from .table.rounding import Rounding
from .units import UnitSystem
from .units.constants import CODATA

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Target:
    """One file to write: which interactions it holds, in which units, and by which functions."""

    path: Path
    names: tuple[str, ...]
    units: UnitSystem
    layout: Layout | None
    write: Callable[[Table, Path], None]
    read: Callable[[Path], Table]

    @property
    def paths(self) -> tuple[Path, ...]:
        """Every file that is written, the metadata of a CSV file among them."""
        beside = (sidecar(self.path),) if self.layout is None and self.path.suffix.lower() == ".csv" else ()
        return (self.path, *beside)


def targets(document: Document, into: Path) -> list[Target]:
    """Return the files that a document asks for.

    Raises
    ------
    UnusableInput
        If a layout can't be used, a file is named twice, or there is no output.
    """
    if not document.outputs:
        problem = Problem("output", "The document names no output.", 'Add [[output]] with file = "tables.h5".')
        raise UnusableInput([problem], document.file)
    taken = {Path(document.file).resolve(): "the document itself"}
    found: list[Target] = []
    for index, output in enumerate(document.outputs):
        for target in _targets_of(document, output, index, into):
            for path in target.paths:
                if path.resolve() in taken:
                    says = f'"{output.file}" would overwrite {taken[path.resolve()]}.'
                    raise UnusableInput([Problem(f"output[{index}].file", says, "Choose another name.")], document.file)
                taken[path.resolve()] = f"output[{index}]" if target.path == path else f"metadata of output[{index}]"
            found.append(target)
    return found


def _targets_of(document: Document, output: Output, index: int, into: Path) -> list[Target]:
    pairs = [interaction.potential for interaction in document.interactions]
    if output.layout:
        chosen = _layout(document, output, index)
        units = output.units or chosen.units or document.units
        write, read = partial(layout.write, layout=chosen), partial(layout.read, layout=chosen, units=units)
        return [
            Target(into / output.file_for(pair.between), (pair.name,), units, chosen, write, read) for pair in pairs
        ]
    units = output.units or document.units
    known = format_of(Path(output.file))
    if known.holds_all:
        names = tuple(pair.name for pair in pairs)
        file = output.file_for(pairs[0].between)
        return [Target(into / file, names, units, None, known.write, known.read)]
    return [
        Target(into / output.file_for(pair.between), (pair.name,), units, None, known.write, known.read)
        for pair in pairs
    ]


def _layout(document: Document, output: Output, index: int) -> Layout:
    """Return the layout of an output; what is wrong with it is a problem of the document."""
    try:
        return read_layout(Path(document.file).parent / output.layout)
    except UnusableInput as error:
        place = f"output[{index}].layout"
        problems = [replace(p, at=f"{place}: {p.at}" if p.at else place, line=None) for p in error.problems]
        raise UnusableInput(problems, document.file) from None


def unit_systems(found: list[Target]) -> list[UnitSystem]:
    """Return the systems of units that targets need, each once."""
    return list(dict.fromkeys(target.units for target in found))


def certified_rows(facts: PotentialFacts, units: UnitSystem, *, every_row: bool = False) -> Rows:
    """Return the rows of an interaction with their certificate.

    Parameters
    ----------
    facts : PotentialFacts
    units : UnitSystem
    every_row : bool
        Prove every row, not only a few hundred.
    """
    curve = facts.potential.treated
    rows = tabulate_rows(facts.potential, facts.grid, facts.rows, units)
    chosen = np.arange(facts.rows) if every_row else rows_to_prove(curve, rows, units)
    certificate: dict[str, Any] = facts.certificate.record(units)
    certificate["rows_proved"] = len(chosen)
    certificate["last_places_off"] = round(last_places_off(curve, rows, units, chosen), 2)
    return replace(rows, certificate=certificate)


def write_target(target: Target, document: Document, rows: dict[str, Rows], report: dict[str, Any]) -> None:
    """Write one file, read it back, and compare.

    Raises
    ------
    UnusableInput
        If it can't be written, or does not read back as it was.
    """
    chosen = tuple(_claimed(rows[name], target.layout) for name in target.names)
    table = Table(
        interactions=chosen,
        units=target.units,
        title=document.title,
        source=document.source,
        purpose=document.purpose,
        document=document.text,
        document_sha256=document.sha256,
        constants=CODATA,
        writer=f"slopewell {__version__}",
        report=report,
    )
    target.write(table, target.path)
    compare_written(table, target.read(target.path), target)


def _claimed(rows: Rows, chosen: Layout | None) -> Rows:
    return rows if chosen is None or not chosen.interpolation else replace(rows, interpolation=chosen.interpolation)


def compare_written(table: Table, again: Table, target: Target) -> None:
    """Refuse a file that does not hold the numbers that were written to it."""
    stored = {rows.name: rows for rows in again.interactions}
    for rows in table.interactions:
        other = next(iter(stored.values())) if target.layout else stored.get(rows.name)
        for name, column in rows.columns().items():
            found = None if other is None else other.column(name)
            if found is None and target.layout:
                continue
            if found is None or not _same(column, found, target.layout, name):
                says = f"{name} of {rows.name} does not read back from {target.path} as it was written."
                raise UnusableInput([Problem("", says, "Is the disk sound? Does the layout give enough digits?")])


def _same(written: Array, found: Array, chosen: Layout | None, name: str) -> bool:
    if written.shape != found.shape:
        return False
    if chosen is None:
        return bool(np.array_equal(written, found))
    formats = {column.quantity: column.format for column in chosen.columns}
    relative, absolute = rounding(formats.get(name, formats.get("slope" if name == "force" else name, "")))
    if name not in formats:
        relative = max(relative, 1e-2)
    return bool(np.all(np.abs(found - written) <= relative * np.abs(written) + absolute))


def printed(chosen: Layout, units: UnitSystem) -> Rounding:
    """Return the rounding of the digits that a layout prints, in eV and ångström."""
    errors = {column.quantity: rounding(column.format) for column in chosen.columns}
    energy = errors.get("energy", (0.0, 0.0))
    force = errors.get("force") or errors.get("slope") or (0.0, 0.0)
    separation = errors.get("separation", (0.0, 0.0))
    return Rounding(
        energy_relative=energy[0],
        energy_absolute=energy[1] * float(units.energy.factor),
        force_relative=force[0],
        force_absolute=force[1] * float(units.force.factor),
        separation_relative=separation[0],
        separation_absolute=separation[1] * float(units.length.factor),
    )


def rounding(number_format: str) -> tuple[float, float]:
    """Return the relative and absolute rounding error of a number format; none for the shortest text."""
    if not number_format or number_format.endswith("d"):
        return 0.0, 0.0
    found = re.fullmatch(r"[+ 0]?\d*(?:\.(\d+))?([eEfFgG])", number_format)
    assert found is not None
    digits = int(found[1]) if found[1] else 6
    if found[2] in "fF":
        return 1e-15, 0.5000001 * 10.0**-digits
    return 5.000001 * 10.0 ** -(digits + (found[2] in "eE")) + 1e-16, 0.0
