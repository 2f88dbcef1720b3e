"""Hermite's polynomial through Taylor coefficients at both ends."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula.balls import ball, series
from slopewell.potential.matching import matching

small = st.fractions(-5, 5, max_denominator=50)


@given(
    st.integers(1, 4).flatmap(lambda n: st.tuples(*[st.lists(small, min_size=n, max_size=n)] * 2)),
    st.fractions(Fraction(1, 10), 3, max_denominator=20),
    st.fractions(Fraction(1, 10), 3, max_denominator=20),
)
def test_it_has_the_coefficients_asked_for_at_both_ends(
    ends: tuple[list[Fraction], list[Fraction]], start: Fraction, width: Fraction
) -> None:
    left, right = ends
    tree = matching(left, right, start, start + width)
    for at, wanted in ((start, left), (start + width, right)):
        found = series(tree, ball(at), len(wanted) - 1)
        assert all(
            c.contains(ball(w)) or abs(float((c - ball(w)).mid())) < 1e-25 for c, w in zip(found, wanted, strict=True)
        )


def test_two_energies_and_slopes_give_the_textbook_cubic() -> None:
    # 2x^3 - 3x^2 + 1: elementary; half-way it is 1/2 with slope -3/2.
    tree = matching([Fraction(1), Fraction(0)], [Fraction(0), Fraction(0)], Fraction(1), Fraction(2))
    value, slope = series(tree, ball(Fraction(3, 2)), 1)
    assert (float(value.mid()), float(slope.mid())) == (0.5, -1.5)
