"""The verb ``sheet`` and what ``check`` draws and writes, from the command line."""

from __future__ import annotations

import xml.etree.ElementTree as ET
from pathlib import Path

import pytest
from documentation import ROOT
from slopewell.cli import main
from slopewell.problems import UnusableInput
from slopewell.reports.page import Sheet
from slopewell.sheets import drawings_of, sheet, sheet_of

ARGON_LIKE = """schema = "slopewell/potential/1"
title = "Argon-like pair"
temperature = "100 K"
[units]
energy = "eV"
length = "angstrom"
[species.A]
[[interaction]]
between = ["A", "A"]
form = "lennard-jones"
parameters = { epsilon = 0.01, sigma = 3.4 }
cutoff = { at = 9, treatment = "switch", from = 7 }
[grid]
from = 2.5
to = 9
rows = 101
[[output]]
file = "pair.json"
"""


@pytest.fixture
def pair(tmp_path: Path) -> Path:
    path = tmp_path / "pair.toml"
    path.write_text(ARGON_LIKE, encoding="utf-8")
    return path


@pytest.fixture
def table(pair: Path) -> Path:
    assert main(["tabulate", str(pair)]) == 0
    return pair.with_suffix(".json")


@pytest.mark.parametrize(
    ("ending", "start"),
    [(".html", b"<!DOCTYPE html>"), (".png", b"\x89PNG"), (".svg", b"<?xml"), (".pdf", b"%PDF")],
)
def test_each_ending_has_its_format(ending: str, start: bytes, pair: Path) -> None:
    out = pair.with_name(f"out{ending}")
    assert main(["sheet", str(pair), "-o", str(out)]) == 0
    assert out.read_bytes().startswith(start)


def test_a_page_lies_beside_its_file(pair: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["sheet", str(pair)]) == 0
    assert capsys.readouterr().out == f"wrote {pair.with_suffix('.html')}\n"


def test_the_same_document_gives_the_same_page(pair: Path) -> None:
    first, _ = sheet([pair], pair.with_name("first.html"))
    second, _ = sheet([pair], pair.with_name("second.html"))
    assert first.read_bytes() == second.read_bytes()


def test_a_table_is_checked_and_knows_its_document(table: Path) -> None:
    shown = sheet_of(table)
    assert shown.record["verdict"] in ("pass", "warn")
    assert shown.drawings[0].cutoff == pytest.approx(9.0)
    assert shown.drawings[0].landmarks["well_depth"] == pytest.approx(0.01, rel=1e-3)


def test_a_document_and_its_table_over_each_other(pair: Path, table: Path) -> None:
    path, shown = sheet([pair, table])
    assert path.name == "pair-and-pair.html"
    assert shown.drawings[0].other.energy == pytest.approx(shown.drawings[0].energy, abs=1e-4)
    assert f"This is about pair.toml; {table.name} is only drawn over it." in path.read_text(encoding="utf-8")


def test_one_interaction_of_many(tmp_path: Path) -> None:
    path = tmp_path / "two.toml"
    second = ARGON_LIKE.partition("[[interaction]]")[2].partition("[grid]")[0].replace('"A", "A"', '"A", "B"')
    path.write_text(f"{ARGON_LIKE}[species.B]\n[[interaction]]{second}", encoding="utf-8")
    _, shown = sheet([path], only=["A-B"])
    assert [drawing.name for drawing in shown.drawings] == ["A-B"]


def test_drawings_of_a_document_checked_before(pair: Path) -> None:
    shown: Sheet = sheet_of(pair)
    (again,) = drawings_of(pair, shown.record)
    assert again.marks == shown.drawings[0].marks


@pytest.mark.parametrize(
    ("arguments", "says"),
    [
        (["pair.toml", "-o", "out.docx"], "names neither a page nor a picture"),
        (["pair.toml", "pair.toml", "pair.toml"], "one file, or two"),
        (["pair.toml", "--interaction", "A-B"], 'no interaction "A-B"'),
        (["none.h5"], "can't be read"),
        (["pair.toml", "-o", "pair.toml/out.html"], "can't be written"),
    ],
)
def test_what_can_not_be_done_is_said(
    arguments: list[str],
    says: str,
    pair: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    monkeypatch.chdir(pair.parent)
    assert main(["sheet", *arguments]) == 2
    assert says in " ".join(capsys.readouterr().err.split())


def test_files_without_a_common_pair_are_not_compared(pair: Path) -> None:
    other = pair.with_name("other.toml")
    other.write_text(ARGON_LIKE.replace('"A", "A"', '"B", "B"').replace("species.A", "species.B"), encoding="utf-8")
    # Two files of one interaction each are compared whatever it is called; here the second has two.
    with other.open("a", encoding="utf-8") as file:
        file.write('[species.C]\n[[interaction]]\nbetween = ["B", "C"]\nform = "lennard-jones"\n')
        file.write("parameters = { epsilon = 0.01, sigma = 3.4 }\n")
    with pytest.raises(UnusableInput, match="no interaction in common"):
        sheet([pair, other])


def test_a_failing_potential_gets_its_page_and_exit_status_1(tmp_path: Path) -> None:
    faulty = ROOT / "samples" / "faulty" / "truncated-cutoff.toml"
    out = tmp_path / "faulty.html"
    assert main(["sheet", str(faulty), "-o", str(out)]) == 1
    assert out.exists()


def test_check_draws_a_plain_curve_into_a_pipe(pair: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", str(pair), "--curve"]) == 0
    said = capsys.readouterr().out
    assert "1 zero crossing 3.4 angstrom" in said
    assert "\x1b" not in said


def test_check_writes_junit(pair: Path) -> None:
    out = pair.with_suffix(".xml")
    assert main(["check", str(pair), "--junit", str(out)]) == 0
    assert ET.parse(out).getroot().get("failures") == "0"


def test_every_command_is_completed(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["completion", "bash"]) == 0
    said = capsys.readouterr().out
    for name in ("check", "tabulate", "sheet", "completion"):
        assert f"    {name}) words=" in said


def test_a_table_from_elsewhere_is_described(tmp_path: Path) -> None:
    path = tmp_path / "old.dat"
    path.write_text("".join(f"{r} {1 / r}\n" for r in range(1, 30)), encoding="utf-8")
    arguments = ["sheet", str(path), "--columns", "separation,energy", "--units", "eV,bohr"]
    main(arguments)
    assert "<h1>old.dat</h1>" in path.with_suffix(".html").read_text(encoding="utf-8")
