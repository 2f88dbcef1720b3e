"""Whoever does the work, every set is done once, and a process that dies costs one set at most."""

from __future__ import annotations

import os
import signal
from collections.abc import Iterator

import pytest
from ensembles import chosen, job
from slopewell.ensemble import crews
from slopewell.ensemble.job import Job, Outcome, outcome
from slopewell.ensemble.sets import ParameterSet
from slopewell.problems import UnusableInput

JOB = job()
DEADLY = "13"


def quick(job: Job, one: ParameterSet) -> Outcome:
    """Stand in for the work; the deadly set takes its process with it."""
    if one.cells == (DEADLY,):
        os.kill(os.getpid(), signal.SIGKILL)
    return outcome(job, one, {"subjects": []}, {})


def sets(count: int) -> Iterator[ParameterSet]:
    return (chosen(str(number), name=f"set-{number}") for number in range(count))


def test_processes_do_every_set_once_and_ask_for_few_at_a_time() -> None:
    asked: list[str] = []

    def watched() -> Iterator[ParameterSet]:
        for one in sets(30):
            asked.append(one.name)
            yield one

    done = []
    for result in crews.on_processes(JOB, watched(), 2):
        done.append(result.name)
        assert len(asked) - len(done) <= 2 * crews.AHEAD
    assert sorted(done) == sorted(one.name for one in sets(30))


def test_a_set_that_kills_its_process_stops_no_other(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(crews, "run_set", quick)
    done = list(crews.on_processes(JOB, sets(30), 2))
    assert sorted(result.name for result in done) == sorted(one.name for one in sets(30))
    assert [result.name for result in done if not result.settled] == [f"set-{DEADLY}"]


@pytest.mark.parametrize(
    ("address", "says"),
    [("nowhere", "is no address"), ("tcp://127.0.0.1:9", "No Dask scheduler answers")],
)
def test_a_scheduler_that_is_not_there_is_said(address: str, says: str, monkeypatch: pytest.MonkeyPatch) -> None:
    pytest.importorskip("distributed")
    monkeypatch.setattr(crews, "PATIENCE", "0.2s")
    with pytest.raises(UnusableInput, match=says):
        list(crews.on_cluster(JOB, sets(1), address))
