"""Do the separations ascend from row to row?"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from .findings import ERROR, Check, Finding
from .table_facts import TableFacts

MOST_SHOWN = 20


def look(facts: TableFacts) -> Iterator[Finding]:
    """Find separations that repeat or go back, and negative ones."""
    r = facts.rows.separation
    unit = facts.units.length.text
    step = np.diff(r)
    if step.size and np.all(step < 0):
        yield Finding(
            level=ERROR,
            says=f"The separations descend from {r[0]:.6g} to {r[-1]:.6g} {unit}.",
            remedy="Turn the rows over.",
            start=float(r[-1]),
            end=float(r[0]),
        )
        return
    for wrong, what, remedy in (
        (step == 0, "repeats the separation before it", "Take the doubled rows out, or print more digits."),
        (
            step < 0,
            "goes back in separation",
            "Put the rows in order; are there two tables in the file (--block)?",
        ),
    ):
        rows = np.flatnonzero(wrong) + 2
        if rows.size:
            shown = ", ".join(map(str, rows[:8])) + (", …" if rows.size > 8 else "")
            yield Finding(
                level=ERROR,
                says=f"Row {shown} {what}.",
                remedy=remedy,
                start=float(r[rows - 1].min()),
                end=float(r[rows - 1].max()),
                measured=float(rows.size),
                limit=0.0,
                unit="1",
                details={"rows": rows[:MOST_SHOWN].tolist()},
            )
    if r[0] < 0:
        yield Finding(
            level=ERROR,
            says=f"The first separation is negative: {r[0]:.6g} {unit}.",
            remedy="Are the columns named in the right order?",
            start=float(r[0]),
            end=float(r[0]),
        )


CHECK: Check[TableFacts] = Check("rows-ordered", "The separations ascend", look, requires=("rows-readable",))
