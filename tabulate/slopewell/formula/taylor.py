"""Read a tree with truncated Taylor series over NumPy arrays: energy and every derivative at once.

The recurrences are the usual ones of automatic differentiation (A. Griewank and A. Walther,
*Evaluating Derivatives*, 2nd ed., SIAM 2008, table 13.2). A series is a list of coefficients in
which trailing exact zeros are left out; a coefficient is a number, an array, or a
:class:`~slopewell.formula.pairs.Pair` of arrays.
"""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from math import factorial
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .balls import fraction
from .functions import HEADS, Head
from .pairs import Pair, double, pair
from .tree import Apply, Choice, Constant, Name, Number, Tree

Array = NDArray[np.float64]
Series = list[Any]

LARGEST_WHOLE_POWER = 2**20
"""Size up to which a whole power is a chain of products, each right to rounding."""
BLOCK = 4096
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

    def head(self, name: str, x: Any, *, order: int = 0) -> Any:
        """Return an elementary function of a leading coefficient."""
        head: Head = HEADS[name]
        return head.of_pair(x, order) if self.paired else head.of_array(x, order)

    def read(self, tree: Tree) -> Series:
        """Return the series of one node."""
        match tree:
            case Number():
                return [self.number(tree.value)]
            case Constant():
                return [
                    self.number(fraction(tree.ball)) if tree.ball.is_finite() else self.number(0) * np.nan
                ]
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


def primitive(reading: Reading, head: Any, slope: Series, x: Series) -> Series:
    """Return f(x) from its leading coefficient and the series of f′(x)."""
    result = [head]
    for k in range(1, reading.order + 1):
        total = None
        for j in range(1, min(k, len(x) - 1) + 1):
            if k - j < len(slope):
                term = x[j] * slope[k - j] * reading.number(Fraction(j, k))
                total = term if total is None else total + term
        result.append(reading.number(0) if total is None else total)
    return result


def pick(reading: Reading, holds: Any, first: Series, second: Series) -> Series:
    """Return the first series where the condition holds and the second elsewhere."""
    result: Series = []
    for k in range(max(len(first), len(second))):
        one = first[k] if k < len(first) else reading.number(0)
        other = second[k] if k < len(second) else reading.number(0)
        if reading.paired:
            result.append(Pair(np.where(holds, one.high, other.high), np.where(holds, one.low, other.low)))
        else:
            result.append(np.where(holds, one, other))
    return result


def total(reading: Reading, *terms: Series) -> Series:
    """Add series."""
    result = list(terms[0])
    for term in terms[1:]:
        for k, coefficient in enumerate(term):
            if k < len(result):
                result[k] = result[k] + coefficient
            else:
                result.append(coefficient)
    return result


def negative(reading: Reading, x: Series) -> Series:
    """Negate a series."""
    return [-coefficient for coefficient in x]


def product(reading: Reading, *factors: Series) -> Series:
    """Multiply series."""
    result = factors[0]
    for factor in factors[1:]:
        result = _product(reading, result, factor)
    return result


def _product(reading: Reading, x: Series, y: Series) -> Series:
    result: Series = []
    for k in range(min(reading.order + 1, len(x) + len(y) - 1)):
        low, high = max(0, k - len(y) + 1), min(k, len(x) - 1)
        coefficient = x[low] * y[k - low]
        for j in range(low + 1, high + 1):
            coefficient = coefficient + x[j] * y[k - j]
        result.append(coefficient)
    return result


