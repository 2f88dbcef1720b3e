"""The verb plan."""

from __future__ import annotations

import json
from pathlib import Path

import documents
import pytest
from slopewell.cli import main
from slopewell.document import INTERPOLATIONS, SPACINGS
from slopewell.planning import plan
from slopewell.problems import UnusableInput
from slopewell.tabulating import tabulate


def written(folder: Path, text: str) -> Path:
    path = folder / "pair.toml"
    path.write_text(text, encoding="utf-8")
    return path


def test_every_spacing_is_planned_with_every_rule(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = written(tmp_path, documents.text())
    assert main(["plan", str(path), "--tolerance", "1e-6 eV", "--json"]) == 0
    plans = json.loads(capsys.readouterr().out)["plans"]
    assert [(p["spacing"], p["interpolation"]) for p in plans] == [(s, i) for s in SPACINGS for i in INTERPOLATIONS]
    assert all(p["interaction"] == "A-A" and p["proved"] and p["energy_error_bound"] <= 1e-6 for p in plans)


def test_tabulate_writes_the_rows_that_plan_gives(tmp_path: Path) -> None:
    grid = documents.GRID.replace("rows = 101", 'tolerance = "1e-6 eV"\nspacing = "inverse"')
    path = written(tmp_path, documents.text(grid=grid, outputs='[[output]]\nfile = "pair.csv"\n'))
    _, plans = plan(path)
    wanted = next(p for p in plans if p.spacing == "inverse" and p.interpolation == "cubic-hermite")
    (csv,) = tabulate(path).written
    assert len(csv.read_text(encoding="utf-8").splitlines()) == 1 + (wanted.rows or 0)


def test_the_table_for_people_names_rows_and_errors(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = written(tmp_path, documents.text())
    assert main(["plan", str(path), "--tolerance", "1e-4 eV"]) == 0
    lines = capsys.readouterr().out.splitlines()
    assert lines[0] == "A-A  (force error and drift at most, in eV/angstrom)"
    assert lines[1].split() == [
        "rows",
        "even",
        "in",
        "read",
        "by",
        "rows",
        "bytes",
        "force",
        "error",
        "drift",
    ]
    assert len(lines) == 2 + len(SPACINGS) * len(INTERPOLATIONS)


@pytest.mark.parametrize(
    ("tolerance", "says"), [(None, "no tolerance"), ("1 nm", "no positive energy"), ("x", "number")]
)
def test_a_plan_needs_an_energy(tolerance: str | None, says: str, tmp_path: Path) -> None:
    with pytest.raises(UnusableInput, match=says):
        plan(written(tmp_path, documents.text()), tolerance)
