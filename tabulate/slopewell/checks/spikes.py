"""Single numbers that do not fit their neighbours: in a column by itself, confirmed by the other column."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from .slopes import Slopes

Array = NDArray[np.float64]
Numbers = NDArray[np.intp]
SlopesOf = Callable[[slice, Array], Slopes]
"""Slopes of some rows with their energies changed."""

AROUND = 3
"""Rows to either side that predict the one between."""
STANDS_OUT = 4.0
"""Multiple of the doubt about a prediction beyond which a number stands out."""
WINDOW = 20
"""Rows to either side that must become smooth when a number is replaced."""
CALMER = 0.2
"""Part that a doubt or a disagreement must fall to when the right number is replaced."""
MOST_TRIED = 60


def predicted(separation: Array, column: Array) -> tuple[Array, Array]:
    """Return what the neighbours of each row predict for it, and the doubt about that.

    The row itself enters neither. Rows near the ends, and unpredictable ones, have infinite doubt.
    """
    values, doubt = np.zeros_like(column), np.full_like(column, np.inf)
    size = column.size
    if size < 2 * AROUND + 1:
        return values, doubt
    middle = slice(AROUND, size - AROUND)
    with np.errstate(all="ignore"):
        wide = _lagrange(separation, column, (-3, -2, -1, 1, 2, 3))
        narrow = _lagrange(separation, column, (-2, -1, 1, 2))
        values[middle] = wide
        doubt[middle] = np.abs(wide - narrow)
    return values, np.where(np.isfinite(doubt) & np.isfinite(values), doubt, np.inf)


def _lagrange(separation: Array, column: Array, nodes: tuple[int, ...]) -> Array:
    size = separation.size

    def at(array: Array, node: int) -> Array:
        return array[AROUND + node : size - AROUND + node]

    here = at(separation, 0)
    total = np.zeros_like(here)
    for node in nodes:
        weight = np.ones_like(here)
        for other in nodes:
            if other != node:
                weight = weight * ((here - at(separation, other)) / (at(separation, node) - at(separation, other)))
        total += weight * at(column, node)
    return total


def candidates(separation: Array, column: Array, noise: Array) -> tuple[Numbers, Array]:
    """Return rows that stand out, the worst first, and what their neighbours predict for every row."""
    values, doubt = predicted(separation, column)
    with np.errstate(all="ignore"):
        ratio = np.abs(column - values) / (STANDS_OUT * (doubt + 3 * noise))
    ratio = np.nan_to_num(ratio, nan=0.0, posinf=0.0)
    found = np.flatnonzero(ratio > 1)
    # A spike spoils the predictions of its neighbours as well, but itself stands out most.
    local = found[[bool(ratio[row] >= ratio[max(row - AROUND, 0) : row + AROUND + 1].max()) for row in found]]
    return local[np.argsort(-ratio[local])][:MOST_TRIED], values


def energy_spikes(separation: Array, energy: Array, force: Array, noise: Array, slopes_of: SlopesOf) -> Numbers:
    """Return the rows whose energy is corrupted: once it is replaced, slopes and forces agree all around.

    Parameters
    ----------
    separation, energy, force, noise : (n,) array
        Noise is the largest rounding error of the energy.
    slopes_of : callable
        Slopes of a window of rows with other energies.
    """
    rows, values = candidates(separation, energy, noise)
    found = []
    for row in rows.tolist():
        window = slice(max(row - WINDOW, 0), min(row + WINDOW + 1, energy.size))
        near = slice(max(row - 2, 0) - window.start, row + 3 - window.start)
        replaced = energy[window].copy()
        before = slopes_of(window, replaced)
        replaced[row - window.start] = values[row]
        after = slopes_of(window, replaced)
        gap = np.abs(force[window] + after.values)[near]
        if np.all(after.band[near] < CALMER * before.band[near].max()) and np.all(gap <= after.band[near]):
            found.append(row)
    return np.array(sorted(found), dtype=np.intp)


def force_spikes(separation: Array, energy: Array, force: Array, noise: Array, doubt: Array) -> Numbers:
    """Return the rows whose force is corrupted: once it is replaced, its integral is the fall of the energy.

    Parameters
    ----------
    separation, energy, force, noise : (n,) array
        Noise is the largest rounding error of the force.
    doubt : (n,) array
        How far the slope of the energy may be off: a row that it vouches for is no spike.
    """
    rows, values = candidates(separation, force, noise)
    found = []
    for row in rows.tolist():
        if doubt[row] < CALMER * abs(force[row] - values[row]):
            continue
        window = slice(row - AROUND, row + AROUND + 1)
        local = force[window].copy()
        fall = float(energy[row - 1] - energy[row + 1])
        before = abs(_area(separation[window], local) - fall)
        local[AROUND] = values[row]
        after = abs(_area(separation[window], local) - fall)
        if after < CALMER * before:
            found.append(row)
    return np.array(sorted(found), dtype=np.intp)


def _area(separation: Array, force: Array) -> float:
    """Return the integral over the two middle intervals of the polynomial through all rows."""
    shift = separation - separation[AROUND]
    scale = float(np.abs(shift).max())
    powers = np.polynomial.polynomial.Polynomial(
        np.linalg.solve(np.vander(shift / scale, increasing=True), force)
    ).integ()
    low, high = shift[AROUND - 1] / scale, shift[AROUND + 1] / scale
    return float(powers(high) - powers(low)) * scale
