"""One set of a document: its content hash, and what comes of it."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import h5py
import pytest
from documents import text
from ensembles import DOCUMENT, GRID, chosen, job
from slopewell.document import read_source
from slopewell.ensemble import job as module
from slopewell.ensemble.job import make_job, run_set

LAYOUT = """schema = "slopewell/layout/1"
title = "Two columns"
[[column]]
quantity = "separation"
[[column]]
quantity = "energy"
"""


def test_the_content_hash_tells_everything_apart_that_matters() -> None:
    base, one = job(), chosen("0.02")
    other = [
        base.content(chosen("0.020")),
        base.content(chosen("0.02", name="two")),
        replace(base, accept=("finite",)).content(one),
        replace(base, companions=(("a", b"1"),)).content(one),
        replace(base, companions=(("a", b"2"),)).content(one),
        job(document=DOCUMENT.replace("rows = 21", "rows = 22")).content(one),
        job("A-A.epsilon [meV]").content(one),
        job(one_table=False).content(one),
    ]
    assert len({base.content(one), *other}) == len(other) + 1
    assert base.content(chosen("0.02", line=7)) == base.content(one)


def test_a_set_gives_the_table_that_its_values_give(tmp_path: Path) -> None:
    done = run_set(job(), chosen("0.02"))
    assert done.settled
    assert done.record["files"] == ["tables.h5"]
    (tmp_path / "tables.h5").write_bytes(done.files["tables.h5"])
    with h5py.File(tmp_path / "tables.h5") as file:
        assert file["interactions/A-A/energy"].attrs["units"] == "kJ/mol"
        assert '"epsilon": 0.02' in file.attrs["document"]
    (subject,) = done.record["report"]["subjects"]
    assert subject["file"] == "one.json"
    assert subject["landmarks"][0]["well_depth"] == pytest.approx(0.02, rel=1e-12)


def test_a_set_that_cannot_be_used_says_why_and_writes_nothing() -> None:
    for cell, at, settled in (
        ("-1", "interaction[0].parameters.epsilon", True),
        ("x", "line 2, column A-A.epsilon", False),
        ("1e999999", "interaction[0].parameters.epsilon", True),
    ):
        done = run_set(job(), chosen(cell))
        (subject,) = done.record["report"]["subjects"]
        assert (subject["verdict"], subject["problems"][0]["at"]) == ("unusable", at)
        assert (done.files, done.settled) == ({}, settled)


def test_a_fault_of_the_program_is_the_fate_of_one_set(monkeypatch: pytest.MonkeyPatch) -> None:
    def broken(*_: object, **__: object) -> None:
        raise ZeroDivisionError("by nothing")

    monkeypatch.setattr(module, "tabulate", broken)
    done = run_set(job(), chosen("0.02"))
    assert not done.settled
    assert "ZeroDivisionError: by nothing" in done.record["report"]["subjects"][0]["problems"][0]["says"]


def test_a_job_carries_the_files_that_the_document_names(tmp_path: Path) -> None:
    home = tmp_path / "documents"
    home.mkdir()
    (tmp_path / "two.layout.toml").write_text(LAYOUT, encoding="utf-8")
    outputs = '[[output]]\nfile = "{a}/pair.dat"\nlayout = "../two.layout.toml"\n'
    (home / "pair.toml").write_text(text(grid=GRID, outputs=outputs), encoding="utf-8")
    made = make_job(read_source(home / "pair.toml"), job().columns, (), one_table=False)
    (tmp_path / "two.layout.toml").unlink()
    done = run_set(made, chosen("0.02"))
    assert list(done.files) == ["A/pair.dat"]
    assert done.files["A/pair.dat"].count(b"\n") == 21
