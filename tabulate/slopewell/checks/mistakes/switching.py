"""A switched energy whose force lacks the derivative of the switch, or was not switched at all."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from .evidence import Evidence, Explanation

Array = NDArray[np.float64]
Numbers = NDArray[np.intp]

LEAST_ROWS, LEAST_SOUND = 2, 3
ENDED = 0.75
"""Weight of the switch below which it counts as having run to its end within the wrong rows."""
SOLID = 0.5
"""Part of the rows from the first to the last wrong one that must be wrong: a window, no single rows."""
FAINT = 0.05
"""Part of the largest energy in the window below which an energy says nothing of the switch."""
SLACK = 0.05


def slope_missing(evidence: Evidence) -> Iterator[Explanation]:
    """Look for a switch in the rows that are wrong: they lie in one window that ends at the cutoff."""
    wrong = evidence.wrong
    if wrong.size < LEAST_ROWS or not evidence.live:
        return
    first, last = int(wrong[0]), int(wrong[-1])
    told = evidence.band < 0.2 * np.abs(evidence.expected)
    if np.count_nonzero(told[:first]) < LEAST_SOUND or last >= evidence.live + 2:
        return
    if wrong.size < SOLID * np.count_nonzero(told[first : last + 1]):
        return
    window = np.arange(first, min(last + 1, evidence.live))
    for weight, how in (
        (_of_slope(evidence, window), "lacks the derivative of the switch"),
        (_of_integral(evidence, first), "was not switched at all"),
    ):
        if weight is None or not _falls(weight):
            continue
        predicted = evidence.expected.copy()
        predicted[first : last + 1] = evidence.force[first : last + 1]
        unit = evidence.units.length.text
        start = float(evidence.separation[first])
        yield Explanation(
            predicted,
            np.maximum(evidence.band + evidence.rounding, 1e-300),
            f"From about {start:.6g} {unit} on the energy is switched off, but the force {how}; before "
            "that they agree.",
            "Take the force as minus the slope of the switched energy: S·F − S′·U with the switch S.",
            measured=start,
            unit=unit,
            weight=0.4,
        )
        return


def _of_slope(evidence: Evidence, window: Numbers) -> Array | None:
    """Return the switch S that a missing −S′U would need: ln S is the integral of the gap per energy."""
    gap = (evidence.force - evidence.expected)[window]
    energy = evidence.energy[window]
    clear = evidence.excess[window] > 1
    # The missing term pulls the switched energy to zero: it has the opposite sign of the energy.
    if not clear.any() or np.mean((gap * energy)[clear] < 0) < 1 - SLACK:
        return None
    # Where the energy passes zero its quotient says nothing; the rate is smooth across.
    told = np.abs(energy) > FAINT * np.abs(energy).max()
    rate = np.interp(evidence.separation[window], evidence.separation[window][told], gap[told] / energy[told])
    step = np.diff(evidence.separation[window])
    weight: Array = np.exp(np.insert(np.cumsum((rate[1:] + rate[:-1]) / 2 * step), 0, 0.0))
    return weight


def _of_integral(evidence: Evidence, first: int) -> Array | None:
    """Return the switch that turns the energy of the stated force into the stated energy."""
    begin = max(first - 1, 0)
    part = slice(begin, evidence.live)
    r, force, energy = evidence.separation[part], evidence.force[part], evidence.energy[part]
    if r.size < LEAST_ROWS:
        return None
    step = np.diff(r)
    slope = np.gradient(force, r)
    area = (force[1:] + force[:-1]) / 2 * step - np.diff(slope) * step**2 / 12
    bare = energy[0] - np.insert(np.cumsum(area), 0, 0.0)
    told = np.abs(bare) > FAINT * np.abs(bare).max()
    if np.count_nonzero(told) < LEAST_ROWS:
        return None
    weight: Array = energy[told] / bare[told]
    return weight


def _falls(weight: Array) -> bool:
    steps = np.diff(weight)
    within = weight.min() > -SLACK and weight.max() < 1 + SLACK
    return bool(within and weight[-1] < ENDED and weight[0] > 1 - 3 * SLACK and np.all(steps < SLACK))
