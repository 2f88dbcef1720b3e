"""Files of parameter sets are read row by row, and refused with the place of what is wrong."""

from __future__ import annotations

from pathlib import Path

import pytest
from ensembles import DOCUMENT
from slopewell.document import parse_source
from slopewell.ensemble.sets import ParameterSet, check_names, read_sets
from slopewell.problems import UnusableInput

DATA = parse_source(DOCUMENT, "pair.toml", "").data


def read(folder: Path, text: str) -> list[ParameterSet]:
    path = folder / "sets.csv"
    path.write_text(text, encoding="utf-8")
    return list(check_names(read_sets(path, DATA)))


def test_rows_keep_their_line_and_their_text(tmp_path: Path) -> None:
    sets = read(tmp_path, '\ufeffA-A.epsilon,set,A-A.sigma\r\n"0.010",a,3.40\r\n\r\n 2e-2 ,b.2,3\r\n')
    assert sets == [ParameterSet("a", 2, ("0.010", "3.40")), ParameterSet("b.2", 4, (" 2e-2 ", "3"))]


def test_sets_without_names_are_numbered(tmp_path: Path) -> None:
    assert [one.name for one in read(tmp_path, "A-A.sigma\n3.4\n3.5\n")] == ["000001", "000002"]


@pytest.mark.parametrize(
    ("text", "at", "says"),
    [
        ("", "line 1", "The header names no parameter."),
        ("set\na\n", "line 1", "The header names no parameter."),
        ("set,A-A.x\n", "line 1, column 2", 'The document states no value "A-A.x".'),
        ("A-A.sigma,temperature [nm]\n", "line 1, column 2", "[nm] can't be the unit of temperature"),
        ("A-A.sigma,A-A.sigma [nm]\n", "line 1", "Two columns stand for one value."),
        ("set,A-A.sigma\na,3\nA,4\n", "line 3", 'The set "A" stands on line 2 already.'),
        ("set,A-A.sigma\n../a,3\n", "line 2", '"../a" can\'t be the name of a set.'),
        ("set,A-A.sigma\n,3\n", "line 2", '"" can\'t be the name of a set.'),
        ('A-A.sigma\n3\n"4\n', "line 3", "This is not valid CSV"),
    ],
)
def test_what_is_wrong_with_a_file_is_said_with_its_place(text: str, at: str, says: str, tmp_path: Path) -> None:
    with pytest.raises(UnusableInput) as error:
        read(tmp_path, text)
    assert error.value.problems[0].at == at
    assert error.value.problems[0].says.startswith(says)


def test_a_file_that_cannot_be_read_is_refused(tmp_path: Path) -> None:
    with pytest.raises(UnusableInput, match="can't be read"):
        read_sets(tmp_path / "none.csv", DATA)
    (tmp_path / "latin.csv").write_bytes(b"A-A.sigma\n\xe9\n")
    with pytest.raises(UnusableInput, match="not UTF-8"):
        list(read_sets(tmp_path / "latin.csv", DATA))
