"""Jumps of energy, force and stiffness at the edges between pieces, and how bad each one is."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise

from ..formula.balls import ball, precision, series
from ..formula.tree import ZERO, Tree
from .findings import ERROR, NOTE, WARNING, Finding
from .potential_facts import PotentialFacts

THRESHOLD = 1e-6
"""Part of the energy scale (per cutoff to the order's power) from which on a jump counts."""
NEEDED = {"sampling": 0, "dynamics": 1, "lattice-dynamics": 2}
"""The highest derivative of the energy that must not jump, by purpose."""
QUANTITIES = ("energy", "force", "stiffness", "third derivative")
REASONS = {
    "sampling": "sampling needs a continuous energy",
    "dynamics": "dynamics needs a continuous force, else it does not conserve energy",
    "lattice-dynamics": "lattice dynamics needs a continuous stiffness",
}


UNSCALED = (
    " Nothing tells how large that is: the curve has no well, and the document no temperature and no energy-scale."
)


@dataclass(frozen=True, slots=True)
class Edge:
    """Two trees that meet at a separation in ångström."""

    at: Fraction
    inside: Tree
    outside: Tree


def interior_edges(facts: PotentialFacts) -> list[Edge]:
    """Return the edges before the cutoff that the formula itself brings."""
    treatment = _treatment_edges(facts)
    return [edge for edge in _edges(facts) if edge.at not in treatment]


def cutoff_edges(facts: PotentialFacts) -> list[Edge]:
    """Return the edges that the cutoff treatment brings; without one, the end of the grid."""
    treatment = _treatment_edges(facts)
    edges = [edge for edge in _edges(facts) if edge.at in treatment]
    if facts.potential.reach == facts.potential.end:
        edges.append(Edge(facts.potential.end, facts.potential.treated.pieces[-1].tree, ZERO))
    return edges


def _treatment_edges(facts: PotentialFacts) -> set[Fraction]:
    cutoff = facts.potential.cutoff
    return set() if cutoff is None else {cutoff.at} | ({cutoff.start} if cutoff.start is not None else set())


def _edges(facts: PotentialFacts) -> list[Edge]:
    pieces = facts.potential.treated.within(facts.potential.start, facts.potential.end).pieces
    return [Edge(a.end, a.tree, b.tree) for a, b in pairwise(pieces)]


def judge(facts: PotentialFacts, edge: Edge, where: str, remedy: str) -> Iterator[Finding]:
    """Yield a finding for each order of jump at an edge, the lowest order first."""
    needed = NEEDED[facts.potential.purpose]
    highest = 3 if needed == 2 else 2
    for order, jump in enumerate(jumps(edge, highest)):
        if jump == 0.0:
            continue
        limit = THRESHOLD * (facts.energy_scale or 0.0) / float(facts.potential.reach) ** order
        if not abs(jump) > limit:
            continue
        level = ERROR if order <= needed else WARNING if order == needed + 1 else NOTE
        unit = facts.units.per_length(order)
        size = facts.energy(abs(jump), order)
        place = facts.length(float(edge.at))
        unscaled = "" if facts.energy_scale else UNSCALED
        yield Finding(
            level=level,
            says=f"The {QUANTITIES[order]} jumps by {size:.4g} {unit.text} {where} at {place:.6g} "
            f"{facts.units.length.text}"
            + (f"; {REASONS[facts.potential.purpose]}." if level == ERROR else ".")
            + unscaled,
            remedy=remedy,
            start=place,
            end=place,
            measured=size,
            limit=facts.energy(limit, order),
            unit=unit.text,
        )


def jumps(edge: Edge, highest: int) -> list[float]:
    """Return by how much energy and derivatives change across an edge; exactly 0 unless they provably do."""
    inside, outside = (series(tree, ball(edge.at), highest) for tree in (edge.inside, edge.outside))
    result = []
    factorial = 1
    with precision():
        for order in range(highest + 1):
            factorial *= max(order, 1)
            jump = (outside[order] - inside[order]) * factorial
            result.append(0.0 if jump.contains(0) else float(jump.mid()))
    return result
