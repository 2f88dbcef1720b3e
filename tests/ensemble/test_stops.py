"""Runs that are stopped leave whole sets only, and the next run makes what an undisturbed one makes."""

from __future__ import annotations

import os
import random
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest
from ensembles import depths, files, lay_out

COUNT = 40
LONG = 120
"""Seconds after which a process that should end has hung."""


def start(folder: Path, into: str, workers: int) -> subprocess.Popen[str]:
    given = f"tabulate pair.toml --parameters sets.csv --into {into} --workers {workers}"
    return subprocess.Popen(
        [sys.executable, "-m", "slopewell", *given.split()],
        cwd=folder,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
        start_new_session=True,
    )


def finished(folder: Path) -> int:
    return sum(not path.parent.name.startswith(".") for path in folder.rglob("set.json"))


@pytest.mark.parametrize(("into", "workers"), [("out", 1), ("out/all.h5", 2)])
def test_killed_at_random_moments_and_restarted_it_makes_the_same_bytes(
    into: str, workers: int, tmp_path: Path
) -> None:
    lay_out(tmp_path, depths(COUNT))
    process = start(tmp_path, "un" + into, 1)
    assert process.communicate(timeout=LONG)[0].startswith(f"{COUNT} sets: {COUNT} pass\n")
    chance = random.Random(workers)
    for _ in range(3):
        process = start(tmp_path, into, workers)
        # A moment at random after something new is done, so that every kill falls into the work.
        before, enough = finished(tmp_path / "out"), time.monotonic() + LONG
        while process.poll() is None and finished(tmp_path / "out") <= before and time.monotonic() < enough:
            time.sleep(0.01)
        time.sleep(chance.uniform(0, 0.3))
        process.kill()
        # The pipes close when the last of its processes is gone.
        process.communicate(timeout=LONG)
    last = start(tmp_path, into, workers)
    assert f"{COUNT} sets: {COUNT} pass\n" in last.communicate(timeout=LONG)[0]
    assert files(tmp_path / "out") == files(tmp_path / "unout")


@pytest.mark.parametrize("workers", [1, 2])
def test_an_interrupt_keeps_what_is_done_and_leaves_no_process(workers: int, tmp_path: Path) -> None:
    lay_out(tmp_path, depths(400))
    process = start(tmp_path, "out", workers)
    enough = time.monotonic() + LONG
    while finished(tmp_path / "out") < 3 and process.poll() is None and time.monotonic() < enough:
        time.sleep(0.01)
    os.killpg(process.pid, signal.SIGINT)
    printed, errors = process.communicate(timeout=LONG)
    assert (process.returncode, printed) == (130, "")
    assert errors == "Sets that are finished are kept; the same command goes on from there.\nstopped\n"
    assert 3 <= finished(tmp_path / "out") < 400
    assert not list((tmp_path / "out").rglob(".*"))
