"""smooth-inside: jumps where a formula changes branch, by the purpose."""

from __future__ import annotations

from pathlib import Path

import pytest
from documents import HEAD, SWITCH, facts, text
from slopewell.checks import Finding
from slopewell.checks.smooth_inside import CHECK

# k_B·T at 100 K is 8.617333262e-3 eV (CODATA 2022); a jump counts from 1e-6 of it on, per cutoff for a force.
SCALE = 8.617333262145e-3
REACH = 9.0


def found(formula: str, size: float, folder: Path, purpose: str = "dynamics") -> list[Finding]:
    parameters = f'parameters = {{ e = "1 eV", a = "1 angstrom", s = "{size!r} eV" }}\n'
    energy = f'energy = "e*(2*a/r)^6 + where(r < 5*a, 0*e, {formula})"\n'
    return list(CHECK.look(facts(text(energy + parameters, head=f'{HEAD}purpose = "{purpose}"\n'), folder)))


@pytest.mark.parametrize(
    ("formula", "order", "purpose", "level"),
    [
        ("s", 0, "sampling", "error"),
        ("s", 0, "dynamics", "error"),
        ("s*(r/a - 5)", 1, "sampling", "warning"),
        ("s*(r/a - 5)", 1, "dynamics", "error"),
        ("s*(r/a - 5)^2/2", 2, "sampling", "note"),
        ("s*(r/a - 5)^2/2", 2, "dynamics", "warning"),
        ("s*(r/a - 5)^2/2", 2, "lattice-dynamics", "error"),
        ("s*(r/a - 5)^3/6", 3, "lattice-dynamics", "warning"),
    ],
)
def test_a_jump_is_as_bad_as_the_purpose_makes_it(
    formula: str, order: int, purpose: str, level: str, tmp_path: Path
) -> None:
    limit = 1e-6 * SCALE / REACH**order
    (finding, *_) = found(formula, 1.01 * limit, tmp_path, purpose)
    assert (finding.level, finding.start) == (level, pytest.approx(5.0))
    assert finding.measured == pytest.approx(1.01 * limit, rel=1e-6)
    assert finding.limit == pytest.approx(limit)
    assert found(formula, 0.99 * limit, tmp_path, purpose) == []


def test_branches_that_meet_smoothly_pass(tmp_path: Path) -> None:
    assert found("s*(r/a - 5)^4", 1.0, tmp_path, "lattice-dynamics") == []


def test_the_jump_of_every_order_is_found_lowest_first(tmp_path: Path) -> None:
    findings = found("s*exp(r/a - 5)", 1e-3, tmp_path)
    assert [finding.unit for finding in findings] == ["eV", "eV/angstrom", "eV/angstrom^2"]


def test_a_kink_of_abs_is_found(tmp_path: Path) -> None:
    parameters = 'parameters = { e = "1 eV", a = "1 angstrom" }\n'
    document = text(f'energy = "e*abs(r/a - 5)"\n{parameters}', cutoff=SWITCH)
    (finding,) = CHECK.look(facts(document, tmp_path))
    assert (finding.level, finding.start, finding.unit) == ("error", pytest.approx(5.0), "eV/angstrom")
    assert finding.measured == pytest.approx(2.0)


def test_the_known_jump_of_a_published_form_is_reported(tmp_path: Path) -> None:
    # HFD-B damps its dispersion up to D·r_m only, where the stiffness jumps. Argon: R. A. Aziz and
    # M. J. Slaman, Mol. Phys. 58, 679 (1986); the jump of 2.6228 K/Å² at 5.10884 Å is
    # computed from its parameters.
    values = {
        "epsilon": '"143.224 K"',
        "r_m": '"3.7565 angstrom"',
        "A": "2.26210716e5",
        "alpha": "10.77874743",
        "beta": "-1.8122004",
        "c6": "1.10785136",
        "c8": "0.56072459",
        "c10": "0.34602794",
        "D": "1.36",
    }
    listing = ", ".join(f"{key} = {value}" for key, value in values.items())
    document = text(f'form = "hfd-b"\nparameters = {{ {listing} }}\n')
    (finding,) = CHECK.look(facts(document, tmp_path))
    assert finding.level == "warning"
    assert finding.start == pytest.approx(5.10884)
    assert finding.measured / 8.617333262e-5 == pytest.approx(2.6228, rel=1e-4)


def test_without_a_scale_every_jump_counts_and_the_finding_says_why(tmp_path: Path) -> None:
    document = text(
        'energy = "where(r < a, e*a/r, 2*e*a/r)"\nparameters = { e = "1 eV", a = "5 angstrom" }\n',
        head=HEAD.replace('temperature = "100 K"\n', ""),
    )
    findings = list(CHECK.look(facts(document, tmp_path)))
    assert [finding.limit for finding in findings] == [0.0] * len(findings)
    assert findings[0].level == "error"
    assert "no temperature and no energy-scale" in findings[0].says


def test_the_scale_is_the_stated_one_then_the_thermal_one_then_the_depth(tmp_path: Path) -> None:
    stated = facts(text(head=f'{HEAD}energy-scale = "3 eV"\n'), tmp_path)
    thermal = facts(text(), tmp_path)
    well = facts(text(head=HEAD.replace('temperature = "100 K"\n', "")), tmp_path)
    assert stated.energy_scale == 3.0
    assert thermal.energy_scale == pytest.approx(SCALE)
    assert well.energy_scale == pytest.approx(0.01)
