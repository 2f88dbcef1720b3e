"""Does the curve end cleanly at its cutoff, as the purpose needs it?"""

from __future__ import annotations

from collections.abc import Iterator

from .findings import Check, Finding
from .jumps import cutoff_edges, judge
from .potential_facts import PotentialFacts


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Judge the jumps at the cutoff, at the start of a switch, and at the grid's end without a cutoff."""
    cutoff = facts.potential.cutoff
    where = "at the cutoff," if cutoff else "at the end of the grid, where the simulation stops reading,"
    for edge in cutoff_edges(facts):
        at_start = cutoff is not None and edge.at == cutoff.start
        yield from judge(facts, edge, "at the start of the switch," if at_start else where, REMEDY)


REMEDY = 'Use treatment = "switch" (or "shifted-force"), or a switch with more continuous derivatives.'

CHECK: Check[PotentialFacts] = Check(
    "cutoff-steps", "Energy, force and stiffness end at the cutoff without a step", look, requires=("finite",)
)
