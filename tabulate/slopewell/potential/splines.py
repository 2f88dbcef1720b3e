"""Curves through points: splines as polynomial trees, a wall before the first, a tail beyond the last."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from ..formula.branches import Piece
from ..formula.tree import ZERO, Apply, R, Tree, add, multiply, number
from .curve import Curve
from .matching import matching

Array = NDArray[np.float64]

SPLINES = {"cubic": 4, "quintic": 6, "monotone": 3, "smoothing": 5}
"""Every kind of spline with the number of points that it needs."""
BEYOND = ("inverse-power", "zero")
SMOOTHEST, ROUGHEST = 1e12, 1e-12
"""Bounds of a smoothing parameter, against the natural scale of the points."""


@dataclass(frozen=True, slots=True)
class Points:
    """Points of an energy curve in eV and ångström, ascending.

    Attributes
    ----------
    separation, energy : tuple of Fraction
    slope : tuple of Fraction
        Slopes of the energy; empty where they are not known.
    error : tuple of float
        Standard errors of the energies; empty where they are not known.
    weight : tuple of float
        Weights for a fit; empty where none are given.
    file, sha256 : str
        Where they were read from.
    """

    separation: tuple[Fraction, ...]
    energy: tuple[Fraction, ...]
    slope: tuple[Fraction, ...] = ()
    error: tuple[float, ...] = ()
    weight: tuple[float, ...] = ()
    file: str = ""
    sha256: str = ""

    def arrays(self) -> tuple[Array, Array]:
        """Return separations and energies as arrays."""
        return np.array([float(x) for x in self.separation]), np.array([float(y) for y in self.energy])


class SplineError(ValueError):
    """Points that a curve can't be made of as asked.

    Attributes
    ----------
    remedy : str
    """

    def __init__(self, says: str, remedy: str) -> None:
        self.remedy = remedy
        super().__init__(says)


def spline(points: Points, kind: str) -> Curve:
    """Return a spline on the range of its points.

    Parameters
    ----------
    points : Points
    kind : str
        ``cubic`` (not-a-knot, or through the stated slopes), ``quintic``, ``monotone`` between neighbours
        (F. N. Fritsch and J. Butland, SIAM J. Sci. Stat. Comput. 5, 300 (1984)), or ``smoothing``: the
        smoothest natural cubic whose mean squared distance from the points, in standard errors, is one
        (C. H. Reinsch, Numer. Math. 10, 177 (1967)).

    Notes
    -----
    SciPy gives energy, slope and, for a quintic, curvature at each point; each piece is Hermite's
    polynomial of them in exact fractions, so these do not jump at all.
    """
    x, y = points.arrays()
    columns = KNOTS[kind](x, y, points)
    nodes = [[points.separation[i], *(_exact(c[i]) for c in columns)] for i in range(x.size)]
    if kind != "smoothing":
        for node, energy in zip(nodes, points.energy, strict=True):
            node[1] = energy
    if points.slope:
        for node, slope in zip(nodes, points.slope, strict=True):
            node[2] = slope
    pieces = []
    for (start, *left), (end, *right) in itertools.pairwise(nodes):
        pieces.append(Piece(start, end, matching(_taylor(left), _taylor(right), start, end)))
    return Curve(tuple(pieces))


def _taylor(derivatives: list[Fraction]) -> list[Fraction]:
    return [value / (1, 1, 2)[k] for k, value in enumerate(derivatives)]


def _exact(value: float) -> Fraction:
    return Fraction(float(value))


def _cubic(x: Array, y: Array, points: Points) -> list[Array]:
    from scipy.interpolate import CubicSpline

    if points.slope:
        return [y, np.array([float(slope) for slope in points.slope])]
    return [y, CubicSpline(x, y)(x, 1)]


def _quintic(x: Array, y: Array, points: Points) -> list[Array]:
    from scipy.interpolate import make_interp_spline

    if points.slope:
        slope = np.array([float(slope) for slope in points.slope])
        return [y, slope, make_interp_spline(x, slope, k=5)(x, 1)]
    made = make_interp_spline(x, y, k=5)
    return [y, made(x, 1), made(x, 2)]


def _monotone(x: Array, y: Array, points: Points) -> list[Array]:
    from scipy.interpolate import PchipInterpolator

    return [y, PchipInterpolator(x, y)(x, 1)]


def _smoothing(x: Array, y: Array, points: Points) -> list[Array]:
    from scipy.interpolate import make_smoothing_spline
    from scipy.optimize import brentq

    weight = np.array(points.error) ** -2.0
    unit = float((x[-1] - x[0]) ** 3 * weight.mean())

    def excess(exponent: float) -> float:
        made = make_smoothing_spline(x, y, weight, lam=unit * 10**exponent)
        return float(np.mean(weight * (y - made(x)) ** 2)) - 1.0

    rough, smooth = np.log10(ROUGHEST), np.log10(SMOOTHEST)
    exponent = (
        smooth if excess(smooth) < 0 else rough if excess(rough) > 0 else brentq(excess, rough, smooth, xtol=1e-6)
    )
    made = make_smoothing_spline(x, y, weight, lam=unit * 10**exponent)
    return [made(x), made(x, 1)]


KNOTS = {"cubic": _cubic, "quintic": _quintic, "monotone": _monotone, "smoothing": _smoothing}
"""What gives energy, slope and perhaps curvature at the points, by the kind of spline."""


def extended(curve: Curve, start: Fraction, end: Fraction, beyond: str) -> Curve:
    """Return a spline continued to a wider range.

    Parameters
    ----------
    curve : Curve
    start, end : Fraction
        The range wanted. Before the first point stands an exponential, beyond the last one the inverse
        power, each with the energy and slope there, or zero.
    beyond : str
        One of ``BEYOND``.

    Raises
    ------
    SplineError
        If energy and slope allow no such continuation.
    """
    first, last = curve.pieces[0].start, curve.pieces[-1].end
    pieces = list(curve.within(start, end).pieces) if start < last and end > first else []
    if start < first:
        pieces.insert(0, Piece(start, min(first, end), _wall(curve, first)))
    if end > last:
        pieces.append(Piece(max(last, start), end, ZERO if beyond == "zero" else _tail(curve, last)))
    return Curve(tuple(pieces), curve.coordinate)


def _ends(curve: Curve, at: Fraction) -> tuple[Fraction, Fraction]:
    energy, slope = curve.derivatives(np.array([float(at)]), 1)[:, 0]
    return _exact(energy), _exact(slope)


def _wall(curve: Curve, first: Fraction) -> Tree:
    energy, slope = _ends(curve, first)
    if energy <= 0 or slope >= 0:
        says = "the grid starts before the first point, whose energy is not that of a wall, positive and falling"
        raise SplineError(says, "Add points further in, or start the grid at the first one.")
    distance = add(R, number(-first))
    return multiply(number(energy), Apply("exp", (multiply(number(slope / energy), distance),)))


def _tail(curve: Curve, last: Fraction) -> Tree:
    energy, slope = _ends(curve, last)
    if energy * slope >= 0:
        says = "beyond the last point no inverse power can follow: energy and slope there do not vanish together"
        raise SplineError(says, 'Add points further out, end the grid at the last one, or write beyond = "zero".')
    power = _exact(float(-slope * last / energy))
    return multiply(number(energy), Apply("^", (multiply(number(1 / last), R), number(-power))))
