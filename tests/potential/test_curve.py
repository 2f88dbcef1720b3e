"""Curves: each separation belongs to one piece, and all readings agree."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from documents import REDUCED_LENNARD_JONES, curve
from slopewell.formula.pairs import Pair

BRANCHED = "where(r < 2, r^2, 10 + r)"


def test_a_row_at_a_branch_point_takes_the_side_that_the_comparison_says() -> None:
    at = np.array([1.9, 2.0, 2.1])
    assert curve(BRANCHED, 1, 3).derivatives(at, 1)[1].tolist() == pytest.approx([3.8, 1.0, 1.0])
    assert curve("where(r <= 2, r^2, 10 + r)", 1, 3).derivatives(at, 1)[1].tolist() == pytest.approx([3.8, 4.0, 1.0])


def test_a_separation_beside_the_end_of_a_piece_by_rounding_counts_as_on_it() -> None:
    beside = np.array([np.nextafter(2.0, 1.0), np.nextafter(2.0, 3.0)])
    assert curve(BRANCHED, 1, 3).derivatives(beside, 1)[1].tolist() == [1.0, 1.0]


def test_separations_in_any_order_give_the_same_values() -> None:
    branched = curve(BRANCHED, 1, 3)
    ascending = np.linspace(1, 3, 41)
    shuffled = np.random.default_rng(7).permutation(41)
    expected = branched.derivatives(ascending, 3)[:, shuffled]
    assert np.array_equal(branched.derivatives(ascending[shuffled], 3), expected)


def test_separations_outside_belong_to_the_nearest_piece() -> None:
    assert curve(BRANCHED, 1, 3).derivatives(np.array([0.5, 4.0]), 0)[0].tolist() == [0.25, 14.0]


def test_the_accurate_reading_agrees_with_the_fast_one() -> None:
    reduced = curve(REDUCED_LENNARD_JONES, Fraction(4, 5), 3)
    r = np.linspace(0.8, 3, 200)
    fast, accurate = reduced.derivatives(r, 2), reduced.accurate_derivatives(Pair(r, np.zeros_like(r)), 2)
    for order in range(3):
        scale = 4 * (r**-12 * (1, 12, 156)[order] + r**-6 * (1, 6, 42)[order]) / r**order
        assert np.all(np.abs(fast[order] - accurate[order].rounded()) <= 40 * np.finfo(float).eps * scale)


def test_edges_are_where_pieces_meet() -> None:
    assert curve(BRANCHED, 1, 3).edges() == (Fraction(2),)
    assert curve("r^2", 1, 3).edges() == ()


def test_a_part_of_a_curve_keeps_only_its_pieces() -> None:
    part = curve(BRANCHED, 1, 3).within(Fraction(5, 2), Fraction(11, 4))
    (piece,) = part.pieces
    assert (piece.start, piece.end) == (Fraction(5, 2), Fraction(11, 4))
    assert part.piece_at(2.6) == piece
