"""The command line: exit status, what goes where, one clear message for each bad input, never a traceback."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from documentation import ROOT
from documents import SWITCH, text
from slopewell.cli import COMMANDS, main, parser
from slopewell.forms import catalogue
from slopewell.schemas import NAMES

OUTPUT = '[[output]]\nfile = "pair.h5"\n'
WARNING = 'cutoff = { at = 9, treatment = "shifted-force" }\n'
ERROR = 'cutoff = { at = 9, treatment = "truncate" }\n'
FAULTY = ROOT / "samples" / "faulty"


@pytest.fixture
def write(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    for name, cutoff in (("good", SWITCH), ("warning", WARNING), ("error", ERROR)):
        (tmp_path / f"{name}.toml").write_text(text(cutoff=cutoff, outputs=OUTPUT), encoding="utf-8")
    return tmp_path


@pytest.mark.usefixtures("write")
@pytest.mark.parametrize(
    ("arguments", "status"),
    [
        (["check", "good.toml"], 0),
        (["check", "warning.toml"], 0),
        (["check", "warning.toml", "--strict"], 1),
        (["check", "error.toml"], 1),
        (["check", "good.toml", "error.toml"], 1),
        (["check", "none.toml"], 2),
        (["check", "error.toml", "none.toml"], 2),
        (["tabulate", "good.toml"], 0),
        (["tabulate", "warning.toml"], 0),
        (["tabulate", "warning.toml", "--strict"], 1),
        (["tabulate", "error.toml"], 1),
        (["tabulate", "error.toml", "--accept", "cutoff-steps"], 0),
        (["tabulate", "error.toml", "--accept", "finite"], 1),
        (["tabulate", "good.toml", "--accept", "nothing"], 2),
        (["tabulate", "none.toml"], 2),
        (["forms"], 0),
        (["forms", "morse"], 0),
        (["forms", "mors"], 2),
        (["units", "1 eV", "kJ/mol"], 0),
        (["units", "1 eV", "nm"], 2),
        (["units", "1 eW", "eV"], 2),
        (["schema", "potential"], 0),
        (["schema", "potentials"], 2),
        (["--version"], 0),
        (["--help"], 0),
        ([], 2),
        (["chekc"], 2),
        (["check"], 2),
        (["check", "good.toml", "--nothing"], 2),
    ],
    ids=lambda part: " ".join(part) if isinstance(part, list) else str(part),
)
def test_the_exit_status_says_how_it_went(arguments: list[str], status: int) -> None:
    assert main(arguments) == status


@pytest.mark.usefixtures("write")
def test_json_is_all_that_stands_on_standard_output(capsys: pytest.CaptureFixture[str]) -> None:
    main(["check", "--json", "error.toml", "none.toml"])
    captured = capsys.readouterr()
    report = json.loads(captured.out)
    assert [subject["verdict"] for subject in report["subjects"]] == ["fail", "unusable"]
    assert captured.err == ""


@pytest.mark.usefixtures("write")
def test_what_can_not_be_tabulated_is_said_on_standard_error(capsys: pytest.CaptureFixture[str]) -> None:
    main(["tabulate", "none.toml"])
    captured = capsys.readouterr()
    assert captured.out == ""
    assert captured.err.startswith("none.toml  can't be used: 1 problem\n  The file can't be read")


def test_written_files_are_named(write: Path, capsys: pytest.CaptureFixture[str]) -> None:
    main(["tabulate", "good.toml", "--into", "tables"])
    assert capsys.readouterr().out.endswith("\nwrote tables/pair.h5\n")
    assert (write / "tables" / "pair.h5").exists()


def test_with_an_error_nothing_is_written_and_the_way_out_is_said(
    write: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    main(["tabulate", "error.toml"])
    assert capsys.readouterr().out.endswith(
        "Nothing was written. Mend the errors, or accept them by --accept cutoff-steps.\n"
    )
    assert not (write / "pair.h5").exists()


BAD = {
    "flipped-sign": (
        (FAULTY / "flipped-sign.toml").read_bytes(),
        r"force-matches-slope \[force-sign-flipped\]",
    ),
    "missing-switch-slope": (
        (FAULTY / "missing-switch-slope.toml").read_bytes(),
        r"force-matches-slope \[switch-slope-missing\]",
    ),
    "truncated-cutoff": ((FAULTY / "truncated-cutoff.toml").read_bytes(), "error   cutoff-steps"),
    "exp-6-core": ((FAULTY / "exp-6-core-on-grid.toml").read_bytes(), "error   repulsive-core"),
    "energy-plus-length": (
        (FAULTY / "energy-plus-length.toml").read_bytes(),
        r"\(line \d+\): This operator joins energy and length\.",
    ),
    "nan-parameter": ((FAULTY / "parameter-makes-nan.toml").read_bytes(), "error   finite"),
    "nan-literal": (
        text('form = "lennard-jones"\nparameters = { epsilon = nan, sigma = 3.4 }\n').encode(),
        r"interaction\[0\]\.parameters\.epsilon.*is not a finite number",
    ),
    "ten-megabyte-formula": (
        text('energy = "e' + "+e" * 5_000_000 + '"\nparameters = { e = "1 eV" }\n').encode(),
        "The formula has 10,000,001 characters; at most 100,000 are taken",
    ),
    "deep-formula": (
        text('energy = "' + "(" * 300 + "e" + ")" * 300 + '"\nparameters = { e = "1 eV" }\n').encode(),
        "Brackets are nested deeper than 200 levels",
    ),
    "invalid-utf-8": (text().encode().replace(b"Argon", b"Arg\xf6n"), "is not valid UTF-8"),
    "schema-error": (
        (FAULTY / "schema-error.toml").read_bytes(),
        r"treatment \(line \d+\): .*is not one of truncate",
    ),
    "python-in-a-formula": (
        text("energy = \"__import__('os').getcwd()\"\n").encode(),
        r"interaction\[0\]\.energy \(line \d+\)",
    ),
    "empty": (b"", 'The key "schema" is missing'),
    "binary": (bytes(range(256)), "is not valid UTF-8"),
}


@pytest.mark.parametrize(("content", "says"), BAD.values(), ids=BAD)
def test_bad_input_gets_one_clear_message(
    content: bytes, says: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "bad.toml").write_bytes(content)
    assert main(["check", str(tmp_path / "bad.toml")]) in (1, 2)
    shown = " ".join(capsys.readouterr().out.split())
    assert re.search(" ".join(says.split()), shown)
    assert "Traceback" not in shown
    assert len(shown) < 3000


@pytest.mark.parametrize("faulty", sorted(FAULTY.glob("*.toml")), ids=lambda path: path.stem)
def test_accepting_everything_never_ends_in_a_traceback(faulty: Path, tmp_path: Path) -> None:
    names = [line.split("`")[1] for line in (ROOT / "README.md").read_text().splitlines() if line.startswith("| `")]
    known = {
        "finite",
        "force-matches-slope",
        "smooth-inside",
        "cutoff-steps",
        "repulsive-core",
        "single-well",
    }
    known |= {"expected-landmarks", "first-row-energy", "table-error"}
    accepted = [part for name in names if name in known for part in ("--accept", name)]
    assert main(["tabulate", str(faulty), "--into", str(tmp_path), *accepted]) in (0, 2)


def test_forms_are_listed_and_shown(capsys: pytest.CaptureFixture[str]) -> None:
    main(["forms"])
    listed = capsys.readouterr().out
    assert [line.split()[0] for line in listed.splitlines()] == list(catalogue())
    main(["forms", "morse"])
    assert '[[interaction]]\nbetween = ["A", "B"]\nform = "morse"' in capsys.readouterr().out


def test_a_mistyped_name_gets_the_nearest_one(capsys: pytest.CaptureFixture[str]) -> None:
    main(["forms", "mors"])
    assert 'Did you mean "morse"?' in capsys.readouterr().err
    main(["schema", "tabel"])
    assert 'Did you mean "table"?' in capsys.readouterr().err


@pytest.mark.parametrize("name", NAMES)
def test_a_schema_is_printed_as_it_is_published(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    main(["schema", name])
    assert capsys.readouterr().out == (ROOT / "schemas" / f"{name}.schema.json").read_text(encoding="utf-8")


def test_help_names_every_command(capsys: pytest.CaptureFixture[str]) -> None:
    main(["--help"])
    shown = capsys.readouterr().out
    assert [name for name, _, _ in COMMANDS if name not in shown] == []


@pytest.mark.parametrize("name", [name for name, _, _ in COMMANDS])
def test_every_command_has_help(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([name, "--help"]) == 0
    assert capsys.readouterr().out.startswith(f"usage: slopewell {name}")


def test_a_parser_can_be_had_more_than_once() -> None:
    assert parser().parse_args(["forms"]).name is None
