"""New rows from old ones, read by the rule that the table names, with the error that this adds."""

from __future__ import annotations

from dataclasses import dataclass, replace
from fractions import Fraction
from math import isqrt

import numpy as np
from numpy.typing import NDArray

from .problems import Problem, UnusableInput
from .table import Rows, separations
from .table.interpolation import interpolant
from .units import Unit

Array = NDArray[np.float64]

SPACINGS = ("separation", "separation-squared", "inverse", "logarithmic")
FEWEST, MOST = 8, 1_000_000


@dataclass(frozen=True, slots=True)
class NewRows:
    """The rows that are wanted: their number, or the error that they may add, and their spacing."""

    rows: int | None = None
    tolerance: float | None = None
    spacing: str = ""


def resampled(rows: Rows, wanted: NewRows, unit: Unit) -> tuple[Rows, tuple[float, float]]:
    """Return new rows between the same ends, and the largest errors of energy and force they add.

    Parameters
    ----------
    rows : Rows
        With energy and force, or one of them.
    wanted : NewRows
    unit : Unit
        The unit of length of the rows.

    Raises
    ------
    UnusableInput
        If the spacing is unknown, the number of rows unusable, or no number keeps the tolerance.
    """
    if wanted.spacing and wanted.spacing not in SPACINGS:
        says = f'"{wanted.spacing}" is no spacing.'
        raise UnusableInput([Problem("--spacing", says, f"Use one of {', '.join(SPACINGS)}.")])
    if wanted.rows is not None and not 2 <= wanted.rows <= 10 * MOST:
        says = f"{wanted.rows} is no usable number of rows."
        raise UnusableInput([Problem("--rows", says, "Use 2 to 10000000.")])
    if rows.energy is None:
        says = f"{rows.name} has no energy to read between rows."
        raise UnusableInput([Problem("--rows", says, "Add --complete.")])
    spacing = wanted.spacing or rows.spacing or "separation"
    if wanted.tolerance is None:
        made = _on_grid(rows, wanted.rows or rows.separation.size, spacing, unit)
        return made, added_error(rows, made)
    return _within(rows, wanted.tolerance, spacing, unit)


def _within(rows: Rows, tolerance: float, spacing: str, unit: Unit) -> tuple[Rows, tuple[float, float]]:
    """Find the fewest rows that keep a tolerance, by doubling and halving the interval."""

    def tried(count: int) -> tuple[Rows, tuple[float, float]]:
        made = _on_grid(rows, count, spacing, unit)
        return made, added_error(rows, made)

    high = FEWEST
    best = tried(high)
    while best[1][0] > tolerance:
        if high >= MOST:
            says = f"Even {MOST} rows add an error of {best[1][0]:.3g}."
            raise UnusableInput([Problem("--tolerance", says, "Allow more; does the table have a step inside?")])
        high = min(2 * high, MOST)
        best = tried(high)
    low = high // 2
    while high - low > max(1, isqrt(high) // 8):
        middle = (low + high) // 2
        attempt = tried(middle)
        if attempt[1][0] <= tolerance:
            high, best = middle, attempt
        else:
            low = middle
    return best


def _on_grid(rows: Rows, count: int, spacing: str, unit: Unit) -> Rows:
    start, end = (Fraction(float(r)) * unit.factor for r in (rows.separation[0], rows.separation[-1]))
    if spacing in ("inverse", "logarithmic") and start <= 0:
        says = f"Rows from {float(rows.separation[0]):g} can't be even in {spacing}."
        raise UnusableInput([Problem("--spacing", says, "Use separation.")])
    r = separations(start, end, count, spacing, unit)
    r[0], r[-1] = rows.separation[0], rows.separation[-1]
    read = interpolant(rows)
    rule = rows.interpolation or ("cubic-hermite" if rows.force is not None else "cubic-spline")
    force = None if rows.force is None else read.force(r)
    keeps = rule if rule != "quintic-hermite" else "cubic-hermite"
    return replace(
        rows,
        separation=r,
        energy=read.energy(r),
        force=force,
        curvature=None,
        spacing=spacing,
        interpolation=keeps,
        certificate={},
        derived=tuple(name for name in ("energy", "force") if rows.column(name) is not None),
    )


def added_error(old: Rows, new: Rows) -> tuple[float, float]:
    """Return how far readings of new rows lie from readings of the old ones, at the old rows and between."""
    first, second = interpolant(old), interpolant(new)
    r = old.separation
    places = np.concatenate([r, (r[:-1] + r[1:]) / 2])
    places = places[(places >= second.start) & (places <= second.end)]
    energy = np.abs(first.energy(places) - second.energy(places))
    force = np.abs(first.force(places) - second.force(places))
    return float(energy.max()), float(force.max())
