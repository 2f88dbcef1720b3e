"""The checks of rows: order, spacing, digits, last row, core and wells, each with a planted defect."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
from numpy.typing import NDArray
from slopewell.checks import TABLE_CHECKS, Finding, TableFacts, run_checks
from slopewell.checks.row_landmarks import turns
from slopewell.table import Rows
from slopewell.units import unit_system

Array = NDArray[np.float64]
UNITS = unit_system("eV", "angstrom")
R = np.linspace(3.0, 12.0, 901)


def energy(r: Array) -> Array:
    return np.asarray(4 * 0.01 * ((3.4 / r) ** 12 - (3.4 / r) ** 6))


def force(r: Array) -> Array:
    return np.asarray(4 * 0.01 * (12 * (3.4 / r) ** 12 - 6 * (3.4 / r) ** 6) / r)


def found(r: Array, u: Array | None, f: Array | None, **rules: Any) -> dict[str, Finding]:
    purpose = rules.pop("purpose", "")
    findings, _ = run_checks(TABLE_CHECKS, TableFacts(Rows("A-B", r, u, f, **rules), UNITS, purpose), "A-B")
    return {finding.check: finding for finding in reversed(findings)}


def test_a_number_that_is_not_finite_is_named_by_its_row() -> None:
    column = energy(R)
    column[4] = np.nan

    assert found(R, column, force(R))["rows-readable"].details["rows"] == [5]


@pytest.mark.parametrize(("row", "value", "word"), [(10, R[9], "repeats"), (10, R[8], "goes back")])
def test_separations_out_of_order_are_named_by_their_rows(row: int, value: float, word: str) -> None:
    r = R.copy()
    r[row] = value
    finding = found(r, energy(r), force(r))["rows-ordered"]

    assert finding.level == "error"
    assert row + 1 in finding.details["rows"]
    assert word in finding.says


@pytest.mark.parametrize("power", [1, 2, -1, 0])
def test_rows_that_keep_a_rule_are_no_finding(power: int) -> None:
    even = np.linspace(np.log(3.0), np.log(12.0), 300) if power == 0 else np.linspace(3.0**power, 12.0**power, 300)
    r = np.exp(even) if power == 0 else even ** (1 / power)

    assert "rows-evenly-spaced" not in found(r, energy(r), force(r))


def test_a_missing_row_is_named() -> None:
    r = np.delete(R, 100)
    finding = found(r, energy(r), force(r))["rows-evenly-spaced"]

    assert (finding.level, finding.details["rows"]) == ("warning", [100])


def test_a_claimed_spacing_that_is_not_kept_is_an_error() -> None:
    assert found(R, energy(R), force(R), spacing="inverse")["rows-evenly-spaced"].level == "error"


def short(column: Array, digits: int) -> Array:
    return np.array([float(f"{number:.{digits - 1}e}") for number in column.tolist()])


@pytest.mark.parametrize(("digits", "mistake"), [(4, "too-few-digits"), (12, None)])
def test_too_few_digits_are_a_warning(digits: int, mistake: str | None) -> None:
    finding = found(R, short(energy(R), digits), short(force(R), digits)).get("enough-digits")

    assert (None if finding is None else (finding.level, finding.mistake)) == (mistake and ("warning", mistake))


@pytest.mark.parametrize(("purpose", "level"), [("", "warning"), ("dynamics", "error")])
def test_a_step_at_the_last_row_is_judged_by_purpose(purpose: str, level: str) -> None:
    assert found(R, energy(R), force(R), purpose=purpose)["last-row"].level == level


def test_a_table_that_ends_at_zero_has_no_step() -> None:
    u, f = energy(R), force(R)
    last = R - R[-1]

    assert "last-row" not in found(R, u - u[-1] + f[-1] * last, f - f[-1], purpose="dynamics")


def test_a_curve_that_turns_over_has_no_core() -> None:
    r = np.linspace(0.5, 6.0, 800)
    u = 2000 * np.exp(-4 * r) - 30 / r**6
    f = 8000 * np.exp(-4 * r) - 180 / r**7

    assert "turns over" in found(r, u, f)["repulsive-core"].says


def test_two_wells_are_a_warning_and_noise_is_none() -> None:
    r = np.linspace(1.0, 9.0, 2000)
    waves = np.cos(2 * r) / r
    slope = (2 * r * np.sin(2 * r) + np.cos(2 * r)) / r**2

    assert found(r, waves, slope)["single-well"].measured == 3
    assert len(turns(short(energy(R), 6), 5e-6 * np.abs(energy(R)))) == 1


def test_landmarks_are_those_of_lennard_jones() -> None:
    # J. E. Lennard-Jones, Proc. R. Soc. A 106, 463 (1924): the minimum of the 12-6 form lies at 2^(1/6) sigma
    landmarks = TableFacts(Rows("A-B", R, energy(R), force(R)), UNITS).landmarks

    assert landmarks.equilibrium_separation == pytest.approx(3.4 * 2 ** (1 / 6), rel=1e-7)
    assert landmarks.well_depth == pytest.approx(0.01, rel=1e-7)
    assert landmarks.zero_crossing == pytest.approx(3.4, rel=1e-7)
    assert landmarks.stiffness == pytest.approx(72 * 0.01 / (2 ** (1 / 3) * 3.4**2), rel=1e-4)
    assert landmarks.largest_attraction is not None
    assert landmarks.largest_attraction[0] == pytest.approx(3.4 * (26 / 7) ** (1 / 6), rel=1e-4)
