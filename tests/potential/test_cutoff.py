"""Cutoff treatments against published polynomials and values."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from typing import Any

import numpy as np
import pytest
from documents import REDUCED_LENNARD_JONES, curve
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula.balls import ball, series
from slopewell.potential import TREATMENTS, Curve, Cutoff, find_landmarks, treat
from slopewell.potential.cutoff import SWITCHED, switch

Entries = Callable[[str], Any]
BARE = curve(REDUCED_LENNARD_JONES, Fraction(4, 5), 5)


def treated(at: float, treatment: str, start: float | None = None, continuity: int = 2, end: float = 5) -> Curve:
    begin = None if start is None else Fraction(start)
    return treat(BARE, Cutoff(Fraction(at), treatment, begin, continuity), Fraction(end))


def at(reading: Curve, r: float, order: int = 1) -> list[float]:
    return [float(row[0]) for row in reading.derivatives(np.array([r]), order)]


# Hermite step polynomials S(x), x from 0 at the start of the switch to 1 at the cutoff: the weight is 1 − S.
@pytest.mark.parametrize(("continuity", "entry"), [(1, "T09-001"), (3, "T09-003")])
def test_the_switch_has_the_published_value(continuity: int, entry: str, published: Entries) -> None:
    numerator, denominator = published(entry).value.split("S(1/4)=")[1].split("/")
    weight = series(switch(Fraction(2), Fraction(3), continuity), ball(Fraction(9, 4)), 0)[0]
    assert weight.contains(ball(1 - Fraction(int(numerator), int(denominator))))
    assert float(weight.rad()) < 1e-30


def test_the_switch_of_two_derivatives_is_that_of_the_closed_form() -> None:
    # 6x^5 - 15x^4 + 10x^3: K. Perlin, ACM Trans. Graph. 21, 681 (2002).
    x = Fraction(1, 4)
    weight = series(switch(Fraction(2), Fraction(3), 2), ball(2 + x), 0)[0]
    assert weight.contains(ball(1 - (6 * x**5 - 15 * x**4 + 10 * x**3)))


@pytest.mark.parametrize("continuity", [1, 2, 3])
def test_the_switch_meets_one_and_zero_with_so_many_derivatives(continuity: int) -> None:
    weight = switch(Fraction(2), Fraction(5, 2), continuity)
    begin, end = (series(weight, ball(r), continuity + 1) for r in (Fraction(2), Fraction(5, 2)))
    assert [float(c.mid()) for c in begin[: continuity + 1]] == pytest.approx([1] + [0] * continuity, abs=1e-25)
    assert [float(c.mid()) for c in end[: continuity + 1]] == pytest.approx([0] * (continuity + 1), abs=1e-25)
    assert abs(float(begin[continuity + 1].mid())) > 1
    assert abs(float(end[continuity + 1].mid())) > 1


@given(st.integers(1, 3), st.floats(0.01, 0.99))
def test_the_switch_falls_between_its_ends(continuity: int, share: float) -> None:
    value, slope = series(switch(Fraction(2), Fraction(3), continuity), ball(2 + share), 1)
    assert 0 < float(value.mid()) < 1
    assert float(slope.mid()) < 0


@pytest.mark.parametrize(
    ("continuity", "r", "entry"),
    [
        *((1, 2.1, "T09-013"), (1, 2.4, "T09-015"), (2, 2.1, "T09-016")),
        *((2, 2.4, "T09-018"), (3, 2.1, "T09-019"), (3, 2.4, "T09-021")),
    ],
)
def test_a_switched_lennard_jones_curve_has_the_published_values(
    continuity: int, r: float, entry: str, published: Entries
) -> None:
    energy, slope = at(treated(2.5, "switch", 2, continuity), r)
    assert energy == pytest.approx(published(entry).part("U"), rel=1e-12)
    assert -slope == pytest.approx(published(entry).part("F"), rel=1e-12)


@pytest.mark.parametrize(("cutoff", "entry"), [(3, "T09-006"), (4, "T09-007")])
def test_a_truncated_curve_jumps_by_the_published_steps(cutoff: float, entry: str, published: Entries) -> None:
    jumps = [float(word) for word in published(entry).value.replace(";", "").split() if word[:2] == "0."]
    energy, slope, curvature = at(treated(cutoff, "truncate"), cutoff, 2)
    assert [-energy, slope, -curvature] == pytest.approx([jumps[0], jumps[1], jumps[2]], rel=1e-12)


@pytest.mark.parametrize(("cutoff", "entry"), [(2.5, "T09-009"), (3, "T09-010")])
def test_a_force_shifted_curve_has_the_published_minimum(cutoff: float, entry: str, published: Entries) -> None:
    reading = treated(cutoff, "shifted-force")
    landmarks = find_landmarks(reading, Fraction(4, 5), Fraction(5))
    assert landmarks.equilibrium_separation == pytest.approx(published(entry).part("r_min"), rel=1e-12)
    assert -landmarks.well_depth == pytest.approx(published(entry).part("U_min"), rel=1e-12)
    energy, slope = at(reading, 1.0)
    assert energy == pytest.approx(published(entry).part("U(1)"), rel=1e-12)
    assert -slope == pytest.approx(published(entry).part("F(1)"), rel=1e-12)


def test_an_energy_shifted_curve_has_the_published_depth(published: Entries) -> None:
    landmarks = find_landmarks(treated(2.5, "shifted-energy"), Fraction(4, 5), Fraction(5))
    assert -landmarks.well_depth == pytest.approx(published("T09-012").number, rel=1e-12)


@pytest.mark.parametrize("treatment", TREATMENTS)
def test_up_to_and_including_the_cutoff_a_row_has_the_value_from_inside(treatment: str) -> None:
    reading = treated(2.5, treatment, 2 if treatment in SWITCHED else None)
    inside = series(reading.pieces[-2].tree, ball(Fraction(5, 2)), 1)
    assert at(reading, 2.5) == pytest.approx([float(c.mid()) for c in inside], abs=1e-16)


@pytest.mark.parametrize("treatment", TREATMENTS)
def test_beyond_the_cutoff_energy_and_force_are_exactly_zero(treatment: str) -> None:
    reading = treated(2.5, treatment, 2 if treatment in SWITCHED else None)
    assert not reading.derivatives(np.array([2.50001, 3.0, 5.0]), 2).any()


@pytest.mark.parametrize(
    ("treatment", "orders"),
    [("truncate", 0), ("shifted-energy", 1), ("shifted-force", 2), ("shifted-stiffness", 3)],
)
def test_a_shift_brings_so_many_derivatives_to_zero_at_the_cutoff(treatment: str, orders: int) -> None:
    coefficients = series(treated(2.5, treatment).pieces[0].tree, ball(Fraction(5, 2)), 2)
    vanishing = [abs(float(c.mid())) < 1e-25 for c in coefficients]
    assert vanishing == [order < orders for order in range(3)]


def test_before_the_switch_the_curve_is_the_bare_one() -> None:
    r = np.linspace(0.8, 1.99, 50)
    assert np.array_equal(treated(2.5, "switch", 2).derivatives(r, 2), BARE.derivatives(r, 2))


def test_a_cutoff_at_the_end_of_the_grid_leaves_no_stretch_of_zeros() -> None:
    assert treated(5, "shifted-energy").edges() == ()


def test_a_branch_inside_the_switch_keeps_its_own_trees() -> None:
    bent = curve("where(r < 2.2, 1/r, 2/r)", 1, 3)
    reading = treat(bent, Cutoff(Fraction(5, 2), "switch", Fraction(2), 2), Fraction(3))
    assert [float(edge) for edge in reading.edges()] == pytest.approx([2, 2.2, 2.5])
    weight = 1 - (6 * 0.6**5 - 15 * 0.6**4 + 10 * 0.6**3)
    assert at(reading, 2.3, 0) == pytest.approx([2 / 2.3 * weight])
