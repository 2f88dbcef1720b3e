"""A line of the summary: verdict, worst finding, landmarks."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from documents import read
from ensembles import DOCUMENT
from slopewell.ensemble import summary


def finding(level: str, check: str) -> dict[str, Any]:
    return {"level": level, "check": check, "interaction": "A-A", "says": "So it is."}


def problem(at: str) -> dict[str, Any]:
    return {"at": at, "says": "It is wrong."}


@pytest.mark.parametrize(
    ("subject", "worst"),
    [
        ({}, ""),
        ({"findings": [finding("note", "a"), finding("error", "b")]}, "error b (A-A): So it is."),
        ({"findings": [finding("error", "b"), finding("error", "c")]}, "error b (A-A): So it is."),
        ({"problems": [problem("grid.from"), problem("")]}, "grid.from: It is wrong."),
        ({"problems": [problem("")]}, "It is wrong."),
    ],
)
def test_the_worst_is_the_first_of_the_highest_level(subject: dict[str, Any], worst: str) -> None:
    assert summary.worst_finding(subject) == worst


def test_a_line_has_a_cell_for_every_title(tmp_path: Path) -> None:
    titles = summary.header(read(DOCUMENT, tmp_path))
    landmarks = {"interaction": "A-A", "well_depth": 0.01, "largest_attraction": {"force": -0.2}}
    subject = {"verdict": "warn", "landmarks": [landmarks]}
    cells = summary.line({"set": "one", "report": {"subjects": [subject]}}, ["A-A"])
    found = dict(zip(titles, cells, strict=True))
    assert found["set"] == "one"
    assert found["A-A.well_depth [eV]"] == 0.01
    assert found["A-A.largest_attraction.force [eV/angstrom]"] == -0.2
    assert found["A-A.largest_attraction.separation [angstrom]"] is None
