"""Name the mistake behind forces that are not minus the slope of their energies.

A mistake is one function from evidence to explanations. Each predicts the forces that it would have made;
the one whose predictions meet the stated forces is named. To add one, write its function and how to
undo it, and add a line to ``MISTAKES``.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

import numpy as np

from . import columns, factors, mending, rows, switching
from .evidence import Evidence, Explanation, distance
from .mending import Columns, Mend

__all__ = ["MISTAKES", "Columns", "Diagnosis", "Evidence", "Explanation", "Mistake", "diagnose"]

REMAINING = 0.02
"""Part of the wrong rows that an explanation may leave unexplained."""
AS_WELL, AS_WELL_AT_LEAST = 2.0, 0.15
"""An explanation fits as well as the best one up to this multiple of its misfit plus this much."""


@dataclass(frozen=True)
class Mistake:
    """One way in which force and energy come apart.

    Attributes
    ----------
    name : str
        What findings call it.
    explain : callable
        From evidence to the explanations in which this mistake was made.
    mend : callable
        Undoes it.
    """

    name: str
    explain: Callable[[Evidence], Iterator[Explanation]]
    mend: Mend


MISTAKES = (
    Mistake("force-sign-flipped", factors.sign, mending.divide),
    Mistake("counted-twice", factors.counted_twice, mending.divide),
    Mistake("force-in-other-units", factors.other_units, mending.divide),
    Mistake("slope-per-squared-separation", factors.slope_per_squared, mending.divide),
    Mistake("force-divided-by-separation", factors.divided_by_separation, mending.divide),
    Mistake("virial-instead-of-force", factors.virial, mending.divide),
    Mistake("columns-exchanged", columns.exchanged, mending.exchange),
    Mistake("constant-force-offset", columns.constant_offset, mending.subtract),
    Mistake("rows-offset", rows.offset, mending.shift),
    Mistake("switch-slope-missing", switching.slope_missing, mending.from_slope),
    Mistake("rows-corrupted", rows.corrupted, mending.interpolate),
)
"""The mistakes that are known, the plainest first."""


@dataclass(frozen=True)
class Diagnosis:
    """An explanation with the name of its mistake and its misfit: 0 is exact, 1 the edge of the band."""

    mistake: str
    explanation: Explanation
    misfit: float


def diagnose(evidence: Evidence) -> list[Diagnosis]:
    """Return the explanations that fit, best first; none where none does or nothing is wrong."""
    fitting = []
    if evidence.wrong.size:
        for mistake in MISTAKES:
            options = [(misfit, e) for e in mistake.explain(evidence) if (misfit := _misfit(evidence, e)) is not None]
            if options:
                misfit, best = min(options, key=lambda option: option[0])
                fitting.append(Diagnosis(mistake.name, best, misfit))
    least = min((found.misfit for found in fitting), default=0.0)
    limit = AS_WELL * least + AS_WELL_AT_LEAST
    return sorted(fitting, key=lambda found: found.misfit if found.misfit > limit else 0.0)


def _misfit(evidence: Evidence, explanation: Explanation) -> float | None:
    """Return how badly an explanation fits, or None if it leaves too many rows unexplained."""
    apart = distance(evidence.force, explanation.predicted, explanation.band)
    told = np.isfinite(explanation.band)
    wrong = evidence.wrong[told[evidence.wrong]]
    if not wrong.size or wrong.size < 0.5 * evidence.wrong.size:
        return None
    if np.count_nonzero(apart > 1) > REMAINING * evidence.wrong.size:
        return None
    return float(np.mean(np.minimum(apart[wrong], 3.0))) + explanation.weight
