"""Mistakes of whole columns: exchanged, or one of them shifted by a constant."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from .evidence import Evidence, Explanation, weighted_median


def exchanged(evidence: Evidence) -> Iterator[Explanation]:
    """Read the energy as force and the force as energy."""
    if evidence.exchanged is None or not _plausible(evidence):
        return
    other = evidence.exchanged()
    for turn in (1.0, -1.0):
        # In the order of this evidence: the energy column is where the slope of the force column is expected.
        agrees = np.abs(other.force - turn * other.expected) <= other.band + other.rounding
        told = np.isfinite(other.band) & (np.abs(other.expected) > 2 * other.band)
        if np.count_nonzero(told) < 3 or np.mean(agrees[np.isfinite(other.band)]) < 0.995:
            continue
        predicted = np.where(agrees, evidence.force, np.inf)
        yield Explanation(
            predicted,
            np.where(np.isfinite(other.band), 1e-300, np.inf),
            "The columns are exchanged: what is called energy is minus the slope of what is called force."
            if turn > 0
            else "The columns are exchanged, and the sign is flipped: what is called energy is the slope of "
            "what is called force.",
            "Exchange the names of the two columns.",
            details={} if turn > 0 else {"also": ["force-sign-flipped"]},
            weight=0.5 if turn < 0 else 0.0,
        )


def _plausible(evidence: Evidence) -> bool:
    """Whether the energy column is roughly the slope of the force column, up to its sign."""
    with np.errstate(all="ignore"):
        slope = np.diff(evidence.force) / np.diff(evidence.separation)
        ratio = np.abs(slope / ((evidence.energy[1:] + evidence.energy[:-1]) / 2))
    told = ratio[np.isfinite(ratio) & (ratio > 0)]
    if not told.size:
        return False
    low, high = np.quantile(told, (0.3, 0.7))
    return bool(low > 0.7 and high < 1.4)


def constant_offset(evidence: Evidence) -> Iterator[Explanation]:
    """Shift all forces before the cutoff by one amount."""
    live = np.arange(evidence.force.size) < evidence.live
    chosen = evidence.sample[live[evidence.sample] & (evidence.excess[evidence.sample] > 1)]
    if chosen.size < 3:
        return
    weights = 1 / np.maximum(evidence.band + evidence.rounding, 1e-300)[chosen]
    offset = weighted_median((evidence.force - evidence.expected)[chosen], weights)
    if not offset:
        return
    for added in (np.where(live, offset, 0.0), np.full(live.size, offset)):
        yield Explanation(
            evidence.expected + added,
            evidence.band + evidence.rounding,
            f"All forces are off by {offset:.6g} {evidence.units.force.text}: one of the two columns was "
            "shifted to zero "
            "force at the cutoff, the other was not.",
            "Subtract this force, or add its potential (force times distance to the cutoff) to the energy.",
            measured=offset,
            unit=evidence.units.force.text,
            scale=added,
        )
