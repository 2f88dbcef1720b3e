"""Points from a file beside the document."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from documents import problems, read, text
from slopewell.document import Interaction

R = np.linspace(2.5, 9, 60)
U = 0.04 * ((3.4 / R) ** 12 - (3.4 / R) ** 6)
SLOPE = 0.04 * (-12 * 3.4**12 / R**13 + 6 * 3.4**6 / R**7)


def write(folder: Path, *columns: np.ndarray, head: str = "separation,energy\n", separator: str = ",") -> None:
    rows = (separator.join(f"{value:.12g}" for value in row) for row in zip(*columns, strict=True))
    (folder / "scan.csv").write_text(head + "\n".join(rows) + "\n", encoding="utf-8")


def interaction(folder: Path, keys: str = "") -> Interaction:
    return read(text(f'points = "scan.csv"\n{keys}'), folder).interactions[0]


def said(folder: Path, keys: str = "") -> tuple[str, str]:
    (problem,) = problems(text(f'points = "scan.csv"\n{keys}'), folder)
    return problem


@pytest.mark.parametrize("separator", [",", " ", "\t", " ; "])
def test_columns_are_read_whatever_parts_them(separator: str, tmp_path: Path) -> None:
    write(tmp_path, R, U, head="# made up\nr U\n", separator=separator)
    assert interaction(tmp_path).potential.bare.derivatives(R, 0)[0] == pytest.approx(U, rel=1e-9)


def test_units_and_order_of_the_columns_are_those_declared(tmp_path: Path) -> None:
    write(tmp_path, np.arange(R.size), U / 0.0103642696562621738, R / 10, head="")
    keys = 'columns = ["skip", "energy", "separation"]\nunits = { energy = "kJ/mol", length = "nm" }\n'
    assert interaction(tmp_path, keys).potential.bare.derivatives(R, 0)[0] == pytest.approx(U, rel=1e-9)


@pytest.mark.parametrize(("name", "sign"), [("slope", 1), ("force", -1)])
def test_slopes_and_forces_are_used(name: str, sign: int, tmp_path: Path) -> None:
    write(tmp_path, R[::3], U[::3], sign * SLOPE[::3])
    found = interaction(tmp_path, f'columns = ["separation", "energy", "{name}"]\n')
    assert found.potential.bare.derivatives(R[::3], 1)[1] == pytest.approx(SLOPE[::3], rel=1e-9)


def test_points_may_descend(tmp_path: Path) -> None:
    write(tmp_path, R[::-1], U[::-1])
    assert interaction(tmp_path).potential.bare.derivatives(R, 0)[0] == pytest.approx(U, rel=1e-9)


def test_points_may_be_a_term(tmp_path: Path) -> None:
    write(tmp_path, R, U)
    other = '[[interaction.term]]\nenergy = "e"\nparameters = { e = "2 eV" }\n'
    terms = f'[[interaction.term]]\npoints = "scan.csv"\n{other}'
    (found,) = read(text(terms, cutoff=""), tmp_path).interactions
    assert found.potential.bare.derivatives(R, 0)[0] == pytest.approx(U + 2, rel=1e-10)
    assert len(found.potential.splines) == 1


def test_a_missing_file_is_said(tmp_path: Path) -> None:
    at, says = said(tmp_path)
    assert at == "interaction[0].points"
    assert 'The file "scan.csv" can\'t be read' in says


ERRORS = 'columns = ["separation", "energy", "error"]\n'
MISTAKES = {
    "ragged": ("1 2\n3 4 5\n", "", "scan.csv, line 2: 3 columns; 2 are named (separation, energy)."),
    "no-number": ("1 2\n3 x\n", "", 'scan.csv, line 2: "x" is no number.'),
    "too-few": ("1 2\n3 4\n", "", "2 points are too few; 4 are needed."),
    "twice": ("1 2\n3 4\n3 5\n6 7\n8 9\n", "", "Two points have one separation."),
    "negative": ("-1 2\n3 4\n5 5\n6 7\n8 9\n", "", "A separation is not positive."),
    "error-of-zero": ("1 2 0\n3 4 1\n4 5 1\n6 7 1\n8 9 1\n", ERRORS, "A standard error is not positive."),
    "smoothing-without-errors": (
        "1 2\n3 4\n4 5\n6 7\n8 9\n",
        'spline = "smoothing"\n',
        "needs the standard errors",
    ),
    "monotone-with-slopes": (
        "1 2 0\n3 4 1\n4 5 1\n6 7 1\n8 9 1\n",
        'spline = "monotone"\ncolumns = ["separation", "energy", "slope"]\n',
        "chooses its own slopes",
    ),
    "no-wall": ("3 2\n4 4\n5 5\n6 7\n9 9\n", "", "not that of a wall"),
}


@pytest.mark.parametrize(("rows", "keys", "words"), MISTAKES.values(), ids=MISTAKES)
def test_a_faulty_file_is_said_with_its_line(rows: str, keys: str, words: str, tmp_path: Path) -> None:
    (tmp_path / "scan.csv").write_text(rows, encoding="utf-8")
    at, says = said(tmp_path, keys)
    assert at == "interaction[0].points"
    assert words in says


@pytest.mark.parametrize(
    ("columns", "at", "words"),
    [
        ('["separation", "enrgy"]', "columns[1]", '"enrgy" is no column of points.'),
        ('["energy", "energy"]', "columns[0]", '"energy" stands twice.'),
        ('["energy", "skip"]', "columns", "No column holds the separation."),
    ],
)
def test_columns_are_checked(columns: str, at: str, words: str, tmp_path: Path) -> None:
    write(tmp_path, R, U)
    assert said(tmp_path, f"columns = {columns}\n") == (f"interaction[0].{at}", words)
