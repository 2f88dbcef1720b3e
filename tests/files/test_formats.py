"""What every format must do: give back any table, in the same bytes each time, whole or not at all."""

from __future__ import annotations

import json
import re
import tempfile
from pathlib import Path

import pytest
from documentation import ROOT
from hypothesis import given, settings
from hypothesis import strategies as st
from slopewell.document import build
from slopewell.files import FORMATS, Format, csvfile, format_of
from slopewell.problems import UnusableInput
from slopewell.table import Table
from tables import any_table, assert_same, small_table

every_format = pytest.mark.parametrize("known", FORMATS, ids=lambda known: known.name)


def written(known: Format, table: Table, folder: Path) -> Path:
    path = folder / f"pair{known.endings[0]}"
    known.write(table, path)
    return path


@every_format
@given(data=st.data())
@settings(max_examples=60)
def test_any_table_reads_back_as_it_was(known: Format, data: st.DataObject) -> None:
    table = data.draw(any_table(most=3 if known.holds_all else 1))
    with tempfile.TemporaryDirectory() as folder:
        assert_same(known.read(written(known, table, Path(folder))), table)


@every_format
def test_a_table_written_twice_is_the_same_bytes(known: Format, tmp_path: Path) -> None:
    for name in ("one", "two"):
        (tmp_path / name).mkdir()
        written(known, small_table(), tmp_path / name)
    one, two = ({path.name: path.read_bytes() for path in (tmp_path / name).iterdir()} for name in ("one", "two"))
    assert one == two


@every_format
def test_a_long_document_is_kept(known: Format, tmp_path: Path) -> None:
    long = small_table(document="# a long document\n" * 10_000)
    assert known.read(written(known, long, tmp_path)).document == long.document


@every_format
def test_a_file_that_is_something_else_is_refused(known: Format, tmp_path: Path) -> None:
    path = tmp_path / f"pair{known.endings[0]}"
    for content in (b"", b"\x89HDF\r\n", b"{}", b"separation\n1\n", b"\xff\xfe"):
        path.write_bytes(content)
        with pytest.raises(UnusableInput) as caught:
            known.read(path)
        assert caught.value.file == str(path)


@every_format
def test_a_file_that_is_not_there_is_refused(known: Format, tmp_path: Path) -> None:
    with pytest.raises(UnusableInput):
        known.read(tmp_path / f"none{known.endings[0]}")


@every_format
def test_nothing_is_left_beside_the_files_that_are_meant(known: Format, tmp_path: Path) -> None:
    path = written(known, small_table(), tmp_path)
    sidecars = {csvfile.sidecar(path).name} if known.name == "CSV" else set()
    assert {file.name for file in tmp_path.iterdir()} == {path.name} | sidecars


def test_the_ending_names_the_format_in_either_case() -> None:
    assert [format_of(Path(name)).name for name in ("a.h5", "a.HDF5", "a.csv", "a.json")] == [
        *("HDF5", "HDF5", "CSV", "JSON")
    ]


def test_an_unknown_ending_is_refused_with_the_known_ones() -> None:
    with pytest.raises(UnusableInput) as caught:
        format_of(Path("a.xls"))
    assert caught.value.problems[0].remedy.startswith("End it in .h5, .hdf5, .csv, .json")


def test_documents_take_the_endings_of_the_formats() -> None:
    # The floor of documents lies below that of files, so that the endings stand in both.
    text = Path(build.__file__).read_text(encoding="utf-8")
    endings = set(re.findall(r'"(\.[a-z0-9]+)"', text))
    assert endings == {ending for known in FORMATS for ending in known.endings}


def test_the_json_table_fits_its_schema(tmp_path: Path) -> None:
    from jsonschema import Draft202012Validator

    (json_format,) = (known for known in FORMATS if known.name == "JSON")
    stored = json.loads(written(json_format, small_table(), tmp_path).read_text(encoding="utf-8"))
    schema = json.loads((ROOT / "schemas" / "table.schema.json").read_text(encoding="utf-8"))
    assert list(Draft202012Validator(schema).iter_errors(stored)) == []
