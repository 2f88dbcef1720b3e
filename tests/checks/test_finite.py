"""finite: a value at every row and no pole between rows."""

from __future__ import annotations

from pathlib import Path

import pytest
from documents import SWITCH, facts, text
from slopewell.checks import ERROR, Finding
from slopewell.checks.finite import CHECK


def found(energy: str, parameters: str, folder: Path, cutoff: str = SWITCH) -> list[Finding]:
    document = text(f'energy = "{energy}"\nparameters = {{ {parameters} }}\n', cutoff=cutoff)
    return list(CHECK.look(facts(document, folder)))


POLE = 'e = "1 eV", at = "{} angstrom"'


@pytest.mark.parametrize("at", ["4.013", "2.5001", "8.99"])
def test_a_pole_on_the_grid_is_located(at: str, tmp_path: Path) -> None:
    (finding,) = found("e*at/(r - at)", POLE.format(at), tmp_path)
    assert finding.level == ERROR
    assert finding.start == pytest.approx(float(at), abs=1e-5)
    assert "has a pole" in finding.says


@pytest.mark.parametrize("at", ["2.499", "9.001", "-1"])
def test_a_pole_just_outside_the_grid_is_no_matter(at: str, tmp_path: Path) -> None:
    assert found("e*at/(r - at)", POLE.format(at), tmp_path) == []


def test_several_poles_are_all_located(tmp_path: Path) -> None:
    findings = found("e*tan(k*r)", 'e = "1 eV", k = "1 angstrom^-1"', tmp_path)
    # tan has poles at odd multiples of pi/2.
    assert [finding.start for finding in findings] == pytest.approx([4.712389, 7.853982], abs=1e-5)


def test_a_pole_on_a_row_is_a_row_without_a_value(tmp_path: Path) -> None:
    (finding,) = found("e*at/(r - at)", POLE.format("2.5"), tmp_path)
    assert (finding.start, finding.end) == (2.5, 2.5)


def test_a_root_of_a_negative_number_is_located(tmp_path: Path) -> None:
    (finding,) = found("e*sqrt(r/at - 1)", POLE.format("4"), tmp_path)
    assert finding.start == 2.5
    assert finding.end == pytest.approx(4, abs=0.1)


def test_an_overflow_is_found(tmp_path: Path) -> None:
    (finding,) = found("e*exp((at/r)^9)", POLE.format("6"), tmp_path)
    assert finding.start == 2.5
    assert "no finite value" in finding.says


def test_a_curve_that_is_large_but_finite_passes(tmp_path: Path) -> None:
    assert found("e*exp((at/r)^9)", POLE.format("5"), tmp_path) == []


def test_terms_that_cancel_a_pole_pass(tmp_path: Path) -> None:
    # sin(x)/x has a value at every separation, although an enclosure of it around a root fails nowhere here.
    assert found("e*sin(r/at - 4)/(r/at)", POLE.format("1"), tmp_path) == []
