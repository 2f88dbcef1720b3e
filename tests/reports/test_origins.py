"""Where pairs come from, as JSON data and as lines."""

from __future__ import annotations

from collections.abc import Callable
from hashlib import sha256
from pathlib import Path
from typing import Any

import pytest
from documents import HEAD, LENNARD_JONES, read, text
from jsonschema import Draft202012Validator
from slopewell.reports.origins import pair_lines, pair_records
from slopewell.schemas import schema
from slopewell.workflow import check_document

LIKE = LENNARD_JONES + '[[interaction]]\nbetween = ["B", "B"]\n' + LENNARD_JONES.replace("3.4", "3.0")
MIXING = '[mixing]\nrule = "geometric"\n'
SHARED = '[cutoff]\nat = 9\ntreatment = "shifted-force"\n'


def test_stated_and_mixed_pairs_are_told_apart(tmp_path: Path) -> None:
    document = read(text(LIKE, cutoff="", outputs=MIXING + SHARED), tmp_path)
    records = pair_records(document)
    assert [(record["interaction"], record["origin"]) for record in records] == [
        ("A-A", "stated"),
        ("B-B", "stated"),
        ("A-B", "mixed"),
    ]
    assert records[2]["parameters"] == pytest.approx({"epsilon": 0.01, "sigma": (3.4 * 3.0) ** 0.5})
    assert pair_lines(records[0], document.units) == []
    assert pair_lines(records[2], document.units) == [
        ("mixed", "by geometric: lennard-jones with epsilon = 0.01, sigma = 3.19374")
    ]


def test_where_all_is_stated_there_is_nothing_to_say(tmp_path: Path) -> None:
    assert pair_records(read(text(), tmp_path)) == ()


def test_the_tail_has_its_published_value(tmp_path: Path, published: Callable[[str], Any]) -> None:
    # Allen and Tildesley (2017): reduced density 0.8, cutoff 3 sigma; 1 eV/angstrom^3 is 160217.6634 MPa.
    interaction = 'form = "lennard-jones"\nparameters = { epsilon = 1, sigma = 1 }\n'
    document = text(
        interaction,
        head=HEAD + 'number-density = "0.8 angstrom^-3"\n',
        cutoff='cutoff = { at = 3, treatment = "switch", from = 2 }\n',
        grid="[grid]\nfrom = 0.8\nto = 3\nrows = 101\n",
    )
    (record,) = pair_records(read(document, tmp_path))
    energy, pressure = (float(part.split("=")[1]) for part in published("T02-045").value.split("; "))
    assert record["tail"]["energy"] == pytest.approx(energy, rel=1e-8)
    assert record["tail"]["pressure_MPa"] == pytest.approx(pressure * 160217.6634, rel=1e-8)


def test_a_tail_without_end_is_null(tmp_path: Path) -> None:
    coulomb = 'energy = "ke/r"\n'
    document = text(coulomb, head=HEAD + 'number-density = "0.1 angstrom^-3"\n')
    (record,) = pair_records(read(document, tmp_path))
    assert record["tail"] is None


def test_the_report_with_pairs_fits_its_schema(tmp_path: Path) -> None:
    document = read(text(LIKE, cutoff="", outputs=MIXING + SHARED), tmp_path)
    subject, _ = check_document(document)
    record = {"schema": "slopewell/report/1", "subjects": [subject.record()]}
    assert len(record["subjects"][0]["pairs"]) == 3
    Draft202012Validator(schema("report")).validate(record)


def test_files_of_points_are_told_by_their_checksum(tmp_path: Path) -> None:
    content = "\n".join(f"{r} {10 / r**6}" for r in (2.5, 3, 4, 5, 6, 7, 8, 9))
    (tmp_path / "scan.dat").write_text(content, encoding="utf-8")
    (record,) = pair_records(read(text('points = "scan.dat"\n'), tmp_path))
    assert record["points"] == [{"file": "scan.dat", "sha256": sha256(content.encode()).hexdigest()}]
