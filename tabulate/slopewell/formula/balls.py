"""Read a tree with balls: intervals that certainly hold the value and every derivative.

A ball is python-flint's ``arb``, a midpoint with a radius that covers all rounding. Read as a
power series in the separation, a tree gives Taylor coefficients that hold for *every* separation
of a stretch at once (F. Johansson, IEEE Trans. Comput. 66, 1281 (2017), for the arithmetic).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from fractions import Fraction
from functools import lru_cache
from math import comb, factorial
from typing import Any

from flint import arb, arb_series, ctx, fmpq

from .tree import Apply, Choice, Constant, Name, Number, Tree

Ball = Any
"""A python-flint ``arb``; the library ships no types."""

PRECISION = 128
"""Bits of every ball computation."""


class Undecided(ArithmeticError):
    """A comparison that balls over this stretch can't decide."""


@contextmanager
def precision(bits: int = PRECISION) -> Iterator[None]:
    """Compute with so many bits inside the block; python-flint keeps this setting per process."""
    before = ctx.prec
    ctx.prec = bits
    try:
        yield
    finally:
        ctx.prec = before


def ball(value: Fraction | float | int) -> Ball:
    """Return the ball of a number: exact for a float, within 2**-128 for a fraction."""
    return _exact(value.numerator, value.denominator) if isinstance(value, Fraction) else arb(value)


@lru_cache(maxsize=4096)
def _exact(numerator: int, denominator: int) -> Ball:
    with precision():
        return arb(fmpq(numerator, denominator))


def stretch(start: Ball | float | Fraction, end: Ball | float | Fraction) -> Ball:
    """Return the ball that holds everything from start to end."""
    low, high = (_as_ball(edge) for edge in (start, end))
    with precision():
        return low.union(high)


def _as_ball(value: Ball | float | Fraction) -> Ball:
    return value if isinstance(value, arb) else ball(value)


def fraction(value: Ball) -> Fraction:
    """Return the midpoint of a ball as an exact fraction."""
    mantissa, exponent = value.mid().man_exp()
    return Fraction(int(mantissa)) * Fraction(2) ** int(exponent)


def series(tree: Tree, x: Ball, order: int) -> list[Ball]:
    """Return Taylor coefficients of a tree that hold over a whole ball of separations.

    Parameters
    ----------
    tree : Tree
        A bound tree: its only name is ``r``.
    x : arb
        The separations.
    order : int
        Highest power of the separation, 0 to 12.

    Returns
    -------
    list of arb
        ``order + 1`` balls; the k-th holds U⁽ᵏ⁾/k! at every separation of ``x``. A coefficient
        that can't be bounded (a pole) is not finite.

    Raises
    ------
    Undecided
        If a ``where``, ``abs``, ``min`` or ``max`` changes branch within ``x``.
    """
    with precision():
        cap, ctx.cap = ctx.cap, order + 1
        try:
            result = _Reading(arb_series([x, 1]), order).of(tree)
        finally:
            ctx.cap = cap
        return [result[k] for k in range(order + 1)]


def enclose(tree: Tree, x: Ball, order: int, extra: int = 2) -> list[Ball]:
    """Return :func:`series` over a stretch, tightened by its expansion about the midpoint.

    The expansion is Taylor's with Lagrange's remainder: thin coefficients at the midpoint up to
    ``order + extra - 1`` and one wide coefficient over the stretch.
    """
    top = order + extra
    wide = series(tree, x, top)
    if x.rad() == 0:
        return wide[: order + 1]
    thin = series(tree, x.mid(), top)
    with precision():
        step = x - x.mid()
        powers = [arb(1)]
        for _ in range(top):
            powers.append(powers[-1] * step)
        tight = []
        for k in range(order + 1):
            total = comb(top, k) * wide[top] * powers[top - k]
            for j in range(k, top):
                total += comb(j, k) * thin[j] * powers[j - k]
            tight.append(meet(total, wide[k]))
        return tight


