"""Error constants of the interpolation rules, as data.

On an interval of length h the error of energy and force is at most a constant times a power of h times
the largest size of one derivative there. Sources: linear, elementary; Hermite, G. Birkhoff and A. Priver,
J. Math. and Phys. 46, 440 (1967); how a spline departs from the Hermite interpolant through its slopes,
C. A. Hall and W. W. Meyer, J. Approx. Theory 16, 105 (1976), and C. de Boor, *A Practical Guide to Splines*.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import sqrt


@dataclass(frozen=True, slots=True)
class Term:
    """A bound constant·hᵖᵒʷᵉʳ·max|U⁽ᵒʳᵈᵉʳ⁾|."""

    constant: float
    power: int
    order: int

    def size(self, h: float, derivative: float) -> float:
        """Return the bound for an interval length and the largest derivative."""
        return self.constant * h**self.power * derivative


@dataclass(frozen=True, slots=True)
class Rule:
    """How a code reads between rows, and how far that is off.

    Attributes
    ----------
    name : str
    columns : int
        Columns of numbers a row needs, the separation included.
    energy, force : Term
        Error bounds for a curve that is smooth on the interval.
    drift : Term or None
        How far the force that is read may be from the slope of the energy that is read; None where
        it is that slope.
    energy_basis, force_basis : tuple of float
        Largest sizes of the basis functions that go with value, slope and curvature at one end of a
        unit interval, and of their derivatives.
    """

    name: str
    columns: int
    energy: Term
    force: Term
    drift: Term | None
    energy_basis: tuple[float, ...]
    force_basis: tuple[float, ...]

    @property
    def order(self) -> int:
        """The highest derivative that the bounds need."""
        return max(self.energy.order, self.force.order)


RULES = {
    rule.name: rule
    for rule in (
        Rule("linear", 3, Term(1 / 8, 2, 2), Term(1 / 8, 2, 3), Term(1 / 2, 1, 2), (1.0,), (1.0,)),
        Rule(
            "cubic-hermite", 3, Term(1 / 384, 4, 4), Term(sqrt(3) / 216, 3, 4), None, (1.0, 4 / 27), (1.5, 1.0)
        ),
        Rule(
            "cubic-spline", 3, Term(1 / 384, 4, 4), Term(sqrt(3) / 216, 3, 4), None, (1.0, 4 / 27), (1.5, 1.0)
        ),
        Rule(
            "quintic-hermite",
            4,
            Term(1 / 46080, 6, 6),
            Term(sqrt(5) / 30000, 5, 6),
            None,
            (1.0, 0.2, 0.0173),
            (1.875, 1.0, 0.07),
        ),
    )
}
"""Every interpolation rule by its name. The spline's terms are those of the Hermite interpolant; what its
slopes add is bounded apart."""

SLOPE_IN_ENERGY, SLOPE_IN_FORCE = 1 / 4, 1.0
"""What an error of the slopes at both ends adds to energy (times h) and force of a cubic."""
