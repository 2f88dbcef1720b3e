"""Text tables by layout: what a column holds and how its numbers look, described once for both ways."""

from __future__ import annotations

import io
import re
import string
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from ..document.source import read_source
from ..document.validate import schema_problems
from ..problems import Problem, UnusableInput
from ..table import Rows, Table
from ..units import UnitSystem, unit_system
from .atomic import whole_file
from .quantities import columns_of, rows_of

Array = NDArray[np.float64]
CHUNK = 4096
"""Rows formatted at a time: one large % format is the fastest that plain Python has."""
TEXT_FIELDS = (
    "title",
    "source",
    "name",
    "a",
    "b",
    "energy_unit",
    "length_unit",
    "force_unit",
    "spacing",
    "interpolation",
)
NUMBER_FIELDS = ("rows", "first", "last")


@dataclass(frozen=True, slots=True)
class Column:
    """One column: the quantity it holds and its number format, empty for the shortest."""

    quantity: str
    format: str = ""


@dataclass(frozen=True, slots=True)
class Layout:
    """A text file described both ways."""

    title: str
    columns: tuple[Column, ...]
    head: tuple[str, ...] = ()
    foot: tuple[str, ...] = ()
    separator: str = " "
    units: UnitSystem | None = None
    spacing: str = ""
    interpolation: str = ""

    @property
    def quantities(self) -> tuple[str, ...]:
        """What the columns hold, from left to right."""
        return tuple(column.quantity for column in self.columns)


def read_layout(path: Path) -> Layout:
    """Read a layout file.

    Raises
    ------
    UnusableInput
        With every problem in it.
    """
    source = read_source(path)
    problems = schema_problems(source.data, "layout", source.line)
    if problems:
        raise UnusableInput(problems, str(path))
    data = source.data
    for key in ("head", "foot"):
        for index, line in enumerate(data.get(key, [])):
            problems += _field_problems(line, f"{key}[{index}]", source.line(key))
    columns = tuple(Column(entry["quantity"], entry.get("format", "")) for entry in data["column"])
    problems += _column_problems(columns, data.get("separator", " "))
    units = None
    try:
        units = unit_system(data["units"]["energy"], data["units"]["length"]) if "units" in data else None
    except UnusableInput as error:
        problems += [replace(problem, at="units", line=source.line("units")) for problem in error.problems]
    if problems:
        raise UnusableInput(problems, str(path))
    return Layout(
        data["title"],
        columns,
        tuple(data.get("head", ())),
        tuple(data.get("foot", ())),
        data.get("separator", " "),
        units,
        data.get("spacing", ""),
        data.get("interpolation", ""),
    )


def _column_problems(columns: tuple[Column, ...], separator: str) -> list[Problem]:
    problems = []
    quantities = [column.quantity for column in columns if column.quantity != "skip"]
    if not {"separation", "separation-squared"} & set(quantities):
        problems.append(Problem("column", "No column holds the separation.", 'Add quantity = "separation".'))
    problems += [
        Problem("column", f'"{name}" stands in two columns.', "Take one out, or call it skip.")
        for name in sorted({q for q in quantities if quantities.count(q) > 1})
    ]
    if not re.fullmatch(r"\s+|\s*[,;]\s*", separator):
        problems.append(Problem("separator", "Columns are split by blanks, a tab, a comma or a semicolon.", "Use one."))
    for column in columns:
        if (column.format[-1:] == "d") != (column.quantity in ("row", "skip") and column.format != ""):
            says = f'The format "{column.format}" does not fit {column.quantity}.'
            if column.format:
                problems.append(Problem("column", says, "Use d for row and skip, e, f or g for numbers."))
    return problems


