"""Comparing tables: no difference where there is none, and units, shifts and rows named where they do."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray
from slopewell.cli import main
from slopewell.comparison import compare
from slopewell.problems import UnusableInput
from slopewell.table import Rows, Table
from slopewell.units import unit_system

Array = NDArray[np.float64]
R = np.linspace(3.0, 12.0, 401)


def energy(r: Array) -> Array:
    return np.asarray(0.04 * ((3.4 / r) ** 12 - (3.4 / r) ** 6))


def force(r: Array) -> Array:
    return np.asarray(0.04 * (12 * (3.4 / r) ** 12 - 6 * (3.4 / r) ** 6) / r)


def table(
    r: Array = R, scale: float = 1.0, shift: float = 0.0, units: str = "eV,angstrom", length: float = 1.0
) -> Table:
    rows = Rows("A-B", r * length, scale * energy(r) + shift, scale * force(r) / length)
    return Table((rows,), unit_system(*units.split(",")))


def moved(shift: float) -> Table:
    return Table((Rows("A-B", R + shift, energy(R), force(R)),), unit_system("eV", "angstrom"))


def pushed(factor: float, offset: float = 0.0) -> Table:
    return Table((Rows("A-B", R, energy(R), factor * force(R) + offset),), unit_system("eV", "angstrom"))


def test_a_table_equals_itself_in_other_units() -> None:
    found = compare(table(), table(scale=96.48533212331002, units="kJ/mol,nm", length=0.1))

    assert found.within
    assert found.differences[0].relative < 1e-12


@pytest.mark.parametrize(
    ("other", "name", "factor"),
    [
        (table(scale=96.48533212331002), "energy-units", 96.48533212331002),
        (table(length=0.1), "length-units", 0.1),
        (table(shift=0.002), "energy-shift", 0.002),
        (table(scale=1.05), "energy-factor", 1.05),
        (table(scale=-1.0), "energy-sign", -1.0),
        (moved(0.05), "separation-shift", 0.05),
        (pushed(0.1), "force-in-other-units", 0.1),
        (pushed(-1.0), "force-sign-flipped", -1.0),
        (pushed(2.0), "counted-twice", 2.0),
        (pushed(1.0, 0.003), "constant-force-offset", 0.003),
    ],
)
def test_what_explains_the_difference_is_named(other: Table, name: str, factor: float) -> None:
    found = compare(table(), other)
    explained = found.differences[0].explained_by

    assert not found.within
    assert explained is not None
    assert (explained.name, explained.factor) == (name, pytest.approx(factor))


def test_coarse_rows_explain_the_difference() -> None:
    explained = compare(table(), table(np.linspace(3.0, 12.0, 90))).differences[0].explained_by

    assert explained is not None
    assert explained.name == "grid"


def test_another_curve_has_no_explanation() -> None:
    rows = Rows("A-B", R, energy(R) + 0.001 * np.sin(R), force(R) - 0.001 * np.cos(R))
    found = compare(table(), Table((rows,), unit_system("eV", "angstrom")))

    assert found.differences[0].explained_by is None
    assert found.differences[0].energy[0] == pytest.approx(0.001, rel=1e-3)


def test_tables_without_a_common_pair_are_refused() -> None:
    two = [Rows(name, R, energy(R), force(R)) for name in ("C-D", "E-F")]
    with pytest.raises(UnusableInput, match="share no interaction"):
        compare(table(), Table(tuple(two), unit_system("eV", "angstrom")))


@pytest.mark.parametrize(("scale", "status"), [("1", 0), ("1.1", 1)])
def test_command_prints_the_result_and_leaves_with_its_status(
    scale: str, status: int, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    files = [tmp_path / "one.dat", tmp_path / "other.dat"]
    for path, factor in zip(files, (1.0, float(scale)), strict=True):
        np.savetxt(path, np.column_stack([R, factor * energy(R), factor * force(R)]), fmt="%.16e")
    call = [
        "compare",
        *map(str, files),
        "--columns",
        "separation,energy,force",
        "--units",
        "eV,angstrom",
        "--json",
    ]

    assert main(call) == status
    record = json.loads(capsys.readouterr().out)
    assert record["within"] == (status == 0)
    assert set(record["interactions"][0]) >= {"interaction", "energy", "force", "relative", "explained_by"}
