"""Is every number of the rows finite?"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from .findings import ERROR, Check, Finding
from .table_facts import TableFacts

MOST_SHOWN = 20


def look(facts: TableFacts) -> Iterator[Finding]:
    """Find numbers that are infinite or no numbers."""
    broken = np.zeros(facts.rows.separation.size, dtype=bool)
    for column in facts.rows.columns().values():
        broken |= ~np.isfinite(column)
    if broken.any():
        rows = (np.flatnonzero(broken) + 1).tolist()
        shown = ", ".join(map(str, rows[:8])) + (", …" if len(rows) > 8 else "")
        yield Finding(
            level=ERROR,
            says=f"{len(rows)} rows hold something that is no finite number: row {shown}.",
            remedy="Recompute these rows, or take them out.",
            measured=float(len(rows)),
            limit=0.0,
            unit="1",
            details={"rows": rows[:MOST_SHOWN]},
        )
    elif broken.size < 2:
        yield Finding(level=ERROR, says="There are fewer than two rows.", remedy="Is this the right file or block?")


CHECK: Check[TableFacts] = Check("rows-readable", "Every number of the rows is finite", look)
