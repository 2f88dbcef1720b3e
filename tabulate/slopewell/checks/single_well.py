"""Is there no more than one well?"""

from __future__ import annotations

from collections.abc import Iterator

from .findings import WARNING, Check, Finding
from .potential_facts import PotentialFacts


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Find more than one minimum on the range of the grid."""
    wells = [extremum.separation for extremum in facts.treated.extrema if extremum.minimum]
    if len(wells) < 2:
        return
    unit = facts.units.length.text
    listing = ", ".join(f"{facts.length(r):.6g}" for r in wells[:6]) + (", …" if len(wells) > 6 else "")
    yield Finding(
        level=WARNING,
        says=f"There are {len(wells)} minima, at {listing} {unit}.",
        remedy="Make sure that the source means them; else check the parameters or shorten the range.",
        start=facts.length(wells[0]),
        end=facts.length(wells[-1]),
        measured=float(len(wells)),
        limit=1.0,
        unit="1",
    )


CHECK: Check[PotentialFacts] = Check("single-well", "There is no more than one well", look, requires=("finite",))
