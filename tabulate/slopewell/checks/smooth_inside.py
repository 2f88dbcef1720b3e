"""Is the curve smooth inside its range, as the purpose needs it?"""

from __future__ import annotations

from collections.abc import Iterator

from .findings import Check, Finding
from .jumps import interior_edges, judge
from .potential_facts import PotentialFacts


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Judge the jumps at every point where where, abs, min or max changes branch."""
    for edge in interior_edges(facts):
        yield from judge(facts, edge, "where the formula changes branch,", "Choose branches that meet smoothly.")


CHECK: Check[PotentialFacts] = Check(
    "smooth-inside", "Nothing jumps where the formula changes branch", look, requires=("finite",)
)
