"""How large the derivatives of a curve are, stretch by stretch, proved by balls.

Coarse stretches come first; the ones that decide a bound are cut again until they are sharp. So the cost
follows the curve and not the number of rows.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise
from math import factorial, inf, isfinite

from ..formula.balls import Ball, ball, enclose, series, stretch
from ..formula.branches import Piece
from ..formula.tree import ZERO
from ..potential import Curve

ORDER = 8
"""The highest derivative that any interpolation rule needs."""
FIRST_STRETCHES = 6
"""Stretches a piece is cut into at first."""


@dataclass(frozen=True, slots=True)
class Stretch:
    """A stretch of one piece, in ångström.

    Attributes
    ----------
    low, high : float
    piece : Piece
    largest : tuple of float
        Proved upper bounds of |U⁽ᵏ⁾|, k = 0 … 8, in eV/Åᵏ; infinite where balls find none.
    middle : tuple of float
        |U⁽ᵏ⁾| at the middle.
    """

    low: float
    high: float
    piece: Piece
    largest: tuple[float, ...]
    middle: tuple[float, ...]

    def halves(self) -> tuple[Stretch, Stretch]:
        """Cut the stretch in two."""
        cut = (self.low + self.high) / 2
        return measure(self.piece, self.low, cut), measure(self.piece, cut, self.high)


def measure(piece: Piece, low: float, high: float) -> Stretch:
    """Return the stretch between two separations of a piece, with the sizes of its derivatives."""
    if piece.tree == ZERO:
        zeros = (0.0,) * (ORDER + 1)
        return Stretch(low, high, piece, zeros, zeros)
    wide = enclose(piece.tree, stretch(low, high), ORDER)
    thin = series(piece.tree, ball((low + high) / 2), ORDER)
    return Stretch(
        low,
        high,
        piece,
        tuple(_upper(c) * factorial(k) for k, c in enumerate(wide)),
        tuple(abs(float(c.mid())) * factorial(k) if c.is_finite() else 0.0 for k, c in enumerate(thin)),
    )


def _upper(coefficient: Ball) -> float:
    size = float(abs(coefficient).upper()) if coefficient.is_finite() else inf
    return size * (1 + 1e-15) if isfinite(size) else inf


def first_stretches(curve: Curve, start: Fraction, end: Fraction) -> list[Stretch]:
    """Return coarse stretches that cover a range, finer towards short separations."""
    found = []
    for piece in curve.within(start, end).pieces:
        low, high = float(piece.start), float(piece.end)
        ratio = (high / low) ** (1 / FIRST_STRETCHES)
        cuts = [low * ratio**k for k in range(FIRST_STRETCHES)] + [high]
        found += [measure(piece, a, b) for a, b in pairwise(cuts)]
    return found
