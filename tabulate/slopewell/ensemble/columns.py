"""Columns of a file of parameter sets: which value of the document each one stands for."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

from ..problems import Problem, UnusableInput, nearest
from ..units import quantity

Path = tuple[str | int, ...]
TITLE = re.compile(r"\s*(.*?)(?:\s+\[([^\[\]]+)\])?\s*")
NUMBER = re.compile(r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?")
STATED = re.compile(rf"\s*{NUMBER.pattern}\s*(.*?)\s*")


@dataclass(frozen=True, slots=True)
class Column:
    """A column of values.

    Attributes
    ----------
    title : str
        As the header has it, such as ``"W-W.epsilon [eV]"``.
    path : tuple
        Keys and indices that lead to the value in the document's data.
    unit : str
        Unit of its numbers; empty where they are plain numbers, as in the document.
    """

    title: str
    path: Path
    unit: str


def find_column(title: str, data: dict[str, Any]) -> Column:
    """Return the column that a title of the header means.

    Parameters
    ----------
    title : str
        ``W-W.epsilon`` for a parameter of an interaction, or the key path of any other number of the
        document, such as ``species.W.charge``; behind it, in square brackets, the unit where it is not
        the document's.
    data : dict
        The document's data.

    Raises
    ------
    UnusableInput
        If the document states no such value, or several.
    """
    found = TITLE.fullmatch(title)
    assert found is not None
    name, unit = found[1], found[2] or ""
    values = dict(_values(data))
    paths = [path for path in values if name in _names(path, data)]
    if not paths:
        known = (_names(path, data)[0] for path in values)
        raise _problem(f'The document states no value "{name}".', nearest(name, known))
    if len(paths) > 1:
        longer = ", ".join(_names(path, data)[-1] for path in paths)
        raise _problem(f'"{name}" may mean {len(paths)} values of the document.', f"Write one of: {longer}.")
    (path,) = paths
    return Column(title.strip(), path, _unit(name, unit, values[path]))


def _problem(says: str, remedy: str) -> UnusableInput:
    return UnusableInput([Problem("", says, remedy)])


def _values(part: Any, path: Path = ()) -> Iterator[tuple[Path, Any]]:
    """Yield the path of every number of a document, with or without a unit, and the number."""
    if isinstance(part, dict | list):
        for key, inner in part.items() if isinstance(part, dict) else enumerate(part):
            yield from _values(inner, (*path, key))
    elif not isinstance(part, bool) and STATED.fullmatch(str(part)):
        yield path, part


def _names(path: Path, data: dict[str, Any]) -> list[str]:
    """Return what a value may be called, from the shortest name to its key path."""
    names = [_joined(path)]
    if len(path) > 2 and path[0] == "interaction" and isinstance(path[1], int):
        pair = "-".join(data["interaction"][path[1]].get("between", ()))
        names.insert(0, f"{pair}.{_joined(path[2:])}")
        if "parameters" in path:
            place = path.index("parameters")
            names.insert(0, f"{pair}.{_joined((*path[2:place], *path[place + 1 :]))}")
            names.insert(0, f"{pair}.{_joined(path[place + 1 :])}")
    return names


def _joined(path: Path) -> str:
    return "".join(f"[{key}]" if isinstance(key, int) else f".{key}" for key in path).removeprefix(".")


def _unit(name: str, unit: str, stated: Any) -> str:
    """Return the unit of a column: the header's, else the document's, both of one dimension."""
    found = STATED.fullmatch(str(stated))
    assert found is not None
    own = found[1]
    if unit and own and quantity(f"1 {unit}").dimension != quantity(f"1 {own}").dimension:
        says = f"[{unit}] can't be the unit of {name}, which the document gives in {own}."
        raise _problem(says, "Give it in a unit of the same dimension.")
    return unit or own
