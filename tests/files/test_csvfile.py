"""CSV by RFC 4180, and its sidecar by the W3C recommendation for tabular data."""

from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from slopewell.files import csvfile
from slopewell.problems import UnusableInput
from tables import small_table


@pytest.fixture
def path(tmp_path: Path) -> Path:
    csvfile.write(small_table(), tmp_path / "A-B.csv")
    return tmp_path / "A-B.csv"


def test_lines_end_as_rfc_4180_says_after_a_header(path: Path) -> None:
    raw = path.read_bytes()
    assert raw.startswith(b"separation,energy,force\r\n")
    assert raw.endswith(b"\r\n")
    assert raw.count(b"\n") == raw.count(b"\r\n") == 7


def test_numbers_are_the_shortest_that_read_back(path: Path) -> None:
    with path.open(newline="") as file:
        rows = list(csv.DictReader(file))
    (table,) = small_table().interactions
    assert [float(row["energy"]) for row in rows] == table.energy.tolist()
    assert rows[1]["separation"] == "1.2"


def test_the_sidecar_describes_every_column(path: Path) -> None:
    # "Metadata Vocabulary for Tabular Data", W3C recommendation of 17 December 2015, sections 5.3 to 5.6.
    metadata = json.loads(csvfile.sidecar(path).read_text(encoding="utf-8"))
    assert csvfile.sidecar(path).name == "A-B.csv-metadata.json"
    assert metadata["@context"][0] == "http://www.w3.org/ns/csvw"
    assert metadata["url"] == path.name
    columns = metadata["tableSchema"]["columns"]
    assert [(c["name"], c["datatype"]) for c in columns] == [(n, "double") for n in ("separation", "energy", "force")]
    assert [c["urn:slopewell:unit"] for c in columns] == ["angstrom", "eV", "eV/angstrom"]


def test_every_annotation_of_the_sidecar_is_one_of_the_recommendation_or_a_prefixed_name(path: Path) -> None:
    own = {"@context", "url", "dialect", "tableSchema"}
    metadata = json.loads(csvfile.sidecar(path).read_text(encoding="utf-8"))
    assert [key for key in metadata if key not in own and ":" not in key] == []


def test_a_csv_without_its_sidecar_is_refused(path: Path) -> None:
    csvfile.sidecar(path).unlink()
    with pytest.raises(UnusableInput, match=r"metadata file A-B\.csv-metadata\.json is missing"):
        csvfile.read(path)


def test_a_header_that_its_sidecar_does_not_describe_is_refused(path: Path) -> None:
    path.write_bytes(path.read_bytes().replace(b"energy", b"enthalpy"))
    with pytest.raises(UnusableInput, match="its metadata say"):
        csvfile.read(path)


@pytest.mark.parametrize("damage", [b",x", b",1,2,3", b""])
def test_a_damaged_row_is_refused(damage: bytes, path: Path) -> None:
    lines = path.read_bytes().split(b"\r\n")
    lines[2] = lines[2].split(b",")[0] + damage
    path.write_bytes(b"\r\n".join(lines))
    with pytest.raises(UnusableInput, match="row"):
        csvfile.read(path)
