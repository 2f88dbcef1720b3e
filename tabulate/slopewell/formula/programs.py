"""A tree as a program of balls: its distinct nodes in order, each an operation on power series.

The program is made once a tree, so that reading it at many separations costs little more than
the arithmetic of python-flint itself.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from math import factorial
from typing import Any

from flint import arb, arb_series, ctx

from .exact import Ball, ball, precision
from .tree import Apply, Choice, Constant, Name, Number, Tree

Series = Any
"""A python-flint ``arb_series``; the library ships no types."""
Operation = Callable[..., Series]
Program = tuple[tuple[Operation, tuple[int, ...]], ...]
"""Operations with the numbers of the earlier results they take; result 0 is the separation."""


LONGEST = 64
"""Length of the constants of a program: a product is as long as the shorter factor, so none may be short."""


class Undecided(ArithmeticError):
    """A comparison that balls over this stretch can't decide."""


@dataclass(frozen=True, slots=True, eq=False)
class Same:
    """A tree that is equal to itself only, which is quicker to tell than equality part by part."""

    tree: Tree

    def __hash__(self) -> int:
        """Return the identity of the tree."""
        return id(self.tree)

    def __eq__(self, other: object) -> bool:
        """Tell whether both are one and the same tree."""
        return isinstance(other, Same) and self.tree is other.tree


@lru_cache(maxsize=1024)
def program(same: Same) -> Program:
    """Return the program of a tree."""
    steps: list[tuple[Operation, tuple[int, ...]]] = []
    numbers: dict[int, int] = {}

    def add(tree: Tree) -> int:
        if isinstance(tree, Name):
            return 0
        key = id(tree)
        if key not in numbers:
            operation, parts = _operation(tree)
            arguments = tuple(add(part) for part in parts)
            steps.append((operation, arguments))
            numbers[key] = len(steps)
        return numbers[key]

    last = add(same.tree)
    if last == 0:
        steps.append((lambda r: r, (0,)))
    return tuple(steps)


def run(steps: Program, r: Series) -> Series:
    """Return the last result of a program; python-flint's precision and length of series are the caller's."""
    results = [r]
    for operation, arguments in steps:
        try:
            results.append(operation(*[results[k] for k in arguments]))
        except (ValueError, ZeroDivisionError):
            # python-flint's way to say that a pole or the end of a domain lies in the stretch
            results.append(arb_series([arb.nan()] * ctx.cap))
    return results[-1]


def _operation(tree: Tree) -> tuple[Operation, tuple[Tree, ...]]:
    """Return what a node does, and the parts it does it with."""
    match tree:
        case Number():
            return _constant(ball(tree.value)), ()
        case Constant():
            return _constant(tree.ball), ()
        case Choice():
            return _choice(tree.comparison), (tree.left, tree.right, tree.then, tree.otherwise)
        case Apply(function="^", arguments=(base, Number(value=n))):
            return _power(n), (base,)
        case Apply(function="tang_toennies", arguments=(Number(value=order), argument)):
            return _tang_toennies(int(order)), (argument,)
        case Apply():
            return OPERATIONS[tree.function], tree.arguments
        case _:
            raise AssertionError(tree)


def _constant(value: Ball) -> Operation:
    with precision():
        held = arb_series([value], LONGEST)
    return lambda: held


def _choice(comparison: str) -> Operation:
    less = comparison in ("<", "<=")
    at_equality = comparison in ("<=", ">=")

    def choose(left: Series, right: Series, then: Series, otherwise: Series) -> Series:
        difference = (left - right)[0]
        if difference < 0 or (difference <= 0 and comparison == "<="):
            return then if less else otherwise
        if difference > 0 or (difference >= 0 and comparison == ">="):
            return otherwise if less else then
        if difference.is_zero():
            return then if at_equality else otherwise
        raise Undecided(comparison)

    return choose


