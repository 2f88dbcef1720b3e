"""Compute the rows of a potential on a grid, each number right to a few units in the last place."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from ..document import Grid
from ..formula.pairs import converted, pair
from ..potential import Curve, Potential
from ..potential.curve import SNAP
from ..units import UnitSystem
from .grid import separations
from .model import Rows

Array = NDArray[np.float64]


def tabulate_rows(potential: Potential, grid: Grid, rows: int, units: UnitSystem) -> Rows:
    """Return the rows of an interaction.

    Parameters
    ----------
    potential : Potential
    grid : Grid
    rows : int
        Number of rows, which the grid itself may leave to a tolerance.
    units : UnitSystem
        The units of the result; energies and forces belong to the separations as rounded in them.
    """
    r = separations(grid.start, grid.end, rows, grid.spacing, units.length)
    order = 2 if grid.interpolation == "quintic-hermite" else 1
    columns = evaluate(potential.treated, r, order, units)
    if potential.cutoff is not None:
        # A cutoff in other units may lie a rounding beside its row, where its zeros would be 1e-49.
        at = np.abs(r * float(units.length.factor / potential.cutoff.at) - 1) <= SNAP
        for column in columns[: potential.cutoff.zeros]:
            column[at] = 0.0
    return Rows(
        name=potential.name,
        separation=r,
        energy=columns[0],
        force=0.0 - columns[1],
        curvature=columns[2] if order == 2 else None,
        spacing=grid.spacing,
        interpolation=grid.interpolation,
        ends=grid.ends if grid.interpolation == "cubic-spline" else "",
    )


def evaluate(curve: Curve, r: Array, order: int, units: UnitSystem) -> list[Array]:
    """Return energy and derivatives at separations in the given units, rounded once."""
    angstrom = converted(r, units.length.factor)
    derivatives = curve.accurate_derivatives(angstrom, order)
    with np.errstate(all="ignore"):
        return [(derivative * pair(_factor(units, k))).rounded() + 0.0 for k, derivative in enumerate(derivatives)]


def _factor(units: UnitSystem, order: int) -> Fraction:
    return units.length.factor**order / units.energy.factor
