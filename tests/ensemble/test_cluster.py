"""A real cluster on this machine loses a worker in the middle, and every set is still done exactly once."""

from __future__ import annotations

import csv
import os
import signal
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import Any

import pytest
from ensembles import depths, files, lay_out
from slopewell.ensemble import tabulate_sets

distributed = pytest.importorskip("distributed")
COUNT = 24


@pytest.mark.filterwarnings("ignore::ResourceWarning", "ignore::pytest.PytestUnraisableExceptionWarning")
def test_every_set_is_done_once_although_a_worker_is_killed(tmp_path: Path) -> None:
    document, sets = lay_out(tmp_path, depths(COUNT))
    done: list[str] = []

    def killing(items: Iterable[Any], label: str) -> Iterator[Any]:
        for item in items:
            if len(done) == COUNT // 4:
                os.kill(next(iter(cluster.workers.values())).pid, signal.SIGKILL)
            done.append(item.name)
            yield item

    with distributed.LocalCluster(2, threads_per_worker=1, dashboard_address=None) as cluster:
        address = cluster.scheduler_address
        made = tabulate_sets(document, sets, into=tmp_path / "far", scheduler=address, track=killing)
    assert made.verdicts == {"pass": COUNT}
    assert sorted(done) == sorted(f"draw-{number}" for number in range(COUNT))
    with made.summary.open(encoding="utf-8", newline="") as file:
        assert [row["set"] for row in csv.DictReader(file)] == [f"draw-{number}" for number in range(COUNT)]
    tabulate_sets(document, sets, into=tmp_path / "near", workers=1)
    assert files(tmp_path / "far") == files(tmp_path / "near")
