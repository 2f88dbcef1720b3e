"""Arrays of pairs: a double and the small error that rounding left, carried along.

Products and sums keep the exact rounding error of the leading part (T. J. Dekker, Numer. Math. 18,
224 (1971); D. E. Knuth, TAOCP 2, 4.2.2), so that a twelfth power is off by one unit in the last
place rather than by twelve. A function of a pair is the function of its leading part, corrected to first order.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from math import inf, isfinite
from typing import Any

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
SPLITTER = 134217729.0
"""2**27 + 1, which splits a double into halves of 26 bits."""


@dataclass(frozen=True, slots=True)
class Pair:
    """The unevaluated sum ``high + low`` of two arrays of doubles, ``low`` being the far smaller."""

    high: Any
    low: Any

    def __add__(self, other: Pair) -> Pair:
        """Add two pairs."""
        total = self.high + other.high
        virtual = total - self.high
        error = (self.high - (total - virtual)) + (other.high - virtual)
        return settle(total, error + (self.low + other.low))

    def __neg__(self) -> Pair:
        """Return minus the pair."""
        return Pair(-self.high, -self.low)

    def __sub__(self, other: Pair) -> Pair:
        """Subtract a pair."""
        return self + (-other)

    def __mul__(self, other: Pair) -> Pair:
        """Multiply two pairs."""
        product, error = exact_product(self.high, other.high)
        return settle(product, error + (self.high * other.low + self.low * other.high))

    def __truediv__(self, other: Pair) -> Pair:
        """Divide by a pair."""
        quotient = self.high / other.high
        product, error = exact_product(quotient, other.high)
        rest = ((self.high - product) - error) + (self.low - quotient * other.low)
        return settle(quotient, rest / other.high)

    def rounded(self) -> Any:
        """Return the nearest doubles."""
        return self.high + self.low


def settle(high: Any, low: Any) -> Pair:
    """Return a pair whose low part is below the last place of the high one, and never spoils an infinity."""
    total = high + low
    rest = low - (total - high)
    if np.all(np.isfinite(rest)):
        return Pair(total, rest)
    return Pair(np.where(np.isfinite(total), total, high), np.where(np.isfinite(rest), rest, 0.0))


def exact_product(x: Any, y: Any) -> tuple[Any, Any]:
    """Return the rounded product of doubles and its rounding error."""
    product = x * y
    x_high, x_low = _split(x)
    y_high, y_low = _split(y)
    error = ((x_high * y_high - product) + x_high * y_low + x_low * y_high) + x_low * y_low
    return product, error


def _split(x: Any) -> tuple[Any, Any]:
    scaled = SPLITTER * x
    high = scaled - (scaled - x)
    return high, x - high


def pair(value: Fraction) -> Pair:
    """Return the pair nearest to an exact value."""
    high = double(value)
    low = double(value - Fraction(high)) if isfinite(high) else 0.0
    # NumPy's kind of double, because Python's own refuses to be divided by zero.
    return Pair(np.float64(high), np.float64(low))


def double(value: Fraction | int) -> float:
    """Return the double nearest to an exact value; infinite beyond the largest one."""
    try:
        return float(value)
    except OverflowError:
        return inf if value > 0 else -inf


def converted(values: Array, factor: Fraction) -> Pair:
    """Return exact doubles times an exact factor, as pairs."""
    return Pair(values, np.zeros_like(values)) * pair(factor)
