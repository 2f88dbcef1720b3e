"""The immutable tree that a formula is parsed into, and that every reading walks."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Any

COORDINATE = "r"
"""The name by which a formula calls the separation."""

Place = tuple[int, int]
"""Start and end of a part of a formula, in characters of its text."""

NOWHERE: Place = (0, 0)


@dataclass(frozen=True, slots=True)
class Number:
    """An exact rational number; decimals are taken as they are written."""

    value: Fraction
    place: Place = field(default=NOWHERE, compare=False)


@dataclass(frozen=True, slots=True)
class Constant:
    """A number known as a ball (python-flint ``arb``), such as a folded square root.

    Equality is by identity: two balls that overlap need not hold the same number.
    """

    ball: Any = field(compare=False)
    key: int


@dataclass(frozen=True, slots=True)
class Name:
    """The separation, a parameter, or one of the constants ``pi``, ``kB``, ``ke``."""

    name: str
    place: Place = field(default=NOWHERE, compare=False)


@dataclass(frozen=True, slots=True)
class Apply:
    """An operator or function with its arguments.

    ``function`` is one of ``+ * / ^ negate`` (sums and products may have more than two
    arguments) or the name of a function of the language other than ``where``. ``signs`` are the
    places of the operator signs between the arguments.
    """

    function: str
    arguments: tuple[Tree, ...]
    place: Place = field(default=NOWHERE, compare=False)
    signs: tuple[Place, ...] = field(default=(), compare=False)


@dataclass(frozen=True, slots=True)
class Choice:
    """``where(left comparison right, then, otherwise)``."""

    comparison: str
    left: Tree
    right: Tree
    then: Tree
    otherwise: Tree
    place: Place = field(default=NOWHERE, compare=False)


Tree = Number | Constant | Name | Apply | Choice

R = Name(COORDINATE)
ZERO = Number(Fraction(0))
ONE = Number(Fraction(1))


def children(tree: Tree) -> tuple[Tree, ...]:
    """Return the direct parts of a tree, in the order they are written."""
    match tree:
        case Apply():
            return tree.arguments
        case Choice():
            return (tree.left, tree.right, tree.then, tree.otherwise)
        case _:
            return ()


def walk(tree: Tree) -> Iterator[Tree]:
    """Yield every node of a tree, parents first."""
    yield tree
    for child in children(tree):
        yield from walk(child)


def depth(tree: Tree) -> int:
    """Return how many nodes lie one in the other."""
    return 1 + max(map(depth, children(tree)), default=0)


def names(tree: Tree) -> frozenset[str]:
    """Return the names that occur in a tree, the separation included."""
    return frozenset(node.name for node in walk(tree) if isinstance(node, Name))


def number(value: Fraction | int | float) -> Number:
    """Return the node of an exact value; a float stands for the binary number it is."""
    return Number(Fraction(value))


def add(*terms: Tree) -> Tree:
    """Return the sum of trees, without the zeros."""
    kept = tuple(term for term in terms if term != ZERO)
    if not kept:
        return ZERO
    return kept[0] if len(kept) == 1 else Apply("+", kept)


def negate(tree: Tree) -> Tree:
    """Return minus a tree."""
    return Number(-tree.value) if isinstance(tree, Number) else Apply("negate", (tree,))


def multiply(*factors: Tree) -> Tree:
    """Return the product of trees, without the ones; zero if any factor is zero."""
    if ZERO in factors:
        return ZERO
    kept = tuple(factor for factor in factors if factor != ONE)
    if not kept:
        return ONE
    return kept[0] if len(kept) == 1 else Apply("*", kept)


def polynomial(coefficients: list[Fraction], variable: Tree) -> Tree:
    """Return a polynomial in Horner's form, lowest coefficient first."""
    result: Tree = number(coefficients[-1])
    for coefficient in reversed(coefficients[:-1]):
        result = add(multiply(result, variable), number(coefficient))
    return result