def square(reading: Reading, x: Series) -> Series:
    """Square a series, with half the products of a general one."""
    two = reading.number(2)
    result: Series = []
    for k in range(min(reading.order + 1, 2 * len(x) - 1)):
        low = max(0, k - len(x) + 1)
        cross = None
        for j in range(low, (k + 1) // 2):
            term = x[j] * x[k - j]
            cross = term if cross is None else cross + term
        coefficient = None if cross is None else cross * two
        if k % 2 == 0:
            middle = x[k // 2] * x[k // 2]
            coefficient = middle if coefficient is None else coefficient + middle
        result.append(coefficient)
    return result


def quotient(reading: Reading, x: Series, y: Series) -> Series:
    """Divide series."""
    result: Series = []
    last = len(x) - 1 if len(y) == 1 else reading.order
    for k in range(min(last, reading.order) + 1):
        rest = x[k] if k < len(x) else None
        for j in range(1, min(k, len(y) - 1) + 1):
            term = y[j] * result[k - j]
            rest = -term if rest is None else rest - term
        result.append((reading.number(0) if rest is None else rest) / y[0])
    return result


def exp(reading: Reading, x: Series) -> Series:
    """Return the exponential."""
    result = [reading.head("exp", x[0])]
    if len(x) == 1:
        return result
    for k in range(1, reading.order + 1):
        result.append(_weighted(reading, x, result, k))
    return result


def _weighted(reading: Reading, x: Series, y: Series, k: int) -> Any:
    """Return Σ (j/k) xⱼ yₖ₋ⱼ over j from 1 to k."""
    coefficient = None
    for j in range(1, min(k, len(x) - 1) + 1):
        if k - j < len(y):
            term = x[j] * y[k - j]
            term = term if j == k else term * reading.number(Fraction(j, k))
            coefficient = term if coefficient is None else coefficient + term
    return reading.number(0) if coefficient is None else coefficient


def log(reading: Reading, x: Series) -> Series:
    """Return the natural logarithm."""
    result = [reading.head("log", x[0])]
    if len(x) == 1:
        return result
    for k in range(1, reading.order + 1):
        rest = x[k] if k < len(x) else reading.number(0)
        for j in range(max(1, k - len(x) + 1), k):
            rest = rest - result[j] * x[k - j] * reading.number(Fraction(j, k))
        result.append(rest / x[0])
    return result


def sqrt(reading: Reading, x: Series) -> Series:
    """Return the square root."""
    result = [reading.head("sqrt", x[0])]
    if len(x) == 1:
        return result
    half = reading.number(Fraction(1, 2))
    for k in range(1, reading.order + 1):
        rest = x[k] if k < len(x) else reading.number(0)
        for j in range(1, k):
            rest = rest - result[j] * result[k - j]
        result.append(rest * half / result[0])
    return result


def real_power(reading: Reading, x: Series, n: Fraction) -> Series:
    """Return a power that is neither whole nor half, or a huge one."""
    result = [reading.head("power", x[0], order=n)]  # type: ignore[arg-type]
    if len(x) == 1:
        return result
    for k in range(1, reading.order + 1):
        rest = reading.number(0)
        for j in range(1, min(k, len(x) - 1) + 1):
            rest = rest + x[j] * result[k - j] * reading.number((j * n - (k - j)) / k)
        result.append(rest / x[0])
    return result


def _turning(first: str, second: str, sign: int) -> Callable[[Reading, Series], tuple[Series, Series]]:
    """Return the rule for two functions that are each other's derivative, up to a sign."""

    def rule(reading: Reading, x: Series) -> tuple[Series, Series]:
        one, other = [reading.head(first, x[0])], [reading.head(second, x[0])]
        for k in range(1, reading.order + 1 if len(x) > 1 else 1):
            up, down = _weighted(reading, x, other, k), _weighted(reading, x, one, k)
            one.append(up)
            other.append(-down if sign < 0 else down)
        return one, other

    return rule


sin_and_cos = _turning("sin", "cos", -1)
sinh_and_cosh = _turning("sinh", "cosh", 1)


def tan(reading: Reading, x: Series) -> Series:
    """Return the tangent, from t′ = (1 + t²) x′."""
    result = [reading.head("tan", x[0])]
    for k in range(1, reading.order + 1 if len(x) > 1 else 1):
        slope = total(reading, [reading.number(1)], square(reading, result))
        result.append(_weighted(reading, x, slope[:k], k))
    return result


def tanh(reading: Reading, x: Series) -> Series:
    """Return the hyperbolic tangent, from its slope 4u/(1 + u)² with u = exp(−2|x|), free of cancellation."""
    head = reading.head("tanh", x[0])
    if len(x) == 1 or reading.order == 0:
        return [head]
    u = exp(reading, [c * reading.number(-2) for c in absolute(reading, x)])
    below = square(reading, total(reading, [reading.number(1)], u))
    slope = quotient(reading, [c * reading.number(4) for c in u], below)
    return primitive(reading, head, slope, x)


def _error_function(name: str, sign: int) -> Callable[[Reading, Series], Series]:
    def rule(reading: Reading, x: Series) -> Series:
        if len(x) == 1 or reading.order == 0:
            return [reading.head(name, x[0])]
        bell = exp(reading, negative(reading, square(reading, x)))
        scale = reading.number(sign * TWO_OVER_ROOT_PI)
        return primitive(reading, reading.head(name, x[0]), [c * scale for c in bell], x)

    return rule


TWO_OVER_ROOT_PI = Fraction(112837916709551257389615890312154517169, 10**38)
"""2/√π to 39 digits."""


def absolute(reading: Reading, x: Series) -> Series:
    """Return the absolute value."""
    return pick(reading, _high(reading, x) < 0, negative(reading, x), x)


def smaller(reading: Reading, x: Series, y: Series) -> Series:
    """Return the smaller of two."""
    return pick(reading, _high(reading, x) <= _high(reading, y), x, y)


def larger(reading: Reading, x: Series, y: Series) -> Series:
    """Return the larger of two."""
    return pick(reading, _high(reading, x) >= _high(reading, y), x, y)


def _high(reading: Reading, x: Series) -> Any:
    return x[0].high if reading.paired else x[0]


RULES: dict[str, Callable[..., Series]] = {
    "+": total,
    "*": product,
    "/": quotient,
    "negate": negative,
    "exp": exp,
    "log": log,
    "sqrt": sqrt,
    "erf": _error_function("erf", 1),
    "erfc": _error_function("erfc", -1),
    "sin": lambda reading, x: sin_and_cos(reading, x)[0],
    "cos": lambda reading, x: sin_and_cos(reading, x)[1],
    "tan": tan,
    "sinh": lambda reading, x: sinh_and_cosh(reading, x)[0],
    "cosh": lambda reading, x: sinh_and_cosh(reading, x)[1],
    "tanh": tanh,
    "abs": absolute,
    "min": smaller,
    "max": larger,
}
