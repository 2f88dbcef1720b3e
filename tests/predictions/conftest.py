"""Curves and systems that the tests of predictions share."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from math import inf

import pytest
from slopewell.formula import bind, parse
from slopewell.formula.branches import resolve
from slopewell.potential import Curve
from slopewell.predictions.curve import EnergyCurve, from_curve

CurveOf = Callable[..., EnergyCurve]


@pytest.fixture(scope="session")
def curve_of() -> CurveOf:
    """Return the energy curve of a formula in eV and ångström; extra arguments are its parameters."""

    def make(formula: str, start: str, end: str, *, reach: float = inf, **parameters: str | Fraction) -> EnergyCurve:
        tree = bind(parse(formula), {name: Fraction(value) for name, value in parameters.items()})
        curve = Curve(resolve(tree, Fraction(start), Fraction(end)))
        return from_curve(curve, "X-X", float(Fraction(start)), float(Fraction(end)), reach)

    return make


@pytest.fixture(scope="session")
def reduced(curve_of: CurveOf) -> EnergyCurve:
    """Return Lennard-Jones 12-6 with ε = 1 eV and σ = 1 Å."""
    return curve_of("4*(1/r^12 - 1/r^6)", "0.4", "5")


MORSE = "D*(exp(-2*a*(r - re)) - 2*exp(-a*(r - re)))"
HFD = (
    "e*(A*exp(-alpha*r/rm + beta*(r/rm)^2) - where(r < D*rm, exp(-(D*rm/r - 1)^2), 1)"
    "*(c6*(rm/r)^6 + c8*(rm/r)^8 + c10*(rm/r)^10))"
)
JAEGER = "A*exp(a1*r + a2*r^2 + am1/r + am2/r^2)" + "".join(
    f" - tang_toennies({n}, b*r)*C{n}/r^{n}" for n in (6, 8, 10, 12, 14, 16)
)
