"""Put the values of a parameter set into a document's data, and write such data as text."""

from __future__ import annotations

import json
from copy import deepcopy
from decimal import Decimal
from typing import Any

from ..problems import Problem, UnusableInput
from .columns import NUMBER, Column
from .sets import ParameterSet


def applied(data: dict[str, Any], columns: tuple[Column, ...], chosen: ParameterSet) -> dict[str, Any]:
    """Return a document's data with the values of a set in their places.

    Raises
    ------
    UnusableInput
        With every cell that holds no number, by line and column.
    """
    if len(chosen.cells) != len(columns):
        says = f"The row has {len(chosen.cells)} values for {len(columns)} columns."
        raise UnusableInput([Problem(f"line {chosen.line}", says, "Give one value a column.")])
    problems: list[Problem] = []
    changed = deepcopy(data)
    for column, cell in zip(columns, chosen.cells, strict=True):
        number = cell.strip()
        if not NUMBER.fullmatch(number):
            says = f'"{number[:60]}" is not a number.'
            place = f"line {chosen.line}, column {column.title}"
            problems.append(Problem(place, says, "Give a number; its unit stands in the header or in the document."))
            continue
        part: Any = changed
        for key in column.path[:-1]:
            part = part[key]
        part[column.path[-1]] = f"{number} {column.unit}" if column.unit else Decimal(number)
    if problems:
        raise UnusableInput(problems)
    return changed


def exact_json(value: Any, indent: str = "\n") -> str:
    """Return data as JSON with every decimal digit as it was written."""
    inner = f"{indent} "
    if isinstance(value, dict):
        parts = [f"{json.dumps(key, ensure_ascii=False)}: {exact_json(part, inner)}" for key, part in value.items()]
        return f"{{{inner}{f',{inner}'.join(parts)}{indent}}}" if parts else "{}"
    if isinstance(value, list):
        return f"[{', '.join(exact_json(part, inner) for part in value)}]"
    return str(value) if isinstance(value, Decimal) else json.dumps(value, ensure_ascii=False)
