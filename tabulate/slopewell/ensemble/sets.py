"""Read parameter sets from a CSV file (RFC 4180), row by row."""

from __future__ import annotations

import contextlib
import csv
import re
import sqlite3
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from ..problems import Problem, UnusableInput
from .columns import Column, find_column

NAME_COLUMN = "set"
NAME = re.compile(r"[A-Za-z0-9][A-Za-z0-9._+=-]{0,99}")


@dataclass(frozen=True, slots=True)
class ParameterSet:
    """One row of the file: its name, its line, and its cells as they are written, the name left out."""

    name: str
    line: int
    cells: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class ParameterSets:
    """A file of parameter sets; iterating reads it from the start, a row at a time."""

    path: Path
    columns: tuple[Column, ...]
    name_place: int | None

    def __iter__(self) -> Iterator[ParameterSet]:
        """Yield the sets in the order of the file."""
        rows = _rows(self.path)
        next(rows, None)
        for number, (line, cells) in enumerate(rows, start=1):
            if self.name_place is None:
                yield ParameterSet(f"{number:06d}", line, tuple(cells))
            else:
                name = cells[self.name_place].strip() if self.name_place < len(cells) else ""
                kept = (cell for place, cell in enumerate(cells) if place != self.name_place)
                yield ParameterSet(name, line, tuple(kept))


def read_sets(path: Path, data: dict[str, Any]) -> ParameterSets:
    """Return the parameter sets of a file, whose header names values of a document.

    Parameters
    ----------
    path : Path
    data : dict
        The document's data.

    Raises
    ------
    UnusableInput
        If the file can't be read, or a column stands for no value of the document.
    """
    _, header = next(_rows(path), (1, []))
    titles = [title.strip() for title in header]
    problems: list[Problem] = []
    columns: list[Column] = []
    for place, title in enumerate(titles, start=1):
        if title == NAME_COLUMN:
            continue
        try:
            columns.append(find_column(title, data))
        except UnusableInput as error:
            problems += [Problem(f"line 1, column {place}", one.says, one.remedy) for one in error.problems]
    if not problems and not columns:
        problems.append(
            Problem("line 1", "The header names no parameter.", "Begin with a line such as set,W-W.epsilon.")
        )
    paths = [column.path for column in columns]
    if len(set(paths)) < len(paths) or titles.count(NAME_COLUMN) > 1:
        problems.append(Problem("line 1", "Two columns stand for one value.", "Keep one of them."))
    if problems:
        raise UnusableInput(problems, str(path))
    return ParameterSets(path, tuple(columns), titles.index(NAME_COLUMN) if NAME_COLUMN in titles else None)


def _rows(path: Path) -> Iterator[tuple[int, list[str]]]:
    """Yield the line and the cells of every row that is not empty."""
    line = 1
    try:
        with path.open(encoding="utf-8-sig", newline="") as file:
            reader = csv.reader(file, strict=True)
            for cells in reader:
                if cells:
                    yield line, cells
                line = reader.line_num + 1
    except OSError as error:
        says = f"The file can't be read: {error.strerror or error}."
        raise UnusableInput([Problem("", says, "Check its name and permissions.")], str(path)) from None
    except UnicodeDecodeError:
        raise UnusableInput([Problem("", "It is not UTF-8.", "Save the file as UTF-8.")], str(path)) from None
    except csv.Error as error:
        problem = Problem(f"line {line}", f"This is not valid CSV: {error}.", "Mend the row there.")
        raise UnusableInput([problem], str(path)) from None


def check_names(sets: ParameterSets) -> Iterator[ParameterSet]:
    """Yield every set, holding its name against those before it.

    Raises
    ------
    UnusableInput
        At a name that can't be the name of a folder, or that an earlier set has.
    """
    # SQLite moves the names to a temporary file of its own once they are many: memory does not grow.
    with contextlib.closing(sqlite3.connect("")) as names:
        names.execute("CREATE TABLE name (name TEXT PRIMARY KEY COLLATE NOCASE, line INTEGER)")
        for one in sets:
            if not NAME.fullmatch(one.name):
                says = f'"{one.name[:60]}" can\'t be the name of a set.'
                remedy = "Use letters, digits and . _ + = - (up to 100, the first a letter or digit)."
                raise UnusableInput([Problem(f"line {one.line}", says, remedy)], str(sets.path))
            try:
                names.execute("INSERT INTO name VALUES (?, ?)", (one.name, one.line))
            except sqlite3.IntegrityError:
                (line,) = names.execute("SELECT line FROM name WHERE name = ?", (one.name,)).fetchone()
                says = f'The set "{one.name}" stands on line {line} already.'
                raise UnusableInput([Problem(f"line {one.line}", says, "Rename one.")], str(sets.path)) from None
            yield one
