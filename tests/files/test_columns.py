"""Rows of columns in any text: what is taken, and what is refused at which place."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from slopewell.files.columns import blocks, check_names, read_columns
from slopewell.problems import UnusableInput

NAMES = ("separation", "energy", "force")
EXPECTED = [[1.0, 2.0], [1e-3, 30.0], [3.0, -4.0]]


def read(
    folder: Path, text: str | bytes, names: tuple[str, ...] = NAMES, block: int | None = None
) -> list[list[float]]:
    path = folder / "old.dat"
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return [column.tolist() for column in read_columns(path, names, block).values()]


@pytest.mark.parametrize(
    "text",
    [
        "1.0 1e-3 3\n2.0 30 -4\n",
        "# title\nr U F\n1.0 1e-3 3\n2.0 30 -4\n",
        "! title\n; more\n// more\n@ more\n1.0 1e-3 3\n2.0 30 -4\n",
        "1.0\t1e-3\t3\n2.0\t30\t-4",
        "1.0,1e-3,3\n2.0,30,-4\n",
        "1.0, 1e-3, 3\n2.0, 30, -4\n",
        "r;U;F\n1.0;1e-3;3;\n2.0;30;-4;\n",
        "1.0D0 1.0D-03 3.d0\n2.0 3.0D+01 -4\n",
        "1.0 1.0-003 3\n2.0 3.0+001 -4\n",
        b"\xef\xbb\xbf1.0 1e-3 3\r\n2.0 30 -4\r\n",
        "1.0 1e-3 3 # first\n2.0 30 -4 ! last\n",
        "1.0 1e-3 3\n# between\n2.0 30 -4\n",
        "2\n1.0 1e-3 3\n2.0 30 -4\n# end\n",
    ],
)
def test_rows_are_read(text: str | bytes, tmp_path: Path) -> None:
    assert read(tmp_path, text) == EXPECTED


@pytest.mark.parametrize(
    "text",
    [
        "W-W\nN 2\n\n1 2 3\n2 3 4\n\nW-P\nN 2\n\n1 2 5\n2 3 6\n",
        "# W-W\n1 2 3\n2 3 4\n# W-P\n1 2 5\n2 3 6\n",
        "1 2 3\n2 3 4\n\n1 2 5\n2 3 6\n",
    ],
)
def test_one_of_several_blocks_is_chosen(text: str, tmp_path: Path) -> None:
    with pytest.raises(UnusableInput, match="2 blocks") as error:
        read(tmp_path, text)

    assert "Choose one by --block: 1: lines" in error.value.problems[0].remedy
    assert read(tmp_path, text, block=2)[2] == [5.0, 6.0]


@pytest.mark.parametrize(
    ("text", "at", "says"),
    [
        ("1 2 3\n2 ***** 4\n", "line 2, column 3", "*****"),
        ("# head\n1 2 3\n2 4\n3 4 5\n", "line 3, column 1", "2 columns; 3 are named"),
        ("1 ***** 3\n2 3 4\n", "line 1, column 3", "*****"),
        ("1 2 3\n2 3 4x\n", "line 2, column 5", "4x"),
    ],
)
def test_what_cannot_be_read_is_shown_with_its_place(text: str, at: str, says: str, tmp_path: Path) -> None:
    with pytest.raises(UnusableInput) as error:
        read(tmp_path, text)
    (problem,) = error.value.problems

    assert problem.at == at
    assert says in problem.says


def test_a_file_without_rows_is_refused(tmp_path: Path) -> None:
    with pytest.raises(UnusableInput, match="no rows of numbers"):
        read(tmp_path, "hello\n")


@pytest.mark.parametrize(
    ("names", "says"),
    [
        (("separation", "energi"), '"energi" is no column'),
        (("row", "energy"), "No column holds the separation"),
        (("separation", "row"), "No column holds energy or force"),
        (("separation", "energy", "energy"), '"energy" stands twice'),
    ],
)
def test_names_of_columns_are_checked(names: tuple[str, ...], says: str) -> None:
    with pytest.raises(UnusableInput, match=says):
        check_names(names)


def test_blank_lines_after_every_row_part_nothing() -> None:
    lines = ["1 2 3", "", "2 3 4", "", "3 4 5", ""]

    assert [(block.first, block.last) for block in blocks(lines, 3, 0)] == [(1, 5)]


@given(st.lists(st.tuples(*[st.floats(-1e300, 1e300)] * 3), min_size=1, max_size=20))
def test_every_number_reads_back(rows: list[tuple[float, float, float]]) -> None:
    import tempfile

    with tempfile.TemporaryDirectory() as folder:
        text = "".join(f"{a!r} {b!r} {c!r}\n" for a, b, c in rows)
        columns = read(Path(folder), text)

    assert np.array_equal(np.array(columns).T, np.array(rows))
