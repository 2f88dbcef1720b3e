"""Faults against the schema, said in plain words with their place."""

from __future__ import annotations

from pathlib import Path

import pytest
from documents import GRID, HEAD, LENNARD_JONES, SWITCH, UNITS, problems, text
from slopewell.document.validate import key_path

KINDS = '"form", "energy", "points", "term" or "segment"'
ONE_OF = ("interaction[0]", f"One of {KINDS} is missing.")

CASES = {
    "missing-title": (
        text(head=HEAD.replace('title = "Argon-like pair for tests"\n', "")),
        [("title", 'The key "title" is missing in the document.')],
    ),
    "unknown-key": (
        text(head=HEAD + 'titel = "A"\n'),
        [("titel", 'There is no key "titel" here.')],
    ),
    "other-schema": (
        text(head=HEAD.replace("potential/1", "potential/9")),
        [("schema", "Expected 'slopewell/potential/1', found \"slopewell/potential/9\".")],
    ),
    "unknown-purpose": (
        text(head=HEAD + 'purpose = "fun"\n'),
        [("purpose", '"fun" is not one of sampling, dynamics, lattice-dynamics.')],
    ),
    "temperature-as-number": (
        text(head=HEAD.replace('"100 K"', "100")),
        [("temperature", "Expected a text, found 100.")],
    ),
    "neither-form-nor-energy": (text("parameters = { a = 1 }\n"), [ONE_OF]),
    "form-and-energy": (
        text(LENNARD_JONES + 'energy = "1/r"\n'),
        [("interaction[0].energy", f"Only one of {KINDS} may be given.")],
    ),
    "three-species": (
        text(between='["A", "A", "B"]'),
        [("interaction[0].between", "There are too many entries: at most 2 expected.")],
    ),
    "switch-without-start": (
        text(cutoff='cutoff = { at = 9, treatment = "switch" }\n'),
        [("interaction[0].cutoff.from", 'The key "from" is missing in interaction[0].cutoff.')],
    ),
    "start-without-switch": (
        text(cutoff='cutoff = { at = 9, treatment = "truncate", from = 7 }\n'),
        [("interaction[0].cutoff.from", '"from" has no meaning here.')],
    ),
    "continuity-out-of-range": (
        text(cutoff='cutoff = { at = 9, treatment = "switch", from = 7, continuity = 4 }\n'),
        [("interaction[0].cutoff.continuity", "4 is not one of 1, 2, 3.")],
    ),
    "too-many-rows": (
        text(grid=GRID.replace("101", "10_000_001")),
        [("grid.rows", "10000001 is too large: at most 10,000,000 is taken.")],
    ),
    "one-row": (
        text(grid=GRID.replace("101", "1")),
        [("grid.rows", "1 is too small: it must be at least 2.")],
    ),
    "half-a-row": (
        text(grid=GRID.replace("101", "10.5")),
        [("grid.rows", "Expected a whole number, found 10.5.")],
    ),
    "neither-rows-nor-tolerance": (
        text(grid=GRID.replace("rows = 101\n", "")),
        [("grid", 'One of "rows" or "tolerance" is missing.')],
    ),
    "no-interaction": (
        HEAD + UNITS + GRID,
        [("interaction", 'The key "interaction" is missing in the document.')],
    ),
    "spline-without-points": (
        text(LENNARD_JONES + 'spline = "cubic"\n'),
        [("interaction[0].spline", '"spline" has no meaning without "points".')],
    ),
    "expectation-of-nothing": (
        text(cutoff=SWITCH + "expect = { depth = { value = 1, within = 1 } }\n"),
        [("interaction[0].expect.depth", 'There is no key "depth" here.')],
    ),
    "expectation-without-width": (
        text(cutoff=SWITCH + "expect = { well-depth = { value = 1, within = 0 } }\n"),
        [("interaction[0].expect.well-depth.within", "0 is too small: it must be more than 0.")],
    ),
    "species-with-a-path": (
        text(units=UNITS.replace("[species.B]", '[species."a/b"]')),
        [("species", '"a/b" is not a name that is taken here.')],
    ),
}


@pytest.mark.parametrize(("document", "said"), CASES.values(), ids=CASES)
def test_a_fault_against_the_schema_is_said_in_plain_words(
    document: str, said: list[tuple[str, str]], tmp_path: Path
) -> None:
    assert problems(document, tmp_path) == said


def test_all_faults_against_the_schema_are_said_in_the_order_of_the_file(tmp_path: Path) -> None:
    document = text(head=HEAD + 'purpose = "fun"\n', grid=GRID.replace("101", "1"), cutoff="cut = 1\n")
    assert [at for at, _ in problems(document, tmp_path)] == ["purpose", "interaction[0].cut", "grid.rows"]


def test_key_paths_are_written_as_in_the_document() -> None:
    assert key_path(["interaction", 1, "cutoff", "from"]) == "interaction[1].cutoff.from"
