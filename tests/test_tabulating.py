"""The verb tabulate: checks, then every file, with what was accepted and certified."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest
from documents import GRID, LENNARD_JONES, SWITCH, text
from slopewell.files import format_of, layout, read_layout
from slopewell.problems import UnusableInput
from slopewell.tabulating import Tabulated, tabulate
from slopewell.units import unit_system

OUTPUTS = """[[output]]
file = "pair.h5"
[[output]]
file = "pair.json"
units = { energy = "kJ/mol", length = "nm" }
[[output]]
file = "{a}-{b}.csv"
[[output]]
file = "{a}-{b}.dat"
layout = "own.layout.toml"
"""
LAYOUT = """schema = "slopewell/layout/1"
title = "Own"
head = ["# {title}"]
units = { energy = "K", length = "bohr" }
[[column]]
quantity = "separation"
[[column]]
quantity = "energy"
[[column]]
quantity = "force"
"""
SECOND = f'[[interaction]]\nbetween = ["A", "B"]\n{LENNARD_JONES}{SWITCH}'
TRUNCATED = 'cutoff = { at = 9, treatment = "truncate" }\n'


def run(document: str, folder: Path, **options: object) -> Tabulated:
    (folder / "pair.toml").write_text(document, encoding="utf-8")
    (folder / "own.layout.toml").write_text(LAYOUT, encoding="utf-8")
    return tabulate(folder / "pair.toml", **options)


def test_every_output_is_written_into_the_folder(tmp_path: Path) -> None:
    done = run(text(cutoff=SWITCH + SECOND, outputs=OUTPUTS), tmp_path, into=tmp_path / "new" / "tables")
    assert [path.name for path in done.written] == [
        *("pair.h5", "pair.json", "A-A.csv", "A-B.csv", "A-A.dat", "A-B.dat")
    ]
    assert {path.name for path in (tmp_path / "new" / "tables").iterdir()} == {
        *(path.name for path in done.written),
        *("A-A.csv-metadata.json", "A-B.csv-metadata.json"),
    }


def test_files_stand_beside_the_document_by_default(tmp_path: Path) -> None:
    (path,) = run(text(outputs='[[output]]\nfile = "pair.h5"\n'), tmp_path).written
    assert path == tmp_path / "pair.h5"


def test_each_file_has_the_same_numbers_in_its_own_units(tmp_path: Path) -> None:
    paths = {path.suffix: path for path in run(text(outputs=OUTPUTS), tmp_path).written}
    chosen = read_layout(tmp_path / "own.layout.toml")
    tables = [format_of(paths[ending]).read(paths[ending]) for ending in (".h5", ".json", ".csv")]
    tables.append(layout.read(paths[".dat"], chosen))
    assert [(t.units.energy.text, t.units.length.text) for t in tables] == [
        *(("eV", "angstrom"), ("kJ/mol", "nm"), ("eV", "angstrom"), ("K", "bohr"))
    ]
    first = tables[0].interactions[0]
    for table in tables:
        (rows,) = table.interactions
        factor = float(table.units.energy.factor)
        near = np.abs(first.energy) + 1e-4
        assert np.all(np.abs(rows.energy * factor - first.energy) <= 1e-13 * near)
        assert rows.separation * float(table.units.length.factor) == pytest.approx(first.separation, rel=1e-15)


def test_two_writes_of_one_document_are_the_same_bytes(tmp_path: Path) -> None:
    found = []
    for name in ("one", "two"):
        (tmp_path / name).mkdir()
        run(text(cutoff=SWITCH + SECOND, outputs=OUTPUTS), tmp_path / name, into=tmp_path / name / "out")
        found.append({path.name: path.read_bytes() for path in (tmp_path / name / "out").iterdir()})
    assert found[0] == found[1]


def test_provenance_and_report_are_stored(tmp_path: Path) -> None:
    (path,) = run(text(outputs='[[output]]\nfile = "pair.json"\n'), tmp_path).written
    stored = json.loads(path.read_text(encoding="utf-8"))
    assert stored["document"] == (tmp_path / "pair.toml").read_text(encoding="utf-8")
    assert stored["constants"] == "CODATA 2022"
    assert stored["writer"].startswith("slopewell ")
    (subject,) = stored["report"]["subjects"]
    assert (subject["file"], subject["sha256"]) == ("pair.toml", stored["document_sha256"])


def test_rows_carry_their_certificate(tmp_path: Path) -> None:
    (path,) = run(text(outputs='[[output]]\nfile = "pair.h5"\n'), tmp_path).written
    (rows,) = format_of(path).read(path).interactions
    assert rows.certificate["last_places_off"] <= 4
    assert 0 < rows.certificate["rows_proved"] <= 101
    assert rows.certificate["proved"]


def test_an_error_means_that_nothing_is_written(tmp_path: Path) -> None:
    done = run(text(cutoff=TRUNCATED, outputs=OUTPUTS), tmp_path, into=tmp_path / "tables")
    assert done.written == ()
    assert done.report.subjects[0].verdict == "fail"
    assert not (tmp_path / "tables").exists()


def test_an_accepted_error_is_recorded_in_the_file(tmp_path: Path) -> None:
    document = text(cutoff=TRUNCATED, outputs='[[output]]\nfile = "pair.json"\n')
    done = run(document, tmp_path, accept=["cutoff-steps", "finite"])
    (subject,) = json.loads(done.written[0].read_text(encoding="utf-8"))["report"]["subjects"]
    assert subject["accepted"] == ["cutoff-steps"]
    assert subject["verdict"] == "fail"


def test_accepting_another_check_does_not_help(tmp_path: Path) -> None:
    assert run(text(cutoff=TRUNCATED, outputs=OUTPUTS), tmp_path, accept=["finite"]).written == ()


def test_an_unknown_check_is_refused_before_anything_is_read(tmp_path: Path) -> None:
    with pytest.raises(UnusableInput, match='There is no check "finit"'):
        tabulate(tmp_path / "none.toml", accept=["finit"])


@pytest.mark.parametrize(
    ("outputs", "says"),
    [
        ("", "The document names no output"),
        ('[[output]]\nfile = "a.h5"\n[[output]]\nfile = "a.h5"\n', r"would overwrite output\[0\]"),
        ('[[output]]\nfile = "a.dat"\nlayout = "none.toml"\n', "can't be read"),
    ],
)
def test_outputs_that_can_not_be_written_are_refused(outputs: str, says: str, tmp_path: Path) -> None:
    with pytest.raises(UnusableInput, match=says):
        run(text(outputs=outputs), tmp_path)


def test_a_file_in_place_of_the_folder_leaves_what_was_there(tmp_path: Path) -> None:
    (tmp_path / "tables").write_text("a file")
    with pytest.raises(UnusableInput, match="can't be written"):
        run(text(outputs=OUTPUTS), tmp_path, into=tmp_path / "tables")
    assert (tmp_path / "tables").read_text() == "a file"


def test_a_tolerance_decides_the_row_count(tmp_path: Path) -> None:
    grid = GRID.replace("rows = 101", 'tolerance = "1e-5 eV"')
    (path,) = run(text(grid=grid, outputs='[[output]]\nfile = "pair.h5"\n'), tmp_path).written
    (rows,) = format_of(path).read(path).interactions
    assert rows.certificate["energy_error_bound"] <= 1e-5
    assert rows.certificate["energy_error_bound"] > 0.5e-5
    assert rows.separation.size == rows.certificate["rows"]


def test_the_written_units_are_plain_text(tmp_path: Path) -> None:
    odd = '[[output]]\nfile = "pair.json"\nunits = { energy = "kJ mol^-1", length = "Å" }\n'
    (path,) = run(text(outputs=odd), tmp_path).written
    units = json.loads(path.read_text(encoding="utf-8"))["units"]
    assert units == {"energy": "kJ/mol", "length": "angstrom"}
    assert format_of(path).read(path).units == unit_system("kJ/mol", "angstrom")
