"""How parameter sets fare with more workers and more sets, as ratios within one run.

Left out of the default run: ``python -m pytest tests/benchmarks -m speed``.
"""

from __future__ import annotations

import os
import subprocess
import sys
import time
from pathlib import Path

import pytest
from documents import HEAD, UNITS, text
from ensembles import GRID, OUTPUT, lay_out
from slopewell.ensemble import tabulate_sets

pytestmark = pytest.mark.speed
SPECIES = ("A", "B", "C")
PAIRS = [(a, b) for place, a in enumerate(SPECIES) for b in SPECIES[place:]]
MEMORY = """
import resource, sys
from slopewell.ensemble import tabulate_sets
tabulate_sets("pair.toml", "sets.csv", into=sys.argv[1], workers=int(sys.argv[2]))
for who in (resource.RUSAGE_SELF, resource.RUSAGE_CHILDREN):
    print(resource.getrusage(who).ru_maxrss)
"""


def mixture(rows: int) -> str:
    """A mixture of three species, each pair with a well of its own."""
    body = "".join(
        f'[[interaction]]\nbetween = ["{a}", "{b}"]\nform = "lennard-jones"\n'
        f"parameters = {{ epsilon = {0.01 + 0.001 * place}, sigma = {3.4 + 0.01 * place} }}\n"
        'cutoff = { at = 9, treatment = "switch", from = 7 }\n'
        for place, (a, b) in enumerate(PAIRS)
    )
    return f"{HEAD}{UNITS}[species.C]\n{body}{GRID.replace('21', str(rows))}{OUTPUT}"


def sets(count: int, titles: str = "A-A.epsilon,B-C.sigma") -> str:
    rows = [f"{0.01 + number / 1_000_000:.6f},{3.4 + number / 1_000_000:.6f}" for number in range(count)]
    return "\n".join([titles, *rows]) + "\n"


@pytest.mark.skipif((os.cpu_count() or 1) < 2, reason="needs two processors")
def test_two_workers_do_nearly_twice_as_much(tmp_path: Path) -> None:
    document, path = lay_out(tmp_path, sets(120), mixture(2001))
    times = []
    for workers in (1, 2):
        started = time.perf_counter()
        made = tabulate_sets(document, path, into=tmp_path / str(workers), workers=workers)
        times.append(time.perf_counter() - started)
        assert made.verdicts == {"pass": 120}
    assert times[0] / times[1] >= 1.8


@pytest.mark.parametrize("workers", [1, 2])
@pytest.mark.parametrize("into", ["out", "out.h5"])
def test_memory_does_not_grow_with_the_number_of_sets(workers: int, into: str, tmp_path: Path) -> None:
    # The caches of formulas and landmarks are full long before the smaller count.
    most = []
    for count in (300, 900):
        lay_out(tmp_path / str(count), sets(count, "A-A.epsilon,A-A.sigma"), text(grid=GRID, outputs=OUTPUT))
        done = subprocess.run(
            [sys.executable, "-c", MEMORY, into, str(workers)],
            cwd=tmp_path / str(count),
            capture_output=True,
            text=True,
            check=True,
        )
        most.append([int(line) for line in done.stdout.split()])
    for fewer, more in zip(*most, strict=True):
        assert more <= 1.1 * fewer
