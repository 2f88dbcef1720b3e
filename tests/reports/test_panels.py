from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from slopewell.reports.drawing import Drawing, overlaid, rows_drawing
from slopewell.reports.page import Sheet
from slopewell.reports.panels import FORCE_WORDS, bound_panels, panels_of, senses, share
from slopewell.table import Table


def test_energy_stands_above_force(drawing: Drawing) -> None:
    assert [(panel.kind, panel.per_length) for panel in panels_of(drawing)] == [("energy", 0), ("force", 1)]


def test_both_sides_of_the_force_are_named(drawing: Drawing) -> None:
    _, force = panels_of(drawing)
    assert senses(force) == [(FORCE_WORDS[0], "above"), (FORCE_WORDS[1], "below")]


def test_attraction_is_not_named_where_nothing_attracts(table: Table) -> None:
    rows = table.interactions[0]
    falling = np.exp(-rows.separation)
    pushing = rows_drawing(replace(rows, energy=falling, force=falling), table.units, {})
    _, force = panels_of(pushing)
    assert senses(force) == [(FORCE_WORDS[0], "above")]


def test_a_difference_of_nothing_is_a_line_inside_its_panel(drawing: Drawing) -> None:
    _, difference, *_ = panels_of(overlaid(drawing, drawing, ("a", "b")))
    assert share(0.0, difference.limits) == pytest.approx(50)
    assert not difference.curves[0][1].any()


def test_bounds_are_drawn_as_logarithms(sheet: Sheet) -> None:
    shown = sheet.drawings[0]
    energy, _ = bound_panels(shown)
    assert energy.logarithmic
    assert 10 ** energy.curves[0][1] == pytest.approx(shown.error.at(shown.separation)[0])


def test_without_a_proof_no_bounds_are_drawn(drawing: Drawing) -> None:
    assert bound_panels(drawing) == []
