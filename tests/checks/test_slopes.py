"""Slopes of rows: the true one lies within the band, at every row, for smooth, broken and rounded curves."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from slopewell.checks.digits import digits, separation_rounding
from slopewell.checks.slopes import slopes
from slopewell.checks.table_facts import rows_evidence
from slopewell.units import unit_system

Array = NDArray[np.float64]
UNITS = unit_system("eV", "angstrom")


def test_polynomial_of_degree_six_is_exact() -> None:
    r = np.linspace(1.0, 2.0, 40)
    found = slopes(r, r**6, np.zeros(40), np.zeros(40))

    assert np.allclose(found.values[3:-3], 6 * r[3:-3] ** 5, rtol=1e-10)


@given(st.floats(0.2, 5.0), st.integers(20, 400), st.floats(1.2, 6.0))
def test_true_slope_lies_within_the_band(rate: float, rows: int, ratio: float) -> None:
    r = np.linspace(1.0, ratio, rows)
    energy = np.exp(-rate * r) - 0.5 / r**6
    force = rate * np.exp(-rate * r) - 3 / r**7

    assert not rows_evidence(r, energy, force, UNITS).wrong.size


@pytest.mark.parametrize("rows", [60, 500])
def test_a_step_and_a_kink_spoil_no_row(rows: int) -> None:
    r = np.linspace(1.0, 3.0, rows)
    step = r < 2.0
    kink = r < 2.5
    energy = np.where(step, 1 / r**6, 0.1 * np.abs(r - 2.5))
    force = np.where(step, 6 / r**7, np.where(kink, 0.1, -0.1))

    assert not rows_evidence(r, energy, force, UNITS).wrong.size


def test_digits_are_counted() -> None:
    column = np.array([float(f"{x:.5e}") for x in np.linspace(1.1, 99.7, 300)])
    fixed = np.array([float(f"{x:.3f}") for x in np.linspace(1.1, 99.7, 300)])

    assert digits(column).significant == 6
    assert digits(fixed).decimals == 3
    assert digits(fixed).rounding(fixed) == pytest.approx(5e-4)


def test_an_exact_step_is_no_rounding() -> None:
    exact = np.array([float(f"{x:.2f}") for x in np.arange(0.25, 3.0, 0.01)])
    rounded = np.array([float(f"{x:.4f}") for x in np.linspace(0.25, 3.0, 1000)])

    assert separation_rounding(exact).max() < 1e-12
    assert separation_rounding(rounded) == pytest.approx(5e-5)
