"""Elementary functions of the leading coefficient of a series, for arrays and for pairs of arrays."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np

from .pairs import Pair, double, settle

NOTHING_LEFT = 800.0
"""Argument from which on exp(−x) is zero as a double."""


@dataclass(frozen=True, slots=True)
class Head:
    """A function and its slope, both of doubles and an optional order."""

    value: Callable[[Any, Any], Any]
    slope: Callable[[Any, Any, Any], Any]
    """Of the argument, the value there, and the order."""

    def of_array(self, x: Any, order: Any) -> Any:
        """Return the function of an array."""
        return self.value(x, order)

    def of_pair(self, x: Pair, order: Any) -> Pair:
        """Return the function of a pair, the low part to first order."""
        value = self.value(x.high, order)
        return settle(value, self.slope(x.high, value, order) * x.low)


# The C library is right to 2 units in the last place, where scipy.special loses 30 for erfc and 200 for
# the incomplete gamma function.
_erf = np.vectorize(math.erf, otypes=[float])
_erfc = np.vectorize(math.erfc, otypes=[float])


def _tang_toennies(x: Any, n: Any) -> Any:
    """Return exp(−x) Σ xᵏ/k! over k > n: term by term for small x, as one minus the other terms for large."""
    order = int(n)
    x = np.minimum(x, NOTHING_LEFT)
    near = _partial_sum(x, order + 1, 2 * order + 31) * Pair(np.exp(-x), 0.0)
    for k in range(1, order + 2):
        near = near * Pair(x, 0.0) / Pair(float(k), 0.0)
    far = Pair(1.0, 0.0) - _partial_sum(x, 0, order) * Pair(np.exp(-x), 0.0)
    return np.where(x < order + 1, near.rounded(), far.rounded())


def _partial_sum(x: Any, first: int, last: int) -> Pair:
    """Return Σ xᵏ⁻ᶠ f!/k! over k from f, the first, to the last, by Horner's rule."""
    result = Pair(np.ones_like(x), 0.0)
    for k in range(last, first, -1):
        result = Pair(1.0, 0.0) + result * Pair(x, 0.0) / Pair(float(k), 0.0)
    return result


def _tang_toennies_slope(x: Any, _: Any, n: Any) -> Any:
    return np.exp(n * np.log(x) - x - math.lgamma(n + 1.0))


HEADS: dict[str, Head] = {
    "exp": Head(lambda x, _: np.exp(x), lambda x, y, _: y),
    "log": Head(lambda x, _: np.log(x), lambda x, y, _: 1.0 / x),
    "sqrt": Head(lambda x, _: np.sqrt(x), lambda x, y, _: 0.5 / y),
    "sin": Head(lambda x, _: np.sin(x), lambda x, y, _: np.cos(x)),
    "cos": Head(lambda x, _: np.cos(x), lambda x, y, _: -np.sin(x)),
    "tan": Head(lambda x, _: np.tan(x), lambda x, y, _: 1.0 + y * y),
    "sinh": Head(lambda x, _: np.sinh(x), lambda x, y, _: np.cosh(x)),
    "cosh": Head(lambda x, _: np.cosh(x), lambda x, y, _: np.sinh(x)),
    "tanh": Head(lambda x, _: np.tanh(x), lambda x, y, _: np.cosh(x) ** -2.0),
    "erf": Head(lambda x, _: _erf(x), lambda x, y, _: 2.0 / math.sqrt(math.pi) * np.exp(-x * x)),
    "erfc": Head(lambda x, _: _erfc(x), lambda x, y, _: -2.0 / math.sqrt(math.pi) * np.exp(-x * x)),
    "power": Head(lambda x, n: np.power(x, double(n)), lambda x, y, n: double(n) * y / x),
    "tang_toennies": Head(_tang_toennies, _tang_toennies_slope),
}
