"""Rows: every number right to a few units in the last place, by balls and in any unit."""

from __future__ import annotations

from fractions import Fraction
from math import exp
from pathlib import Path

import numpy as np
import pytest
from documents import GRID, LENNARD_JONES, SWITCH, read, text
from slopewell.document import Interaction
from slopewell.formula.balls import ball, series
from slopewell.table import Rows, tabulate_rows
from slopewell.units import UnitSystem, unit_system

MOST_UNITS = 4
EV, KJ = unit_system("eV", "angstrom"), unit_system("kJ/mol", "nm")


def lennard_jones_terms(r: float) -> tuple[float, float]:
    """Largest terms of energy and slope in eV and ångström; the switch adds energy over its width."""
    energy = 0.04 * (3.4 / r) ** 12 + 0.04 * (3.4 / r) ** 6
    return energy, 12 * energy / r + energy


def exp_6_terms(r: float) -> tuple[float, float]:
    repulsion, attraction = 9576 * exp(-r / 0.27614), 62.03 / r**6
    return max(repulsion, attraction), max(repulsion / 0.27614, 6 * attraction / r)


def branched_terms(r: float) -> tuple[float, float]:
    return 4 / r, 4 / r**2


CURVES = {
    "switched-lennard-jones": (text(), lennard_jones_terms),
    "force-shifted-exp-6": (
        text(
            'energy = "A*exp(-r/rho) - C/r^6"\n'
            'parameters = { A = "9576 eV", rho = "0.27614 angstrom", C = "62.03 eV angstrom^6" }\n',
            cutoff='cutoff = { at = 9, treatment = "shifted-force" }\n',
        ),
        exp_6_terms,
    ),
    "branched": (
        text(
            'energy = "c/r*where(r < edge, 1, 2)"\nparameters = { c = "2 eV angstrom", edge = "4 angstrom" }\n',
            cutoff='cutoff = { at = 9, treatment = "truncate" }\n',
        ),
        branched_terms,
    ),
}


def interaction(document: str, folder: Path) -> Interaction:
    return read(document, folder).interactions[0]


def rows_of(known: Interaction, units: UnitSystem) -> Rows:
    return tabulate_rows(known.potential, known.grid, known.grid.rows or 2, units)


@pytest.mark.parametrize("units", [EV, KJ], ids=["eV-angstrom", "kJ/mol-nm"])
@pytest.mark.parametrize("name", CURVES)
def test_every_number_is_within_four_units_of_the_largest_term(name: str, units: UnitSystem, tmp_path: Path) -> None:
    document, terms = CURVES[name]
    known = interaction(document, tmp_path)
    rows = rows_of(known, units)
    for index, r in enumerate(rows.separation):
        angstrom = Fraction(float(r)) * units.length.factor
        piece = known.potential.treated.piece_at(float(angstrom))
        true = series(piece.tree, ball(angstrom), 1)
        for order, found in enumerate((rows.energy[index], -rows.force[index])):
            factor = float(units.per_length(order).factor)
            exact = float(true[order].mid()) / factor
            largest = max(abs(exact), terms(float(angstrom))[order] / factor)
            assert abs(found - exact) <= MOST_UNITS * np.spacing(largest)


def test_the_force_is_minus_the_slope_and_attracts_where_it_is_negative(tmp_path: Path) -> None:
    # Common practice, no source: a negative force pulls together.
    rows = rows_of(interaction(text(), tmp_path), EV)
    minimum = 3.4 * 2 ** (1 / 6)
    assert np.all(rows.force[rows.separation < minimum] > 0)
    assert np.all(rows.force[(rows.separation > minimum) & (rows.separation < 9)] < 0)
    slope = np.gradient(rows.energy, rows.separation)
    assert rows.force[1:-1] == pytest.approx(-slope[1:-1], abs=0.05 * rows.force.max())


def test_units_change_numbers_by_their_published_factor(tmp_path: Path) -> None:
    # 1 eV = 96.485 332 123 310 018 4 kJ/mol, CODATA 2022 (exact).
    known = interaction(text(), tmp_path)
    ev, kj = rows_of(known, EV), rows_of(known, KJ)
    scale = np.abs(ev.energy) + 1e-3
    assert np.all(np.abs(kj.energy / 96.4853321233100184 - ev.energy) <= 1e-13 * scale)
    assert np.all(np.abs(kj.force / 964.853321233100184 - ev.force) <= 1e-12 * (np.abs(ev.force) + 1e-3))


def test_the_last_row_of_a_switched_curve_is_exactly_zero(tmp_path: Path) -> None:
    rows = rows_of(interaction(text(), tmp_path), EV)
    assert (rows.energy[-1], rows.force[-1]) == (0.0, 0.0)
    assert not np.signbit([rows.energy[-1], rows.force[-1]]).any()


def test_curvature_comes_with_the_rule_that_reads_it(tmp_path: Path) -> None:
    quintic = interaction(text(grid=GRID + 'interpolation = "quintic-hermite"\n'), tmp_path)
    rows = rows_of(quintic, EV)
    assert rows.curvature == pytest.approx(
        quintic.potential.treated.derivatives(rows.separation, 2)[2], rel=1e-9, abs=1e-9
    )
    assert rows_of(interaction(text(), tmp_path), EV).curvature is None


def test_rows_carry_the_rules_of_their_grid(tmp_path: Path) -> None:
    spline = GRID + 'spacing = "inverse"\ninterpolation = "cubic-spline"\nends = "natural"\n'
    rows = rows_of(interaction(text(LENNARD_JONES, cutoff=SWITCH, grid=spline), tmp_path), EV)
    assert (rows.name, rows.spacing, rows.interpolation, rows.ends) == (
        "A-A",
        "inverse",
        "cubic-spline",
        "natural",
    )
    assert list(rows.columns()) == ["separation", "energy", "force"]


def test_at_ten_equilibrium_separations_the_energy_is_that_of_separated_atoms(tmp_path: Path) -> None:
    # Common practice, no source.
    free = text(cutoff="", grid="grid = { from = 2.5, to = 38.1637, rows = 3 }\n")
    rows = rows_of(interaction(free, tmp_path), EV)
    assert abs(rows.energy[-1]) < 1e-5 * 0.01


@pytest.mark.parametrize("treatment", ['"switch", from = 7', '"shifted-force"', '"force-switch", from = 7'])
@pytest.mark.parametrize("at", ["9", "9.1", "11"])
def test_energy_and_force_at_the_cutoff_are_exactly_zero_in_any_unit(treatment: str, at: str, tmp_path: Path) -> None:
    cutoff = f"cutoff = {{ at = {at}, treatment = {treatment} }}\n"
    known = interaction(text(cutoff=cutoff, grid=GRID.replace("to = 9", f"to = {at}")), tmp_path)
    for units in (EV, KJ):
        rows = rows_of(known, units)
        assert rows.energy is not None
        assert rows.force is not None
        assert (rows.energy[-1], rows.force[-1]) == (0.0, 0.0)
