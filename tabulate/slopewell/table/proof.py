"""Prove stored rows by balls: how many units in the last place each number is off."""

from __future__ import annotations

from math import factorial

import numpy as np
from numpy.typing import NDArray

from ..formula.balls import ball, precision, series
from ..formula.tree import ZERO
from ..potential import Curve
from ..units import UnitSystem
from .model import Rows
from .terms import largest_terms

Array = NDArray[np.float64]
PROVED_ROWS = 200
"""Rows proved of each table as it is written, the ends and the rows about branch points among them."""


def rows_to_prove(curve: Curve, rows: Rows, units: UnitSystem) -> NDArray[np.intp]:
    """Return the numbers of the rows proved as a table is written: evenly spread, with every edge."""
    count = rows.separation.size
    spread = np.linspace(0, count - 1, min(count, PROVED_ROWS)).round()
    edges = np.searchsorted(rows.separation, [float(edge / units.length.factor) for edge in curve.edges()])
    near = np.concatenate([edges + step for step in (-1, 0, 1)]) if edges.size else np.empty(0)
    chosen = np.concatenate([spread, near]).astype(np.intp)
    return np.unique(np.clip(chosen, 0, count - 1))


def last_places_off(curve: Curve, rows: Rows, units: UnitSystem, chosen: NDArray[np.intp]) -> float:
    """Return by how many units in the last place the worst of the chosen rows is off.

    A unit is that of the largest term of the formula there, in the table's units: where terms cancel,
    what is left can't be righter than they are.
    """
    r = rows.separation[chosen]
    stored = [rows.energy, None if rows.force is None else -rows.force, rows.curvature]
    columns = [column[chosen] for column in stored if column is not None]
    angstrom = r * float(units.length.factor)
    terms = largest_terms(curve, angstrom, len(columns) - 1)
    pieces = [curve.pieces[index] for index in curve.indices(angstrom)]
    length = ball(units.length.factor)
    factors = [units.length.factor**k / units.energy.factor * factorial(k) for k in range(len(columns))]
    sizes = [np.maximum(terms[k] * float(factor), np.abs(columns[k])) for k, factor in enumerate(factors)]
    last_places = [np.spacing(np.maximum(size, 1e-290)) for size in sizes]
    exact_factors = [ball(factor) for factor in factors]
    worst = 0.0
    with precision():
        for place, separation in enumerate(r.tolist()):
            if pieces[place].tree == ZERO:
                continue
            exact = series(pieces[place].tree, ball(separation) * length, len(columns) - 1)
            for k, column in enumerate(columns):
                off = float(abs(exact[k] * exact_factors[k] - ball(float(column[place]))).upper())
                worst = max(worst, off / float(last_places[k][place]))
    return worst
