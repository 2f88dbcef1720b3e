"""table-error: proved bounds against the tolerances of a document, and of the document behind a table."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest
from documents import GRID, facts, text
from slopewell.checks import Finding
from slopewell.checks.potential_facts import PotentialFacts
from slopewell.checks.table_error import POTENTIAL_CHECK, TABLE_CHECK
from slopewell.checks.table_facts import TableFacts
from slopewell.outputs import certified_rows


def subject(tolerance: str, folder: Path) -> PotentialFacts:
    return facts(text(grid=f"{GRID}{tolerance}\n"), folder)


def found(tolerance: str, folder: Path) -> list[Finding]:
    return list(POTENTIAL_CHECK.look(subject(tolerance, folder)))


def bound(folder: Path) -> float:
    return subject("", folder).certificate.bound.energy


def test_a_tolerance_just_above_the_bound_is_kept_and_one_just_below_is_not(tmp_path: Path) -> None:
    size = bound(tmp_path)
    assert found(f"tolerance = {1.001 * size!r}", tmp_path) == []
    (finding,) = found(f"tolerance = {0.999 * size!r}", tmp_path)
    assert (finding.level, finding.measured) == ("error", pytest.approx(size))
    assert "Use rows = 102" in finding.remedy or "Use rows = 101" in finding.remedy


def test_the_rows_that_the_remedy_names_keep_the_tolerance(tmp_path: Path) -> None:
    tolerance = f"tolerance = {0.01 * bound(tmp_path)!r}"
    (finding,) = found(tolerance, tmp_path)
    rows = finding.remedy.split("rows = ")[1].split(",")[0]
    grid = GRID.replace("rows = 101", f"rows = {rows}")
    assert list(POTENTIAL_CHECK.look(facts(text(grid=f"{grid}{tolerance}\n"), tmp_path))) == []


def test_a_tolerance_of_the_force_is_held_too(tmp_path: Path) -> None:
    (finding,) = found("tolerance = 1e3\nforce-tolerance = 1e-9", tmp_path)
    assert finding.says.startswith("Reading 101 rows by cubic-hermite makes a force error")


def test_a_curve_without_a_bound_is_an_error_where_a_tolerance_asks_for_one(tmp_path: Path) -> None:
    rough = 'energy = "e*sqrt(r/s - 1)"\nparameters = { e = "1 eV", s = "2.5 angstrom" }\n'
    for tolerance, level in (("", "note"), ("tolerance = 1", "error")):
        unbound = facts(text(rough, grid=f"{GRID}{tolerance}\n"), tmp_path)
        assert [finding.level for finding in POTENTIAL_CHECK.look(unbound)] == [level]


def test_a_table_keeps_the_verdict_of_its_certificate(tmp_path: Path) -> None:
    size = bound(tmp_path)
    for factor, findings in ((1.01, 0), (0.99, 1)):
        made = subject(f"tolerance = {factor * size!r}", tmp_path)
        rows = certified_rows(made, made.units)
        assert len(list(TABLE_CHECK.look(TableFacts(rows, made.units)))) == findings
        assert list(TABLE_CHECK.look(TableFacts(replace(rows, certificate={}), made.units))) == []
