"""The size of the largest term of a formula, which sets what its rounding is measured against."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from ..formula.taylor import derivatives
from ..formula.tree import Apply, Tree
from ..potential import Curve

Array = NDArray[np.float64]


def largest_terms(curve: Curve, r: Array, order: int) -> Array:
    """Return the largest terms of Taylor coefficients 0 … order at separations in ångström."""
    result = np.zeros((order + 1, r.size))
    index = curve.indices(r)
    for number, piece in enumerate(curve.pieces):
        members = index == number
        if members.any():
            result[:, members] = _terms(piece.tree, r[members], order)
    return result


def _terms(tree: Tree, r: Array, order: int) -> Array:
    """Take the larger of the parts of a sum; multiply the parts of a product as series of sizes."""
    match tree:
        case Apply(function="+"):
            largest: Array = np.max([_terms(part, r, order) for part in tree.arguments], axis=0)
            return largest
        case Apply(function="negate"):
            return _terms(tree.arguments[0], r, order)
        case Apply(function="*"):
            total = _terms(tree.arguments[0], r, order)
            for part in tree.arguments[1:]:
                total = _product(total, _terms(part, r, order))
            return total
        case _:
            factorials = np.cumprod([1, *range(1, order + 1)])
            sizes: Array = np.abs(derivatives(tree, r, order)) / factorials[:, None]
            return sizes


def _product(x: Array, y: Array) -> Array:
    with np.errstate(all="ignore"):
        return np.array([np.max([x[j] * y[k - j] for j in range(k + 1)], axis=0) for k in range(len(x))])
