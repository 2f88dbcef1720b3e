"""Give the names of a formula their values, and fold what does not depend on the separation."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from itertools import count

from flint import arb

from .balls import Ball, ball, precision, value
from .tree import COORDINATE, ONE, Apply, Choice, Constant, Name, Number, Tree, add, multiply, negate

EXACT_BITS = 4096
"""Size of numerator and denominator up to which a folded number stays an exact fraction."""

_keys = count(1)


def constant(value_: Ball) -> Tree:
    """Return the node of a ball; two calls never give equal nodes."""
    return Constant(value_, next(_keys))


def bind(tree: Tree, values: Mapping[str, Fraction | Ball]) -> Tree:
    """Put values in the place of names and fold every part without ``r`` to one number.

    Equal parts become one and the same node, so that a reading computes them once.

    Parameters
    ----------
    tree : Tree
        A parsed formula.
    values : mapping of str to Fraction or arb
        A value for each name other than ``r`` and ``pi``.

    Raises
    ------
    KeyError
        For a name without a value.
    """
    return _Binder(values).of(tree)


class _Binder:
    def __init__(self, values: Mapping[str, Fraction | Ball]) -> None:
        with precision():
            self.named: dict[str, Tree] = {"pi": constant(arb.pi())}
        self.named |= {
            name: Number(given) if isinstance(given, Fraction) else constant(given) for name, given in values.items()
        }
        self.shared: dict[Tree, Tree] = {}

    def of(self, tree: Tree) -> Tree:
        bound = self.rebuild(tree)
        return self.shared.setdefault(bound, bound)

    def rebuild(self, tree: Tree) -> Tree:
        match tree:
            case Name(name=name):
                return Name(COORDINATE) if name == COORDINATE else self.named[name]
            case Apply():
                return simplify(tree.function, tuple(self.of(argument) for argument in tree.arguments))
            case Choice():
                left, right, then, otherwise = (
                    self.of(part) for part in (tree.left, tree.right, tree.then, tree.otherwise)
                )
                return Choice(tree.comparison, left, right, then, otherwise)
            case _:
                return tree


def simplify(function: str, arguments: tuple[Tree, ...]) -> Tree:
    """Return a node of bound arguments, folded to a number where they all are numbers."""
    if all(isinstance(argument, Number | Constant) for argument in arguments):
        return fold(function, arguments)
    if function in ("+", "*"):
        return _gather(function, arguments)
    if function == "negate":
        return negate(arguments[0])
    if function == "/" and isinstance(arguments[1], Number) and arguments[1].value:
        return _gather("*", (arguments[0], Number(1 / arguments[1].value)))
    if function == "^" and isinstance(arguments[1], Number) and arguments[1].value in (0, 1):
        return arguments[0] if arguments[1] == ONE else ONE
    return Apply(function, arguments)


def _gather(function: str, arguments: tuple[Tree, ...]) -> Tree:
    """Merge the numbers of a sum or product into one, put first."""
    fixed = tuple(part for part in arguments if isinstance(part, Number | Constant))
    moving = tuple(part for part in arguments if not isinstance(part, Number | Constant))
    join = add if function == "+" else multiply
    return join(fold(function, fixed), *moving) if fixed else Apply(function, moving)


def fold(function: str, arguments: tuple[Tree, ...]) -> Tree:
    """Return the number that a function of numbers is: exact if it is a rational of moderate size."""
    if all(isinstance(argument, Number) for argument in arguments):
        exact = _exact(function, [argument.value for argument in arguments])  # type: ignore[union-attr]
        if exact is not None and max(exact.numerator.bit_length(), exact.denominator.bit_length()) < EXACT_BITS:
            return Number(exact)
    return constant(value(Apply(function, arguments)))


def _exact(function: str, numbers: list[Fraction]) -> Fraction | None:
    match function, numbers:
        case "+", _:
            return sum(numbers, Fraction(0))
        case "*", _:
            product = Fraction(1)
            for factor in numbers:
                product *= factor
            return product
        case "negate", [x]:
            return -x
        case "/", [x, y] if y:
            return x / y
        case "^", [x, n] if n.denominator == 1 and abs(n) <= 64 and (x or n > 0):
            return Fraction(x ** int(n))
        case ("abs", [x]):
            return abs(x)
        case ("min", [x, y]):
            return min(x, y)
        case ("max", [x, y]):
            return max(x, y)
        case _:
            return None


def as_ball(tree: Tree) -> Ball:
    """Return the ball of a number node."""
    if isinstance(tree, Number):
        return ball(tree.value)
    assert isinstance(tree, Constant)
    return tree.ball
