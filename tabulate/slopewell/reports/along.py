"""The proved error of reading between rows, along the rows: a bound for each of some parts of the table."""

from __future__ import annotations

from dataclasses import dataclass, replace
from fractions import Fraction
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from ..checks import PotentialFacts
from ..table.bounds import ErrorBounds
from ..table.grid import separations
from ..units import unit

Array = NDArray[np.float64]
PARTS = 24
"""Parts that a table is cut into, each of whole row intervals."""
LOCAL = ("linear", "cubic-hermite", "quintic-hermite")
"""Rules that read an interval from its own two rows, so that a part of a table is a table."""


@dataclass(frozen=True, slots=True, eq=False)
class ErrorAlong:
    """Bounds on parts of a table, in a document's units.

    Attributes
    ----------
    ends : (n,) array
        Where each part ends, ascending.
    energy, force : (n,) array
        The largest errors on it that reading between rows can make.
    """

    ends: Array
    energy: Array
    force: Array

    def at(self, r: Array) -> tuple[Array, Array]:
        """Return the bounds of energy and force at separations."""
        index = np.searchsorted(self.ends, r).clip(max=self.ends.size - 1)
        return self.energy[index], self.force[index]


def error_along(facts: PotentialFacts, start: float) -> ErrorAlong | None:
    """Return the bounds along the rows of an interaction from a separation on, in the document's unit.

    None where none was proved, or where the rule reads an interval from all rows, as a spline does:
    then there is only the certificate's bound.
    """
    grid, count = facts.grid, facts.rows
    if grid.interpolation not in LOCAL or not facts.certificate.bound.proved:
        return None
    r = separations(grid.start, grid.end, count, grid.spacing, unit("angstrom"))
    size = float(facts.units.length.factor)
    first = max(int(np.searchsorted(r, start * size)) - 1, 0)
    wanted = np.searchsorted(r, np.linspace(r[first], r[-1], PARTS + 1))
    edges = np.unique(wanted.clip(first, count - 1)).tolist()
    bounds = []
    for low, high in pairwise(edges):
        part = replace(grid, start=Fraction(float(r[low])), end=Fraction(float(r[high])), rows=high - low + 1)
        found = ErrorBounds(facts.potential.treated, part).bound(high - low + 1, grid.spacing, grid.interpolation)
        bounds.append((found.energy, found.force))
    units = facts.units
    energy, force = np.array(bounds).T
    return ErrorAlong(r[edges[1:]] / size, energy / float(units.energy.factor), force / float(units.force.factor))
