"""The functions for Python users: tables with NumPy arrays in and out.

They are reached as ``slopewell.read_table``, ``slopewell.check`` and so on, and loaded when first used.
"""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import numpy as np
from numpy.typing import ArrayLike

from . import comparison, conversion, workflow
from .problems import Problem, UnusableInput
from .reports import Report
from .table import Rows, Table
from .tables import Loaded, Reading, check_loaded, parse_units, read_table
from .tabulating import tabulate

__all__ = ["check", "compare", "convert", "make_table", "read_table", "tabulate"]


def make_table(
    separation: ArrayLike,
    energy: ArrayLike | None = None,
    force: ArrayLike | None = None,
    *,
    units: str,
    name: str = "A-B",
    purpose: str = "",
) -> Table:
    """Return a table of arrays.

    Parameters
    ----------
    separation : (n,) array
    energy, force : (n,) array, optional
        At least one of them; the force is −dU/dr.
    units : str
        Units of energy and length, such as ``"eV,angstrom"``.
    name : str
        Name of the interaction.
    purpose : str
        ``sampling``, ``dynamics`` or ``lattice-dynamics``.

    Raises
    ------
    UnusableInput
        If the arrays differ in length, or energy and force are both missing.
    """
    columns = [None if column is None else np.array(column, dtype=np.float64) for column in (separation, energy, force)]
    lengths = {column.shape for column in columns if column is not None}
    if len(lengths) != 1 or any(len(shape) != 1 for shape in lengths):
        raise UnusableInput([Problem("", "The columns differ in length.", "Give arrays of one length.")])
    first, second, third = columns
    if first is None or (second is None and third is None):
        raise UnusableInput([Problem("", "There is neither energy nor force.", "Give one of them.")])
    return Table((Rows(name, first, second, third),), parse_units(units), purpose=purpose)


def check(
    *subjects: str | Path | Table,
    columns: Sequence[str] = (),
    units: str = "",
    layout: str | Path = "",
    block: int | None = None,
    purpose: str = "",
) -> Report:
    """Check documents and tables.

    Parameters
    ----------
    *subjects : path or Table
    columns, units, layout, block, purpose
        How tables that slopewell did not write are to be read; see ``read_table``.

    Returns
    -------
    Report
        One subject each, in order.
    """
    reading = Reading(tuple(columns), units, str(layout), block, purpose)
    found = [
        check_loaded(Loaded(subject, ""), "")
        if isinstance(subject, Table)
        else workflow.check([subject], reading=reading).subjects[0]
        for subject in subjects
    ]
    return Report(tuple(found))


def convert(
    table: str | Path | Table,
    new: str | Path | None = None,
    *,
    columns: Sequence[str] = (),
    units: str = "",
    layout: str | Path = "",
    block: int | None = None,
    new_units: str = "",
    new_layout: str | Path = "",
    rows: int | None = None,
    tolerance: str = "",
    spacing: str = "",
    complete: bool = False,
    mend: str = "",
    accept: Sequence[str] = (),
) -> conversion.Converted:
    """Carry a table over to other units, rows and formats, or mend it.

    Parameters
    ----------
    table : path or Table
    new : path, optional
        The file to write.
    columns, units, layout, block
        How a table that slopewell did not write is to be read; see ``read_table``.
    new_units, new_layout, rows, tolerance, spacing, complete, mend, accept
        What to change; see ``Changes``.

    Returns
    -------
    Converted
        With the new ``table``, the ``report`` and the errors ``added`` by new rows.

    Raises
    ------
    UnusableInput
        If the table can't be read, mended or written.
    """
    changes = conversion.Changes(
        units=new_units,
        layout=str(new_layout),
        rows=rows,
        tolerance=tolerance,
        spacing=spacing,
        complete=complete,
        mend=mend,
        accept=tuple(accept),
    )
    return conversion.convert(table, new, changes, reading=Reading(tuple(columns), units, str(layout), block))


def compare(
    first: str | Path | Table,
    second: str | Path | Table,
    *,
    tolerance: float = comparison.TOLERANCE,
    columns: Sequence[str] = (),
    units: str = "",
    layout: str | Path = "",
    block: int | None = None,
) -> comparison.Comparison:
    """Tell how far two tables, or a table and a document, lie apart, and what explains it.

    Parameters
    ----------
    first, second : path or Table
    tolerance : float
        Largest difference of energy over the energy scale that counts as none.
    columns, units, layout, block
        How tables that slopewell did not write are to be read; see ``read_table``.
    """
    reading = Reading(tuple(columns), units, str(layout), block)
    return comparison.compare(first, second, tolerance=tolerance, reading=reading)
