"""Roots: all of them, and proved to be all."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from math import pi
from typing import Any

import pytest
from flint import arb
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula import bind, parse
from slopewell.formula.balls import ball, fraction
from slopewell.formula.roots import Roots, isolate, nearest_fraction, roots

LENNARD_JONES = "4*((1/r)^12 - (1/r)^6)"


def found(text: str, start: str, end: str, derivative: int = 0) -> Roots:
    return roots(bind(parse(text), {}), Fraction(start), Fraction(end), derivative)


@pytest.mark.parametrize(
    ("derivative", "sixth_power"),
    [(0, Fraction(1)), (1, Fraction(2)), (2, Fraction(26, 7)), (3, Fraction(13, 2))],
)
def test_lennard_jones_has_one_root_of_each_derivative(derivative: int, sixth_power: Fraction) -> None:
    # U = 4(r⁻¹² − r⁻⁶): U⁽ᵏ⁾ vanishes where r⁶ = 12·13…(11+k)/(6·7…(5+k)).
    result = found(LENNARD_JONES, "0.7", "6", derivative)
    assert result.proved
    (root,) = result.found
    assert abs(fraction(root) ** 6 / sixth_power - 1) < Fraction(1, 10**28)


@pytest.mark.parametrize(("entry", "derivative"), [("T02-001", 1), ("T02-004", 2)])
def test_the_published_landmarks_of_lennard_jones_are_found(
    published: Callable[[str], Any], entry: str, derivative: int
) -> None:
    # M. P. Allen and D. J. Tildesley, Computer Simulation of Liquids, 2nd ed. (Oxford 2017)
    (root,) = found(LENNARD_JONES, "0.7", "6", derivative).found
    assert float(root.mid()) == pytest.approx(published(entry).number, rel=1e-13)


def test_every_zero_of_a_wave_is_found() -> None:
    result = found("sin(r)", "0.5", "40")
    assert result.proved
    assert [float(root.mid()) for root in result.found] == pytest.approx([k * pi for k in range(1, 13)], rel=1e-15)


@given(st.lists(st.integers(2, 98), min_size=1, max_size=4, unique=True))
def test_the_zeros_of_a_polynomial_are_found(hundredths: list[int]) -> None:
    text = "*".join(f"(r - {k}/100)" for k in hundredths)
    result = found(text, "0.01", "0.99")
    assert result.proved
    assert [round(float(root.mid()) * 100, 9) for root in result.found] == sorted(hundredths)


@pytest.mark.parametrize("text", ["exp(-r)", "r^2 + 1", "1/r", "cosh(r) - 0.999"])
def test_a_curve_without_a_root_is_proved_to_have_none(text: str) -> None:
    assert found(text, "0.1", "5") == Roots((), ())


def test_a_root_at_a_round_number_is_found_once() -> None:
    assert len(found("r - 2", "1", "3").found) == 1


@pytest.mark.parametrize("derivative", [0, 1, 2])
def test_a_smooth_end_is_divided_out(derivative: int) -> None:
    # U, U′ and U″ vanish at the end; what is left inside are the roots of (3 − r)³(r − 1.3).
    result = found("(3 - r)^3*(r - 1.3)", "0.5", "3", derivative)
    assert result.proved
    inside = [1.3] if derivative == 0 else [1.725] if derivative == 1 else [2.15]
    assert [float(root.mid()) for root in result.found] == pytest.approx(inside, rel=1e-15)


def test_a_touching_root_is_left_undecided_with_its_place() -> None:
    result = found("(r - 1.7)^2", "1", "3")
    assert not result.proved
    ((low, high),) = result.undecided
    assert low <= 1.7 <= high
    assert high - low < 1e-9


def test_a_pole_is_never_taken_for_a_root() -> None:
    result = found("1/(r - 1.7)", "1", "3")
    assert not result.found
    assert not result.proved


def test_a_root_is_isolated_from_enclosures_alone() -> None:
    result = isolate(lambda x: (x * x - 2, 2 * x), ball(1.0), ball(Fraction(2)))
    (root,) = result.found
    assert (root * root).contains(2)
    assert root.rad() < 1e-25
    assert abs(nearest_fraction(root) ** 2 - 2) < Fraction(1, 10**25)


def test_a_flat_zero_is_undecided() -> None:
    assert not isolate(lambda x: (arb(0), arb(0)), ball(1.0), ball(1.0 + 2**-20)).proved
