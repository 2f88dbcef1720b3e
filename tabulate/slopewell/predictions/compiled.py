"""A curve as one array of polynomials, read fast at many separations; each is the curve's to rounding."""

from __future__ import annotations

from math import isinf

import numpy as np
from numpy.typing import NDArray

from .curve import EnergyCurve

Array = NDArray[np.float64]
DEGREE = 5
FORMULA_KNOTS = 3001
"""Knots for a formula: between them its energy is a polynomial of degree 5 to about 10⁻¹⁴ of its size."""
BINS_A_KNOT = 8


def compiled(curve: EnergyCurve, knots: Array | None = None) -> EnergyCurve:
    """Return a curve that reads energy and slope fast.

    Parameters
    ----------
    curve : EnergyCurve
    knots : (n,) array, optional
        Separations between which it is a polynomial of degree 5 at most, in ångström: the rows of a table.
    """
    stop = 4 * curve.end if isinf(curve.reach) else curve.reach
    if knots is None:
        grid = np.concatenate([np.geomspace(curve.start, stop, FORMULA_KNOTS), curve.breaks])
        knots = np.unique(np.clip(grid, curve.start, stop))
    polynomials = _polynomials(curve, knots)
    width = np.diff(knots)
    bins = BINS_A_KNOT * knots.size
    scale = bins / (knots[-1] - knots[0])
    guide = np.searchsorted(knots, knots[0] + np.arange(bins + 1) / scale, side="right") - 1
    guide = np.clip(guide, 0, width.size - 1)

    def derivatives(r: Array, order: int) -> Array:
        index = guide[np.clip((r - knots[0]) * scale, 0, bins).astype(np.intp)]
        while (late := (r > knots[index + 1]) & (index < width.size - 1)).any():
            index = index + late
        while (early := (r < knots[index]) & (index > 0)).any():
            index = index - early
        part = (r - knots[index]) / width[index]
        result = np.empty((order + 1, r.size))
        for k in range(order + 1):
            own = polynomials[k].take(index, axis=0)
            value = own[:, -1].copy()
            for column in range(own.shape[1] - 2, -1, -1):
                value *= part
                value += own[:, column]
            result[k] = value
        return result

    return EnergyCurve(curve.name, derivatives, curve.start, curve.end, curve.reach, exact=False)


def _polynomials(curve: EnergyCurve, knots: Array) -> list[Array]:
    """Return coefficients of energy and slope between knots, lowest power first, in parts of a stretch."""
    nodes = 0.5 - 0.5 * np.cos(np.pi * (np.arange(DEGREE + 1) + 0.5) / (DEGREE + 1))
    inverse = np.linalg.inv(np.vander(nodes, increasing=True))
    r = knots[:-1, None] + nodes * np.diff(knots)[:, None]
    values = curve.derivatives(r.ravel(), 1).reshape(2, *r.shape)
    found = []
    for one in values:
        coefficients = one @ inverse.T
        size = np.abs(coefficients).max(axis=0)
        last = int(np.flatnonzero(size > 1e-12 * size.max())[-1]) if size.max() else 0
        if last < DEGREE - 1:
            coefficients = one[:, _spread(last)] @ np.linalg.inv(np.vander(nodes[_spread(last)], increasing=True)).T
        found.append(np.ascontiguousarray(coefficients))
    return found


def _spread(degree: int) -> list[int]:
    """Return which nodes a polynomial of a lower degree is taken from."""
    return sorted({round(k * DEGREE / max(degree, 1)) for k in range(degree + 1)})
