"""What makes energy drift: planted faults of a table are found, by cause and in size."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
import pytest
from slopewell.predictions.curve import EnergyCurve
from slopewell.predictions.drift import CAUSES, Course, Levels, follow, settle, slope
from slopewell.predictions.dynamics import Particles, start
from slopewell.predictions.faults import take_apart
from slopewell.table import Rows
from slopewell.units import unit_system

from .conftest import CurveOf

THERMAL = 0.01
"""k_B·T in eV: 116 K."""
STEP = 8.0
STEPS = 160
SMOOTH = "4*e*((s/r)^12 - (s/r)^6)*((8 - r)/5)^4"
CUT = "4*e*((s/r)^12 - (s/r)^6)"


@dataclass(frozen=True)
class Bench:
    """A curve with particles that have settled under it."""

    curve: EnergyCurve
    particles: Particles

    def rows(self, count: int, rule: str) -> Rows:
        r = np.linspace(self.curve.start, self.curve.end, count)
        energy, slope = self.curve.derivatives(r, 1)
        return Rows("A-A", r, energy, 0.0 - slope, spacing="separation", interpolation=rule)

    def course(self, rows: Rows, *, known: bool = True, steps: int = STEPS) -> Course:
        parts = take_apart(rows, unit_system("eV", "angstrom"), self.curve if known else None, "", THERMAL)
        levels = Levels(
            {(0, 0): parts.table},
            {(0, 0): parts.rounded} if parts.rounded else None,
            {(0, 0): parts.rows} if parts.rows else None,
            {(0, 0): parts.curve},
            {(0, 0): parts.edge},
        )
        return follow(self.particles, levels, STEP, range(steps), steps)


def bench(curve_of: CurveOf, formula: str) -> Bench:
    curve = curve_of(formula, "2.2", "8", e="1/100", s="3.4", reach=8.0)
    begin = start(108, 19.0, [40.0], 116.0, 3, THERMAL / 116.0)
    return Bench(curve, settle(begin, {(0, 0): curve}, STEP, 150, THERMAL))


@pytest.fixture(scope="module")
def smooth(curve_of: CurveOf) -> Bench:
    return bench(curve_of, SMOOTH)


@pytest.fixture(scope="module")
def truncated(curve_of: CurveOf) -> Bench:
    return bench(curve_of, CUT)


def sizes(course: Course) -> dict[str, float]:
    """Return how far each cause moved the energy at most, in k_B·T a particle."""
    return {name: float(np.ptp(course.causes[name][2:])) / (THERMAL * 108) for name in CAUSES}


def main_cause(course: Course) -> str:
    found = sizes(course)
    return max(found, key=lambda name: found[name])


def test_a_good_table_shows_only_the_time_step(smooth: Bench) -> None:
    found = sizes(smooth.course(smooth.rows(2001, "cubic-hermite")))
    assert found["cutoff"] == found["force-not-slope"] == found["digits"] == 0.0
    assert found["interpolation"] < 1e-7
    assert found["time-step"] < 1e-4


def test_causes_add_up_to_the_energy(smooth: Bench) -> None:
    course = smooth.course(smooth.rows(60, "linear"))
    assert sum(course.causes.values()) == pytest.approx(course.conserved, abs=1e-12)


def test_few_rows_read_linearly(smooth: Bench) -> None:
    rows = smooth.rows(60, "linear")
    course = smooth.course(rows)
    assert main_cause(course) == "interpolation"
    # Theory: a chord lies above the energy by h²/12·U″ on average, near the minimum; pairs move through the
    # rows independently, so the whole is off by √(bonds) of that.
    assert smooth.curve.well is not None
    gap = float(rows.separation[1] - rows.separation[0])
    stiffness = float(smooth.curve.local(smooth.curve.well.separation, 2)[2])
    expected = gap**2 / 12 * stiffness * np.sqrt(6 * 108) / (THERMAL * 108)
    assert 0.2 * expected < sizes(course)["interpolation"] < 5 * expected


def test_more_rows_read_linearly_drift_less(smooth: Bench) -> None:
    coarse, fine = (sizes(smooth.course(smooth.rows(n, "linear")))["interpolation"] for n in (60, 240))
    assert fine < coarse / 5


def test_a_sign_error_in_one_window(smooth: Bench) -> None:
    rows = smooth.rows(2001, "linear")
    force = rows.force.copy()
    window = (rows.separation > 4.4) & (rows.separation < 4.9)
    force[window] *= -1
    course = smooth.course(replace(rows, force=force))
    assert main_cause(course) == "force-not-slope"
    # Theory: a crossing of the window gives back twice its rise, 2·ΔU, and some pair a particle crosses it.
    ends = smooth.curve.energy(np.array([4.4, 4.9]))
    expected = 2 * abs(float(ends[1] - ends[0])) / THERMAL
    assert 0.02 * expected < sizes(course)["force-not-slope"] < 5 * expected
    assert main_cause(smooth.course(replace(rows, force=force), known=False)) == "force-not-slope"


def test_a_step_at_the_cutoff(truncated: Bench) -> None:
    course = truncated.course(truncated.rows(2001, "cubic-hermite"))
    assert main_cause(course) == "cutoff"
    # Theory: each pair that crosses changes the energy by the step: it is off by whole numbers of steps.
    height = abs(float(truncated.curve.energy(np.array([8.0]))[0]))
    jumps = np.diff(course.causes["cutoff"]) / height
    assert np.abs(jumps - np.round(jumps)).max() < 0.2
    assert 1 < np.abs(np.round(np.cumsum(jumps))).max() < 300


def test_too_few_digits(smooth: Bench) -> None:
    rows = smooth.rows(2001, "linear")
    energy, force = (np.array([float(f"{x:.3e}") for x in column]) for column in (rows.energy, rows.force))
    course = smooth.course(replace(rows, energy=energy, force=force))
    found = sizes(course)
    assert main_cause(course) == "digits"
    assert found["force-not-slope"] == 0.0
    assert 1e-6 < found["digits"] < 1e-2


def test_the_slope_of_a_line_and_its_error() -> None:
    time = np.arange(1000.0)
    noise = np.random.default_rng(4).normal(size=(2, 1000))
    found = slope(time, [0.5 * time + one for one in noise])
    assert found.value == pytest.approx(0.5, abs=4 * found.error)
    assert found.error == pytest.approx(np.sqrt(12 / 1000 / 2) / 1000, rel=1.5)
