"""Joins of curves that hold on different ranges, written as trees so that every reading works on them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from flint import arb_series, ctx

from ..formula.balls import Ball, ball, fraction, precision, series
from ..formula.branches import Piece
from ..formula.tree import ONE, Apply, Tree, add, negate
from .curve import Curve
from .cutoff import switch
from .matching import matching
from .sums import add_curves, scaled

METHODS = ("meet", "exp-polynomial", "polynomial", "blend")


@dataclass(frozen=True, slots=True)
class Join:
    """How one segment goes over into the next.

    Attributes
    ----------
    method : str
        One of ``METHODS``. ``meet`` leaves both as they are; the others are bridges: the exponential of a
        polynomial, a polynomial, or a weight that goes from one curve to the other.
    start, end : Fraction
        Ends of the bridge in ångström; one and the same separation where the segments meet.
    degree : int
        Of the polynomial: 3 matches energy and slope at both ends, 5 the curvature too, 7 the third
        derivative too.
    continuity : int
        Continuous derivatives of a blend.
    """

    method: str
    start: Fraction
    end: Fraction
    degree: int = 5
    continuity: int = 2


@dataclass(frozen=True, slots=True)
class Bridge:
    """A join with the two curves that it joins."""

    join: Join
    before: Curve
    after: Curve


class JoinError(ValueError):
    """A bridge that can't be built."""


def join_segments(curves: Sequence[Curve], joins: Sequence[Join]) -> Curve:
    """Return segments side by side, with a bridge from each to the next.

    Parameters
    ----------
    curves : sequence of Curve
        One a segment; each covers its own range and the bridges at its ends.
    joins : sequence of Join
        One fewer than there are curves, ascending.

    Raises
    ------
    JoinError
        If a curve has no finite value at an end, or an exponential is to bridge from or to an energy
        that is not positive.

    Notes
    -----
    The exponential of a quintic that matches energy, slope and curvature at both ends is the usual bridge
    from a screened nuclear repulsion to a pair potential (J. P. Biersack and J. F. Ziegler, Nucl. Instrum.
    Methods 194, 93 (1982), for the repulsion; for the bridge common practice, no source).
    """
    pieces: list[Piece] = []
    starts = [curves[0].pieces[0].start, *(join.end for join in joins)]
    ends = [*(join.start for join in joins), curves[-1].pieces[-1].end]
    for index, (curve, start, end) in enumerate(zip(curves, starts, ends, strict=True)):
        own = curve.within(start, end).pieces
        pieces += own
        if index < len(joins):
            last = pieces[-1]
            pieces[-1] = Piece(last.start, last.end, last.tree, closed=True)
            if joins[index].method != "meet":
                pieces += bridge(Bridge(joins[index], curve, curves[index + 1])).pieces
    return Curve(tuple(pieces), curves[0].coordinate)


def bridge(between: Bridge) -> Curve:
    """Return the bridge between two curves.

    Raises
    ------
    JoinError
        If it can't be built.
    """
    join = between.join
    if join.method == "blend":
        weight = switch(join.start, join.end, join.continuity)
        parts = [curve.within(join.start, join.end) for curve in (between.before, between.after)]
        return add_curves([scaled(parts[0], weight), scaled(parts[1], add(ONE, negate(weight)))])
    order = (join.degree - 1) // 2
    near = between.before.within(between.before.pieces[0].start, join.start).pieces[-1].tree
    far = between.after.within(join.end, between.after.pieces[-1].end).pieces[0].tree
    ends = [_expansion(near, join.start, order), _expansion(far, join.end, order)]
    if join.method == "exp-polynomial":
        ends = [_logarithm(end) for end in ends]
    left, right = ([fraction(c) for c in end] for end in ends)
    tree = matching(left, right, join.start, join.end)
    if join.method == "exp-polynomial":
        tree = Apply("exp", (tree,))
    return Curve((Piece(join.start, join.end, tree),), between.before.coordinate)


def _expansion(tree: Tree, at: Fraction, order: int) -> list[Ball]:
    coefficients = series(tree, ball(at), order)
    if not all(c.is_finite() for c in coefficients):
        raise JoinError(f"the curve has no finite value at {float(at):.6g} angstrom")
    return coefficients


def _logarithm(coefficients: list[Ball]) -> list[Ball]:
    if not coefficients[0] > 0:
        raise JoinError("an exponential can't bridge to an energy that is not positive")
    cap, ctx.cap = ctx.cap, len(coefficients)
    try:
        with precision():
            logarithm = arb_series(coefficients).log()
            return [logarithm[k] for k in range(len(coefficients))]
    finally:
        ctx.cap = cap
