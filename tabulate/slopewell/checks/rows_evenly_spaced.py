"""Which rule of spacing do the rows keep, and which rows are missing or off it?"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from ..table.grid import variable
from .digits import EPSILON, digits
from .findings import ERROR, NOTE, WARNING, Check, Finding
from .table_facts import TableFacts

Array = NDArray[np.float64]

SPACINGS = ("separation", "separation-squared", "inverse", "logarithmic")
WORDS = {"separation": "r", "separation-squared": "r²", "inverse": "1/r", "logarithmic": "log r"}
MOST_OFF = 0.02
"""Part of the rows that may be off or missing for a rule still to be the one that was meant."""
MOST_SHOWN = 20


@dataclass(frozen=True)
class Fit:
    """How rows keep a rule: the rows off it, and how many are missing after which row."""

    spacing: str
    off: NDArray[np.intp]
    gaps: NDArray[np.intp]
    missing: int

    @property
    def failures(self) -> int:
        """Rows that are off or missing."""
        return int(self.off.size + self.missing)


def fit(separation: Array, rounding: Array, spacing: str) -> Fit | None:
    """Hold rows against a rule, judged at their own digits; None where the rule makes no sense for them."""
    with np.errstate(all="ignore"):
        even = variable(separation, spacing)
        slack = np.abs(variable(separation + rounding, spacing) - even) + 16 * EPSILON * np.abs(even)
    if not np.isfinite(even).all() or not np.isfinite(slack).all():
        return None
    steps = np.diff(even)
    usual = float(np.median(steps))
    whole = np.maximum(np.rint(steps / usual), 1.0)
    if whole.sum() > 3 * separation.size:
        return None
    position = np.insert(np.cumsum(whole), 0, 0.0)
    unit = (even[-1] - even[0]) / position[-1]
    expected = even[0] + unit * position
    allowed = 2 * slack + np.interp(position, [0.0, position[-1]], [slack[0], slack[-1]])
    off = np.flatnonzero(np.abs(even - expected) > allowed)
    gaps = np.flatnonzero(whole > 1)
    return Fit(spacing, off, gaps, int(whole.sum()) - steps.size)


def look(facts: TableFacts) -> Iterator[Finding]:
    """Hold the rows against the rule that the table claims, else against every rule."""
    r = facts.rows.separation
    # The digits that there are: a step may be rounded to them even where the rows keep it exactly.
    rounding = np.maximum(digits(r).rounding(r), facts.rounding["separation"])
    claimed = facts.rows.spacing
    best = _best(r, rounding, (claimed,) if claimed else SPACINGS)
    unit = facts.units.length.text
    if best is not None and not best.failures:
        return
    if best is None or best.failures > max(3, MOST_OFF * r.size):
        words = f"are not even in {WORDS[claimed]}, as the table claims" if claimed else "keep none of the usual rules"
        steps = np.diff(r)
        yield Finding(
            level=ERROR if claimed else NOTE,
            says=f"The rows {words} (steps from {steps.min():.6g} to {steps.max():.6g} {unit}).",
            remedy="A code that counts rows instead of reading separations needs them even: slopewell convert --rows.",
            start=float(r[0]),
            end=float(r[-1]),
        )
        return
    yield from _flaws(best, r, unit, ERROR if claimed else WARNING)


def _best(separation: Array, rounding: Array, names: tuple[str, ...]) -> Fit | None:
    best: Fit | None = None
    for name in names:
        found = fit(separation, rounding, name)
        if found is not None and (best is None or found.failures < best.failures):
            best = found
        if best is not None and not best.failures:
            break
    return best


def _flaws(best: Fit, r: Array, unit: str, level: str) -> Iterator[Finding]:
    rule = WORDS[best.spacing]
    if best.gaps.size:
        after = (best.gaps + 1).tolist()
        yield Finding(
            level=level,
            says=f"The rows are even in {rule}, but {best.missing} "
            f"{'is' if best.missing == 1 else 'are'} missing: after row "
            f"{', '.join(map(str, after[:8]))}.",
            remedy="Restore the missing rows, or write new ones by slopewell convert --rows.",
            start=float(r[best.gaps[0]]),
            end=float(r[best.gaps[-1] + 1]),
            measured=float(best.missing),
            limit=0.0,
            unit="1",
            details={"rows": after[:MOST_SHOWN]},
        )
    if best.off.size:
        rows = (best.off + 1).tolist()
        yield Finding(
            level=level,
            says=f"The rows are even in {rule}, but row {', '.join(map(str, rows[:8]))} "
            f"{'is' if len(rows) == 1 else 'are'} off.",
            remedy="Correct these separations.",
            start=float(r[best.off[0]]),
            end=float(r[best.off[-1]]),
            measured=float(len(rows)),
            limit=0.0,
            unit=unit and "1",
            details={"rows": rows[:MOST_SHOWN]},
        )


CHECK: Check[TableFacts] = Check(
    "rows-evenly-spaced", "The rows keep a rule of spacing", look, requires=("rows-readable", "rows-ordered")
)
