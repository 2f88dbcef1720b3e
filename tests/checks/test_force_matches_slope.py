"""A stated force against the slope: what documents are told, and what tables without a column are told."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest
from slopewell.checks import TableFacts, run_checks
from slopewell.checks.force_matches_slope import TABLE_CHECK
from slopewell.table import Rows
from slopewell.units import unit_system
from slopewell.workflow import check

FORCE = "A/rho*exp(-r/rho) - 6*C/r^7"
DOCUMENT = """
schema = "slopewell/potential/1"
title = "invented"
[units]
energy = "kJ/mol"
length = "nm"
[species.W]
[species.P]
[[interaction]]
between = ["W", "P"]
energy = "A*exp(-r/rho) - C/r^6"
force = "{force}"
parameters = {{ A = "9.0e4 kJ/mol", rho = "0.031 nm", C = "4.1e-3 kJ/mol nm^6" }}
[grid]
from = 0.25
to = 1.2
rows = 401
"""


def finding(folder: Path, force: str) -> dict[str, Any] | None:
    path = folder / "stated.toml"
    path.write_text(DOCUMENT.format(force=force))
    record = check([path]).record()["subjects"][0]
    return next((found for found in record["findings"] if found["check"] == "force-matches-slope"), None)


def test_true_force_is_no_finding(tmp_path: Path) -> None:
    assert finding(tmp_path, FORCE) is None


@pytest.mark.parametrize(
    ("force", "mistake", "measured"),
    [
        (f"-({FORCE})", "force-sign-flipped", -1.0),
        (f"2*({FORCE})", "counted-twice", 2.0),
        (f"({FORCE})/2", "counted-twice", 0.5),
        (f"4.184*({FORCE})", "force-in-other-units", 4.184),
        (f"-10*({FORCE})", "force-in-other-units", -10.0),
    ],
)
def test_mistake_is_named_with_its_factor(force: str, mistake: str, measured: float, tmp_path: Path) -> None:
    found = finding(tmp_path, force)

    assert found is not None
    assert (found["level"], found["mistake"], found["limit"]) == ("error", mistake, 1e-9)
    assert found["measured"] == pytest.approx(measured)


@pytest.mark.parametrize(("part", "found"), [(1e-10, False), (1e-7, True)])
def test_difference_is_judged_at_its_limit(part: float, found: bool, tmp_path: Path) -> None:
    assert (finding(tmp_path, f"A/rho*exp(-r/rho) - 6*C*(1 + {part})/r^7") is not None) == found


def test_what_nothing_explains_has_no_name(tmp_path: Path) -> None:
    found = finding(tmp_path, "A/rho*exp(-r/rho) - 12*C/r^7")

    assert found is not None
    assert found["mistake"] is None


@pytest.mark.parametrize("missing", ["energy", "force"])
def test_a_missing_column_is_a_note(missing: str) -> None:
    r = np.linspace(1.0, 2.0, 50)
    columns: dict[str, Any] = {"energy": 1 / r, "force": 1 / r**2} | {missing: None}
    facts = TableFacts(Rows("A-B", r, **columns), unit_system("eV", "angstrom"))
    (found,), _ = run_checks([TABLE_CHECK], facts, "A-B")

    assert found.level == "note"
    assert f"no {missing}" in found.says
