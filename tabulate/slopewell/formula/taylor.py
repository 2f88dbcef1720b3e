"""Read a tree with truncated Taylor series over NumPy arrays: energy and every derivative at once.

A series is a list of coefficients in which trailing exact zeros are left out; a coefficient is a
number, an array, or a :class:`~slopewell.formula.pairs.Pair` of arrays.
"""

from __future__ import annotations

from fractions import Fraction
from math import factorial
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .balls import fraction
from .functions import HEADS, Head
from .pairs import Pair, double, pair
from .recurrences import (
    RULES,
    exp,
    log,
    negative,
    pick,
    primitive,
    product,
    quotient,
    real_power,
    sqrt,
    square,
)
from .tree import Apply, Choice, Constant, Name, Number, Tree

Array = NDArray[np.float64]
Series = list[Any]

LARGEST_WHOLE_POWER = 2**20
"""Size up to which a whole power is a chain of products, each right to rounding."""
BLOCK = 16384
"""Separations worked on at a time, so that intermediate arrays stay in the fast cache."""


def derivatives(tree: Tree, r: Array, order: int) -> Array:
    """Return the value and derivatives of a tree.

    Parameters
    ----------
    tree : Tree
        A bound tree: its only name is ``r``.
    r : (n,) array
        Separations.
    order : int
        Highest derivative.

    Returns
    -------
    (order + 1, n) array
        Row k holds the k-th derivative. What overflows or has no value is not finite.
    """
    result = np.empty((order + 1, r.size))
    with np.errstate(all="ignore"):
        for start in range(0, r.size, BLOCK):
            block = slice(start, start + BLOCK)
            series = Reading([r[block], 1.0], order).of(tree)
            for k in range(order + 1):
                result[k, block] = series[k] * factorial(k) if k < len(series) else 0.0
    return result


def accurate_derivatives(tree: Tree, r: Pair, order: int) -> list[Pair]:
    """Return the same with pairs, right to about one unit in the last place of the largest term.

    Parameters
    ----------
    tree : Tree
        A bound tree.
    r : Pair of (n,) arrays
        Separations, with what rounding left of them.
    order : int
        Highest derivative.
    """
    size = r.high.size
    highs, lows = np.zeros((order + 1, size)), np.zeros((order + 1, size))
    with np.errstate(all="ignore"):
        for start in range(0, size, BLOCK):
            block = slice(start, start + BLOCK)
            series = Reading([Pair(r.high[block], r.low[block]), Pair(1.0, 0.0)], order).of(tree)
            for k, coefficient in enumerate(series[: order + 1]):
                scaled = coefficient * Pair(float(factorial(k)), 0.0) if k > 1 else coefficient
                highs[k, block], lows[k, block] = scaled.high, scaled.low
    return [Pair(high, low) for high, low in zip(highs, lows, strict=True)]


class Reading:
    """Evaluate every distinct node of a tree once, as a truncated series.

    The kind of number is that of the separations handed in: arrays, or pairs of arrays.
    """

    def __init__(self, r: Series, order: int) -> None:
        self.r = r[: order + 1]
        self.order = order
        self.paired = isinstance(r[0], Pair)
        self.known: dict[Any, Series] = {}

    def of(self, tree: Tree) -> Series:
        """Return the series of a tree."""
        key = id(tree)
        if key not in self.known:
            self.known[key] = self.read(tree)
        return self.known[key]

    def number(self, value: Fraction | int) -> Any:
        """Return a number in this reading's own kind."""
        return pair(Fraction(value)) if self.paired else np.float64(double(value))

    def head(self, name: str, x: Any, *, order: Any = 0) -> Any:
        """Return an elementary function of a leading coefficient."""
        head: Head = HEADS[name]
        return head.of_pair(x, order) if self.paired else head.of_array(x, order)

    def read(self, tree: Tree) -> Series:
        """Return the series of one node."""
        match tree:
            case Number():
                return [self.number(tree.value)]
            case Constant():
                return [self.number(fraction(tree.ball)) if tree.ball.is_finite() else self.number(0) * np.nan]
            case Name():
                return self.r
            case Choice():
                return self.choice(tree)
            case Apply(function="^"):
                return self.power(*tree.arguments)
            case Apply(function="tang_toennies"):
                order, argument = tree.arguments
                assert isinstance(order, Number)
                return self.tang_toennies(int(order.value), self.of(argument))
            case Apply():
                return RULES[tree.function](self, *(self.of(argument) for argument in tree.arguments))

    def power(self, base: Tree, exponent: Tree) -> Series:
        """Raise to a power: whole ones by repeated squaring, shared between powers of one base."""
        if not isinstance(exponent, Number):
            return exp(self, product(self, self.of(exponent), log(self, self.of(base))))
        n = exponent.value
        if n.denominator == 1 and abs(n) <= LARGEST_WHOLE_POWER:
            return self.whole_power(base, int(n))
        if n.denominator == 2:
            key = ("root", id(base))
            if key not in self.known:
                self.known[key] = sqrt(self, self.of(base))
            return self.series_power(self.known[key], n.numerator)
        return real_power(self, self.of(base), n)

    def whole_power(self, base: Tree, n: int) -> Series:
        """Return a whole power of a node."""
        key = (id(base), n)
        if key in self.known:
            return self.known[key]
        if n < 0:
            result = quotient(self, [self.number(1)], self.whole_power(base, -n))
        elif n == 0:
            result = [self.number(1)]
        elif n == 1:
            result = self.of(base)
        elif n % 2:
            result = product(self, self.whole_power(base, n - 1), self.of(base))
        else:
            result = square(self, self.whole_power(base, n // 2))
        self.known[key] = result
        return result

    def series_power(self, x: Series, n: int) -> Series:
        """Return a whole power of a series."""
        if n < 0:
            return quotient(self, [self.number(1)], self.series_power(x, -n))
        result = [self.number(1)]
        for bit in bin(n)[2:]:
            result = square(self, result)
            if bit == "1":
                result = product(self, result, x)
        return result

    def choice(self, tree: Choice) -> Series:
        """Choose point by point; only a formula whose branches were not resolved comes here."""
        left, right = self.of(tree.left)[0], self.of(tree.right)[0]
        gap = left - right
        gap = gap.high if self.paired else gap
        holds = {"<": gap < 0, "<=": gap <= 0, ">": gap > 0, ">=": gap >= 0}[tree.comparison]
        return pick(self, holds, self.of(tree.then), self.of(tree.otherwise))

    def tang_toennies(self, n: int, x: Series) -> Series:
        """Return the damping function, whose derivative is xⁿ exp(−x)/n!."""
        slope = product(self, self.series_power(x, n), exp(self, negative(self, x)))
        slope = [c * self.number(Fraction(1, factorial(n))) for c in slope]
        return primitive(self, self.head("tang_toennies", x[0], order=n), slope, x)
