"""Separations of rows: the ends exactly as stated, the others right to the last place or two."""

from __future__ import annotations

from fractions import Fraction

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from slopewell.document import SPACINGS
from slopewell.table import separations
from slopewell.table.grid import variable
from slopewell.units import unit

NM, ANGSTROM = unit("nm"), unit("angstrom")
STARTS = st.decimals("0.01", "3", places=3).map(Fraction)
WIDTHS = st.decimals("0.5", "20", places=3).map(Fraction)
every_spacing = pytest.mark.parametrize("spacing", SPACINGS)


def rule(first: Fraction, last: Fraction, share: Fraction, spacing: str) -> mpmath.mpf:
    """The separation that lies a share of the way from first to last, with 40 digits."""
    first_number, last_number = (mpmath.mpf(x.numerator) / x.denominator for x in (first, last))
    part = mpmath.mpf(share.numerator) / share.denominator
    there = {
        "separation": lambda r: r,
        "separation-squared": lambda r: r**2,
        "inverse": lambda r: 1 / r,
        "logarithmic": mpmath.log,
    }[spacing]
    back = {
        "separation": lambda x: x,
        "separation-squared": mpmath.sqrt,
        "inverse": lambda x: 1 / x,
        "logarithmic": mpmath.exp,
    }[spacing]
    return back(there(first_number) + (there(last_number) - there(first_number)) * part)


@every_spacing
@given(start=STARTS, width=WIDTHS, rows=st.integers(2, 400))
def test_rows_ascend_from_the_stated_start_to_the_stated_end(
    spacing: str, start: Fraction, width: Fraction, rows: int
) -> None:
    r = separations(start, start + width, rows, spacing, ANGSTROM)
    assert r.size == rows
    assert (r[0], r[-1]) == (float(start), float(start + width))
    assert np.all(np.diff(r) > 0)


@every_spacing
@given(start=STARTS, width=WIDTHS, rows=st.integers(3, 2000), row=st.integers(1))
def test_a_row_lies_where_its_rule_says_to_the_last_place(
    spacing: str, start: Fraction, width: Fraction, rows: int, row: int
) -> None:
    row %= rows
    found = separations(start, start + width, rows, spacing, ANGSTROM)[row]
    with mpmath.workdps(40):
        exact = rule(start, start + width, Fraction(row, rows - 1), spacing)
        most = 2 if spacing == "logarithmic" else 1
        assert abs(mpmath.mpf(found) - exact) <= most * np.spacing(found)


@every_spacing
def test_ends_are_those_of_the_unit_that_rows_are_in(spacing: str) -> None:
    # 2.5 and 12 angstrom are stated; in nm the nearest doubles are those of 0.25 and 1.2.
    r = separations(Fraction(5, 2), Fraction(12), 101, spacing, NM)
    assert (r[0], r[-1]) == (0.25, 1.2)


@every_spacing
def test_rows_are_even_in_the_variable_of_their_spacing(spacing: str) -> None:
    steps = np.diff(variable(separations(Fraction(2), Fraction(9), 500, spacing, ANGSTROM), spacing))
    assert steps == pytest.approx(steps.mean(), rel=1e-10)


def test_other_spacings_put_rows_where_their_name_says() -> None:
    middle = {s: separations(Fraction(1), Fraction(4), 3, s, ANGSTROM)[1] for s in SPACINGS}
    assert middle == pytest.approx(
        {"separation": 2.5, "separation-squared": np.sqrt(8.5), "inverse": 1.6, "logarithmic": 2.0}
    )
