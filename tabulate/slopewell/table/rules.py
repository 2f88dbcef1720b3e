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
    """A bound constant·hᵖᵒʷᵉʳ·|U⁽ᵒʳᵈᵉʳ⁾| on one interval.

    The derivative is taken at the middle of the interval: its slope across the interval moves the error
    sideways rather than making it larger, so that it counts in second order (``tilt``) or with a small
    share (``slant``), and what is left of it counts in full.

    Attributes
    ----------
    constant, power, order : float, int, int
    tilt : int
        k where the leading error has the shape (1 − u²)ᵏ on the interval; 0 where it has another.
    slant : float
        Where ``tilt`` is 0: what h·|U⁽ᵒʳᵈᵉʳ⁺¹⁾| adds to the derivative.
    """

    constant: float
    power: int
    order: int
    tilt: int = 0
    slant: float = 0.0

    def plain(self, h: float, derivative: float) -> float:
        """Return the bound for the largest derivative on an interval."""
        return self.constant * h**self.power * derivative

    def size(self, h: float, middle: float, slope: float, rest: float) -> float:
        """Return the bound from the derivative at the middle, and its slope and curvature on the interval.

        With the shape (1 − u²)ᵏ ≤ 1/(1 + k u²) the largest of (1 − u²)ᵏ (m + s u) is at most
        (m + √(m² + s²/k))/2, where s = h·slope/(2 (order + 1)); for the force of ``linear`` the
        interpolated curve is U′.
        """
        if self.tilt:
            sideways = h * slope / (2 * (self.order_of_shape + 1))
            led = (middle + sqrt(middle**2 + sideways**2 / self.tilt)) / 2
        else:
            led = middle + self.slant * h * slope
        return self.plain(h, led + h**2 / 8 * rest)

    @property
    def order_of_shape(self) -> int:
        """The degree of the polynomial (1 − u²)ᵏ."""
        return 2 * self.tilt


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


CUBIC = (Term(1 / 384, 4, 4, 2), Term(sqrt(3) / 216, 3, 4, 0, 216 / sqrt(3) / 1920))
"""Energy and force of a cubic from values and slopes at both ends."""

RULES = {
    rule.name: rule
    for rule in (
        Rule(
            "linear",
            3,
            Term(1 / 8, 2, 2, 1),
            Term(1 / 8, 2, 3, 1),
            Term(1 / 2, 1, 2, 0, 1 / 6),
            (1.0,),
            (1.0,),
        ),
        Rule("cubic-hermite", 3, *CUBIC, None, (1.0, 4 / 27), (1.5, 1.0)),
        Rule("cubic-spline", 3, *CUBIC, None, (1.0, 4 / 27), (1.5, 1.0)),
        Rule(
            "quintic-hermite",
            4,
            Term(1 / 46080, 6, 6, 3),
            Term(sqrt(5) / 30000, 5, 6, 0, 30000 / sqrt(5) / 322560),
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
