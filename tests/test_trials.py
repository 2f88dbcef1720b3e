"""The verb trial: its JSON, its verdicts, what it assumes and what it refuses."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest
from slopewell.cli import main
from slopewell.problems import UnusableInput
from slopewell.tables import Reading
from slopewell.trials import read_time, trial

CAUSES = ["time-step", "cutoff", "interpolation", "force-not-slope", "digits"]
DOCUMENT = """
schema = "slopewell/potential/1"
title = "Beads, invented"
temperature = "120 K"
[units]
energy = "eV"
length = "angstrom"
[species.A]
mass = "40 dalton"
{species}
[[interaction]]
between = ["A", "A"]
form = "lennard-jones"
parameters = {{ epsilon = "120 K", sigma = 3.4 }}
cutoff = {{ at = 7, treatment = "switch", from = 5.5 }}
{more}
[grid]
from = 2.4
to = 7
rows = {rows}
interpolation = "{rule}"
"""
SHORT = {"steps": 60, "seeds": 1, "particles": 128}


def document(folder: Path, rows: int = 2001, rule: str = "cubic-hermite", species: str = "", more: str = "") -> Path:
    path = folder / "beads.toml"
    path.write_text(DOCUMENT.format(rows=rows, rule=rule, species=species, more=more), encoding="utf-8")
    return path


def test_a_good_table_passes_and_is_the_same_for_a_seed(tmp_path: Path) -> None:
    first, second = (trial(document(tmp_path), length=10.0, **SHORT) for _ in range(2))
    assert first.verdict == "pass"
    assert first.record() == second.record()
    assert first.order == pytest.approx(2.0, abs=0.2)


def test_json_of_a_coarse_table(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = document(tmp_path, rows=40, rule="linear")
    options = ["--length", "100 ns", "--steps", "60", "--seeds", "1", "--particles", "128", "--json"]
    assert main(["trial", str(path), *options]) == 1
    record = json.loads(capsys.readouterr().out)
    assert set(record["drift"]) == {"value", "error", "unit"}
    assert [cause["cause"] for cause in record["causes"]] == CAUSES
    assert sum(cause["share"] for cause in record["causes"]) == pytest.approx(1.0)
    assert max(record["causes"], key=lambda cause: cause["share"])["cause"] == "interpolation"
    assert record["verdict"] == "fail"


def test_a_text_table_with_a_sign_error_and_no_document(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    r = np.linspace(2.6, 7.0, 800)
    energy = 0.0414 * ((3.4 / r) ** 12 - (3.4 / r) ** 6) * ((7 - r) / 4) ** 3
    force = -np.gradient(energy, r, edge_order=2)
    force[(r > 4.4) & (r < 4.9)] *= -1
    path = tmp_path / "A-A.dat"
    np.savetxt(path, np.column_stack([r, energy, force]), fmt="%.10e")
    options = ["--columns", "separation,energy,force", "--units", "eV,angstrom", "--interpolation", "linear"]
    assert main(["trial", str(path), *options, "--steps", "60", "--seeds", "1", "--particles", "128"]) == 1
    shown = capsys.readouterr().out
    assert "does not hold its energy" in shown
    assert "mass of A: 40 dalton" in shown
    assert "time step" in shown


def test_a_missing_pair_is_refused(tmp_path: Path) -> None:
    mixed = '[[interaction]]\nbetween = ["A", "B"]\nform = "lennard-jones"\n'
    mixed += 'parameters = { epsilon = "1 meV", sigma = 3 }'
    with pytest.raises(UnusableInput, match="missing: B-B"):
        trial(document(tmp_path, species="[species.B]", more=mixed))


def test_times() -> None:
    assert read_time("100 ns", "--length") == 1e8
    assert read_time("2 fs", "--time-step") == 2.0
    for wrong in ("100", "-1 ns", "x ns", "1 hour", "nan ns"):
        with pytest.raises(UnusableInput):
            read_time(wrong, "--length")


def text_table(folder: Path, sign: float) -> Path:
    r = np.linspace(2.4, 7.0, 400)
    energy = 0.04 * ((3.4 / r) ** 12 - (3.4 / r) ** 6)
    force = sign * 0.04 * (12 * (3.4 / r) ** 12 - 6 * (3.4 / r) ** 6) / r
    path = folder / "bead-bead-old.dat"
    path.write_text("\n".join(f"{a!r} {b!r} {c!r}" for a, b, c in np.array([r, energy, force]).T.tolist()))
    return path


TEXT = Reading(("separation", "energy", "force"), "eV,angstrom")


def test_a_text_is_one_pair_of_one_species_whatever_its_name(tmp_path: Path) -> None:
    masses = {"bead-bead-old": 40.0}
    done = trial(text_table(tmp_path, 1.0), reading=TEXT, masses=masses, temperature=120.0, **SHORT)
    assert done.studied.table.species == ("bead-bead-old",)


def test_a_force_of_the_wrong_sign_ends_in_words(tmp_path: Path) -> None:
    with pytest.raises(UnusableInput, match="breaks down"):
        trial(text_table(tmp_path, -1.0), reading=TEXT, temperature=120.0, steps=400, seeds=1, particles=128)
