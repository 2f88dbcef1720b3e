"""Pieces without choices, and the points between them."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb
from slopewell.formula import bind, parse
from slopewell.formula.branches import MOST_COMPARISONS, Piece, TooManyBranches, resolve
from slopewell.formula.tree import Tree

START, END = Fraction(1), Fraction(3)


def bound(text: str) -> Tree:
    return bind(parse(text), {"pi": arb.pi(), "c": Fraction(1, 3)})


def pieces(text: str, start: Fraction = START, end: Fraction = END) -> tuple[Piece, ...]:
    return resolve(bound(text), start, end)


def test_a_formula_without_a_choice_is_one_piece() -> None:
    tree = bound("r^2")
    assert resolve(tree, START, END) == (Piece(START, END, tree),)


@pytest.mark.parametrize(
    ("text", "first", "second"),
    [
        ("abs(r - 2)", "-(r - 2)", "r - 2"),
        ("min(r, 2)", "r", "2"),
        ("max(r, 2)", "2", "r"),
        ("where(r < 2, exp(r), r)", "exp(r)", "r"),
        ("where(2 < r, exp(r), r)", "r", "exp(r)"),
        ("1 + abs(r - 2)*where(r > 2, r, 3)", "1 + -(r - 2)*3", "1 + (r - 2)*r"),
        ("where(r^2 < 4, where(r < 5, 7, 8), where(r < 1, 9, r))", "7", "r"),
    ],
)
def test_a_choice_is_cut_where_it_turns(text: str, first: str, second: str) -> None:
    low, high = pieces(text)
    assert (low.start, low.end, high.start, high.end) == (1, 2, 2, 3)
    assert (low.tree, high.tree) == (bound(first), bound(second))


@pytest.mark.parametrize(
    ("comparison", "closed"), [("r < 2", False), ("r <= 2", True), ("r > 2", True), ("r >= 2", False)]
)
def test_the_point_itself_belongs_to_the_side_that_the_comparison_says(comparison: str, closed: bool) -> None:
    low, high = pieces(f"where({comparison}, r, 5)")
    assert low.closed is closed
    assert high.closed


def test_an_irrational_point_is_right_to_30_digits() -> None:
    low, _ = pieces("where(r < 2^(1/6)*2, r, 0)")
    assert abs(low.end**6 / 128 - 1) < Fraction(1, 10**30)


def test_a_point_of_a_wave_is_found_each_time_it_turns() -> None:
    found = pieces("where(sin(pi*r) > 0, 1, 0)", Fraction(1, 2), Fraction(9, 2))
    assert [float(piece.end) for piece in found] == [1, 2, 3, 4, 4.5]
    assert [piece.tree for piece in found] == [bound(text) for text in ("1", "0", "1", "0", "1")]


@pytest.mark.parametrize(
    "text",
    [
        "abs((r - 2)^2)",
        "where((r - 2)^2 >= 0, r, 5)",
        "where((r - 2)^2 < 0, 5, r)",
        "min(r, r)",
        "where(r < c, 1, 0)",
        "where(r < 3, 1, 0)",
        "where(1 < 2, r, 5)",
    ],
)
def test_what_touches_or_never_turns_is_one_piece(text: str) -> None:
    (piece,) = pieces(text)
    assert (piece.start, piece.end, piece.closed) == (START, END, True)


def test_more_than_500_points_are_refused() -> None:
    with pytest.raises(TooManyBranches, match=r"branch points|told apart"):
        pieces("abs(sin(1000*r))")


def test_more_than_200_comparisons_are_refused() -> None:
    terms = [f"abs(r + {k})" for k in range(MOST_COMPARISONS + 1)]
    assert len(pieces(" + ".join(terms[1:]))) == 1
    with pytest.raises(TooManyBranches, match="more than 200 comparisons"):
        pieces(" + ".join(terms))


def test_sides_that_agree_over_a_stretch_are_refused() -> None:
    with pytest.raises(TooManyBranches, match=r"agree over a stretch|told apart"):
        pieces("where(sin(r)^2 + cos(r)^2 < 1, r, 5)")
