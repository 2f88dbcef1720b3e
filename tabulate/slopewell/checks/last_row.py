"""Does the table end at zero energy and force, or will the simulation see a step?"""

from __future__ import annotations

from collections.abc import Iterator

from .findings import ERROR, WARNING, Check, Finding
from .jumps import NEEDED, THRESHOLD
from .table_facts import TableFacts


def look(facts: TableFacts) -> Iterator[Finding]:
    """Find a step of energy or force at the last row, where the simulation stops reading."""
    end = float(facts.rows.separation[-1])
    units = facts.units
    for order, (column, unit) in enumerate((("energy", units.energy.text), ("force", units.force.text))):
        values = facts.rows.column(column)
        if values is None:
            continue
        step, limit = float(values[-1]), THRESHOLD * facts.energy_scale / end**order
        if abs(step) <= limit + float(facts.rounding[column][-1]):
            continue
        needed = NEEDED.get(facts.purpose, -1)
        why = f"; {facts.purpose} needs it continuous" if order <= needed else ""
        yield Finding(
            level=ERROR if order <= needed else WARNING,
            says=f"The {column} of the last row is {step:.4g} {unit}, not zero: a pair that passes {end:.6g} "
            f"{units.length.text} sees this step{why}.",
            remedy="Use a table that is switched or shifted to zero at its end, and the same cutoff in the code.",
            start=end,
            end=end,
            measured=abs(step),
            limit=limit,
            unit=unit,
        )


CHECK: Check[TableFacts] = Check(
    "last-row", "The table ends at zero energy and force", look, requires=("rows-readable", "rows-ordered")
)
