"""What a column of a text table may hold, and how it follows from separation, energy and force."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from ..problems import Problem, UnusableInput
from ..table import Rows

Array = NDArray[np.float64]


def _needed(rows: Rows, name: str) -> Array:
    column = rows.column(name)
    if column is None:
        says = f"The rows of {rows.name} have no {name}, which a column needs."
        raise UnusableInput([Problem("column", says, "Take the column out; curvature comes with quintic-hermite.")])
    return column


QUANTITIES: dict[str, Callable[[Rows], NDArray[Any]]] = {
    "row": lambda rows: np.arange(1, rows.separation.size + 1),
    "separation": lambda rows: rows.separation,
    "separation-squared": lambda rows: rows.separation**2,
    "energy": lambda rows: _needed(rows, "energy"),
    "force": lambda rows: _needed(rows, "force"),
    "slope": lambda rows: 0.0 - _needed(rows, "force"),
    "force-over-separation": lambda rows: _needed(rows, "force") / rows.separation,
    "curvature": lambda rows: _needed(rows, "curvature"),
    "skip": lambda rows: np.zeros(rows.separation.size, dtype=int),
}
"""Each quantity as a function of the rows."""


def columns_of(rows: Rows, quantities: Sequence[str]) -> list[NDArray[Any]]:
    """Return the columns that quantities name, computed from rows.

    Raises
    ------
    UnusableInput
        If the rows lack what a quantity needs.
    """
    return [QUANTITIES[name](rows) for name in quantities]


def rows_of(name: str, columns: Mapping[str, Array], spacing: str = "", interpolation: str = "") -> Rows:
    """Return the rows that columns hold, by the names of :data:`QUANTITIES`."""
    separation = columns["separation"] if "separation" in columns else np.sqrt(columns["separation-squared"])
    force = columns.get("force")
    if force is None and "slope" in columns:
        force = 0.0 - columns["slope"]
    if force is None and "force-over-separation" in columns:
        force = columns["force-over-separation"] * separation
    return Rows(
        name=name,
        separation=np.ascontiguousarray(separation),
        energy=_contiguous(columns.get("energy")),
        force=_contiguous(force),
        curvature=_contiguous(columns.get("curvature")),
        spacing=spacing,
        interpolation=interpolation,
    )


def _contiguous(column: Array | None) -> Array | None:
    return None if column is None else np.ascontiguousarray(column)
