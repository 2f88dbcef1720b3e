"""Numbers as balls: python-flint's ``arb``, a midpoint with a radius that covers all rounding."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from fractions import Fraction
from functools import lru_cache
from typing import Any

from flint import arb, ctx, fmpq

Ball = Any
"""A python-flint ``arb``; the library ships no types."""

PRECISION = 128
"""Bits of every ball computation."""


@contextmanager
def precision(bits: int = PRECISION) -> Iterator[None]:
    """Compute with so many bits inside the block; python-flint keeps this setting per process."""
    before = ctx.prec
    ctx.prec = bits
    try:
        yield
    finally:
        ctx.prec = before


def ball(value: Fraction | float | int) -> Ball:
    """Return the ball of a number: exact for a float, within 2**-128 for a fraction."""
    return _exact(value.numerator, value.denominator) if isinstance(value, Fraction) else arb(value)


@lru_cache(maxsize=4096)
def _exact(numerator: int, denominator: int) -> Ball:
    with precision():
        return arb(fmpq(numerator, denominator))
