"""Does the curve end cleanly at its cutoff, as the purpose needs it?"""

from __future__ import annotations

from collections.abc import Iterator

from ..potential.cutoff import SWITCHED, Cutoff
from .findings import Check, Finding
from .jumps import cutoff_edges, judge
from .potential_facts import PotentialFacts


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Judge the jumps at the cutoff, at the start of a switch, and at the grid's end without a cutoff."""
    cutoff = facts.potential.cutoff
    where = "at the cutoff," if cutoff else "at the end of the grid, where the simulation stops reading,"
    for edge in cutoff_edges(facts):
        at_start = cutoff is not None and edge.at == cutoff.start
        yield from judge(facts, edge, "at the start of the switch," if at_start else where, _remedy(cutoff))


def _remedy(cutoff: Cutoff | None) -> str:
    """Return treatments that leave fewer steps than the one in use."""
    if cutoff is not None and cutoff.treatment in SWITCHED:
        return "Give the switch more continuous derivatives, or a wider range."
    shifted = "shifted-force" if cutoff is None or cutoff.zeros < 2 else "shifted-stiffness"
    other = f' (or "{shifted}")' if cutoff is None or cutoff.treatment != shifted else ""
    return f'Use treatment = "switch"{other}, with as many continuous derivatives as the purpose needs.'


CHECK: Check[PotentialFacts] = Check(
    "cutoff-steps", "Energy, force and stiffness end at the cutoff without a step", look, requires=("finite",)
)