def meet(first: Ball, second: Ball) -> Ball:
    """Return the part that two enclosures of one number share."""
    if not first.is_finite():
        return second
    if not second.is_finite():
        return first
    return first.intersection(second) if first.overlaps(second) else first


def value(tree: Tree) -> Ball:
    """Return the value of a tree without ``r``."""
    return series(tree, arb(0), 0)[0]


class _Reading:
    """Evaluate every distinct node once, as a power series in the separation."""

    def __init__(self, r: Any, order: int) -> None:
        self.r = r
        self.order = order
        self.known: dict[int, Any] = {}

    def of(self, tree: Tree) -> Any:
        key = id(tree)
        if key not in self.known:
            try:
                self.known[key] = self.read(tree)
            except (ValueError, ZeroDivisionError):
                # python-flint's way to say that a pole or the end of a domain lies in the stretch
                self.known[key] = arb_series([arb.nan()] * (self.order + 1))
        return self.known[key]

    def read(self, tree: Tree) -> Any:
        match tree:
            case Number():
                return arb_series([ball(tree.value)])
            case Constant():
                return arb_series([tree.ball])
            case Name():
                return self.r
            case Choice():
                return self.of(tree.then if self.holds(tree) else tree.otherwise)
            case Apply(function="^"):
                return self.power(*tree.arguments)
            case Apply(function="tang_toennies"):
                return self.tang_toennies(*tree.arguments)
            case Apply():
                return READINGS[tree.function](*(self.of(argument) for argument in tree.arguments))

    def holds(self, tree: Choice) -> bool:
        difference = (self.of(tree.left) - self.of(tree.right))[0]
        if difference < 0 or (difference <= 0 and tree.comparison == "<="):
            return tree.comparison in ("<", "<=")
        if difference > 0 or (difference >= 0 and tree.comparison == ">="):
            return tree.comparison in (">", ">=")
        if difference.is_zero():
            return tree.comparison in ("<=", ">=")
        raise Undecided(tree.comparison)

    def power(self, base: Tree, exponent: Tree) -> Any:
        x = self.of(base)
        if not isinstance(exponent, Number):
            return (self.of(exponent) * x.log()).exp()
        n = exponent.value
        if n.denominator == 2:
            root = x.sqrt() if n > 0 else x.rsqrt()
            return self.whole_power(root, abs(n.numerator))
        if n.denominator != 1:
            return (arb_series([ball(n)]) * x.log()).exp()
        result = self.whole_power(x, abs(n.numerator))
        return result if n >= 0 else arb_series([1]) / result

    def whole_power(self, x: Any, n: int) -> Any:
        """Raise by repeated squaring, with the sharp ball of an even power where x straddles zero."""
        result = arb_series([1])
        for bit in bin(n)[2:]:
            result = result * result
            if bit == "1":
                result = result * x
        if n and x[0].contains(0):
            coefficients = [result[k] for k in range(self.order + 1)]
            # By the edges, because python-flint gives nan for the power of a ball about zero itself.
            low, high = (edge**n for edge in (x[0].lower(), x[0].upper()))
            coefficients[0] = low.union(high).union(arb(0))
            result = arb_series(coefficients)
        return result

    def tang_toennies(self, order: Tree, argument: Tree) -> Any:
        assert isinstance(order, Number)
        n, x = int(order.value), self.of(argument)
        slope = self.whole_power(x, n) * (-x).exp() * arb_series([1 / arb(factorial(n))])
        low, high = (arb(edge).gamma_lower(n + 1, regularized=1) for edge in (x[0].lower(), x[0].upper()))
        return primitive(slope, x, low.union(high), self.order)


def primitive(slope: Any, x: Any, head: Ball, order: int) -> Any:
    """Return f(x) as a series, from the series of f′(x) and the enclosure of f at the constant term."""
    inner = slope * x.derivative() if order else arb_series([0])
    return arb_series([head] + [inner[k - 1] / k for k in range(1, order + 1)])


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


READINGS: dict[str, Callable[..., Any]] = {
    "+": _sum,
    "*": _product,
    "/": lambda x, y: x / y,
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
