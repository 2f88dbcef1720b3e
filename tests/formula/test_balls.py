"""Balls: what they enclose, and what they refuse to decide."""

from __future__ import annotations

from fractions import Fraction

import mpmath
import pytest
from flint import arb, ctx
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula import bind, parse
from slopewell.formula.balls import (
    Undecided,
    ball,
    enclose,
    fraction,
    meet,
    precision,
    series,
    stretch,
    value,
)


def thin(text: str, r: str, order: int) -> list[arb]:
    return series(bind(parse(text), {}), ball(Fraction(r)), order)


@given(
    st.data(),
    st.fractions("0.5", 3),
    st.fractions(0, "0.2"),
    st.fractions(0, 1),
    st.sampled_from([series, enclose]),
)
def test_a_stretch_encloses_every_separation_in_it(
    smooth_formulas: st.SearchStrategy[str],
    data: st.DataObject,
    start: Fraction,
    width: Fraction,
    part: Fraction,
    reading: object,
) -> None:
    tree, order = bind(parse(data.draw(smooth_formulas)), {}), 3
    over = reading(tree, stretch(start, start + width), order)  # type: ignore[operator]
    within = series(tree, ball(start + part * width), order)
    assert all(wide.overlaps(point) for wide, point in zip(over, within, strict=True))
    # An overlap of a wide ball with one of 1e-30 is as good as containing its middle.
    assert all(
        wide.contains(point.mid()) or (wide - point).contains(0) for wide, point in zip(over, within, strict=True)
    )


@pytest.mark.parametrize(
    ("text", "function"),
    [
        ("exp(-r)/r", lambda r: mpmath.exp(-r) / r),
        ("r^-3.5", lambda r: r ** mpmath.mpf("-3.5")),
        ("r^0.3", lambda r: r ** (mpmath.mpf(3) / 10)),
        ("r^r", lambda r: r**r),
        ("tang_toennies(8, r)", lambda r: mpmath.gammainc(9, 0, r, regularized=True)),
        ("tanh(r)*cosh(r)", mpmath.sinh),
        ("erfc(r) + erf(r) + tan(r)", lambda r: 1 + mpmath.tan(r)),
    ],
)
def test_thin_balls_hold_the_taylor_coefficients_of_mpmath(text: str, function: object) -> None:
    with mpmath.workdps(60):
        wanted = mpmath.taylor(function, mpmath.mpf(5) / 4, 5)
        for found, right in zip(thin(text, "5/4", 5), wanted, strict=True):
            assert float(abs(mpmath.mpf(found.mid().str(40, radius=False)) - right)) < 1e-28 * (1 + float(abs(right)))
            assert float(found.rad()) < 1e-30 * (1 + float(abs(right)))


def test_the_mean_value_form_is_tighter_than_the_naive_one() -> None:
    tree = bind(parse("4*((1/r)^12 - (1/r)^6)"), {})
    x = stretch(Fraction(11, 10), Fraction(1101, 1000))
    naive, tight = series(tree, x, 1), enclose(tree, x, 1)
    for wide, narrow in zip(naive, tight, strict=True):
        assert wide.contains(narrow)
    assert tight[0].rad() < 0.2 * naive[0].rad()


@pytest.mark.parametrize("text", ["1/(r - 1)", "log(r - 1)", "sqrt(r - 1)", "(r - 1)^-2", "(r - 1)^0.3", "tan(pi/2*r)"])
def test_a_pole_or_the_end_of_a_domain_is_not_finite(text: str) -> None:
    tree = bind(parse(text), {"pi": arb.pi()})
    assert not series(tree, stretch(0.5, 1.5), 1)[1].is_finite()


@pytest.mark.parametrize("text", ["abs(r - 1)", "min(r, 1)", "max(r, 1)", "where(r < 1, r, 2)", "where(r >= 1, r, 2)"])
def test_a_branch_within_the_stretch_is_undecided(text: str) -> None:
    with pytest.raises(Undecided):
        series(bind(parse(text), {}), stretch(0.5, 1.5), 0)


@pytest.mark.parametrize(
    ("text", "at_1", "at_3"),
    [
        ("abs(r - 2)", 1, 1),
        ("min(r, 2)", 1, 2),
        ("max(r, 2)", 2, 3),
        ("where(r < 1, 5, 6)", 6, 6),
        ("where(r <= 1, 5, 6)", 5, 6),
        ("where(r > 1, 5, 6)", 6, 5),
        ("where(r >= 1, 5, 6)", 5, 5),
    ],
)
def test_a_branch_is_decided_at_a_point(text: str, at_1: int, at_3: int) -> None:
    assert thin(text, "1", 0)[0] == at_1
    assert thin(text, "3", 0)[0] == at_3


@pytest.mark.parametrize("power", [2, 3, 6, 7])
def test_a_power_over_a_stretch_about_zero_is_sharp(power: int) -> None:
    (found,) = series(bind(parse(f"r^{power}"), {}), stretch(-2.0, 2.0), 0)
    assert found.contains(2.0**power)
    assert float(found.upper()) == pytest.approx(2.0**power, rel=1e-6)
    assert float(found.lower()) == pytest.approx(-(2.0**power) if power % 2 else 0, rel=1e-6, abs=1e-6)


@given(st.fractions(max_denominator=10**40))
def test_a_fraction_lies_in_its_ball(x: Fraction) -> None:
    with precision(256):
        error = abs(ball(x) * x.denominator - x.numerator) / x.denominator
    assert error.contains(0)
    assert abs(fraction(ball(x)) - x) <= abs(x) / 2**127


@given(st.floats(-1e10, 1e10))
def test_a_double_is_its_ball(x: float) -> None:
    assert fraction(ball(x)) == Fraction(x)
    assert ball(x).rad() == 0


@given(st.fractions(-5, 5), st.fractions(0, 5), st.fractions(0, 1))
def test_a_stretch_holds_its_ends_and_all_between(start: Fraction, width: Fraction, part: Fraction) -> None:
    x = stretch(start, start + width)
    assert all((x - ball(start + share * width)).contains(0) for share in (Fraction(0), part, Fraction(1)))


def test_two_enclosures_meet_in_what_they_share() -> None:
    met = meet(arb(1, 1), arb(2, 1))
    assert met.contains(1.5)
    assert met.rad() < 0.51
    assert meet(arb.nan(), arb(3)) == 3
    assert meet(arb(3), arb.nan()) == 3


def test_the_value_of_a_number_needs_no_separation() -> None:
    assert value(parse("2^10 - 24")) == 1000


def test_the_precision_of_the_process_is_left_as_it_was() -> None:
    before = ctx.prec, ctx.cap
    thin("exp(r)", "1", 3)
    with pytest.raises(Undecided), precision(300):
        series(parse("abs(r)"), stretch(-1.0, 1.0), 2)
    assert (ctx.prec, ctx.cap) == before


def test_a_tree_read_to_a_low_order_first_is_read_to_a_higher_one_after() -> None:
    tree = bind(parse("1.5^0.5*r^2.5 + 3/r"), {})
    low = series(tree, ball(2.0), 1)
    high = series(tree, ball(2.0), 6)
    assert all(a.overlaps(b) for a, b in zip(low, high, strict=False))
    assert all(not coefficient.is_zero() for coefficient in high)
