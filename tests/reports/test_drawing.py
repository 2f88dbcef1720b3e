from __future__ import annotations

import numpy as np
import pytest
from slopewell.reports.drawing import Drawing, overlaid, rows_drawing, table_drawings
from slopewell.reports.page import Sheet
from slopewell.table import Table
from slopewell.units import unit_system

EV = unit_system("eV", "angstrom")


def test_marks_lie_on_the_curve(drawing: Drawing) -> None:
    for mark in drawing.marks:
        column = drawing.energy if mark.panel == "energy" else drawing.force
        at = int(np.flatnonzero(drawing.separation == mark.separation)[0])
        assert column[at] == pytest.approx(mark.value, abs=1e-9 * np.abs(column).max())


def test_landmarks_of_a_known_well(drawing: Drawing) -> None:
    # U = 4 ε ((σ/r)¹² − (σ/r)⁶) is zero at σ and deepest, by ε, at 2^(1/6) σ: by calculus.
    found = {mark.kind: (mark.separation, mark.value) for mark in drawing.marks}
    assert found["zero-crossing"] == pytest.approx((0.47, 0.0))
    assert found["equilibrium"] == pytest.approx((2 ** (1 / 6) * 0.47, -5.0))
    assert found["largest-attraction"][0] == pytest.approx((26 / 7) ** (1 / 6) * 0.47)


def test_both_sides_of_a_step_are_drawn(sheet: Sheet) -> None:
    stepping = sheet.drawings[1]
    assert stepping.energy[stepping.separation <= 1.2][-1] < 0


def test_findings_are_placed(sheet: Sheet) -> None:
    flags = sheet.drawings[1].flags
    assert {flag.finding["check"] for flag in flags} == {"cutoff-steps"}
    assert all(flag.start == pytest.approx(1.2) for flag in flags)


def test_the_verdict_is_that_of_the_interaction(sheet: Sheet) -> None:
    assert [drawing.verdict for drawing in sheet.drawings] == ["pass", "fail"]


def test_a_table_without_a_report_is_not_checked(table: Table) -> None:
    assert [drawing.verdict for drawing in table_drawings(table, {})] == ["unchecked", "unchecked"]


def test_a_table_is_drawn_from_its_own_rows(table: Table) -> None:
    (rows, _), (drawn, _) = table.interactions, table_drawings(table, {})
    at = np.searchsorted(rows.separation, drawn.separation)
    assert np.array_equal(rows.separation[at], drawn.separation)
    assert np.array_equal(rows.energy[at], drawn.energy)


def test_a_report_in_other_units_is_converted(table: Table, sheet: Sheet) -> None:
    drawn = rows_drawing(table.interactions[0], EV, sheet.record)
    assert drawn.landmarks["equilibrium_separation"] == pytest.approx(10 * 2 ** (1 / 6) * 0.47)
    assert drawn.landmarks["well_depth"] == pytest.approx(5.0 / 96.48533212331, rel=1e-9)


def test_a_curve_over_its_own_table_differs_by_nothing_at_the_rows(table: Table, sheet: Sheet) -> None:
    rows = table_drawings(table, sheet.record)[0]
    over = overlaid(rows, sheet.drawings[0], ("rows", "formula"))
    assert over.other.energy == pytest.approx(rows.energy, rel=1e-12, abs=1e-12)
    assert over.other.force == pytest.approx(rows.force, rel=1e-12, abs=1e-11)


def test_a_table_without_forces_has_no_force_panel(table: Table) -> None:
    from dataclasses import replace

    drawn = rows_drawing(replace(table.interactions[0], force=None), table.units, {})
    assert drawn.view.force is None
    assert drawn.view.energy is not None
