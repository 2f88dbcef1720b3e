"""Do the rows carry enough digits?"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from .findings import WARNING, Check, Finding
from .table_facts import TableFacts

Array = NDArray[np.float64]

ALLOWED = 1e-4
"""Part of the force's scale in the well that rounding may cost."""
COARSE = 1.5e-5
"""Step of a column's last digit, relative to its scale in the well, from which on it has too few digits."""


def look(facts: TableFacts) -> Iterator[Finding]:
    """Hold the rounding of energies and forces against the force in the well."""
    pull = facts.landmarks.largest_attraction
    r = facts.rows.separation
    if pull is None or r.size < 3 or not pull[1] < 0:
        return
    scale, unit = -pull[1], facts.units.force.text
    well = r >= (facts.landmarks.zero_crossing or r[0])
    costs = []
    if facts.rows.force is not None:
        costs.append((facts.rounding["force"], "force", "the force itself"))
    if facts.rows.energy is not None:
        rounding = facts.rounding["energy"]
        noise = (rounding[1:] + rounding[:-1]) / np.diff(r)
        costs.append((np.append(noise, noise[-1:]), "energy", "a force taken from differences of rows"))
    for cost, column, what in costs:
        worst = float(cost[well].max(initial=0.0))
        if worst <= ALLOWED * scale:
            continue
        place = float(r[well][np.argmax(cost[well])])
        missing = int(np.ceil(np.log10(worst / (ALLOWED * scale))))
        yield Finding(
            level=WARNING,
            mistake="too-few-digits" if _coarse(facts, column, well, scale) else None,
            says=f"The digits of the {column} put a noise of {worst:.2g} {unit} into {what}; the largest "
            "attraction is "
            f"{scale:.3g} {unit}.",
            remedy=f"Ask for {missing} more digit{'s' if missing > 1 else ''} of the {column}"
            + (", or use fewer rows." if column == "energy" else "."),
            start=place,
            end=place,
            measured=worst,
            limit=ALLOWED * scale,
            unit=unit,
            details={"missing_digits": missing},
        )


def _coarse(facts: TableFacts, column: str, well: NDArray[np.bool_], pull: float) -> bool:
    """Whether the column itself, and not the nearness of the rows, is what costs the force."""
    scale = pull if column == "force" else facts.landmarks.well_depth or facts.energy_scale
    return bool(2 * float(facts.rounding[column][well].max(initial=0.0)) > COARSE * scale)


CHECK: Check[TableFacts] = Check(
    "enough-digits",
    "Rounding costs the force in the well next to nothing",
    look,
    requires=("rows-readable", "rows-ordered"),
)
