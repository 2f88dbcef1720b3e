"""Separations of the rows of a grid: even in r, r², 1/r or log r, the ends exactly as stated."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from ..formula import parse
from ..formula.balls import ball, series
from ..formula.pairs import Pair, exact_product, pair
from ..formula.roots import nearest_fraction
from ..formula.taylor import accurate_derivatives
from ..units import Unit

Array = NDArray[np.float64]


def separations(start: Fraction, end: Fraction, rows: int, spacing: str, unit: Unit) -> Array:
    """Return the separations of a grid.

    Parameters
    ----------
    start, end : Fraction
        First and last separation in ångström.
    rows : int
    spacing : str
        ``separation``, ``separation-squared``, ``inverse`` or ``logarithmic``.
    unit : Unit
        The unit of length of the result.

    Returns
    -------
    (rows,) array
        Ascending; the first and last are the doubles nearest to the stated ends, and each
        other one is within a unit in the last place of its rule, or two for ``logarithmic``.
    """
    first, last = start / unit.factor, end / unit.factor
    steps = np.arange(rows, dtype=np.float64)
    with np.errstate(all="ignore"):
        r = RULES[spacing](first, last, steps)
    r[0], r[-1] = float(first), float(last)
    return r


def _even(first: Fraction, last: Fraction, steps: Array) -> Pair:
    step = pair((last - first) / (len(steps) - 1))
    return pair(first) + Pair(steps, np.zeros_like(steps)) * step


def _in_separation(first: Fraction, last: Fraction, steps: Array) -> Array:
    r: Array = _even(first, last, steps).rounded()
    return r


def _in_square(first: Fraction, last: Fraction, steps: Array) -> Array:
    square = _even(first**2, last**2, steps)
    root = np.sqrt(square.high)
    product, error = exact_product(root, root)
    r: Array = root + ((square.high - product) - error + square.low) / (2 * root)
    return r


def _in_inverse(first: Fraction, last: Fraction, steps: Array) -> Array:
    r: Array = (Pair(1.0, 0.0) / _even(1 / first, 1 / last, steps)).rounded()
    return r


def _in_logarithm(first: Fraction, last: Fraction, steps: Array) -> Array:
    # In pairs, since an error in the exponent is one of the separation itself.
    width = nearest_fraction(series(parse("log(r)"), ball(last / first), 0)[0])
    exponent = Pair(steps, np.zeros_like(steps)) * pair(width / (len(steps) - 1))
    (growth,) = accurate_derivatives(parse("exp(r)"), exponent, 0)
    r: Array = (growth * pair(first)).rounded()
    return r


RULES = {
    "separation": _in_separation,
    "separation-squared": _in_square,
    "inverse": _in_inverse,
    "logarithmic": _in_logarithm,
}


VARIABLES: dict[str, Callable[[Array], Array]] = {
    "separation": lambda r: r,
    "separation-squared": np.square,
    "inverse": np.reciprocal,
    "logarithmic": np.log,
}


def variable(separation: Array, spacing: str) -> Array:
    """Return what the rows of a spacing are even in."""
    with np.errstate(all="ignore"):
        return VARIABLES[spacing](separation)
