"""Reading a file to plain data: encodings, syntax errors with their place, the line of every key."""

from __future__ import annotations

import hashlib
import json
from decimal import Decimal
from pathlib import Path

import pytest
from documents import text
from slopewell.document import Source, read_source
from slopewell.document.source import LARGEST_FILE, key_lines
from slopewell.problems import Problem, UnusableInput


def source(folder: Path, content: bytes | str, name: str = "pair.toml") -> Source:
    path = folder / name
    path.write_bytes(content if isinstance(content, bytes) else content.encode())
    return read_source(path)


def refused(folder: Path, content: bytes | str, name: str = "pair.toml") -> Problem:
    with pytest.raises(UnusableInput) as caught:
        source(folder, content, name)
    assert caught.value.file == str(folder / name)
    (problem,) = caught.value.problems
    return problem


def test_decimals_are_kept_exactly_as_written(tmp_path: Path) -> None:
    assert source(tmp_path, "a = 0.1\nb = 1_000.5e-3\n").data == {"a": Decimal("0.1"), "b": Decimal("1.0005")}


def test_json_holds_the_same_structure_as_toml(tmp_path: Path) -> None:
    toml = source(tmp_path, 'a = 0.1\n[b]\nc = ["W"]\n')
    other = source(tmp_path, json.dumps({"a": 0.1, "b": {"c": ["W"]}}), "pair.json")
    assert other.data == toml.data


def test_json_is_recognised_without_its_ending(tmp_path: Path) -> None:
    assert source(tmp_path, ' {"a": 1}', "pair.txt").data == {"a": 1}


def test_the_checksum_is_that_of_the_bytes_and_the_text_that_of_the_file(tmp_path: Path) -> None:
    raw = b"a = 1\r\nb = 2\r\n"
    read = source(tmp_path, raw)
    assert read.sha256 == hashlib.sha256(raw).hexdigest()
    assert read.text == "a = 1\nb = 2\n"


def test_a_byte_order_mark_is_passed_over(tmp_path: Path) -> None:
    assert source(tmp_path, b"\xef\xbb\xbfa = 1\n").data == {"a": 1}


def test_invalid_utf8_is_refused_with_its_line(tmp_path: Path) -> None:
    problem = refused(tmp_path, b'title = "A"\nsource = "caf\xe9"\n')
    assert (problem.at, problem.says) == ("line 2", "Byte 25 (0xe9) is not valid UTF-8.")


def test_a_toml_error_is_shown_with_its_place(tmp_path: Path) -> None:
    problem = refused(tmp_path, "a = 1\nb = = 2\n")
    assert problem.at == "line 2, column 5"
    assert problem.excerpt == "b = = 2\n    ^"


def test_a_toml_that_ends_early_is_refused(tmp_path: Path) -> None:
    assert refused(tmp_path, 'a = "no end').at in ("end of the file", "line 1, column 12")


def test_a_json_error_is_shown_with_its_place(tmp_path: Path) -> None:
    problem = refused(tmp_path, '{"a": 1,\n "b": }', "pair.json")
    assert problem.at == "line 2, column 7"
    assert problem.says == "This is not valid JSON: expecting value."


def test_the_numbers_that_json_does_not_have_are_refused(tmp_path: Path) -> None:
    assert "NaN is not a number of JSON" in refused(tmp_path, '{"a": NaN}', "pair.json").says


@pytest.mark.parametrize("value", ["inf", "nan", "1e301", "-1e400", "1" + "0" * 301])
def test_a_number_that_no_table_can_hold_is_refused_with_its_place(value: str, tmp_path: Path) -> None:
    problem = refused(tmp_path, f"[grid]\nends = [1, {value}]\n")
    assert problem.at == "grid.ends[1]"
    assert "is not a finite number within ±1e300" in problem.says


@pytest.mark.parametrize(("name", "content"), [("deep.json", "[" * 100_000), ("deep.toml", "a = " + "[" * 100_000)])
def test_a_document_nested_without_end_is_refused(name: str, content: str, tmp_path: Path) -> None:
    assert "This is not valid" in refused(tmp_path, content, name).says


def test_a_document_that_is_a_list_is_refused(tmp_path: Path) -> None:
    assert refused(tmp_path, "[1, 2]", "pair.json").says == "The document is not a table of keys."


def test_a_missing_file_and_a_folder_are_refused(tmp_path: Path) -> None:
    for path in (tmp_path / "none.toml", tmp_path):
        with pytest.raises(UnusableInput, match="The file can't be read"):
            read_source(path)


def test_a_huge_file_is_refused_unread(tmp_path: Path) -> None:
    path = tmp_path / "huge.toml"
    with path.open("wb") as file:
        file.truncate(LARGEST_FILE + 1)
    with pytest.raises(UnusableInput, match="larger than 50 MB"):
        read_source(path)


def test_every_key_has_its_line() -> None:
    lines = key_lines(text())
    assert lines["schema"] == 1
    assert lines["units.length"] == 6
    assert lines["species.A.mass"] == 8
    assert lines["interaction[0]"] == 10
    assert lines["interaction[0].parameters"] == 13
    assert lines["grid.rows"] == 18


def test_keys_of_later_entries_and_dotted_keys_have_their_line() -> None:
    lines = key_lines('[[a]]\nx = 1\n[a.b]\ny = 1\n[[a]]\n"x" = 2\n[a.b]\nc.d = 3\n')
    assert (lines["a[0].x"], lines["a[0].b.y"]) == (2, 4)
    assert (lines["a[1].x"], lines["a[1].b.c.d"]) == (6, 8)


def test_a_key_without_a_line_takes_that_of_the_key_around_it(tmp_path: Path) -> None:
    read = source(tmp_path, "[[a]]\nb = { c = 1 }\n")
    assert read.line("a[0].b.c") == 2
    assert read.line("a[0].d") == 1
    assert read.line("z") is None
