"""Reading between rows, against hand-written formulas."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from slopewell.document import INTERPOLATIONS
from slopewell.table import Rows
from slopewell.table.interpolation import READERS, interpolant

R = np.array([1.0, 1.2, 1.5, 1.9, 2.6, 3.0])
BETWEEN = np.linspace(1, 3, 57)


def rows(power: int, rule: str = "", ends: str = "", **without: None) -> Rows:
    columns = {
        "energy": R**power,
        "force": -power * R ** (power - 1),
        "curvature": power * (power - 1) * R ** (power - 2),
    }
    return Rows("A-A", R, **(columns | without), interpolation=rule, ends=ends)


def test_every_rule_of_a_document_has_a_reader() -> None:
    assert tuple(READERS) == INTERPOLATIONS


@pytest.mark.parametrize(
    ("rule", "power"), [("linear", 1), ("cubic-hermite", 3), ("cubic-spline", 3), ("quintic-hermite", 5)]
)
def test_a_rule_gives_back_a_polynomial_of_its_degree(rule: str, power: int) -> None:
    read = interpolant(rows(power, rule))
    assert read.energy(BETWEEN) == pytest.approx(BETWEEN**power, rel=1e-12)
    assert read.force(BETWEEN) == pytest.approx(-power * BETWEEN ** (power - 1), rel=1e-11)
    assert (read.start, read.end) == (1.0, 3.0)


@pytest.mark.parametrize("rule", INTERPOLATIONS)
def test_a_rule_goes_through_the_rows(rule: str) -> None:
    read = interpolant(rows(-6, rule))
    assert read.energy(R) == pytest.approx(R**-6.0, rel=1e-13)
    if rule != "cubic-spline":
        assert read.force(R) == pytest.approx(6 * R**-7.0, rel=1e-12)


@given(st.floats(0, 1), st.integers(0, 4))
def test_the_cubic_between_two_rows_is_the_hermite_formula(share: float, row: int) -> None:
    # The four basis cubics of Hermite, as in any textbook: common practice, no source.
    table = rows(-6, "cubic-hermite")
    h = R[row + 1] - R[row]
    weights = np.array([1 - 3 * share**2 + 2 * share**3, share * (1 - share) ** 2 * h])
    others = np.array([3 * share**2 - 2 * share**3, share**2 * (share - 1) * h])
    left, right = ((table.energy[k], -table.force[k]) for k in (row, row + 1))
    found = interpolant(table).energy(np.array([R[row] + share * h]))[0]
    assert found == pytest.approx(weights @ left + others @ right, rel=1e-12)


def test_linear_reads_the_force_between_force_rows() -> None:
    read = interpolant(rows(-6, "linear"))
    middle = (R[0] + R[1]) / 2
    assert read.force(np.array([middle]))[0] == pytest.approx((6 * R[0] ** -7 + 6 * R[1] ** -7) / 2)


def test_rows_that_name_no_rule_are_read_by_what_they_hold() -> None:
    assert interpolant(rows(3)).energy(BETWEEN) == pytest.approx(BETWEEN**3)
    without = interpolant(rows(3, force=None, curvature=None))
    assert without.energy(BETWEEN) == pytest.approx(BETWEEN**3)


def test_a_rule_may_be_named_instead() -> None:
    straight = interpolant(rows(2, "cubic-hermite"), "linear")
    assert straight.energy(np.array([1.1]))[0] == pytest.approx((1 + 1.44) / 2)


def test_the_ends_of_a_spline_are_the_ones_that_the_rows_name() -> None:
    exact = 3 * BETWEEN[[0, -1]] ** 2
    clamped, natural, loose = (
        interpolant(rows(3, "cubic-spline", ends)) for ends in ("clamped", "natural", "not-a-knot")
    )
    assert -clamped.force(BETWEEN[[0, -1]]) == pytest.approx(exact)
    assert -loose.force(BETWEEN[[0, -1]]) == pytest.approx(exact)
    assert abs(-natural.force(BETWEEN[[0, -1]]) - exact).min() > 0.1
    bend = np.diff(-natural.force(np.array([1.0, 1.0 + 1e-6])))[0] / 1e-6
    assert bend == pytest.approx(0, abs=1e-4)
