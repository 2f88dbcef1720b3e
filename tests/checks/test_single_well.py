"""single-well: more than one minimum is a warning, none is no finding."""

from __future__ import annotations

from pathlib import Path

import pytest
from documents import facts, text
from slopewell.checks import Finding
from slopewell.checks.single_well import CHECK


def found(dip: float, folder: Path) -> list[Finding]:
    energy = (
        'energy = "4*e*((s/r)^12 - (s/r)^6) - d*exp(-((r - p)/w)^2)"\n'
        'parameters = { e = "0.01 eV", s = "3.4 angstrom", p = "6 angstrom", w = "0.3 angstrom", '
        f'd = "{dip} eV" }}\n'
    )
    return list(CHECK.look(facts(text(energy), folder)))


def test_a_second_well_is_a_warning_that_lists_both(tmp_path: Path) -> None:
    (finding,) = found(0.004, tmp_path)
    assert (finding.level, finding.measured) == ("warning", 2.0)
    assert finding.start == pytest.approx(3.4 * 2 ** (1 / 6), rel=1e-4)
    assert finding.end == pytest.approx(6, abs=0.1)


def test_a_dip_too_shallow_for_a_well_passes(tmp_path: Path) -> None:
    assert found(0.0002, tmp_path) == []


def test_many_wells_are_counted_and_some_of_them_listed(tmp_path: Path) -> None:
    wavy = 'energy = "e*(cos(r/w) + 3.4*w/r)"\nparameters = { e = "1 eV", w = "0.1 angstrom" }\n'
    (finding,) = CHECK.look(facts(text(wavy), tmp_path))
    assert finding.measured == pytest.approx(6.5 / 0.1 / 6.283, abs=1.5)
    assert ", …" in finding.says


def test_no_well_is_no_finding(tmp_path: Path) -> None:
    soft = 'form = "inverse-power"\nparameters = { epsilon = 1, sigma = 3, n = 9 }\n'
    assert list(CHECK.look(facts(text(soft), tmp_path))) == []
