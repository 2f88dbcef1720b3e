"""A set is stored whole, and recognised by its content."""

from __future__ import annotations

import os
from pathlib import Path

import pytest
from ensembles import chosen, files, job
from slopewell.ensemble.job import Outcome, outcome
from slopewell.ensemble.store import Store
from slopewell.problems import UnusableInput

JOB = job()
REPORT = {"subjects": [{"file": "one.json", "verdict": "pass"}]}


def made(cell: str, **held: bytes) -> Outcome:
    return outcome(JOB, chosen(cell), REPORT, held)


def test_a_stored_set_is_finished_for_its_own_content_only(tmp_path: Path) -> None:
    store = Store(tmp_path / "sets")
    assert not store.finished("one", JOB.content(chosen("1")))
    store.put(made("1", table=b"rows"))
    assert store.finished("one", JOB.content(chosen("1")))
    assert not store.finished("one", JOB.content(chosen("2")))
    (tmp_path / "sets" / "one" / "table").unlink()
    assert not store.finished("one", JOB.content(chosen("1")))


def test_a_newer_set_takes_the_place_of_an_older_one(tmp_path: Path) -> None:
    store = Store(tmp_path)
    store.put(made("1", old=b"1"))
    store.put(made("2", new=b"2"))
    assert sorted(files(tmp_path)) == ["one/new", "one/set.json"]


def test_a_set_that_did_not_settle_is_never_finished(tmp_path: Path) -> None:
    store = Store(tmp_path)
    store.put(outcome(JOB, chosen("1"), REPORT, {}, settled=False))
    assert store.record("one") is not None
    assert not store.finished("one", JOB.content(chosen("1")))


def test_an_interrupt_leaves_nothing_half_written(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def interrupted(*_: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(os, "replace", interrupted)
    with pytest.raises(KeyboardInterrupt):
        Store(tmp_path).put(made("1", table=b"rows"))
    assert list(tmp_path.iterdir()) == []


def test_what_a_kill_leaves_is_swept_away(tmp_path: Path) -> None:
    store = Store(tmp_path)
    store.put(made("1", table=b"rows"))
    for left in (".new-two.part", ".old-one.part"):
        (tmp_path / left).mkdir()
        (tmp_path / left / "table").write_bytes(b"ro")
    store.sweep()
    assert [path.name for path in tmp_path.iterdir()] == ["one"]


def test_a_place_that_cannot_be_written_is_said(tmp_path: Path) -> None:
    (tmp_path / "sets").write_text("a file", encoding="utf-8")
    with pytest.raises(UnusableInput, match="can't be written"):
        Store(tmp_path / "sets").put(made("1"))
