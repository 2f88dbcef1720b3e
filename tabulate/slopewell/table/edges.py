"""Error bounds of the row intervals that an edge between pieces falls into.

There the curve is less smooth than the rule assumes. It is written as one piece, smooth over the whole
interval, plus a difference that sets in at the edge: the rule's own bound holds for the first, and the
second is bounded by its size and by what the rule makes of its values at the rows.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from math import factorial, inf

from ..formula.balls import Ball, ball, enclose, series, stretch
from ..formula.bind import simplify
from ..formula.branches import Piece
from ..formula.programs import Same
from ..formula.tree import Tree
from ..potential import Curve
from .direct import direct_bound
from .profile import measure
from .rules import Rule
from .spacing import Spacing


@dataclass(frozen=True, slots=True)
class EdgeBound:
    """Error bounds of one row interval, in eV and ångström."""

    at: float
    length: float
    energy: float
    force: float
    drift: float


def edge_bounds(curve: Curve, grid: Spacing, rule: Rule, largest: tuple[float, float]) -> Iterator[EdgeBound]:
    """Yield the bounds of the intervals about each edge between pieces.

    Parameters
    ----------
    curve : Curve
        On the range of the grid.
    grid : Spacing
    rule : Rule
    largest : (float, float)
        The largest errors elsewhere: only an edge that exceeds them is looked at more closely.
    """
    for before, after in zip(curve.pieces, curve.pieces[1:], strict=False):
        found = _bound_at(before, after, grid, rule)
        if found is None:
            continue
        if found.energy > largest[0] or found.force > largest[1]:
            energy, force = direct_bound(curve, found.at, grid, rule)
            found = EdgeBound(found.at, found.length, min(found.energy, energy), min(found.force, force), found.drift)
        yield found


def _bound_at(before: Piece, after: Piece, grid: Spacing, rule: Rule) -> EdgeBound | None:
    edge = float(before.end)
    if grid.on_row(edge):
        index = round(grid.position(edge))
        # The row itself has the value of the piece that owns it; the interval on the other side is at fault.
        low, high = (index, index + 1) if before.closed else (index - 1, index)
        if low < 0 or high > grid.rows - 1:
            return None
        interval, base, other = (grid.row(low), grid.row(high)), after, before
        if not before.closed:
            base, other = before, after
        return _row_mismatch(edge, interval, base, other, rule)
    interval = grid.around(edge)
    choices = [_split(edge, interval, base, other, rule) for base, other in ((before, after), (after, before))]
    return min(choices, key=lambda bound: bound.energy)


def _difference(base: Piece, other: Piece) -> Tree:
    return _gap(Same(other.tree), Same(base.tree))


@lru_cache(maxsize=256)
def _gap(one: Same, other: Same) -> Tree:
    """Return the difference of two trees, the same one each time, so that it is made a program of once."""
    return simplify("+", (one.tree, simplify("negate", (other.tree,))))


def _row_mismatch(edge: float, interval: tuple[float, float], base: Piece, other: Piece, rule: Rule) -> EdgeBound:
    """Bound an interval whose one row has the values of the other piece."""
    h = interval[1] - interval[0]
    energy, force, drift = _smooth(base, interval, h, rule)
    gaps = _sizes(series(_difference(base, other), ball(base.start if edge <= interval[0] else base.end), 2))
    added = _from_rows(gaps, h, rule)
    return EdgeBound(edge, h, energy + added[0], force + added[1], drift + gaps[0] / h + gaps[1])


def _split(edge: float, interval: tuple[float, float], base: Piece, other: Piece, rule: Rule) -> EdgeBound:
    """Bound an interval with the edge inside it: the other piece differs on its own side only."""
    h = interval[1] - interval[0]
    energy, force, drift = _smooth(base, interval, h, rule)
    outer = interval[1] if other.start >= base.end else interval[0]
    difference = _difference(base, other)
    along = _sizes(enclose(difference, stretch(min(edge, outer), max(edge, outer)), 2))
    at_row = _sizes(series(difference, ball(outer), 2))
    added = _from_rows(at_row, h, rule)
    return EdgeBound(
        edge,
        h,
        energy + along[0] + added[0],
        force + along[1] + added[1],
        drift + at_row[0] / h + at_row[1],
    )


def _smooth(base: Piece, interval: tuple[float, float], h: float, rule: Rule) -> tuple[float, float, float]:
    """Return the rule's own bounds for a piece continued over the whole interval."""
    largest = measure(base, *interval).largest
    drift = rule.drift.plain(h, largest[rule.drift.order]) if rule.drift else 0.0
    return (
        rule.energy.plain(h, largest[rule.energy.order]),
        rule.force.plain(h, largest[rule.force.order]),
        drift,
    )


def _sizes(coefficients: list[Ball]) -> list[float]:
    return [float(abs(c).upper()) * factorial(k) if c.is_finite() else inf for k, c in enumerate(coefficients)]


def _from_rows(sizes: list[float], h: float, rule: Rule) -> tuple[float, float]:
    """Return what a rule makes of values, slopes and curvatures at one row, in energy and in force."""
    energy = sum(basis * h**k * sizes[k] for k, basis in enumerate(rule.energy_basis))
    if rule.name == "linear":
        return energy, sizes[1]
    return energy, sum(basis * h ** (k - 1) * sizes[k] for k, basis in enumerate(rule.force_basis))
