"""Nodes and weights for integrals over the separation, from zero to where a curve ends, or to infinity."""

from __future__ import annotations

from functools import cache
from math import ceil, isinf, log

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
POINTS = 8
"""Gauss-Legendre nodes a panel."""
PANEL = 0.006
"""Width of a panel, relative to its separation."""


@cache
def _legendre(points: int) -> tuple[Array, Array]:
    x, w = np.polynomial.legendre.leggauss(points)
    return 0.5 * (x + 1), 0.5 * w


def panels(edges: Array, points: int = POINTS) -> tuple[Array, Array]:
    """Return Gauss-Legendre nodes and weights on each stretch between neighbouring edges.

    Returns
    -------
    (n,) array, (n,) array
    """
    x, w = _legendre(points)
    width = np.diff(edges)[:, None]
    return (edges[:-1, None] + width * x).ravel(), (width * w).ravel()


def to_infinity(start: float, count: int = 24) -> tuple[Array, Array]:
    """Return nodes and weights from a separation to infinity, even in its inverse.

    They are exact to rounding for a sum of inverse powers that fall faster than 1/r.
    """
    inverse, weight = panels(np.linspace(0.0, 1 / start, count + 1))
    return (1 / inverse)[::-1], (weight / inverse**2)[::-1]


def radial(start: float, end: float, reach: float, breaks: tuple[float, ...] = ()) -> tuple[Array, Array]:
    """Return nodes and weights from zero to the reach of a curve.

    Parameters
    ----------
    start, end : float
        Where the curve is given; panels are narrow there.
    reach : float
        Where it ends; may be infinite.
    breaks : tuple of float
        Separations at which it is not smooth; no panel crosses them.
    """
    stop = min(end, reach)
    inside = np.geomspace(start, stop, ceil(log(stop / start) / PANEL) + 1)
    core = np.linspace(0.0, start, 41)
    between = [edge for edge in breaks if 0 < edge < stop]
    r, w = panels(np.unique(np.concatenate([core, inside, between])))
    if isinf(reach):
        far, far_weight = to_infinity(stop)
        return np.concatenate([r, far]), np.concatenate([w, far_weight])
    return r, w
