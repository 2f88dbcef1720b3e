"""The polynomial with given Taylor coefficients at both ends of a stretch, in exact fractions."""

from __future__ import annotations

from fractions import Fraction
from math import comb

from ..formula.tree import R, Tree, add, multiply, number, polynomial


def matching(left: list[Fraction], right: list[Fraction], start: Fraction, end: Fraction) -> Tree:
    """Return Hermite's polynomial with given Taylor coefficients at both ends of a stretch.

    With u from 0 to 1 over the stretch it is the left expansion plus uᵐ times a polynomial in u − 1 that
    makes up for what the right expansion is more; solved in exact fractions.
    """
    count, width = len(left), end - start
    here, there = ([c * width**k for k, c in enumerate(side)] for side in (left, right))
    missing = [there[k] - sum(comb(j, k) * here[j] for j in range(k, count)) for k in range(count)]
    # 1/uᵐ about u = 1 has the coefficients of a negative binomial.
    inverse = [Fraction((-1) ** k * comb(count + k - 1, k)) for k in range(count)]
    rest = [sum((missing[j] * inverse[k - j] for j in range(k + 1)), Fraction(0)) for k in range(count)]
    shifted = [
        sum((comb(j, k) * (-1) ** (j - k) * rest[j] for j in range(k, count)), Fraction(0)) for k in range(count)
    ]
    u = multiply(number(1 / width), add(R, number(-start)))
    return polynomial([*here, *shifted], u)
