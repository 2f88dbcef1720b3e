"""Is the curve smooth inside its range, as the purpose needs it?"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction

from .findings import Check, Finding
from .jumps import interior_edges, judge
from .potential_facts import PotentialFacts

MOST_APART = 3
"""Places with a jump of one kind from which on they make one finding together."""


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Judge the jumps wherever a branch changes, segments meet, or the pieces of a spline do."""
    found: dict[str, list[Finding]] = {}
    for edge in interior_edges(facts):
        for finding in judge(facts, edge, f"{_place(facts)},", _remedy(facts, edge.at)):
            found.setdefault(str(finding.unit), []).append(finding)
    for alike in found.values():
        yield from alike if len(alike) <= MOST_APART else [_together(facts, alike)]


def _place(facts: PotentialFacts) -> str:
    plain = not (facts.potential.splines or facts.potential.segments)
    return "where the formula changes branch" if plain else "where one piece of the curve ends"


def _remedy(facts: PotentialFacts, at: Fraction) -> str:
    for points, _ in facts.potential.splines:
        if at in (points.separation[0], points.separation[-1]):
            return "Add points there, so that the spline leaves off as it goes on."
        if points.separation[0] < at < points.separation[-1]:
            others = [kind for kind in ("quintic", "cubic") if f"{kind} spline" not in facts.potential.formula]
            named = " or ".join(f'"{kind}"' for kind in others)
            return f"Use spline = {named}, or points that lie closer."
    if facts.potential.form:
        return "The published form has this jump: accept it, or smooth the join."
    return "Choose branches that meet smoothly, or join segments by a bridge of a higher degree."


def _together(facts: PotentialFacts, alike: list[Finding]) -> Finding:
    """Return the worst of many jumps, saying how many there are."""
    worst = max(alike, key=lambda finding: finding.measured or 0.0)
    starts = [finding.start for finding in alike if finding.start is not None]
    says = f"{worst.says} It is the largest of {len(alike)} such jumps."
    return replace(worst, says=says, start=min(starts), end=max(starts))


CHECK: Check[PotentialFacts] = Check(
    "smooth-inside", "Nothing jumps where the formula changes branch", look, requires=("finite",)
)
