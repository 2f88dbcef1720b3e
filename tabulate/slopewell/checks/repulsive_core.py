"""Does the curve stay repulsive at short range?"""

from __future__ import annotations

from collections.abc import Iterator

from ..formula.balls import ball, series
from .findings import ERROR, Check, Finding
from .potential_facts import PotentialFacts


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Find a curve that pulls at the first row: one that turned over inside the grid, or has no core."""
    first = facts.potential.treated.pieces[0]
    slope = series(first.tree, ball(facts.potential.start), 1)[1]
    if not slope > 0:
        return
    start, unit = facts.length(float(facts.potential.start)), facts.units.length.text
    top = next((extremum for extremum in facts.treated.extrema), None)
    if top is None or top.minimum:
        yield Finding(
            level=ERROR,
            says=f"The curve attracts at the first row ({start:.6g} {unit}) and has no repulsive core.",
            remedy="Add a repulsive term, or start the grid where a hard core keeps pairs apart.",
            start=start,
            end=start,
            measured=-facts.energy(float(slope.mid()), 1),
            limit=0.0,
            unit=facts.units.force.text,
        )
        return
    place, height = facts.length(top.separation), facts.energy(top.energy)
    yield Finding(
        level=ERROR,
        says=f"The curve turns over at {place:.6g} {unit}: inside this barrier of {height:.4g} "
        f"{facts.units.energy.text} it pulls particles together without end, and the grid starts inside it.",
        remedy=f"Start the grid beyond {place:.6g} {unit}, or join a repulsive wall there.",
        start=start,
        end=place,
        measured=height,
        unit=facts.units.energy.text,
    )


CHECK: Check[PotentialFacts] = Check(
    "repulsive-core", "The curve repels from the first row on", look, requires=("finite",)
)
