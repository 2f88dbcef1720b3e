"""Rules for truncated Taylor series: sums, products, quotients, powers and functions of them.

The recurrences are the usual ones of automatic differentiation (A. Griewank and A. Walther,
*Evaluating Derivatives*, 2nd ed., SIAM 2008, table 13.2).
"""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from typing import Any, Protocol

import numpy as np

from .pairs import Pair

Series = list[Any]


class Arithmetic(Protocol):
    """What a rule needs to know of the reading it serves: its order, and its kind of number."""

    order: int
    paired: bool

    def number(self, value: Fraction | int) -> Any:
        """Return a number in the reading's own kind."""

    def head(self, name: str, x: Any, *, order: Any = 0) -> Any:
        """Return an elementary function of a leading coefficient."""


def primitive(reading: Arithmetic, head: Any, slope: Series, x: Series) -> Series:
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


def pick(reading: Arithmetic, holds: Any, first: Series, second: Series) -> Series:
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


def total(reading: Arithmetic, *terms: Series) -> Series:
    """Add series."""
    result = list(terms[0])
    for term in terms[1:]:
        for k, coefficient in enumerate(term):
            if k < len(result):
                result[k] = result[k] + coefficient
            else:
                result.append(coefficient)
    return result


def negative(reading: Arithmetic, x: Series) -> Series:
    """Negate a series."""
    return [-coefficient for coefficient in x]


def product(reading: Arithmetic, *factors: Series) -> Series:
    """Multiply series."""
    result = factors[0]
    for factor in factors[1:]:
        result = _product(reading, result, factor)
    return result


def _product(reading: Arithmetic, x: Series, y: Series) -> Series:
    result: Series = []
    for k in range(min(reading.order + 1, len(x) + len(y) - 1)):
        low, high = max(0, k - len(y) + 1), min(k, len(x) - 1)
        coefficient = x[low] * y[k - low]
        for j in range(low + 1, high + 1):
            coefficient = coefficient + x[j] * y[k - j]
        result.append(coefficient)
    return result


def square(reading: Arithmetic, x: Series) -> Series:
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


def quotient(reading: Arithmetic, x: Series, y: Series) -> Series:
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


def exp(reading: Arithmetic, x: Series) -> Series:
    """Return the exponential."""
    result = [reading.head("exp", x[0])]
    if len(x) == 1:
        return result
    for k in range(1, reading.order + 1):
        result.append(_weighted(reading, x, result, k))
    return result


def _weighted(reading: Arithmetic, x: Series, y: Series, k: int) -> Any:
    """Return Σ (j/k) xⱼ yₖ₋ⱼ over j from 1 to k."""
    coefficient = None
    for j in range(1, min(k, len(x) - 1) + 1):
        if k - j < len(y):
            term = x[j] * y[k - j]
            term = term if j == k else term * reading.number(Fraction(j, k))
            coefficient = term if coefficient is None else coefficient + term
    return reading.number(0) if coefficient is None else coefficient


def log(reading: Arithmetic, x: Series) -> Series:
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


def sqrt(reading: Arithmetic, x: Series) -> Series:
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


def real_power(reading: Arithmetic, x: Series, n: Fraction) -> Series:
    """Return a power that is neither whole nor half, or a huge one."""
    result = [reading.head("power", x[0], order=n)]
    if len(x) == 1:
        return result
    for k in range(1, reading.order + 1):
        rest = reading.number(0)
        for j in range(1, min(k, len(x) - 1) + 1):
            rest = rest + x[j] * result[k - j] * reading.number((j * n - (k - j)) / k)
        result.append(rest / x[0])
    return result


def _turning(first: str, second: str, sign: int) -> Callable[[Arithmetic, Series], tuple[Series, Series]]:
    """Return the rule for two functions that are each other's derivative, up to a sign."""

    def rule(reading: Arithmetic, x: Series) -> tuple[Series, Series]:
        one, other = [reading.head(first, x[0])], [reading.head(second, x[0])]
        for k in range(1, reading.order + 1 if len(x) > 1 else 1):
            up, down = _weighted(reading, x, other, k), _weighted(reading, x, one, k)
            one.append(up)
            other.append(-down if sign < 0 else down)
        return one, other

    return rule


sin_and_cos = _turning("sin", "cos", -1)
sinh_and_cosh = _turning("sinh", "cosh", 1)


def tan(reading: Arithmetic, x: Series) -> Series:
    """Return the tangent, from t′ = (1 + t²) x′."""
    result = [reading.head("tan", x[0])]
    for k in range(1, reading.order + 1 if len(x) > 1 else 1):
        slope = total(reading, [reading.number(1)], square(reading, result))
        result.append(_weighted(reading, x, slope[:k], k))
    return result


def tanh(reading: Arithmetic, x: Series) -> Series:
    """Return the hyperbolic tangent, from its slope 4u/(1 + u)² with u = exp(−2|x|), free of cancellation."""
    head = reading.head("tanh", x[0])
    if len(x) == 1 or reading.order == 0:
        return [head]
    u = exp(reading, [c * reading.number(-2) for c in absolute(reading, x)])
    below = square(reading, total(reading, [reading.number(1)], u))
    slope = quotient(reading, [c * reading.number(4) for c in u], below)
    return primitive(reading, head, slope, x)


def _error_function(name: str, sign: int) -> Callable[[Arithmetic, Series], Series]:
    def rule(reading: Arithmetic, x: Series) -> Series:
        if len(x) == 1 or reading.order == 0:
            return [reading.head(name, x[0])]
        bell = exp(reading, negative(reading, square(reading, x)))
        scale = reading.number(sign * TWO_OVER_ROOT_PI)
        return primitive(reading, reading.head(name, x[0]), [c * scale for c in bell], x)

    return rule


TWO_OVER_ROOT_PI = Fraction(112837916709551257389615890312154517169, 10**38)
"""2/√π to 39 digits."""


def absolute(reading: Arithmetic, x: Series) -> Series:
    """Return the absolute value."""
    return pick(reading, _high(reading, x) < 0, negative(reading, x), x)


def smaller(reading: Arithmetic, x: Series, y: Series) -> Series:
    """Return the smaller of two."""
    return pick(reading, _high(reading, x) <= _high(reading, y), x, y)


def larger(reading: Arithmetic, x: Series, y: Series) -> Series:
    """Return the larger of two."""
    return pick(reading, _high(reading, x) >= _high(reading, y), x, y)


def _high(reading: Arithmetic, x: Series) -> Any:
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
