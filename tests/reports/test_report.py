"""Reports as data: they fit their schema, and landmarks are in the subject's own units."""

from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
from documentation import ROOT
from documents import HEAD, UNITS, facts, text
from jsonschema import Draft202012Validator
from slopewell.checks import Finding
from slopewell.problems import Problem, UnusableInput
from slopewell.reports import Report, Subject, potential_landmarks, unusable
from slopewell.schemas import schema
from slopewell.workflow import check

KCAL = UNITS.replace('energy = "eV"', 'energy = "kcal/mol"').replace('length = "angstrom"', 'length = "nm"')
ARGON = 'form = "lennard-jones"\nparameters = { epsilon = "0.01 eV", sigma = "3.4 angstrom" }\n'
FINDING = Finding(
    "warning", "It bends.", "Straighten it.", check="single-well", interaction="A-A", measured=float("inf")
)


def landmarks(folder: Path, units: str = UNITS, head: str = HEAD) -> dict[str, Any]:
    cutoff = 'cutoff = { at = "9 angstrom", treatment = "shifted-energy" }\n'
    grid = '[grid]\nfrom = "2.5 angstrom"\nto = "9 angstrom"\nrows = 101\n'
    return potential_landmarks(facts(text(ARGON, cutoff=cutoff, grid=grid, units=units, head=head), folder))


def test_every_sample_gives_a_report_that_fits_the_schema() -> None:
    files = [*sorted((ROOT / "samples" / "faulty").glob("*.toml")), ROOT / "none.toml"]
    record = json.loads(json.dumps(check(files).record(), allow_nan=False))
    assert list(Draft202012Validator(schema("report")).iter_errors(record)) == []
    assert [subject["file"] for subject in record["subjects"]] == [str(path) for path in files]
    assert {subject["verdict"] for subject in record["subjects"]} <= {"fail", "warn", "unusable"}


def test_landmarks_are_in_the_documents_units(tmp_path: Path) -> None:
    # 1 eV = 23.060 547 830 619 03 kcal/mol (CODATA 2022, T01-012 of the references).
    ours, theirs = landmarks(tmp_path), landmarks(tmp_path, KCAL)
    assert theirs["units"] == {"energy": "kcal/mol", "length": "nm"}
    assert theirs["well_depth"] == pytest.approx(23.0605478306190293 * ours["well_depth"], rel=1e-14)
    assert theirs["stiffness"] == pytest.approx(2306.05478306190293 * ours["stiffness"], rel=1e-14)
    assert theirs["equilibrium_separation"] == pytest.approx(ours["equilibrium_separation"] / 10, rel=1e-14)
    assert theirs["largest_attraction"]["force"] == pytest.approx(
        230.605478306190293 * ours["largest_attraction"]["force"], rel=1e-14
    )
    assert theirs["harmonic_wavenumber"] == pytest.approx(ours["harmonic_wavenumber"], rel=1e-14)
    assert theirs["classical_amplitude"] == pytest.approx(ours["classical_amplitude"] / 10, rel=1e-14)


def test_the_bare_curve_stands_beside_the_treated_one(tmp_path: Path) -> None:
    record = landmarks(tmp_path)
    assert record["bare"]["well_depth"] == pytest.approx(0.01, rel=1e-14)
    assert record["well_depth"] < record["bare"]["well_depth"]
    assert record["bare"]["equilibrium_separation"] == record["equilibrium_separation"]


def test_what_needs_a_mass_or_a_temperature_is_null_without(tmp_path: Path) -> None:
    record = landmarks(tmp_path, UNITS.replace('mass = "40 dalton"\n', ""), HEAD.replace('temperature = "100 K"\n', ""))
    assert (record["harmonic_wavenumber"], record["classical_amplitude"]) == (None, None)


def test_a_finding_keeps_its_own_keys_and_drops_what_json_can_not_hold() -> None:
    one = replace(FINDING, details={"factor": 2.0}, mistake="counted-twice", start=1.0, end=2.0)
    (record,) = Subject("a.toml", findings=(one,)).record()["findings"]
    assert (record["factor"], record["mistake"], record["from"], record["to"]) == (
        2.0,
        "counted-twice",
        1.0,
        2.0,
    )
    assert record["measured"] is None


def test_acceptances_stand_in_the_record_only_where_there_are_any() -> None:
    assert "accepted" not in Subject("a.toml").record()
    assert Subject("a.toml", accepted=("finite",)).record()["accepted"] == ["finite"]


def test_an_unusable_file_has_problems_and_nothing_else() -> None:
    error = UnusableInput([Problem("grid.from", "Too small.", "Enlarge it.", excerpt="0\n^", line=3)], "a.toml")
    record = Report((unusable(error, "a.toml"),)).record()["subjects"][0]
    assert record == {
        "file": "a.toml",
        "verdict": "unusable",
        "problems": [{"at": "grid.from", "says": "Too small.", "try": "Enlarge it.", "line": 3, "excerpt": "0\n^"}],
    }
