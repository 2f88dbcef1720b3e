"""Landmarks of the curve that rows stand for, found from the rows alone."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.polynomial import Chebyshev
from numpy.typing import NDArray

from .slopes import Slopes

Array = NDArray[np.float64]

REACH = 0.04
"""Part of the separation to either side that a local fit takes in."""
LEAST_ROWS, HIGHEST_DEGREE = 4, 8
NOTICEABLE = 1e-7
"""Part of the largest fall beyond which a rise is a feature of the curve and not noise."""


@dataclass(frozen=True)
class Turn:
    """A row at which the energy turns, and whether it is a minimum."""

    row: int
    minimum: bool


@dataclass(frozen=True)
class RowLandmarks:
    """Landmarks in the table's own units; None where there is none. See ``Landmarks`` of potentials."""

    equilibrium_separation: float | None
    well_depth: float | None
    stiffness: float | None
    zero_crossing: float | None
    largest_attraction: tuple[float, float] | None
    stationary_points: int
    turns: tuple[Turn, ...]


def row_landmarks(separation: Array, energy: Array, slopes: Slopes, rounding: Array | None = None) -> RowLandmarks:
    """Find the landmarks of rows.

    Parameters
    ----------
    separation, energy : (n,) array
    slopes : Slopes
        Of the energies.
    rounding : (n,) array, optional
        Largest rounding error of each energy: smaller turns are noise.
    """
    noise = np.zeros(energy.size) if rounding is None else rounding
    found = turns(energy, noise)
    wells = [turn.row for turn in found if turn.minimum]
    bottom = min(wells, key=lambda row: float(energy[row]), default=None)
    place = depth = stiffness = None
    if bottom is not None:
        curve = local(separation, energy, bottom)
        place = _turning_point(curve, float(separation[bottom]))
        depth = -float(curve(place))
        stiffness = float(curve.deriv(2)(place))
        rise = float(max(energy[max(bottom - 1, 0)], energy[min(bottom + 1, energy.size - 1)]) - energy[bottom])
        if abs(depth + float(energy[bottom])) > rise:
            # A fit across a kink or a step: the row itself is the better landmark, and no curvature is known.
            place, depth, stiffness = float(separation[bottom]), -float(energy[bottom]), None
    return RowLandmarks(
        equilibrium_separation=place,
        well_depth=depth if depth is not None and depth > 0 else None,
        stiffness=stiffness,
        zero_crossing=_zero_crossing(separation, energy, bottom),
        largest_attraction=_largest_attraction(separation, slopes),
        stationary_points=len(found),
        turns=tuple(found),
    )


def turns(energy: Array, noise: Array) -> list[Turn]:
    """Return the rows at which the energy turns by more than its noise, in order."""
    step = np.sign(np.diff(energy))
    rows = np.flatnonzero(step)
    corners = rows[1:][step[rows[1:]] != step[rows[:-1]]]
    fall = float(energy.max() - energy.min()) if energy.size else 0.0
    well = max(-float(energy.min()), 0.0) or fall
    found: list[Turn] = []
    extreme, rising = 0, None
    for row in [*corners.tolist(), energy.size - 1]:
        moved = float(energy[row] - energy[extreme])
        clear = 4 * float(noise[row] + noise[extreme]) + NOTICEABLE * min(well, fall)
        if rising is None:
            if abs(moved) > clear:
                extreme, rising = row, moved > 0
        elif (moved >= 0) == rising:
            extreme = row
        elif abs(moved) > clear:
            found.append(Turn(extreme, minimum=not rising))
            extreme, rising = row, not rising
    return found


def local(separation: Array, column: Array, row: int) -> Chebyshev:
    """Return a polynomial through the rows around one of them, wide enough to average rounding out."""
    half = REACH * float(separation[row])
    low = min(int(np.searchsorted(separation, separation[row] - half)), max(row - LEAST_ROWS, 0))
    high = max(int(np.searchsorted(separation, separation[row] + half)), min(row + LEAST_ROWS + 1, separation.size))
    stride = max((high - low) // 400, 1)
    part = slice(low, high, stride)
    count = separation[part].size
    degree = min(HIGHEST_DEGREE, count - 1)
    return Chebyshev.fit(separation[part], column[part], degree)


def _turning_point(curve: Chebyshev, near: float) -> float:
    slope, bend = curve.deriv(), curve.deriv(2)
    low, high = curve.domain
    place = near
    for _ in range(20):
        curvature = float(bend(place))
        if not curvature:
            break
        place = min(max(place - float(slope(place)) / curvature, float(low)), float(high))
    return place


def _zero_crossing(separation: Array, energy: Array, bottom: int | None) -> float | None:
    nonzero = np.flatnonzero(energy)
    falling = nonzero[:-1][(energy[nonzero[:-1]] > 0) & (energy[nonzero[1:]] < 0)]
    before = falling if bottom is None else falling[falling < bottom]
    chosen = before[-1] if before.size else (falling[0] if falling.size else None)
    if chosen is None:
        return None
    if energy[chosen + 1] == 0:
        return float(separation[chosen + 1])
    curve = local(separation, energy, int(chosen))
    low, high = float(separation[chosen]), float(separation[chosen + 1])
    if not float(curve(low)) > 0 > float(curve(high)):
        return low + (high - low) * float(energy[chosen] / (energy[chosen] - energy[chosen + 1]))
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if float(curve(middle)) > 0 else (low, middle)
    return (low + high) / 2


def _largest_attraction(separation: Array, slopes: Slopes) -> tuple[float, float] | None:
    sure = slopes.values - slopes.band
    steepest = int(np.argmax(sure))
    if not sure[steepest] > 0:
        return None
    place, slope = float(separation[steepest]), float(slopes.values[steepest])
    curve = local(separation, slopes.values, steepest)
    low, high = (float(separation[max(min(steepest + side, separation.size - 1), 0)]) for side in (-3, 3))
    places = np.linspace(max(low, curve.domain[0]), min(high, curve.domain[1]), 401)
    best = int(np.argmax(curve(places)))
    # A fit across a kink or a step overshoots; the row itself is then the better landmark.
    if abs(float(curve(place)) - slope) > 0.01 * slope or float(curve(places[best])) > 1.05 * slope:
        return place, -slope
    return float(places[best]), -float(curve(places[best]))