def _field_problems(line: str, at: str, number: int | None) -> list[Problem]:
    known = ", ".join((*TEXT_FIELDS, *NUMBER_FIELDS))
    try:
        fields = [(name, spec) for _, name, spec, _ in string.Formatter().parse(line) if name is not None]
    except ValueError as error:
        return [Problem(at, f"The braces do not match: {error}.", "Write {{ for a brace.", line=number)]
    problems = []
    for name, spec in fields:
        if name not in (*TEXT_FIELDS, *NUMBER_FIELDS):
            problems.append(Problem(at, f"{{{name}}} is not known.", f"Known: {known}.", line=number))
        elif spec and not (name in ("first", "last") and re.fullmatch(r"[+ 0]?\d{0,3}(\.\d{1,2})?[eEfFgG]", spec)):
            problems.append(
                Problem(at, f"The format {spec} is not taken for {name}.", "Use one like .6f.", line=number)
            )
    return problems


def write(table: Table, path: Path, layout: Layout) -> None:
    """Write the table's one interaction as text."""
    (rows,) = table.interactions
    fields = _fields(table, rows) | {"title": table.title or path.name}
    columns = columns_of(rows, layout.quantities)
    with whole_file(path) as temporary, temporary.open("w", encoding="utf-8", newline="\n") as file:
        file.writelines(f"{line.format(**fields)}\n" for line in layout.head)
        _write_rows(file, columns, layout)
        file.writelines(f"{line.format(**fields)}\n" for line in layout.foot)


def _fields(table: Table, rows: Rows) -> dict[str, Any]:
    first, _, second = rows.name.partition("-")
    return {
        "title": table.title,
        "source": table.source,
        "name": rows.name,
        "a": first,
        "b": second,
        "energy_unit": table.units.energy.text,
        "length_unit": table.units.length.text,
        "force_unit": table.units.force.text,
        "spacing": rows.spacing,
        "interpolation": rows.interpolation,
        "rows": rows.separation.size,
        "first": float(rows.separation[0]),
        "last": float(rows.separation[-1]),
    }


def _write_rows(file: Any, columns: list[Array], layout: Layout) -> None:
    """Write rows in large chunks; a column without a format goes through its shortest text."""
    formats = [f"%{column.format}" if column.format else "%s" for column in layout.columns]
    line = layout.separator.join(formats).replace("%s", "%r") + "\n"
    size = columns[0].size
    for start in range(0, size, CHUNK):
        block = [column[start : start + CHUNK].tolist() for column in columns]
        count = len(block[0])
        flat = [number for row in zip(*block, strict=True) for number in row]
        file.write(line * count % tuple(flat))


def read(path: Path, layout: Layout, units: UnitSystem | None = None) -> Table:
    """Read a text table by its layout.

    Parameters
    ----------
    path : Path
    layout : Layout
    units : UnitSystem, optional
        Instead of the layout's.

    Raises
    ------
    UnusableInput
        If it does not fit the layout.
    """
    chosen = units or layout.units
    if chosen is None:
        raise UnusableInput([Problem("", "The layout names no units.", "Add units to it.")], str(path))
    try:
        lines = path.read_text(encoding="utf-8").splitlines()
    except (OSError, UnicodeDecodeError) as error:
        raise UnusableInput([Problem("", f"The file can't be read: {error}.", "Check it.")], str(path)) from None
    body = lines[len(layout.head) : len(lines) - len(layout.foot)]
    numbers = _numbers(body, layout, path)
    columns = {name: numbers[:, index] for index, name in enumerate(layout.quantities)}
    rows = rows_of(path.stem, columns, layout.spacing, layout.interpolation)
    return Table((rows,), chosen)


def _numbers(body: list[str], layout: Layout, path: Path) -> Array:
    separator = layout.separator.strip() or None
    try:
        numbers = np.loadtxt(io.StringIO("\n".join(body)), delimiter=separator, ndmin=2, comments=None)
    except ValueError as error:
        raise UnusableInput(
            [Problem("", f"A row can't be read: {error}.", "Does the layout fit?")], str(path)
        ) from None
    if numbers.shape[1] != len(layout.columns):
        says = f"Rows have {numbers.shape[1]} columns, the layout describes {len(layout.columns)}."
        raise UnusableInput([Problem("", says, "Name every column; skip those without meaning.")], str(path))
    return np.asarray(numbers, dtype=np.float64)
