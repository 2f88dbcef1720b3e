from __future__ import annotations

import numpy as np
import pytest
from slopewell.document import read_document
from slopewell.reports.drawing import Drawing, document_drawings, overlaid, rows_drawing, table_drawings
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


COMPOSED = """schema = "slopewell/potential/1"
title = "Segments, points and a mixed pair, invented"
temperature = "300 K"
cutoff = { at = 9, treatment = "switch", from = 7 }
[units]
energy = "eV"
length = "angstrom"
[species.A]
[species.B]
[species.C]
[mixing]
rule = "lorentz-berthelot"
exclude = [["A", "C"], ["B", "C"]]
[[interaction]]
between = ["A", "A"]
form = "lennard-jones"
parameters = { epsilon = 0.01, sigma = 2.9 }
[[interaction]]
between = ["B", "B"]
form = "lennard-jones"
parameters = { epsilon = "0.04 eV", sigma = 3.1 }
[[interaction]]
between = ["C", "C"]
[[interaction.segment]]
points = "points.dat"
[[interaction.segment]]
join = { method = "blend", from = 5, to = 6 }
form = "lennard-jones"
parameters = { epsilon = 0.1, sigma = 2.9 }
[grid]
from = 2.4
to = 9
rows = 101
"""


@pytest.fixture(scope="module")
def composed(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Drawing]:
    folder = tmp_path_factory.mktemp("composed")
    (folder / "composed.toml").write_text(COMPOSED, encoding="utf-8")
    rows = [f"{r} {0.4 * ((2.9 / r) ** 12 - (2.9 / r) ** 6)}\n" for r in (2.4, 2.8, 3.2, 3.6, 4.0, 5.0, 6.0, 7.0)]
    (folder / "points.dat").write_text("".join(rows), encoding="utf-8")
    document = read_document(folder / "composed.toml")
    return {drawn.name: drawn for drawn in document_drawings(document, {})}


def test_bridges_and_points_are_drawn(composed: dict[str, Drawing]) -> None:
    drawn = composed["C-C"]
    assert drawn.bridges == (pytest.approx((5.0, 6.0)),)
    assert [r for r, _ in drawn.points] == pytest.approx([2.4, 2.8, 3.2, 3.6, 4.0, 5.0, 6.0, 7.0])


def test_a_mixed_pair_says_so_with_its_parameters(composed: dict[str, Drawing]) -> None:
    # Lorentz and Berthelot: the mean of the sizes, the geometric mean of the depths; by arithmetic.
    stated = composed["A-B"].stated
    assert stated.title == "Lennard-Jones 12-6, mixed from like pairs (lorentz-berthelot)"
    assert [parameter.value for parameter in stated.parameters] == ["0.02 eV", "3 Å"]
