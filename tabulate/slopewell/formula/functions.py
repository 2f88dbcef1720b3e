"""Elementary functions of the leading coefficient of a series, for arrays and for pairs of arrays."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import pi, sqrt
from typing import Any

import numpy as np

from .pairs import Pair, settle


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


def _erf(x: Any, _: Any) -> Any:
    from scipy.special import erf

    return erf(x)


def _erfc(x: Any, _: Any) -> Any:
    from scipy.special import erfc

    return erfc(x)


def _tang_toennies(x: Any, n: Any) -> Any:
    """Return 1 − exp(−x) Σ xᵏ/k! as the regularized incomplete gamma function, free of cancellation."""
    from scipy.special import gammainc

    return gammainc(n + 1.0, x)


def _tang_toennies_slope(x: Any, _: Any, n: Any) -> Any:
    from scipy.special import gammaln

    return np.exp(n * np.log(x) - x - gammaln(n + 1.0))


HEADS: dict[str, Head] = {
    "exp": Head(lambda x, _: np.exp(x), lambda x, y, _: y),
    "log": Head(lambda x, _: np.log(x), lambda x, y, _: 1.0 / x),
    "sqrt": Head(lambda x, _: np.sqrt(x), lambda x, y, _: 0.5 / y),
    "sin": Head(lambda x, _: np.sin(x), lambda x, y, _: np.cos(x)),
    "cos": Head(lambda x, _: np.cos(x), lambda x, y, _: -np.sin(x)),
    "tan": Head(lambda x, _: np.tan(x), lambda x, y, _: 1.0 + y * y),
    "sinh": Head(lambda x, _: np.sinh(x), lambda x, y, _: np.cosh(x)),
    "cosh": Head(lambda x, _: np.cosh(x), lambda x, y, _: np.sinh(x)),
    "tanh": Head(lambda x, _: np.tanh(x), lambda x, y, _: 1.0 - y * y),
    "erf": Head(_erf, lambda x, y, _: 2.0 / sqrt(pi) * np.exp(-x * x)),
    "erfc": Head(_erfc, lambda x, y, _: -2.0 / sqrt(pi) * np.exp(-x * x)),
    "power": Head(lambda x, n: np.power(x, float(n)), lambda x, y, n: float(n) * y / x),
    "tang_toennies": Head(_tang_toennies, _tang_toennies_slope),
}
