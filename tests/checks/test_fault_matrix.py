"""Tables with known mistakes, a fixed sample: none is raised on a clean one, each mistake is named first."""

from __future__ import annotations

import sys
from collections import Counter
from pathlib import Path

import numpy as np
import pytest

sys.path.insert(0, str(Path(__file__).parent))

from fault_matrix import CURVES, FAULTS, Clean, Sample, cells, clean, clean_cells, named, verdict

GOAL = 0.98


def test_no_alarm_on_any_clean_table() -> None:
    alarms = [(found, cell) for cell in clean_cells(1, 7) if (found := verdict(cell)) not in ("none", None)]

    assert not alarms


@pytest.mark.parametrize("name", sorted({fault.name for fault in FAULTS}))
def test_mistakes_are_named_first(name: str) -> None:
    faults = tuple(fault for fault in FAULTS if fault.name == name)
    count = max(1, 10 // len(faults))
    found = Counter(verdict(cell) for cell in cells(count, 3, faults))
    found.pop(None, None)
    right = sum(number for given, number in found.items() if given and given.startswith(name))

    # A sample this small may hold one cell in which nothing but luck would name it.
    assert right >= min(GOAL * sum(found.values()), sum(found.values()) - 1), found


@pytest.mark.parametrize("curve", CURVES, ids=lambda curve: curve.name)
@pytest.mark.parametrize("stored", ["four decimals", "single precision"])
def test_no_alarm_on_clean_tables_stored_roughly(curve: Clean, stored: str) -> None:
    plain = clean(curve, 1000, "eV,angstrom")
    columns = (plain.separation, plain.energy, plain.force)
    if stored == "four decimals":
        rough = Sample(*(np.round(column, decimals) for column, decimals in zip(columns, (6, 4, 4), strict=True)))
    else:
        rough = Sample(*(column.astype(np.float32).astype(np.float64) for column in columns))

    assert named(rough, "eV,angstrom")[0] == "none"
