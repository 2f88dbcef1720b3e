"""Cut a tree with ``where``, ``abs``, ``min`` and ``max`` into pieces on which no branch changes.

Balls locate every separation at which a comparison turns over. Between them each comparison has
one answer, so the pieces are trees without any choice: nothing smooth is ever assumed across a branch point.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise

from .balls import Ball, Undecided, ball, enclose, series
from .bind import simplify
from .roots import isolate, nearest_fraction
from .tree import COORDINATE, ZERO, Apply, Choice, Tree, add, children, names, negate, walk

MOST_BRANCHES = 500
"""Branch points a formula may have on its range."""
MOST_COMPARISONS = 200
"""Different comparisons a formula may have."""


@dataclass(frozen=True, slots=True)
class Piece:
    """A tree without choices, on the separations from start to end.

    Attributes
    ----------
    start, end : Fraction
        The ends, in ångström.
    tree : Tree
    closed : bool
        Whether the end itself belongs to this piece, and not to the next.
    """

    start: Fraction
    end: Fraction
    tree: Tree
    closed: bool = True


class TooManyBranches(ValueError):
    """A formula whose branch points can't be told apart, or are too many."""


def resolve(tree: Tree, start: Fraction, end: Fraction) -> tuple[Piece, ...]:
    """Cut a bound tree into pieces without choices.

    Raises
    ------
    TooManyBranches
        If there are more than 500 branch points or 200 different comparisons, or where two sides
        of a comparison agree over a stretch.
    """
    if len({node for node in walk(tree) if _chooses(node)}) > MOST_COMPARISONS:
        raise TooManyBranches(f"more than {MOST_COMPARISONS} comparisons")
    return _resolve(tree, start, end)


def _resolve(tree: Tree, start: Fraction, end: Fraction) -> tuple[Piece, ...]:
    choice = _innermost_choice(tree)
    if choice is None:
        return (Piece(start, end, tree),)
    gap, answers = _gap(choice)
    points = _turning_points(gap, start, end)
    edges = [start, *points, end]
    pieces: list[Piece] = []
    for low, high in pairwise(edges):
        positive = _positive(gap, (low + high) / 2, high - low)
        settled = replace(tree, choice, answers[positive])
        closed = True if high == end else answers[_at(choice, gap)] is answers[positive]
        pieces.extend(_close_last(_resolve(settled, low, high), closed))
        if len(pieces) > MOST_BRANCHES:
            raise TooManyBranches(f"more than {MOST_BRANCHES} branch points")
    return _merge(pieces)


def _close_last(pieces: tuple[Piece, ...], closed: bool) -> list[Piece]:
    last = pieces[-1]
    return [*pieces[:-1], Piece(last.start, last.end, last.tree, closed)]


def _merge(pieces: list[Piece]) -> tuple[Piece, ...]:
    """Join neighbours with one and the same tree: there a comparison only touched."""
    merged: list[Piece] = []
    for piece in pieces:
        if merged and merged[-1].tree == piece.tree:
            merged[-1] = Piece(merged[-1].start, piece.end, piece.tree, piece.closed)
        else:
            merged.append(piece)
    return tuple(merged)


def _innermost_choice(tree: Tree) -> Tree | None:
    """Return a choice none of whose own parts is one."""
    for child in children(tree):
        found = _innermost_choice(child)
        if found is not None:
            return found
    return tree if _chooses(tree) else None


def _chooses(tree: Tree) -> bool:
    return isinstance(tree, Choice) or (isinstance(tree, Apply) and tree.function in ("abs", "min", "max"))


def _gap(choice: Tree) -> tuple[Tree, dict[bool, Tree]]:
    """Return the difference that decides, and the part chosen where it is positive and where negative."""
    if isinstance(choice, Choice):
        gap = simplify("+", (choice.left, simplify("negate", (choice.right,))))
        greater = choice.comparison in (">", ">=")
        return gap, {greater: choice.then, not greater: choice.otherwise}
    assert isinstance(choice, Apply)
    if choice.function == "abs":
        return choice.arguments[0], {True: choice.arguments[0], False: negate(choice.arguments[0])}
    one, other = choice.arguments
    gap = ZERO if one == other else add(one, negate(other))
    smallest = choice.function == "min"
    return gap, {True: other if smallest else one, False: one if smallest else other}


def _at(choice: Tree, gap: Tree) -> bool:
    """Return the answer where both sides are equal, in terms of 'the gap is positive'."""
    return not isinstance(choice, Choice) or choice.comparison in ("<", ">=")


def _turning_points(gap: Tree, start: Fraction, end: Fraction) -> list[Fraction]:
    def enclosure(x: Ball) -> tuple[Ball, Ball]:
        coefficients = enclose(gap, x, 1)
        return coefficients[0], coefficients[1]

    if not _moves(gap):
        return []
    found = isolate(enclosure, ball(start), ball(end))
    if len(found.found) + len(found.undecided) > MOST_BRANCHES:
        raise TooManyBranches("the sides of a comparison can't be told apart")
    points = [nearest_fraction(root) for root in found.found]
    for low, high in found.undecided:
        if float(high.mid() - low.mid()) > 1e-6 * float(end - start):
            raise TooManyBranches("the sides of a comparison agree over a stretch")
        points.append(nearest_fraction((low + high) / 2))
    return sorted(point for point in points if start < point < end)


def _moves(gap: Tree) -> bool:
    return COORDINATE in names(gap)


def _positive(gap: Tree, middle: Fraction, width: Fraction) -> bool:
    """Return the sign of the gap inside a stretch; an exact zero everywhere counts as positive."""
    for shift in (Fraction(0), Fraction(1, 7), Fraction(-2, 11)):
        value = series(gap, ball(middle + shift * width), 0)[0]
        if value > 0:
            return True
        if value < 0:
            return False
    return True


def replace(tree: Tree, old: Tree, new: Tree) -> Tree:
    """Return a tree with one part put in the place of another wherever it stands."""
    if tree == old:
        return new
    match tree:
        case Apply():
            parts = tuple(replace(part, old, new) for part in tree.arguments)
            return (
                tree
                if all(a is b for a, b in zip(parts, tree.arguments, strict=True))
                else simplify(tree.function, parts)
            )
        case Choice():
            left, right, then, otherwise = (replace(part, old, new) for part in children(tree))
            return Choice(tree.comparison, left, right, then, otherwise)
        case _:
            return tree


__all__ = ["Piece", "TooManyBranches", "Undecided", "replace", "resolve"]
