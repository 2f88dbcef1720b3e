from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from slopewell.problems import UnusableInput
from slopewell.reports.drawing import overlaid
from slopewell.reports.page import Sheet
from slopewell.reports.picture import figure_of, write_picture


def test_axes_carry_quantity_and_unit(sheet: Sheet) -> None:
    energy, force = figure_of("Beads", sheet.drawings[:1]).axes
    assert energy.get_ylabel() == "energy, kJ/mol"
    assert force.get_ylabel() == "force, kJ/mol/nm"
    assert force.get_xlabel() == "separation, nm"


def test_limits_are_those_of_the_view(sheet: Sheet) -> None:
    energy, force = figure_of("Beads", sheet.drawings[:1]).axes
    view = sheet.drawings[0].view
    assert energy.get_ylim() == pytest.approx(view.energy)
    assert force.get_ylim() == pytest.approx(view.force)
    assert energy.get_xlim() == force.get_xlim() == pytest.approx(view.separation)


def test_landmarks_are_points_at_their_place(sheet: Sheet) -> None:
    energy, _ = figure_of("Beads", sheet.drawings[:1]).axes
    points = {line.get_label(): line.get_xydata()[0] for line in energy.lines if line.get_marker() == "o"}
    assert points["_equilibrium"] == pytest.approx((2 ** (1 / 6) * 0.47, -5.0))
    assert points["_zero-crossing"] == pytest.approx((0.47, 0.0))


def test_words_beside_the_landmarks(sheet: Sheet) -> None:
    energy, force = figure_of("Beads", sheet.drawings[:1]).axes
    said = [text.get_text() for ax in (energy, force) for text in ax.texts]
    assert said == [
        "zero crossing 0.47 nm",
        "depth 5 kJ/mol at 0.5276 nm",
        "cutoff 1.2 nm\nswitch from 0.9 nm",
        "largest attraction −25.49 kJ/mol/nm",
        "▴ repulsion: pushes apart",
        "▾ attraction: pulls together",
    ]


def test_the_curve_is_the_drawing(sheet: Sheet) -> None:
    energy, _ = figure_of("Beads", sheet.drawings[:1]).axes
    (curve,) = [line for line in energy.lines if line.get_label() == "energy"]
    assert np.array_equal(curve.get_ydata(), sheet.drawings[0].energy)


def test_energy_and_force_differ_in_colour_and_line(sheet: Sheet) -> None:
    lines = [
        ax.lines[-3 if ax.get_ylabel().startswith("energy") else -2] for ax in figure_of("", sheet.drawings[:1]).axes
    ]
    assert lines[0].get_color() != lines[1].get_color()
    assert lines[0].get_linestyle() != lines[1].get_linestyle()


def test_verdicts_are_said(sheet: Sheet) -> None:
    figure = figure_of("Beads", sheet.drawings)
    titles = [ax.get_title(loc="left") for ax in figure.axes]
    assert [title for title in titles if title] == ["A-A   ✓ passes", "A-B   ✕ fails"]


def test_a_comparison_shows_both_curves_and_their_difference(sheet: Sheet) -> None:
    first = sheet.drawings[0]
    both = overlaid(first, first, ("old", "new"))
    axes = figure_of("Beads", [both]).axes
    assert [ax.get_ylabel().split(",")[0] for ax in axes] == [
        "energy",
        "difference of energy",
        "force",
        "difference of force",
    ]
    assert [text.get_text() for text in axes[0].get_legend().get_texts()] == ["old", "new"]


@pytest.mark.parametrize("ending", [".svg", ".pdf", ".png"])
def test_the_same_drawings_give_the_same_bytes(ending: str, sheet: Sheet, tmp_path: Path) -> None:
    first, second = tmp_path / f"first{ending}", tmp_path / f"second{ending}"
    for path in (first, second):
        write_picture("Beads", sheet.drawings[:1], path)
    assert first.read_bytes() == second.read_bytes()


def test_what_can_not_be_written_is_said(sheet: Sheet, tmp_path: Path) -> None:
    (tmp_path / "file").touch()
    with pytest.raises(UnusableInput, match="can't be written"):
        write_picture("Beads", sheet.drawings[:1], tmp_path / "file" / "beads.png")
