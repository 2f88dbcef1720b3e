"""Sums of curves: pieces laid over each other, cut wherever one of them has an edge."""

from __future__ import annotations

import itertools
from collections.abc import Callable, Sequence

from ..formula.bind import simplify
from ..formula.branches import Piece
from ..formula.tree import Tree, multiply
from .curve import Curve


def add_curves(curves: Sequence[Curve]) -> Curve:
    """Return the sum of curves that cover one range."""
    return combine(curves, lambda trees: simplify("+", trees) if len(trees) > 1 else trees[0])


def combine(curves: Sequence[Curve], join: Callable[[tuple[Tree, ...]], Tree]) -> Curve:
    """Return the curve whose trees are made of the trees of several curves on one range.

    Parameters
    ----------
    curves : sequence of Curve
    join : callable
        From a tuple of trees, one of each curve, to the tree of the result.
    """
    edges = sorted({edge for curve in curves for piece in curve.pieces for edge in (piece.start, piece.end)})
    places = [0] * len(curves)
    pieces = []
    for start, end in itertools.pairwise(edges):
        parts = [curve.pieces[place] for curve, place in zip(curves, places, strict=True)]
        trees: tuple[Tree, ...] = tuple(part.tree for part in parts)
        ending = [index for index, part in enumerate(parts) if part.end == end]
        closed = parts[ending[0]].closed if ending else True
        pieces.append(Piece(start, end, join(trees), closed))
        for index in ending:
            places[index] += 1
    return Curve(tuple(pieces), curves[0].coordinate)


def scaled(curve: Curve, weight: Tree) -> Curve:
    """Return a curve times a weight."""
    pieces = tuple(Piece(p.start, p.end, multiply(p.tree, weight), p.closed) for p in curve.pieces)
    return Curve(pieces, curve.coordinate)
