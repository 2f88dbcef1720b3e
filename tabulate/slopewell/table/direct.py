"""The error of one row interval enclosed directly: the curve minus its interpolant, stretch by stretch."""

from __future__ import annotations

from fractions import Fraction
from itertools import pairwise
from math import factorial, inf

from ..formula.balls import ball, enclose, fraction, series, stretch
from ..formula.bind import simplify
from ..formula.tree import R, Tree, add, multiply, negate, number, polynomial
from ..potential import Curve
from .rules import Rule
from .spacing import Spacing

CUTS = 8
"""Stretches that each part of the interval is cut into."""
EXPANSION = 7
"""Orders of Taylor's expansion in which the curve and its interpolant cancel exactly."""

HERMITE = {
    2: [[Fraction(1), Fraction(-1)], [Fraction(0), Fraction(1)]],
    4: [
        [Fraction(c) for c in (1, 0, -3, 2)],
        [Fraction(c) for c in (0, 1, -2, 1)],
        [Fraction(c) for c in (0, 0, 3, -2)],
        [Fraction(c) for c in (0, 0, -1, 1)],
    ],
    6: [
        [Fraction(c) for c in (1, 0, 0, -10, 15, -6)],
        [Fraction(c) for c in (0, 1, 0, -6, 8, -3)],
        [Fraction(c, 2) for c in (0, 0, 1, -3, 3, -1)],
        [Fraction(c) for c in (0, 0, 0, 10, -15, 6)],
        [Fraction(c) for c in (0, 0, 0, -4, 7, -3)],
        [Fraction(c, 2) for c in (0, 0, 0, 1, -2, 1)],
    ],
}
"""Basis polynomials on the unit interval by their number: value, slope (and curvature) at 0, then at 1."""


def direct_bound(curve: Curve, edge: float, grid: Spacing, rule: Rule) -> tuple[float, float]:
    """Bound the errors of energy and force on the row intervals that an edge touches."""
    energy = force = 0.0
    places = [edge]
    if grid.on_row(edge):
        step = 1e-6 * grid.longest(edge, edge)
        places = [edge - step, edge + step]
    for low, high in {grid.around(place) for place in places}:
        found = interval_bound(curve, low, high, rule)
        energy, force = max(energy, found[0]), max(force, found[1])
    return energy, force


def interval_bound(curve: Curve, low: float, high: float, rule: Rule) -> tuple[float, float]:
    """Bound the errors of energy and force on one row interval, a spline read by the curve's own slopes."""
    at_rows = [_derivatives(curve, r, len(rule.energy_basis) - 1 if rule.name != "linear" else 1) for r in (low, high)]
    if rule.name == "linear":
        chord = _interpolant([[d[0]] for d in at_rows], low, high)
        slopes = _interpolant([[d[1]] for d in at_rows], low, high)
        return _largest(curve, low, high, chord, 0), _largest(curve, low, high, slopes, 1)
    read = _interpolant(at_rows, low, high)
    return _largest(curve, low, high, read, 0), _largest(curve, low, high, read, 1, differentiate=True)


def _derivatives(curve: Curve, r: float, order: int) -> list[Fraction]:
    coefficients = series(curve.piece_at(r).tree, ball(r), order)
    return [fraction(c) * factorial(k) for k, c in enumerate(coefficients)]


def _interpolant(at_rows: list[list[Fraction]], low: float, high: float) -> Tree:
    """Return the interpolating polynomial as a tree."""
    h = Fraction(high) - Fraction(low)
    data = [value * h**k for row in at_rows for k, value in enumerate(row)]
    basis = HERMITE[len(data)]
    coefficients = [
        sum((value * part[power] for value, part in zip(data, basis, strict=True)), Fraction(0))
        for power in range(len(data))
    ]
    return polynomial(coefficients, multiply(number(1 / h), add(R, negate(number(low)))))


def _largest(curve: Curve, low: float, high: float, read: Tree, order: int, *, differentiate: bool = False) -> float:
    """Bound the difference between a derivative of the curve and what is read for it."""
    largest = 0.0
    for piece in curve.pieces:
        start, end = max(float(piece.start), low), min(float(piece.end), high)
        if start >= end:
            continue
        cuts = [start + (end - start) * k / CUTS for k in range(CUTS)] + [end]
        for a, b in pairwise(cuts):
            part = stretch(a, b)
            if order == 0 or differentiate:
                gap = simplify("+", (piece.tree, simplify("negate", (read,))))
                error = enclose(gap, part, order, EXPANSION)[order]
            else:
                error = enclose(piece.tree, part, order, EXPANSION)[order] - enclose(read, part, 0)[0]
            largest = max(largest, float(abs(error).upper()) if error.is_finite() else inf)
    return largest
