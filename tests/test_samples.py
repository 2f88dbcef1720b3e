"""The samples: the good one passes, each faulty one shows its check first."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from documentation import ROOT, registers
from slopewell.cli import main
from slopewell.reports import Report
from slopewell.workflow import check

SAMPLES = ROOT / "samples"
FAULTY = SAMPLES / "faulty"
TABLE = re.findall(r"\| `(\S+\.toml)` \| (.*?) \| (\d) \|", (FAULTY / "README.md").read_text(encoding="utf-8"))


def report_of(path: Path) -> Report:
    return check([path])


def test_the_membrane_passes_without_any_finding() -> None:
    (subject,) = report_of(SAMPLES / "membrane.toml").subjects
    assert subject.verdict == "pass"
    assert subject.findings == ()
    assert len(subject.landmarks) == 10


def test_the_membrane_says_that_it_is_invented() -> None:
    text = (SAMPLES / "membrane.toml").read_text(encoding="utf-8")
    assert "invented" in text.partition("\n")[0]
    assert re.search(r"^source .*[Ii]nvented", text, re.MULTILINE)


def test_the_ceramic_tabulates_every_pair_of_its_species(tmp_path: Path) -> None:
    assert main(["tabulate", str(SAMPLES / "ceramic.toml"), "--into", str(tmp_path)]) == 0
    assert (tmp_path / "ceramic.h5").is_file()
    assert len(list(tmp_path.glob("ceramic-*-*.csv"))) == 10


def test_the_scan_gives_back_the_parameters_that_it_was_made_with() -> None:
    (subject,) = report_of(SAMPLES / "scan" / "beads.toml").subjects
    (fit,) = next(pair for pair in subject.pairs if pair["interaction"] == "H-H")["fits"]
    made_with = {"D": 3.4, "a": 6.2, "r0": 0.56}
    for name, found in fit["parameters"].items():
        assert abs(found["value"] - made_with[name]) < 3 * found["standard_error"]


@pytest.mark.parametrize(
    "name", ["ceramic.toml", "scan/beads.toml", "scan/heads.csv", "scan/sterols.csv", "scan/head-sterol.csv"]
)
def test_a_sample_says_that_it_is_invented(name: str) -> None:
    text = (SAMPLES / name).read_text(encoding="utf-8")
    assert "nvented" in text.partition("\n")[0]


def test_every_faulty_sample_is_listed() -> None:
    assert {path.name for path in FAULTY.glob("*.toml")} == {name for name, _, _ in TABLE}


def test_every_check_of_a_potential_has_a_faulty_sample() -> None:
    shown = {first.strip("`") for _, first, _ in TABLE}
    assert {check.name for check in registers()["potential"]} <= shown


@pytest.mark.parametrize(("name", "first", "status"), TABLE, ids=[name for name, _, _ in TABLE])
def test_a_faulty_sample_shows_its_finding_first(
    name: str, first: str, status: str, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main(["check", str(FAULTY / name)]) == int(status)
    shown = capsys.readouterr().out
    found = re.search(r"^    (?:error|warning|note) +([a-z0-9-]+)", shown, re.MULTILINE)
    assert (f"`{found[1]}`" if found else "none: it can't be used") == first
