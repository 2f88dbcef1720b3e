from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from slopewell.reports.view import number_text, round_step, thin, ticks, unit_text, view_of

R = np.linspace(0.8, 3.0, 2001)
WELL = 4 * (R**-12 - R**-6)
PUSH = 4 * (12 * R**-13 - 6 * R**-7)


def test_the_wall_does_not_squash_the_well() -> None:
    view = view_of(R, WELL, PUSH, 2 ** (1 / 6), 2.5)
    low, high = view.energy
    assert -1.4 < low < -1.05
    assert 0.5 < high < 1.2


def test_the_wall_leaves_through_the_top() -> None:
    view = view_of(R, WELL, PUSH, 2 ** (1 / 6), 2.5)
    assert WELL[view.separation[0] <= R].max() > view.energy[1]
    assert view.separation[0] > 0.8


def test_the_cutoff_is_inside() -> None:
    view = view_of(R, WELL, PUSH, 2 ** (1 / 6), 2.5)
    assert 2.5 < view.separation[1] < 2.6


def test_a_spoilt_row_does_not_set_the_limits() -> None:
    spoilt = WELL.copy()
    spoilt[1500] = 1e6
    assert view_of(R, spoilt, PUSH, None, 2.5).energy == pytest.approx(view_of(R, WELL, PUSH, None, 2.5).energy)


def test_a_fall_at_short_range_does_not_set_the_limits() -> None:
    falling = np.where(R < 0.9, -1e5, WELL)
    assert view_of(R, falling, PUSH, 2 ** (1 / 6), 2.5).energy[0] > -1.5


def test_a_bounded_repulsion_is_seen_whole() -> None:
    soft = 5 * np.exp(-(R**2))
    view = view_of(R, soft, 2 * R * soft, None, 3.0)
    assert view.separation[0] == 0.8
    assert view.energy[1] > soft.max()


def test_thinning_keeps_a_spike() -> None:
    r = np.linspace(1.0, 2.0, 100_001)
    energy = np.zeros_like(r)
    energy[77_777] = 1.0
    kept = thin(r, [energy], (1.0, 2.0))
    assert 77_777 in kept
    assert kept.size < 2000


def test_thinning_leaves_few_rows_as_they_are() -> None:
    r = np.linspace(1.0, 2.0, 50)
    assert thin(r, [r], (1.0, 2.0)).tolist() == list(range(50))


@given(st.floats(1e-12, 1e12), st.integers(2, 12))
def test_a_round_step_cuts_into_at_most_so_many_parts(span: float, count: int) -> None:
    step = round_step(span, count)
    assert span / step <= count * (1 + 1e-9)
    assert span / step >= count / 2.6


def test_ticks_are_round_and_inside() -> None:
    assert ticks((-6.4, 5.0), 6) == [(-6, "−6"), (-4, "−4"), (-2, "−2"), (0, "0"), (2, "2"), (4, "4")]


@pytest.mark.parametrize(
    ("value", "text"),
    [(-25.49391, "−25.4939"), (5.0, "5"), (1.5e-7, "1.5×10⁻⁷"), (-2e9, "−2×10⁹"), (0.0, "0")],
)
def test_numbers_for_people(value: float, text: str) -> None:
    assert number_text(value) == text


def test_units_for_people() -> None:
    assert unit_text("eV/angstrom^2") == "eV/Å²"
    assert unit_text("cm^-1") == "cm⁻¹"
