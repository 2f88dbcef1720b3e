"""repulsive-core: a curve that turns over inside its grid, or never repels."""

from __future__ import annotations

import re
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from documents import GRID, SWITCH, facts, text
from slopewell.checks import Finding
from slopewell.checks.repulsive_core import CHECK

EXP_6 = 'form = "buckingham"\nparameters = { A = 9576, rho = 0.27614, C = 62.03 }\n'


def found(interaction: str, start: float, folder: Path) -> list[Finding]:
    document = text(interaction, cutoff=SWITCH, grid=GRID.replace("from = 2.5", f"from = {start}"))
    return list(CHECK.look(facts(document, folder)))


def barrier(folder: Path) -> Finding:
    (finding,) = found(EXP_6, 0.5, folder)
    return finding


def test_an_exp_6_curve_that_turns_over_inside_its_grid_is_found(tmp_path: Path) -> None:
    finding = barrier(tmp_path)
    assert finding.level == "error"
    assert "turns over" in finding.says
    # The barrier of the bare formula: its slope vanishes there.
    r = finding.end
    slope = -9576 / 0.27614 * 2.718281828459045 ** (-r / 0.27614) + 6 * 62.03 / r**7
    assert slope == pytest.approx(0, abs=1e-9 * 6 * 62.03 / r**7)
    assert finding.measured == pytest.approx(9576 * 2.718281828459045 ** (-r / 0.27614) - 62.03 / r**6)


def test_a_grid_that_starts_just_outside_the_barrier_passes(tmp_path: Path) -> None:
    top = barrier(tmp_path).end
    assert found(EXP_6, top * 1.0001, tmp_path) == []
    assert len(found(EXP_6, top * 0.9999, tmp_path)) == 1


@pytest.mark.parametrize(("coefficients", "pair"), [("T06-013", "Na-Na"), ("T06-015", "Cl-Cl")])
def test_the_inner_barrier_of_sodium_chloride_is_the_published_one(
    coefficients: str, pair: str, tmp_path: Path, published: Callable[[str], Any]
) -> None:
    stated = published(coefficients)
    where, height = re.search(rf"{pair} ([\d.]+) A, ([\d.]+) eV", published("T06-016").value).groups()
    values = ", ".join(
        f'{name} = "{stated.part(name)!r} {unit}"'
        for name, unit in (("B", "eV"), ("C", "eV angstrom^6"), ("D", "eV angstrom^8"))
    )
    energy = 'energy = "ke/r + B*exp(-r/rho) - C/r^6 - D/r^8"\n'
    (finding,) = found(f'{energy}parameters = {{ {values}, rho = "0.317 angstrom" }}\n', 0.5, tmp_path)
    assert finding.end == pytest.approx(float(where), abs=1e-4)
    assert finding.measured == pytest.approx(float(height), rel=1e-4)


def test_a_curve_without_a_core_is_found(tmp_path: Path) -> None:
    (finding,) = found('form = "sutherland"\nparameters = { epsilon = 1, sigma = 3, m = 6 }\n', 2.5, tmp_path)
    assert finding.level == "error"
    assert "no repulsive core" in finding.says


@pytest.mark.parametrize(
    "interaction",
    [
        'form = "lennard-jones"\nparameters = { epsilon = 0.01, sigma = 3.4 }\n',
        'form = "gaussian-core"\nparameters = { epsilon = 0.01, sigma = 3.4 }\n',
        'form = "yukawa"\nparameters = { q1 = 1, q2 = 1, epsilon_r = 80, lambda_D = 9 }\n',
    ],
    ids=["hard", "bounded", "soft"],
)
def test_a_core_of_any_kind_passes(interaction: str, tmp_path: Path) -> None:
    assert found(interaction, 2.5, tmp_path) == []
