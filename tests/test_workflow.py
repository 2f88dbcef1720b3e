"""The verb check: one subject a file, in order, whatever the others are."""

from __future__ import annotations

from pathlib import Path

import pytest
from documents import GRID, HEAD, LENNARD_JONES, SWITCH, text
from slopewell.checks import POTENTIAL_CHECKS
from slopewell.reports import Subject
from slopewell.workflow import check

SECOND = f'[[interaction]]\nbetween = ["A", "B"]\n{LENNARD_JONES}{SWITCH}'


def subject(document: str, folder: Path) -> Subject:
    (folder / "pair.toml").write_text(document, encoding="utf-8")
    (found,) = check([folder / "pair.toml"]).subjects
    return found


def test_a_good_document_passes_every_check(tmp_path: Path) -> None:
    found = subject(text(), tmp_path)
    assert (found.verdict, found.findings, found.problems) == ("pass", (), ())
    assert found.checked == tuple(known.name for known in POTENTIAL_CHECKS)
    assert found.title == "Argon-like pair for tests"


def test_every_interaction_has_its_landmarks(tmp_path: Path) -> None:
    found = subject(text(cutoff=SWITCH + SECOND), tmp_path)
    assert [record["interaction"] for record in found.landmarks] == ["A-A", "A-B"]


def test_findings_name_their_interaction(tmp_path: Path) -> None:
    second = SECOND.replace('"switch", from = 7', '"truncate"')
    found = subject(text(cutoff=SWITCH + second), tmp_path)
    assert {(finding.check, finding.interaction) for finding in found.findings} == {("cutoff-steps", "A-B")}


def test_an_unusable_file_does_not_stop_the_others(tmp_path: Path) -> None:
    (tmp_path / "good.toml").write_text(text())
    (tmp_path / "bad.toml").write_text("no = toml = at all")
    files = [tmp_path / "bad.toml", tmp_path / "good.toml", tmp_path / "none.toml"]
    assert [found.verdict for found in check(files).subjects] == ["unusable", "pass", "unusable"]


def test_one_cause_gives_one_failure(tmp_path: Path) -> None:
    found = subject(text('energy = "e*sqrt(r/s - 1)"\nparameters = { e = "1 eV", s = "4 angstrom" }\n'), tmp_path)
    assert {finding.check for finding in found.findings} == {"finite"}
    assert found.checked == ("finite",)


def test_a_jump_without_a_scale_is_judged_all_the_same(tmp_path: Path) -> None:
    soft = 'form = "inverse-power"\nparameters = { epsilon = 1, sigma = 3, n = 9 }\n'
    document = text(soft, head=HEAD.replace('temperature = "100 K"\n', ""), cutoff="")
    found = subject(document, tmp_path)
    assert found.verdict == "fail"
    assert any("energy-scale" in finding.says for finding in found.findings)


def test_every_row_is_proved_on_request(tmp_path: Path) -> None:
    (tmp_path / "pair.toml").write_text(text())
    (found,) = check([tmp_path / "pair.toml"], every_row=True).subjects
    assert found.certificates[0]["rows_proved"] == 101


@pytest.mark.parametrize("spacing", ["separation", "separation-squared", "inverse", "logarithmic"])
def test_a_good_document_passes_on_any_grid(spacing: str, tmp_path: Path) -> None:
    assert subject(text(grid=f'{GRID}spacing = "{spacing}"\n'), tmp_path).verdict == "pass"
