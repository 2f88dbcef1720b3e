"""How long checking a foreign table takes, as a ratio to numpy.loadtxt of the same file within one run.

Left out of the default run: ``python -m pytest tests/benchmarks -m speed``.
"""

from __future__ import annotations

import time
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from slopewell.files.columns import read_columns
from slopewell.tables import Reading
from slopewell.workflow import check

pytestmark = pytest.mark.speed
NAMES = ("separation", "energy", "force")
READING = Reading(NAMES, "eV,angstrom")


def shortest(work: Callable[[], object], rounds: int = 4) -> float:
    """Return the least processor time of some rounds: other work on the machine does not count."""
    times = []
    for _ in range(rounds):
        started = time.process_time()
        work()
        times.append(time.process_time() - started)
    return min(times)


def written(path: Path, rows: int, sign: float) -> Path:
    r = np.linspace(2.6, 12.0, rows)
    x = (3.4 / r) ** 6
    np.savetxt(path, np.column_stack([r, 0.04 * (x * x - x), sign * 0.24 * (2 * x * x - x) / r]), fmt="%.12e")
    return path


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_checking_costs_at_most_three_times_reading(sign: float, tmp_path: Path) -> None:
    path = written(tmp_path / "old.dat", 100_000, sign)
    check([path], reading=READING)

    assert shortest(lambda: check([path], reading=READING)) <= 3 * shortest(lambda: np.loadtxt(path))


def test_reading_is_as_fast_as_loadtxt(tmp_path: Path) -> None:
    path = written(tmp_path / "old.dat", 200_000, 1.0)

    assert shortest(lambda: read_columns(path, NAMES)) <= 1.25 * shortest(lambda: np.loadtxt(path))
