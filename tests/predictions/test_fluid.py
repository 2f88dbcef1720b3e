"""Tail corrections against their closed form and a published set of configurations."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import pytest
from slopewell.predictions.curve import EnergyCurve
from slopewell.predictions.figures import GIGAPASCAL, Setting, System
from slopewell.predictions.fluid import look, tail, treatment_cost

from .conftest import CurveOf

CLOSED = [("T02-045", 0.8, 3.0), ("T02-046", 0.8, 4.0), ("T02-048", 0.7, 3.0), ("T02-052", 1.0, 4.0)]


@pytest.mark.parametrize(("entry", "density", "cutoff"), CLOSED)
def test_tail_of_lennard_jones(
    published: Callable[[str], Any], reduced: EnergyCurve, entry: str, density: float, cutoff: float
) -> None:
    # Allen and Tildesley, Computer Simulation of Liquids (2017), section 2.8: closed form.
    energy, pressure = tail(reduced, cutoff, density)
    stated = published(entry)
    assert energy == pytest.approx(stated.part("U/N"), rel=1e-11)
    assert pressure / GIGAPASCAL == pytest.approx(stated.part("P"), rel=1e-11)


def test_tail_of_a_published_configuration(published: Callable[[str], Any], reduced: EnergyCurve) -> None:
    # NIST Lennard-Jones reference calculations: 800 particles, L = 10 σ, cutoff 4 σ; digits from memory.
    energy, _ = tail(reduced, 4.0, 800 / 10**3)
    assert 800 * energy == pytest.approx(published("T02-054").number, rel=5e-5)


def test_a_table_that_ends_is_continued_by_its_last_slope(curve_of: CurveOf) -> None:
    ends = curve_of("-1/r^6", "0.5", "4", reach=4.0)
    system = System(("X",), {("X", "X"): ends})
    found = {figure.quantity: figure.value for figure in look(system, Setting(number_density=0.5))}
    endless, pressure = tail(curve_of("-1/r^6", "0.5", "4"), 4.0, 0.5)
    assert found["tail-energy"] == pytest.approx(endless, rel=1e-9)
    assert found["tail-pressure"] == pytest.approx(1e3 * pressure, rel=1e-9)


def test_a_plain_truncation_costs_its_tail(reduced: EnergyCurve, curve_of: CurveOf) -> None:
    cut = curve_of("4*(1/r^12 - 1/r^6)", "0.4", "3", reach=3.0)
    assert treatment_cost(cut, reduced, 0.8) == pytest.approx(tail(reduced, 3.0, 0.8)[0], rel=1e-9)
