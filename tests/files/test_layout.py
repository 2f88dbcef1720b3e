"""Layouts: text tables described both ways."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from slopewell.files import layout, read_layout
from slopewell.files.layout import Column, Layout
from slopewell.problems import UnusableInput
from slopewell.table import Rows
from slopewell.units import unit_system
from tables import any_rows, small_table

EV = unit_system("eV", "angstrom")
SEPARATION, ENERGY, FORCE = Column("separation"), Column("energy"), Column("force")
PLAIN = Layout("plain", (SEPARATION, ENERGY, FORCE), units=EV)

TEXT = """schema = "slopewell/layout/1"
title = "For tests"
head = ["# {title} of {a} and {b}", "# {rows} rows from {first:.2f} to {last} {length_unit}, {force_unit}"]
foot = ["# {{end}}"]
separator = ", "
units = { energy = "eV", length = "angstrom" }
[[column]]
quantity = "row"
format = "3d"
[[column]]
quantity = "separation"
format = ".2f"
[[column]]
quantity = "energy"
format = "+.3e"
"""


def described(folder: Path, text: str) -> Layout:
    path = folder / "own.layout.toml"
    path.write_text(text, encoding="utf-8")
    return read_layout(path)


def written(chosen: Layout, folder: Path, rows: Rows | None = None) -> Path:
    table = small_table() if rows is None else small_table(interactions=(rows,))
    path = folder / "A-B.dat"
    layout.write(table, path, chosen)
    return path


def test_a_text_table_looks_as_its_layout_says(tmp_path: Path) -> None:
    lines = written(described(tmp_path, TEXT), tmp_path).read_text(encoding="utf-8").splitlines()
    assert lines[:3] == [
        "# Pair for tests of A and B",
        "# 6 rows from 1.00 to 2.0 angstrom, eV/angstrom",
        "  1, 1.00, +0.000e+00",
    ]
    assert lines[-1] == "# {end}"
    assert len(lines) == 9


def test_a_text_table_reads_back_to_its_digits(tmp_path: Path) -> None:
    chosen = described(tmp_path, TEXT)
    (found,) = layout.read(written(chosen, tmp_path), chosen).interactions
    (rows,) = small_table().interactions
    assert found.name == "A-B"
    assert found.separation == pytest.approx(rows.separation, abs=0.005)
    assert found.energy == pytest.approx(rows.energy, rel=5e-4)
    assert found.force is None


@given(any_rows("A-B"), st.sampled_from([" ", "\t", ",", "; "]))
def test_the_shortest_numbers_read_back_to_the_last_bit(
    tmp_path_factory: pytest.TempPathFactory, rows: Rows, separator: str
) -> None:
    held = tuple(Column(name) for name in rows.columns())
    chosen = Layout("any", held, separator=separator, units=EV)
    (found,) = layout.read(written(chosen, tmp_path_factory.mktemp("any"), rows), chosen).interactions
    assert {n: c.tobytes() for n, c in found.columns().items()} == {n: c.tobytes() for n, c in rows.columns().items()}


@pytest.mark.parametrize(
    ("quantity", "factor"), [("slope", 1.0), ("force-over-separation", 1.0), ("separation-squared", 1.0)]
)
def test_a_quantity_that_stands_for_another_gives_it_back(quantity: str, factor: float, tmp_path: Path) -> None:
    columns = (Column(quantity), ENERGY) if quantity == "separation-squared" else (SEPARATION, Column(quantity))
    chosen = Layout("other", columns, units=EV)
    (rows,) = small_table().interactions
    (found,) = layout.read(written(chosen, tmp_path), chosen).interactions
    if quantity == "separation-squared":
        assert found.separation == pytest.approx(rows.separation, rel=1e-15)
    else:
        assert found.force == pytest.approx(rows.force, rel=1e-15)


def test_columns_hold_what_their_quantity_says(tmp_path: Path) -> None:
    names = ("row", "separation", "separation-squared", "slope", "force-over-separation", "skip")
    chosen = Layout("all", tuple(Column(name) for name in names), units=EV)
    numbers = np.loadtxt(written(chosen, tmp_path))
    (rows,) = small_table().interactions
    assert numbers[:, 0].tolist() == [1, 2, 3, 4, 5, 6]
    assert numbers[:, 2] == pytest.approx(rows.separation**2)
    assert numbers[:, 3] == pytest.approx(-rows.force)
    assert numbers[:, 4] == pytest.approx(rows.force / rows.separation)
    assert not numbers[:, 5].any()


def test_many_rows_are_written_in_order(tmp_path: Path) -> None:
    r = np.linspace(1, 2, 10_001)
    numbers = np.loadtxt(written(PLAIN, tmp_path, Rows("A-B", r, r**2, -2 * r)))
    assert np.array_equal(numbers, np.column_stack([r, r**2, -2 * r]))


def test_a_column_that_the_rows_lack_is_said(tmp_path: Path) -> None:
    chosen = replace(PLAIN, columns=(SEPARATION, Column("curvature")))
    with pytest.raises(UnusableInput, match="The rows of A-B have no curvature"):
        written(chosen, tmp_path)
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize(
    ("change", "at", "says"),
    [
        (('"separation"\nformat = ".2f"', '"skip"'), "column", "No column holds the separation."),
        (('"row"\nformat = "3d"', '"energy"'), "column", '"energy" stands in two columns.'),
        (('format = ".2f"', 'format = "2d"'), "column", 'The format "2d" does not fit separation.'),
        (('= ", "', '= "|"'), "separator", "Columns are split by blanks, a tab, a comma or a semicolon."),
        (("{title} of", "{titel} of"), "head[0]", "{titel} is not known."),
        (("{first:.2f}", "{first:10}"), "head[1]", "The format 10 is not taken for first."),
        (("{last}", "{last"), "head[1]", "The braces do not match"),
        (("{{end}}", "{rows.real}"), "foot[0]", "{rows.real} is not known."),
        (('format = "+.3e"', 'format = "x"'), "column[2].format", '"x" is not a name that is taken here.'),
        (('quantity = "row"', 'quantity = "line"'), "column[0].quantity", '"line" is not one of row'),
        (('energy = "eV"', 'energy = "eW"'), "units", '"eW" is not a unit'),
    ],
)
def test_a_mistake_of_a_layout_is_said_with_its_place(
    change: tuple[str, str], at: str, says: str, tmp_path: Path
) -> None:
    with pytest.raises(UnusableInput) as caught:
        described(tmp_path, TEXT.replace(*change))
    assert [(problem.at, problem.says[: len(says)]) for problem in caught.value.problems] == [(at, says)]
    assert caught.value.file == str(tmp_path / "own.layout.toml")


def test_all_mistakes_of_a_layout_are_said(tmp_path: Path) -> None:
    text = TEXT.replace("{title}", "{titel}").replace('= ", "', '= "|"').replace('"separation"\n', '"skip"\n')
    with pytest.raises(UnusableInput) as caught:
        described(tmp_path, text)
    assert {problem.at for problem in caught.value.problems} == {"head[0]", "separator", "column"}


def test_a_file_that_the_layout_does_not_fit_is_refused(tmp_path: Path) -> None:
    path = written(PLAIN, tmp_path)
    with pytest.raises(UnusableInput, match="Rows have 3 columns, the layout describes 2"):
        layout.read(path, replace(PLAIN, columns=(SEPARATION, ENERGY)))
    path.write_text("1.0 x 2.0\n")
    with pytest.raises(UnusableInput, match="A row can't be read"):
        layout.read(path, PLAIN)
    path.write_bytes(b"\xff\n")
    with pytest.raises(UnusableInput, match="The file can't be read"):
        layout.read(path, PLAIN)


def test_a_layout_without_units_needs_them_from_elsewhere(tmp_path: Path) -> None:
    bare = replace(PLAIN, units=None)
    path = written(bare, tmp_path)
    with pytest.raises(UnusableInput, match="The layout names no units"):
        layout.read(path, bare)
    assert layout.read(path, bare, EV).units == EV
