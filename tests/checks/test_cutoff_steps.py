"""cutoff-steps: what each treatment leaves at the cutoff, by the purpose."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from documents import GRID, HEAD, facts, text
from slopewell.checks import Finding
from slopewell.checks.cutoff_steps import CHECK

REDUCED = 'form = "lennard-jones"\nparameters = { epsilon = 1, sigma = 1 }\n'
SHORT = GRID.replace("from = 2.5", "from = 0.8").replace("to = 9", "to = 5")
AT_3 = "cutoff = { at = 3, treatment"


def found(cutoff: str, folder: Path, purpose: str = "dynamics", grid: str = SHORT) -> list[Finding]:
    document = text(REDUCED, cutoff=cutoff, grid=grid, head=f'{HEAD}purpose = "{purpose}"\n')
    return list(CHECK.look(facts(document, folder)))


def test_a_truncation_jumps_by_the_published_steps(tmp_path: Path, published: Callable[[str], Any]) -> None:
    steps = [float(word) for word in published("T09-006").value.split() if word[:2] == "0."]
    findings = found(f'{AT_3} = "truncate" }}\n', tmp_path)
    assert [finding.measured for finding in findings] == pytest.approx(steps, rel=1e-12)
    assert [finding.start for finding in findings] == [3.0, 3.0, 3.0]


@pytest.mark.parametrize(
    ("treatment", "purpose", "levels"),
    [
        ('"truncate"', "sampling", ["error", "warning", "note"]),
        ('"truncate"', "dynamics", ["error", "error", "warning"]),
        ('"truncate"', "lattice-dynamics", ["error", "error", "error", "warning"]),
        ('"shifted-energy"', "sampling", ["warning", "note"]),
        ('"shifted-energy"', "dynamics", ["error", "warning"]),
        ('"shifted-force"', "dynamics", ["warning"]),
        ('"shifted-force"', "lattice-dynamics", ["error", "warning"]),
        ('"switch", from = 2, continuity = 1', "dynamics", ["warning", "warning"]),
        ('"switch", from = 2, continuity = 2', "dynamics", []),
        ('"switch", from = 2, continuity = 2', "lattice-dynamics", ["warning", "warning"]),
        ('"switch", from = 2, continuity = 3', "lattice-dynamics", []),
    ],
)
def test_a_step_is_as_bad_as_the_purpose_makes_it(
    treatment: str, purpose: str, levels: list[str], tmp_path: Path
) -> None:
    assert [finding.level for finding in found(f"{AT_3} = {treatment} }}\n", tmp_path, purpose)] == levels


def test_a_curve_without_a_cutoff_is_truncated_where_its_grid_ends(tmp_path: Path) -> None:
    findings = found("", tmp_path)
    assert {finding.start for finding in findings} == {5.0}
    assert "where the simulation stops reading" in findings[0].says


def test_a_tail_below_the_limit_passes(tmp_path: Path) -> None:
    # At 30 sigma energy, force and stiffness are 4/30^6, 24/30^7 and 168/30^8; a scale of 1 eV allows 1e-6.
    long = SHORT.replace("to = 5", "to = 30")
    document = text(REDUCED, cutoff="", grid=long, head=f'{HEAD}energy-scale = "1 eV"\n')
    assert list(CHECK.look(facts(document, tmp_path))) == []


def test_a_tail_just_above_the_limit_does_not(tmp_path: Path) -> None:
    short = SHORT.replace("to = 5", "to = 12.5")
    document = text(REDUCED, cutoff="", grid=short, head=f'{HEAD}energy-scale = "1 eV"\n')
    (energy, *_) = CHECK.look(facts(document, tmp_path))
    assert (energy.level, energy.measured) == ("error", pytest.approx(4 / 12.5**6, rel=1e-5))


@pytest.mark.parametrize(
    ("treatment", "offered"),
    [('"truncate"', '"shifted-force"'), ('"shifted-force"', '"shifted-stiffness"')],
)
def test_the_remedy_is_not_what_is_already_in_use(treatment: str, offered: str, tmp_path: Path) -> None:
    finding = found(f"{AT_3} = {treatment} }}\n", tmp_path)[0]
    assert offered in finding.remedy
    assert treatment not in finding.remedy
