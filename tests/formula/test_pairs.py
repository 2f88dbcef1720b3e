"""Pairs of doubles: exact remainders, so that long products stay right."""

from __future__ import annotations

from fractions import Fraction
from math import inf

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula.pairs import Pair, converted, exact_product, pair

MODERATE = st.floats(1e-40, 1e40) | st.floats(-1e40, -1e-40)
TINY = Fraction(1, 2**98)
"""Relative error of one operation on pairs, with a factor of 2**8 to spare."""


def exact(value: Pair) -> Fraction:
    return Fraction(float(value.high)) + Fraction(float(value.low))


def of(high: float) -> Pair:
    return Pair(np.float64(high), np.float64(0.0))


@given(MODERATE, MODERATE)
def test_the_remainder_of_a_product_is_exact(x: float, y: float) -> None:
    high, low = exact_product(x, y)
    assert Fraction(high) + Fraction(low) == Fraction(x) * Fraction(y)


@given(MODERATE, MODERATE, MODERATE)
def test_sums_products_and_quotients_are_right_to_30_digits(x: float, y: float, z: float) -> None:
    a, b = of(x) * of(y), of(z)
    product = Fraction(x) * Fraction(y)
    assert abs(exact(a + b) - (product + Fraction(z))) <= TINY * max(abs(product), abs(Fraction(z)))
    assert abs(exact(a - b) - (product - Fraction(z))) <= TINY * max(abs(product), abs(Fraction(z)))
    assert abs(exact(a * b) - product * Fraction(z)) <= TINY * abs(product * Fraction(z))
    assert abs(exact(a / b) - product / Fraction(z)) <= TINY * abs(product / Fraction(z))
    assert exact(-a) == -exact(a)


@given(st.floats(0.1, 10), st.integers(2, 24))
def test_a_high_power_is_off_by_less_than_one_unit_in_the_last_place(x: float, n: int) -> None:
    result = of(x)
    for _ in range(n - 1):
        result = result * of(x)
    rounded = float(result.rounded())
    assert abs(Fraction(rounded) - Fraction(x) ** n) <= Fraction(np.spacing(rounded)) * Fraction(501, 1000)


@given(st.fractions(max_denominator=10**30))
def test_the_pair_of_a_fraction_is_right_to_30_digits(value: Fraction) -> None:
    assert abs(exact(pair(value)) - value) <= abs(value) / 2**105


@pytest.mark.parametrize(("value", "high"), [(Fraction(10) ** 400, inf), (-(Fraction(10) ** 400), -inf)])
def test_a_value_beyond_the_doubles_is_infinite(value: Fraction, high: float) -> None:
    assert pair(value) == Pair(high, 0.0)


def test_what_overflows_or_is_divided_by_zero_is_infinite_and_not_spoilt() -> None:
    large, none = Pair(np.array([1e300]), np.array([0.0])), Pair(np.array([0.0]), np.array([0.0]))
    with np.errstate(all="ignore"):
        for result in (large * large, large / none, large * large + large):
            assert result.rounded()[0] == inf


def test_numbers_are_converted_with_an_exact_factor() -> None:
    values = np.array([0.1, 0.7, 1e-5])
    rounded = converted(values, Fraction(96485, 1000)).rounded()
    assert rounded.tolist() == [float(Fraction(value) * Fraction(96485, 1000)) for value in values]
