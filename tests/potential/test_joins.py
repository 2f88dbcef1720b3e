"""Joins of segments against a published spline-joined repulsion."""

from __future__ import annotations

from fractions import Fraction
from math import exp

import numpy as np
import pytest
from documents import REDUCED_LENNARD_JONES, curve
from slopewell.formula.balls import ball, series
from slopewell.potential import Curve
from slopewell.potential.joins import Join, JoinError, join_segments

# Iron: M. I. Mendelev, S. Han, D. J. Srolovitz, G. J. Ackland, D. Y. Sun and M. Asta, Philos. Mag. 83, 3977
# (2003); coefficients from memory. That energy and slope meet at both ends of the bridge confirms them.
NUCLEI = """9734.2365892908/r*(0.18180*exp(-28.616724320005*r) + 0.50990*exp(-8.4267310396064*r)
 + 0.28020*exp(-3.6030244464156*r) + 0.028170*exp(-1.8028536321603*r))"""
BRIDGE = (7.4122709384068, -0.64180690713367, -2.6043547961722, 0.6262539393123)
FITTED = """-27.444805994228*max(2.2 - r, 0)^3
 + 15.738054058489*max(2.3 - r, 0)^3 + 2.2077118733936*max(2.4 - r, 0)^3
 - 2.4989799053251*max(2.5 - r, 0)^3 + 4.2099676494795*max(2.6 - r, 0)^3 - 0.77361294129713*max(2.7 - r, 0)^3
 + 0.80656414937789*max(2.8 - r, 0)^3
 - 2.3194358924605*max(3.0 - r, 0)^3 + 2.6577406128280*max(3.3 - r, 0)^3

 - 1.0260416933564*max(3.7 - r, 0)^3
 + 0.35018615891957*max(4.2 - r, 0)^3 - 0.058531821042271*max(4.7 - r, 0)^3
 - 0.0030458824556234*max(5.3 - r, 0)^3"""
START, END = Fraction(1), Fraction(41, 20)

SHORT = curve("100*exp(-3*r)/r", Fraction(1, 10), 3)
LONG = curve(REDUCED_LENNARD_JONES, Fraction(1, 2), 3)


def joined(method: str, degree: int = 5, continuity: int = 2) -> Curve:
    return join_segments([SHORT, LONG], [Join(method, Fraction(3, 5), Fraction(9, 10), degree, continuity)])


def jumps(whole: Curve, at: Fraction, order: int) -> list[float]:
    before = next(piece for piece in whole.pieces if piece.end == at)
    after = next(piece for piece in whole.pieces if piece.start == at)
    left, right = (series(piece.tree, ball(at), order) for piece in (before, after))
    return [float((b - a).mid()) for a, b in zip(left, right, strict=True)]


def test_the_exponential_of_a_cubic_is_the_published_bridge() -> None:
    parts = [curve(NUCLEI, Fraction(1, 2), END), curve(FITTED, START, Fraction(53, 10))]
    whole = join_segments(parts, [Join("exp-polynomial", START, END, degree=3)])
    r = np.linspace(1.01, 2.04, 50)
    expected = [exp(sum(b * x**k for k, b in enumerate(BRIDGE))) for x in r]
    assert whole.derivatives(r, 0)[0] == pytest.approx(expected, rel=1e-8)


def test_the_published_pieces_meet_in_energy_and_slope_but_not_in_curvature() -> None:
    middle = f"exp({BRIDGE[0]} + ({BRIDGE[1]})*r + ({BRIDGE[2]})*r^2 + {BRIDGE[3]}*r^3)"
    parts = [
        curve(NUCLEI, Fraction(1, 2), START),
        curve(middle, START, END),
        curve(FITTED, END, Fraction(53, 10)),
    ]
    whole = join_segments(parts, [Join("meet", START, START), Join("meet", END, END)])
    for at in (START, END):
        energy, slope, half_curvature = jumps(whole, at, 2)
        assert abs(energy) < 1e-6
        assert abs(slope) < 2e-6
        assert abs(half_curvature) > 1


@pytest.mark.parametrize(
    ("method", "degree", "orders"),
    [
        ("polynomial", 3, 2),
        ("polynomial", 5, 3),
        ("polynomial", 7, 4),
        ("exp-polynomial", 3, 2),
        ("exp-polynomial", 5, 3),
    ],
)
def test_a_bridge_matches_so_many_derivatives_at_both_ends(method: str, degree: int, orders: int) -> None:
    whole = joined(method, degree)
    for at in (Fraction(3, 5), Fraction(9, 10)):
        found = jumps(whole, at, orders)
        assert found[:orders] == pytest.approx([0.0] * orders, abs=1e-25)
        assert abs(found[orders]) > 1


@pytest.mark.parametrize("continuity", [1, 2, 3])
def test_a_blend_is_so_many_times_differentiable_and_stays_between(continuity: int) -> None:
    whole = joined("blend", continuity=continuity)
    for at in (Fraction(3, 5), Fraction(9, 10)):
        assert jumps(whole, at, continuity) == pytest.approx([0.0] * (continuity + 1), abs=1e-25)
    r = np.linspace(0.61, 0.89, 40)
    energy, low, high = (part.derivatives(r, 0)[0] for part in (whole, SHORT, LONG))
    assert ((energy >= np.minimum(low, high)) & (energy <= np.maximum(low, high))).all()


def test_outside_the_bridge_the_segments_are_as_they_were() -> None:
    whole = joined("exp-polynomial")
    inner, outer = np.array([0.2, 0.6]), np.array([0.9000001, 2.0])
    assert whole.derivatives(inner, 1) == pytest.approx(SHORT.derivatives(inner, 1))
    assert whole.derivatives(outer, 1) == pytest.approx(LONG.derivatives(outer, 1))


def test_a_row_where_segments_meet_belongs_to_the_inner_one() -> None:
    whole = join_segments([SHORT, LONG], [Join("meet", Fraction(2), Fraction(2))])
    assert whole.derivatives(np.array([2.0]), 0)[0] == pytest.approx(SHORT.derivatives(np.array([2.0]), 0)[0])


def test_an_exponential_does_not_bridge_to_an_attraction() -> None:
    with pytest.raises(JoinError, match="not positive"):
        join_segments([SHORT, LONG], [Join("exp-polynomial", Fraction(3, 5), Fraction(3, 2))])


def test_a_bridge_needs_finite_ends() -> None:
    with pytest.raises(JoinError, match="no finite value"):
        join_segments(
            [SHORT, curve("log(r - 1)", Fraction(1, 2), 3)],
            [Join("polynomial", Fraction(3, 5), Fraction(9, 10))],
        )
