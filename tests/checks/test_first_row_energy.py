"""first-row-energy: can a pair get below the first row?"""

from __future__ import annotations

from pathlib import Path

import pytest
from documents import GRID, HEAD, SWITCH, facts, text
from slopewell.checks import Finding
from slopewell.checks.first_row_energy import CHECK

THERMAL = 8.617333262145e-3
"""k_B·T at 100 K in eV (CODATA 2022)."""


def found(energy: float, folder: Path, head: str = HEAD) -> list[Finding]:
    wall = f'form = "inverse-power"\nparameters = {{ epsilon = {energy!r}, sigma = 2.5, n = 9 }}\n'
    return list(CHECK.look(facts(text(wall, head=head), folder)))


@pytest.mark.parametrize(("low", "levels"), [(4.99, ["error"]), (5.01, ["warning"]), (19.9, ["warning"]), (20.1, [])])
def test_a_low_first_row_is_an_error_and_a_middling_one_a_warning(
    low: float, levels: list[str], tmp_path: Path
) -> None:
    findings = found(low * THERMAL, tmp_path)
    assert [finding.level for finding in findings] == levels
    assert [finding.measured for finding in findings] == pytest.approx([low] * len(levels), rel=1e-6)


def test_without_a_temperature_it_is_a_note(tmp_path: Path) -> None:
    (finding,) = found(1.0, tmp_path, head=HEAD.replace('temperature = "100 K"\n', ""))
    assert (finding.level, finding.measured) == ("note", pytest.approx(1.0))


@pytest.mark.parametrize(("start", "levels"), [(0.17, []), (0.19, ["error"])])
def test_a_bounded_repulsion_must_start_close_to_zero(start: float, levels: list[str], tmp_path: Path) -> None:
    # The cutoff lies at 9 angstrom; 2 % of it is 0.18.
    core = f'form = "gaussian-core"\nparameters = {{ epsilon = {THERMAL}, sigma = 3 }}\n'
    document = text(core, cutoff=SWITCH, grid=GRID.replace("from = 2.5", f"from = {start}"))
    assert [finding.level for finding in CHECK.look(facts(document, tmp_path))] == levels


def test_a_negative_first_row_is_an_error(tmp_path: Path) -> None:
    document = text(grid=GRID.replace("from = 2.5", "from = 3.6"))
    (finding,) = CHECK.look(facts(document, tmp_path))
    assert finding.level == "error"
    assert finding.measured < 0
