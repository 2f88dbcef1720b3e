"""Cutoff treatments, written as changes of the formula tree so that every reading works on them."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from ..formula.balls import ball, precision, series
from ..formula.bind import constant, simplify
from ..formula.branches import Piece
from ..formula.tree import ZERO, R, Tree, add, multiply, negate, number, polynomial
from .curve import Curve
from .force_switch import switch_force

TREATMENTS = ("truncate", "shifted-energy", "shifted-force", "shifted-stiffness", "switch", "force-switch")
SHIFTED = {"truncate": -1, "shifted-energy": 0, "shifted-force": 1, "shifted-stiffness": 2}
"""The highest derivative that a shift makes zero at the cutoff."""
SWITCHED = ("switch", "force-switch")

SWITCHES = {
    1: [Fraction(c) for c in (3, -2)],
    2: [Fraction(c) for c in (10, -15, 6)],
    3: [Fraction(c) for c in (35, -84, 70, -20)],
}
"""Switch of n continuous derivatives: yⁿ⁺¹ times this polynomial in y, lowest power first.

y falls from 1 at the start of the switch to 0 at the cutoff. These are the Hermite step
polynomials of degree 2n + 1 (n = 2 in K. Perlin, ACM Trans. Graph. 21, 681 (2002)); written in
y they keep their relative accuracy right up to the cutoff.
"""


@dataclass(frozen=True, slots=True)
class Cutoff:
    """Where and how a curve is brought to zero.

    Attributes
    ----------
    at : Fraction
        The cutoff in ångström.
    treatment : str
        One of ``TREATMENTS``.
    start : Fraction or None
        Where a switch begins, of the energy or of the force.
    continuity : int
        Continuous derivatives of what is switched: 1, 2 or 3.
    """

    at: Fraction
    treatment: str
    start: Fraction | None = None
    continuity: int = 2

    @property
    def zeros(self) -> int:
        """How many of energy, force, stiffness and so on the treatment makes zero at the cutoff."""
        if self.treatment in SWITCHED:
            return self.continuity + 1 + (self.treatment == "force-switch")
        return SHIFTED[self.treatment] + 1


def treat(curve: Curve, cutoff: Cutoff, end: Fraction) -> Curve:
    """Return a curve as the simulation sees it: treated up to the cutoff, exactly zero beyond.

    Parameters
    ----------
    curve : Curve
        The bare curve.
    cutoff : Cutoff
    end : Fraction
        Where the zero stretch ends, in ångström.

    Notes
    -----
    ``shifted-force`` subtracts the tangent at the cutoff (S. D. Stoddard and J. Ford, Phys. Rev. A 8,
    1504 (1973); S. Toxvaerd and J. C. Dyre, J. Chem. Phys. 134, 081102 (2011)); ``shifted-stiffness``
    one more term of the Taylor expansion there (M. Lamichhane, J. D. Gezelter and K. E. Newman, J. Chem.
    Phys. 141, 134109 (2014), for expansions of any order). ``force-switch`` is P. J. Steinbach and
    B. R. Brooks, J. Comput. Chem. 15, 667 (1994), with the weights of ``SWITCHES``.
    """
    inside = curve.within(min(piece.start for piece in curve.pieces), cutoff.at).pieces
    if cutoff.treatment == "switch":
        pieces = _switched(inside, cutoff)
    elif cutoff.treatment == "force-switch":
        assert cutoff.start is not None
        pieces = switch_force(inside, cutoff.start, cutoff.at, switch(cutoff.start, cutoff.at, cutoff.continuity))
    else:
        rest = _remainder(inside[-1].tree, cutoff)
        pieces = [
            Piece(p.start, p.end, simplify("+", (p.tree, rest)) if rest != ZERO else p.tree, p.closed) for p in inside
        ]
    if end > cutoff.at:
        last = pieces[-1]
        pieces = [
            *pieces[:-1],
            Piece(last.start, last.end, last.tree, closed=True),
            Piece(cutoff.at, end, ZERO),
        ]
    return Curve(tuple(pieces), curve.coordinate)


def _remainder(tree: Tree, cutoff: Cutoff) -> Tree:
    """Return what is added to a bare curve inside its cutoff: minus its Taylor polynomial there."""
    order = SHIFTED[cutoff.treatment]
    if order < 0:
        return ZERO
    coefficients = series(tree, ball(cutoff.at), order)
    distance = add(number(cutoff.at), negate(R))
    with precision():
        terms = [constant(c * (-1) ** (k + 1)) for k, c in enumerate(coefficients)]
    return add(*(multiply(term, *[distance] * k) for k, term in enumerate(terms)))


def _switched(inside: tuple[Piece, ...], cutoff: Cutoff) -> list[Piece]:
    assert cutoff.start is not None
    weight = switch(cutoff.start, cutoff.at, cutoff.continuity)
    pieces: list[Piece] = []
    for piece in inside:
        if piece.start < cutoff.start:
            end = min(piece.end, cutoff.start)
            pieces.append(Piece(piece.start, end, piece.tree, piece.closed if end == piece.end else True))
        if piece.end > cutoff.start:
            tree = ZERO if piece.tree == ZERO else multiply(piece.tree, weight)
            pieces.append(Piece(max(piece.start, cutoff.start), piece.end, tree, piece.closed))
    return pieces


def switch(start: Fraction, end: Fraction, continuity: int) -> Tree:
    """Return the weight that falls from 1 at ``start`` to 0 at ``end``, so many times differentiable."""
    y = multiply(number(1 / (end - start)), add(number(end), negate(R)))
    return multiply(simplify("^", (y, number(continuity + 1))), polynomial(SWITCHES[continuity], y))
