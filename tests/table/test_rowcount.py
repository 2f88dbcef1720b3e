"""The fewest rows that keep a tolerance."""

from __future__ import annotations

from fractions import Fraction

import pytest
from sampling import sampled
from slopewell.document import SPACINGS, Grid
from slopewell.formula import bind, parse
from slopewell.formula.branches import resolve
from slopewell.potential import Curve
from slopewell.problems import UnusableInput
from slopewell.table.bounds import ErrorBounds
from slopewell.table.rowcount import row_count, rows_needed, smallest

GRID = Grid(Fraction(9, 10), Fraction(3), None, tolerance=Fraction(1, 10**6))
LENNARD_JONES = Curve(resolve(bind(parse("4*((1/r)^12 - (1/r)^6)"), {}), GRID.start, GRID.end))


@pytest.mark.parametrize("spacing", SPACINGS)
@pytest.mark.parametrize("rule", ["linear", "cubic-hermite", "quintic-hermite"])
def test_the_count_keeps_the_tolerance_when_sampled_and_a_tenth_fewer_does_not(rule: str, spacing: str) -> None:
    tolerance = 1e-4 if rule == "linear" else 1e-6
    rows = rows_needed(ErrorBounds(LENNARD_JONES, GRID), spacing, rule, "clamped", tolerance, None)
    assert rows is not None
    assert sampled(LENNARD_JONES, GRID, rows, spacing, rule, "clamped")[0] <= tolerance
    assert sampled(LENNARD_JONES, GRID, int(0.9 * rows), spacing, rule, "clamped")[0] > tolerance


def test_a_spline_keeps_the_tolerance_too() -> None:
    rows = rows_needed(ErrorBounds(LENNARD_JONES, GRID), "separation", "cubic-spline", "natural", 1e-5, None)
    assert rows is not None
    assert sampled(LENNARD_JONES, GRID, rows, "separation", "cubic-spline", "natural")[0] <= 1e-5


def test_the_count_is_the_smallest_whose_bound_keeps_it() -> None:
    bounds = ErrorBounds(LENNARD_JONES, GRID)
    rows = rows_needed(bounds, "inverse", "cubic-hermite", "clamped", 1e-6, None)
    assert rows is not None
    assert bounds.energy_bound(rows, "inverse", "cubic-hermite") <= 1e-6
    assert bounds.energy_bound(rows - 1, "inverse", "cubic-hermite") > 1e-6


def test_a_tolerance_of_the_force_is_kept_as_well() -> None:
    bounds = ErrorBounds(LENNARD_JONES, GRID)
    rows = rows_needed(bounds, "separation", "cubic-hermite", "clamped", 1.0, 1e-4)
    assert rows is not None
    assert bounds.bound(rows, "separation", "cubic-hermite").force <= 1e-4
    assert bounds.bound(rows - 1, "separation", "cubic-hermite").force > 1e-4


@pytest.mark.parametrize(("power", "crossing"), [(1, 77_777), (2, 3), (4, 12_345), (6, 9_999_999)])
def test_the_search_finds_the_crossing(power: int, crossing: int) -> None:
    assert smallest(lambda rows: (crossing / rows) ** power, 2, power) == crossing


def test_what_no_count_keeps_is_told() -> None:
    assert smallest(lambda rows: 2.0, 2, 4) is None
    hopeless = Grid(GRID.start, GRID.end, None, interpolation="linear", tolerance=Fraction(1, 10**30))
    with pytest.raises(UnusableInput, match="keeps the tolerance for A-A"):
        row_count(ErrorBounds(LENNARD_JONES, hopeless), hopeless, "A-A")


def test_stated_rows_are_taken_as_they_are() -> None:
    stated = Grid(GRID.start, GRID.end, 17)
    assert row_count(ErrorBounds(LENNARD_JONES, stated), stated, "A-A") == 17
