"""The register: curve and table side by side, and the observable that the developers' page adds."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import replace
from typing import Any

import numpy as np
import pytest
from documentation import ROOT
from slopewell.predictions.curve import EnergyCurve, from_rows
from slopewell.predictions.figures import Setting, System
from slopewell.predictions.register import OBSERVABLES, compare
from slopewell.table import Rows
from slopewell.units import unit_system


def test_every_observable_is_registered_once() -> None:
    names = [name for name, _ in OBSERVABLES]
    assert len(set(names)) == len(names)


def test_what_only_one_side_has_stands_alone(reduced: EnergyCurve) -> None:
    curve = System(("X",), {("X", "X"): reduced})
    table = System(("X",), {("X", "X"): replace(reduced, reach=2.5)}, {"X": 40.0})
    found = {
        (one.figure.quantity, one.curve is None, one.table is None)
        for one in compare(curve, table, Setting(structures=("fcc",)))
    }
    assert ("lattice-constant", False, False) in found
    assert ("einstein-frequency", True, False) in found


def test_rows_in_other_units_give_the_same_curve(reduced: EnergyCurve) -> None:
    r = np.linspace(0.8, 4.0, 3001)
    energy, slope = reduced.derivatives(r, 1)
    units = unit_system("meV", "nm")
    rows = Rows("X-X", r / 10, energy * 1e3, -slope * 1e4, interpolation="cubic-hermite")
    read = from_rows(rows, units)
    at = np.linspace(0.9, 3.9, 777)
    assert read.energy(at) == pytest.approx(reduced.energy(at), abs=2e-7)
    assert read.force(at) == pytest.approx(reduced.force(at), abs=2e-4)
    assert read.energy(np.array([4.1])) == 0.0
    assert read.well is not None
    assert read.well.depth == pytest.approx(1.0, abs=1e-8)


def test_below_the_first_row_a_wall_goes_on(reduced: EnergyCurve) -> None:
    high = replace(reduced, start=0.8)
    energy, slope = reduced.derivatives(np.array([0.8]), 1)[:, 0]
    below = high.all(np.array([0.8 - 1e-9]), 1)[:, 0]
    assert below == pytest.approx((energy, slope), rel=1e-6)
    attracts = replace(reduced, start=1.2)
    assert np.isinf(attracts.energy(np.array([1.1])))[0]


def test_the_observable_of_the_developers_page(published: Callable[[str], Any], reduced: EnergyCurve) -> None:
    text = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
    section = text.partition("## To add a prediction")[2]
    (block,) = re.findall(r"```python\n(.*?)```", section.partition("\n## ")[0], re.DOTALL)
    names: dict[str, Any] = {}
    exec(block.replace("from .figures", "from slopewell.predictions.figures"), names)
    (figure,) = names["look"](System(("X",), {("X", "X"): reduced}), Setting())
    # Closed form (26/7)^(1/6), on a grid of some 10⁻³.
    assert figure.value == pytest.approx(published("T02-004").number, abs=2e-3)
