"""Read a tree with balls: intervals that certainly hold the value and every derivative.

A ball is python-flint's ``arb``, a midpoint with a radius that covers all rounding. Read as a
power series in the separation, a tree gives Taylor coefficients that hold for *every* separation
of a stretch at once (F. Johansson, IEEE Trans. Comput. 66, 1281 (2017), for the arithmetic).
"""

from __future__ import annotations

from fractions import Fraction
from math import comb

from flint import arb, arb_series, ctx

from .exact import PRECISION, Ball, ball, precision
from .programs import Same, Undecided, program, run
from .tree import Tree

__all__ = [
    "PRECISION",
    "Ball",
    "Undecided",
    "ball",
    "enclose",
    "fraction",
    "meet",
    "precision",
    "series",
    "stretch",
    "value",
]


def stretch(start: Ball | float | Fraction, end: Ball | float | Fraction) -> Ball:
    """Return the ball that holds everything from start to end."""
    low, high = (_as_ball(edge) for edge in (start, end))
    with precision():
        return low.union(high)


def _as_ball(value: Ball | float | Fraction) -> Ball:
    return value if isinstance(value, arb) else ball(value)


def fraction(value: Ball) -> Fraction:
    """Return the midpoint of a ball as an exact fraction."""
    mantissa, exponent = value.mid().man_exp()
    return Fraction(int(mantissa)) * Fraction(2) ** int(exponent)


def series(tree: Tree, x: Ball, order: int) -> list[Ball]:
    """Return Taylor coefficients of a tree that hold over a whole ball of separations.

    Parameters
    ----------
    tree : Tree
        A bound tree: its only name is ``r``.
    x : arb
        The separations.
    order : int
        Highest power of the separation, 0 to 12.

    Returns
    -------
    list of arb
        ``order + 1`` balls; the k-th holds U⁽ᵏ⁾/k! at every separation of ``x``. A coefficient
        that can't be bounded (a pole) is not finite.

    Raises
    ------
    Undecided
        If a ``where``, ``abs``, ``min`` or ``max`` changes branch within ``x``.
    """
    steps = program(Same(tree))
    # Set and restored by hand: this is called many thousand times, and a context manager would cost a fifth of it.
    bits, cap = ctx.prec, ctx.cap
    ctx.prec, ctx.cap = PRECISION, order + 1
    try:
        result = run(steps, arb_series([x, 1]))
        return [result[k] for k in range(order + 1)]
    finally:
        ctx.prec, ctx.cap = bits, cap


def enclose(tree: Tree, x: Ball, order: int, extra: int = 2) -> list[Ball]:
    """Return :func:`series` over a stretch, tightened by its expansion about the midpoint.

    The expansion is Taylor's with Lagrange's remainder: thin coefficients at the midpoint up to
    ``order + extra - 1`` and one wide coefficient over the stretch.
    """
    top = order + extra
    wide = series(tree, x, top)
    if x.rad() == 0:
        return wide[: order + 1]
    thin = series(tree, x.mid(), top)
    with precision():
        step = x - x.mid()
        powers = [arb(1)]
        for _ in range(top):
            powers.append(powers[-1] * step)
        tight = []
        for k in range(order + 1):
            total = comb(top, k) * wide[top] * powers[top - k]
            for j in range(k, top):
                total += comb(j, k) * thin[j] * powers[j - k]
            tight.append(meet(total, wide[k]))
        return tight


def meet(first: Ball, second: Ball) -> Ball:
    """Return the part that two enclosures of one number share."""
    if not first.is_finite():
        return second
    if not second.is_finite():
        return first
    return first.intersection(second) if first.overlaps(second) else first


def value(tree: Tree) -> Ball:
    """Return the value of a tree without ``r``."""
    return series(tree, arb(0), 0)[0]
