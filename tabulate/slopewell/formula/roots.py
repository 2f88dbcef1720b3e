"""Find every root of a derivative of a tree over a stretch, and prove that there are no others.

Bisection with balls: a stretch whose enclosure excludes zero holds no root; one whose enclosed
derivative excludes zero holds at most one, which the interval Newton method then shrinks to
rounding (R. E. Moore, *Interval Analysis*, 1966; W. Tucker, *Validated Numerics*, 2011).
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from flint import arb

from .balls import Ball, ball, enclose, fraction, precision, series, stretch
from .tree import Tree

NARROWEST = Fraction(1, 2**44)
"""Width, relative to the whole stretch, below which a stretch is left undecided."""
MOST_STRETCHES = 4_000
CONTACT = 1e-22
"""Size of a boundary coefficient, against the largest one, that counts as an exact zero."""

Enclosure = Callable[[Ball], tuple[Ball, Ball]]
"""From a stretch to enclosures of a function and of its derivative over it."""
Enclosures = Callable[[Ball], list[Ball]]
"""From a stretch to enclosures of the Taylor coefficients over it."""


@dataclass(frozen=True, slots=True)
class Roots:
    """Roots of a function over a stretch.

    Attributes
    ----------
    found : tuple of arb
        Small balls, ascending, each of which certainly holds exactly one root.
    undecided : tuple of (arb, arb)
        Start and end of tiny stretches about which nothing could be proved.
    """

    found: tuple[Ball, ...]
    undecided: tuple[tuple[Ball, Ball], ...]

    @property
    def proved(self) -> bool:
        """Whether these certainly are all the roots."""
        return not self.undecided


def roots(tree: Tree, start: Fraction, end: Fraction, derivative: int, enclosures: Enclosures | None = None) -> Roots:
    """Find the roots of the k-th derivative of a tree strictly between two separations.

    A zero at an end (a potential that leaves smoothly at its cutoff) is divided out first.
    ``enclosures`` are those of the tree, up to one order more at least, where several of its
    derivatives are asked for.
    """
    contact = _contact(tree, end, derivative)
    coefficients_of = enclosures or remembering(tree, derivative + 1)

    def enclosure(x: Ball) -> tuple[Ball, Ball]:
        coefficients = coefficients_of(x)
        return coefficients[derivative], (derivative + 1) * coefficients[derivative + 1]

    if contact == 0:
        return isolate(enclosure, ball(start), ball(end))
    clear = _clear_of_end(tree, start, end, derivative, contact)
    return isolate(enclosure, ball(start), ball(clear)) if clear > start else Roots((), ())


def remembering(tree: Tree, order: int) -> Enclosures:
    """Return the enclosures of a tree's Taylor coefficients, each stretch computed once."""
    known: dict[tuple[Any, ...], list[Ball]] = {}

    def coefficients(x: Ball) -> list[Ball]:
        key = (*x.mid().man_exp(), *x.rad().man_exp())
        if key not in known:
            known[key] = enclose(tree, x, order)
        return known[key]

    return coefficients


def isolate(enclosure: Enclosure, start: Ball, end: Ball) -> Roots:
    """Find the roots of a function between two separations by its enclosures."""
    with precision():
        smallest = (end - start).mid() * ball(NARROWEST)
        pending = [(start, end)]
        found: list[Ball] = []
        undecided: list[tuple[Ball, Ball]] = []
        visited = 0
        while pending:
            low, high = pending.pop()
            visited += 1
            value, slope = enclosure(stretch(low, high))
            if value.is_finite() and not value.contains(0):
                continue
            if slope.is_finite() and not slope.contains(0):
                root = _single(enclosure, low, high)
                if root is not None:
                    found.append(root)
                continue
            hopeless = value.is_zero() or (not value.is_finite() and _nowhere_finite(enclosure, low, high))
            if high - low < smallest or visited > MOST_STRETCHES or hopeless:
                undecided.append((low, high))
                continue
            # Off the middle, so that a root at a round number is not an end of both halves.
            middle = (low + (high - low) * arb(0.4921875)).mid()
            pending += [(middle, high), (low, middle)]
        return Roots(_distinct(found), _joined(undecided))


def _nowhere_finite(enclosure: Enclosure, low: Ball, high: Ball) -> bool:
    """Tell a stretch on which a function has no value at all from one with a pole on it."""
    return not any(enclosure(low + (high - low) * arb(share))[0].is_finite() for share in (0, 0.375, 0.75, 1))


def _single(enclosure: Enclosure, low: Ball, high: Ball) -> Ball | None:
    """Shrink a stretch on which a function is monotone to its root; None if it has none there."""
    left, _ = enclosure(low)
    right, _ = enclosure(high)
    if (left > 0 and right > 0) or (left < 0 and right < 0):
        return None
    x = stretch(low, high)
    for _ in range(60):
        middle = x.mid()
        value, _ = enclosure(middle)
        _, slope = enclosure(x)
        if slope.contains(0) or not slope.is_finite():
            break
        newton = middle - value / slope
        if not newton.overlaps(x):
            return None
        narrowed = newton.intersection(x)
        if narrowed.rad() >= x.rad() * arb(0.99) or narrowed.rad() < abs(narrowed.mid()) * arb(2) ** -100:
            return narrowed
        x = narrowed
    return x


def _distinct(found: list[Ball]) -> tuple[Ball, ...]:
    """Sort roots; one that lies on the end of two stretches was found twice."""
    result: list[Ball] = []
    for root in sorted(found, key=lambda x: float(x.mid())):
        if not (result and result[-1].overlaps(root)):
            result.append(root)
    return tuple(result)


def _joined(stretches: list[tuple[Ball, Ball]]) -> tuple[tuple[Ball, Ball], ...]:
    result: list[tuple[Ball, Ball]] = []
    for low, high in sorted(stretches, key=lambda x: float(x[0].mid())):
        if result and not low > result[-1][1]:
            result[-1] = (result[-1][0], high)
        else:
            result.append((low, high))
    return tuple(result)


def _contact(tree: Tree, end: Fraction, derivative: int, most: int = 5) -> int:
    """Return how many leading Taylor coefficients of the derivative vanish at the end."""
    coefficients = series(tree, ball(end), derivative + most)[derivative:]
    sizes = [float(abs(c).upper()) if c.is_finite() else float("inf") for c in coefficients]
    limit = CONTACT * max(sizes)
    order = 0
    while order < most and sizes[order] <= limit:
        order += 1
    return order if 0 < order < most and max(sizes) < float("inf") else 0


def _clear_of_end(tree: Tree, start: Fraction, end: Fraction, derivative: int, contact: int) -> Fraction:
    """Return a separation from which on to the end the derivative, its end zero divided out, has no root."""
    width = end - start
    top = derivative + contact + 4
    with precision():
        thin = series(tree, ball(end), top)
        for _ in range(50):
            x = stretch(end - width, end)
            wide = series(tree, x, top)
            step = x - ball(end)
            rest = wide[top] * _choose(top, derivative) * step ** (top - derivative - contact)
            for k in range(derivative + contact, top):
                rest += thin[k] * _choose(k, derivative) * step ** (k - derivative - contact)
            if rest.is_finite() and not rest.contains(0):
                return end - width
            width /= 2
    return end


def _choose(n: int, k: int) -> int:
    from math import comb

    return comb(n, k)


def nearest_fraction(root: Ball) -> Fraction:
    """Return a root as a fraction, right to 100 bits."""
    return fraction(root)