def _power(n: Fraction) -> Operation:
    size = abs(n.numerator)
    if n.denominator == 2:
        return lambda x: whole_power(x.sqrt() if n > 0 else x.rsqrt(), size)
    if n.denominator != 1:
        with precision():
            exponent = arb_series([ball(n)], LONGEST)
        return lambda x: (exponent * x.log()).exp()
    if n >= 0:
        return lambda x: whole_power(x, size)
    return lambda x: arb_series([1]) / whole_power(x, size)


def whole_power(x: Series, n: int) -> Series:
    """Raise by repeated squaring, with the sharp ball of an even power where x straddles zero."""
    if n == 0:
        return arb_series([1])
    result = x
    for bit in bin(n)[3:]:
        result = result * result
        if bit == "1":
            result = result * x
    if x[0].contains(0):
        coefficients = [result[k] for k in range(ctx.cap)]
        # By the edges, because python-flint gives nan for the power of a ball about zero itself.
        low, high = (edge**n for edge in (x[0].lower(), x[0].upper()))
        coefficients[0] = low.union(high).union(arb(0))
        result = arb_series(coefficients)
    return result


def _tang_toennies(n: int) -> Operation:
    def damping(x: Series) -> Series:
        slope = whole_power(x, n) * (-x).exp() * arb_series([1 / arb(factorial(n))])
        low, high = (_tang_toennies_at(n, edge) for edge in (x[0].lower(), x[0].upper()))
        return _primitive(slope, x, low.union(high))

    return damping


def _tang_toennies_at(n: int, x: Ball) -> Ball:
    """Return the damping function at one point, by its sum where that loses few digits."""
    if x < 1:
        return arb(x).gamma_lower(n + 1, regularized=1)
    total = arb(1)
    for k in range(n, 0, -1):
        total = 1 + total * x / k
    return 1 - (-x).exp() * total


def _primitive(slope: Series, x: Series, head: Ball) -> Series:
    """Return f(x) as a series, from the series of f′(x) and the enclosure of f at the constant term."""
    if ctx.cap == 1:
        return arb_series([head])
    inner = slope * x.derivative()
    return arb_series([head] + [inner[k - 1] / k for k in range(1, ctx.cap)])


def _variable_power(x: Series, exponent: Series) -> Series:
    return (exponent * x.log()).exp()


def _sum(*terms: Any) -> Any:
    total = terms[0]
    for term in terms[1:]:
        total = total + term
    return total


def _product(*factors: Any) -> Any:
    total = factors[0]
    for factor in factors[1:]:
        total = total * factor
    return total


def _sinh(x: Any) -> Any:
    return (x.exp() - (-x).exp()) / arb_series([2])


def _cosh(x: Any) -> Any:
    return (x.exp() + (-x).exp()) / arb_series([2])


def _tanh(x: Any) -> Any:
    one = arb_series([1])
    decay = (arb_series([-2]) * x).exp()
    return arb_series([2]) / (one + decay) - one


def _sign(x: Any) -> int:
    if x[0] >= 0:
        return 1
    if x[0] <= 0:
        return -1
    raise Undecided("abs")


def _abs(x: Any) -> Any:
    return x if _sign(x) > 0 else -x


def _min(x: Any, y: Any) -> Any:
    return y if _sign(x - y) > 0 else x


def _max(x: Any, y: Any) -> Any:
    return x if _sign(x - y) > 0 else y


OPERATIONS: dict[str, Callable[..., Any]] = {
    "+": _sum,
    "*": _product,
    "/": lambda x, y: x / y,
    "^": _variable_power,
    "negate": lambda x: -x,
    "exp": lambda x: x.exp(),
    "log": lambda x: x.log(),
    "sqrt": lambda x: x.sqrt(),
    "erf": lambda x: x.erf(),
    "erfc": lambda x: x.erfc(),
    "sin": lambda x: x.sin(),
    "cos": lambda x: x.cos(),
    "tan": lambda x: x.tan(),
    "sinh": _sinh,
    "cosh": _cosh,
    "tanh": _tanh,
    "abs": _abs,
    "min": _min,
    "max": _max,
}
