"""expected-landmarks: what the source states, within what it allows."""

from __future__ import annotations

from pathlib import Path

import pytest
from documents import SWITCH, UNITS, facts, text
from slopewell.checks import Finding
from slopewell.checks.expected_landmarks import CHECK

DEPTH, SIZE = 0.01, 3.4
EQUILIBRIUM = SIZE * 2 ** (1 / 6)
# Closed forms of the 12-6 curve: curvature at the minimum, and the force where the curvature vanishes.
STIFFNESS = 72 * DEPTH / EQUILIBRIUM**2
PULL = (26 / 7) ** (1 / 6)
LARGEST = 24 * DEPTH / SIZE * (2 * PULL**-13 - PULL**-7)
# Wavenumber of 20 dalton on that spring: sqrt(k/m)/(2 pi c), with CODATA 2022 units.
WAVENUMBER = (STIFFNESS * 16.02176634 / (20 * 1.66053906892e-27)) ** 0.5 / (2 * 3.141592653589793 * 29979245800)

EXPECTED = {
    "equilibrium-separation": EQUILIBRIUM,
    "well-depth": DEPTH,
    "stiffness": STIFFNESS,
    "zero-crossing": SIZE,
    "largest-attraction": LARGEST,
    "harmonic-wavenumber": WAVENUMBER,
}


def found(
    landmark: str, value: float, within: float, folder: Path, more: str = "", units: str = UNITS
) -> list[Finding]:
    stated = f"expect = {{ {landmark} = {{ value = {value!r}, within = {within!r}{more} }} }}\n"
    return list(CHECK.look(facts(text(cutoff=SWITCH + stated, units=units), folder)))


@pytest.mark.parametrize(("landmark", "value"), EXPECTED.items(), ids=EXPECTED)
def test_a_stated_landmark_may_be_off_by_what_is_allowed(landmark: str, value: float, tmp_path: Path) -> None:
    width = abs(value) * 1e-6
    assert found(landmark, value + 0.99 * width, width, tmp_path) == []
    assert found(landmark, value - 0.99 * width, width, tmp_path) == []
    (finding,) = found(landmark, value + 1.01 * width, width, tmp_path)
    assert finding.level == "error"
    assert finding.measured == pytest.approx(value, rel=1e-9)
    assert finding.limit == value + 1.01 * width
    assert finding.details == {"landmark": landmark, "within": width}


def test_values_are_in_the_documents_units(tmp_path: Path) -> None:
    other = UNITS.replace('energy = "eV"', 'energy = "kJ/mol"')
    # epsilon = 0.01 is then 0.01 kJ/mol.
    assert found("well-depth", 0.01, 1e-9, tmp_path, units=other) == []


def test_the_bare_curve_is_meant_unless_the_treated_one_is_asked_for(tmp_path: Path) -> None:
    shifted = text(
        cutoff='cutoff = { at = 9, treatment = "shifted-energy" }\n'
        'expect = { well-depth = { value = 0.01, within = 1e-6, of = "treated" } }\n'
    )
    (finding,) = CHECK.look(facts(shifted, tmp_path))
    step = 4 * DEPTH * ((SIZE / 9) ** 12 - (SIZE / 9) ** 6)
    assert finding.measured == pytest.approx(DEPTH + step, rel=1e-12)
    assert list(CHECK.look(facts(shifted.replace("treated", "bare"), tmp_path))) == []


def test_a_stated_well_that_does_not_exist_is_an_error(tmp_path: Path) -> None:
    stated = f"{SWITCH}expect = {{ well-depth = {{ value = 1, within = 9 }} }}\n"
    soft = text('form = "inverse-power"\nparameters = { epsilon = 1, sigma = 3, n = 9 }\n', cutoff=stated)
    (finding,) = CHECK.look(facts(soft, tmp_path))
    assert finding.measured is None
    assert "has none" in finding.says
