"""Switch the force of a curve, and let the energy be its integral from the cutoff."""

from __future__ import annotations

from fractions import Fraction

from flint import arb_series, ctx

from ..formula.balls import Ball, ball, fraction, precision, series, stretch
from ..formula.bind import simplify
from ..formula.branches import Piece
from ..formula.tree import ZERO, R, Tree, add, negate, number, polynomial

ORDER = 40
"""Terms of the expansion of the switched force."""
ERROR = 2.0**-90
"""Largest error of the force of a stretch, against its size there, that the expansion may make."""
SMALLEST = Fraction(1, 4096)
"""Part of the switch below which a stretch is not cut further."""


def switch_force(inside: tuple[Piece, ...], start: Fraction, end: Fraction, weight: Tree) -> list[Piece]:
    """Return pieces whose force is that of others times a weight from ``start`` to ``end``.

    Parameters
    ----------
    inside : tuple of Piece
        The bare curve up to the cutoff.
    start, end : Fraction
        Where the switch begins, and the cutoff.
    weight : Tree
        Falls from 1 to 0 between them.

    Returns
    -------
    list of Piece
        The energy at ``end`` is zero, it is continuous, and its slope is the switched one. Before the
        switch it is the bare curve plus a constant.

    Notes
    -----
    Between ``start`` and ``end`` the switched slope is expanded by balls about the outer end of each stretch,
    stretches being halved until Taylor's remainder is below 2⁻⁹⁰ of its size, and integrated term by
    term. Slope and weight vanish together at the cutoff, so the leading coefficients there are exact zeros.
    """
    level = Fraction(0)
    pieces: list[Piece] = []
    for piece in reversed(inside):
        low, high = max(piece.start, start), piece.end
        if high > start:
            for part in reversed(_stretches(piece.tree, weight, low, high, end)):
                coefficients = _antiderivative(piece.tree, weight, part, end, level)
                tree = polynomial(coefficients, add(number(part[1]), negate(R)))
                closed = piece.closed if part[1] == piece.end else True
                pieces.insert(0, Piece(part[0], part[1], tree if any(coefficients) else ZERO, closed))
                level = _value(coefficients, part[1] - part[0])
        if piece.start < start:
            edge = min(high, start)
            energy = series(piece.tree, ball(edge), 0)[0]
            offset = level - fraction(energy) if energy.is_finite() else Fraction(0)
            closed = piece.closed if edge == piece.end else True
            pieces.insert(0, Piece(piece.start, edge, simplify("+", (piece.tree, number(offset))), closed))
            inner = series(piece.tree, ball(piece.start), 0)[0]
            level = fraction(inner) + offset if inner.is_finite() else Fraction(0)
    return pieces


def _stretches(
    tree: Tree, weight: Tree, low: Fraction, high: Fraction, end: Fraction
) -> list[tuple[Fraction, Fraction]]:
    pending, found = [(low, high)], []
    smallest = SMALLEST * (end - low)
    while pending:
        a, b = pending.pop()
        if b - a > smallest and not _converges(tree, weight, a, b):
            middle = (a + b) / 2
            pending += [(middle, b), (a, middle)]
            continue
        found.append((a, b))
    return found


def _converges(tree: Tree, weight: Tree, low: Fraction, high: Fraction) -> bool:
    wide = _slope(tree, weight, stretch(low, high), ORDER)
    with precision():
        remainder = abs(wide[ORDER]) * ball(high - low) ** ORDER
        size = abs(_slope(tree, weight, ball(low), 0)[0])
        return bool(remainder.is_finite() and remainder <= size * ERROR)


def _slope(tree: Tree, weight: Tree, x: Ball, order: int) -> list[Ball]:
    """Return Taylor coefficients of the slope of a tree times the weight."""
    energy, falling = series(tree, x, order + 1), series(weight, x, order)
    cap, ctx.cap = ctx.cap, order + 1
    try:
        with precision():
            slope = arb_series([k * energy[k] for k in range(1, order + 2)])
            product = slope * arb_series([*falling])
            return [product[k] for k in range(order + 1)]
    finally:
        ctx.cap = cap


def _antiderivative(
    tree: Tree, weight: Tree, part: tuple[Fraction, Fraction], end: Fraction, level: Fraction
) -> list[Fraction]:
    """Return the energy on a stretch in powers of the distance from its outer end."""
    slope = _slope(tree, weight, ball(part[1]), ORDER - 1)
    contact = 0 if part[1] != end else next((k for k, c in enumerate(slope) if not c.contains(0)), ORDER)
    exact = [Fraction(0) if k < contact else fraction(c) for k, c in enumerate(slope)]
    return [level, *(c * (-1) ** (k + 1) / (k + 1) for k, c in enumerate(exact))]


def _value(coefficients: list[Fraction], t: Fraction) -> Fraction:
    total = Fraction(0)
    for coefficient in reversed(coefficients):
        total = total * t + coefficient
    return total
