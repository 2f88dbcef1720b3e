"""Is the stated force minus the slope of the energy?"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from .findings import ERROR, NOTE, Check, Finding
from .mistakes import Diagnosis, Evidence, diagnose
from .potential_facts import PotentialFacts
from .table_facts import TableFacts

LIMIT = 1e-9
"""Largest difference of a stated force from the slope, relative to the size of the terms behind it."""


def look_at_potential(facts: PotentialFacts) -> Iterator[Finding]:
    """Hold the source's force against the slope of the bare curve."""
    if facts.potential.stated_force is not None:
        yield from judge(potential_evidence(facts), "the stated force", LIMIT)


def potential_evidence(facts: PotentialFacts) -> Evidence:
    """Return stated and exact forces at the probes, in the document's units."""
    assert facts.potential.stated_force is not None
    r = facts.probes
    with np.errstate(all="ignore"):
        energy, slope, bend = facts.potential.bare.derivatives(r, 2)
        force = facts.potential.stated_force.derivatives(r, 0)[0]
    finite = np.isfinite(energy) & np.isfinite(slope) & np.isfinite(bend) & np.isfinite(force)
    r, energy, slope, bend, force = (column[finite] for column in (r, energy, slope, bend, force))
    # A clean difference is some rounding of the largest term, which energy, slope and bend cannot all hide.
    size = np.maximum(np.abs(slope), np.maximum(np.abs(energy) / r, np.abs(bend) * r))
    per_length = float(facts.units.force.factor)
    return Evidence(
        separation=r / float(facts.units.length.factor),
        energy=energy / float(facts.units.energy.factor),
        force=force / per_length,
        expected=(0.0 - slope) / per_length,
        band=LIMIT * size / per_length,
        rounding=np.zeros_like(r),
        units=facts.units,
        rows=False,
    )


def look_at_table(facts: TableFacts) -> Iterator[Finding]:
    """Hold the force column against the slope of the energy column."""
    evidence = facts.evidence
    if evidence is None:
        missing = "force" if facts.rows.force is None else "energy"
        how = "the slope of a spline through the energies" if missing == "force" else "the integral of the force"
        yield Finding(
            level=NOTE,
            says=f"The table has no {missing}, so nothing can be held against the other column.",
            remedy=f"slopewell convert --complete adds it: {how}, marked as derived.",
        )
        return
    if not np.isfinite(evidence.band).any():
        yield Finding(
            level=NOTE,
            says=f"{evidence.force.size} rows are too few, or too far apart, to tell a slope.",
            remedy="Add rows.",
        )
        return
    yield from judge(evidence, "the force column", None)


def judge(evidence: Evidence, subject: str, limit: float | None) -> Iterator[Finding]:
    """Make a finding of a contradiction, naming the mistake where one explains it."""
    wrong = evidence.wrong
    if not wrong.size:
        return
    found = diagnose(evidence)
    start, end = float(evidence.separation[wrong[0]]), float(evidence.separation[wrong[-1]])
    worst = Finding(level=ERROR, says="", remedy="", start=start, end=end, limit=limit, unit="1")
    yield _explained(worst, found) if found else _unexplained(worst, evidence, subject)


def _explained(finding: Finding, found: list[Diagnosis]) -> Finding:
    best = found[0]
    explanation = best.explanation
    others = [*explanation.details.get("also", ()), *(other.mistake for other in found[1:])]
    return replace(
        finding,
        mistake=best.mistake,
        says=explanation.says,
        remedy=explanation.remedy,
        measured=explanation.measured,
        unit=explanation.unit,
        limit=finding.limit if explanation.unit == "1" else None,
        details={**explanation.details, **({"also": list(dict.fromkeys(others))} if others else {})},
    )


def _unexplained(finding: Finding, evidence: Evidence, subject: str) -> Finding:
    most = int(np.argmax(np.abs(evidence.force - evidence.expected) * (evidence.excess > 1)))
    stated, expected = float(evidence.force[most]), float(evidence.expected[most])
    length, force = evidence.units.length.text, evidence.units.force.text
    return replace(
        finding,
        says=f"At {evidence.separation[most]:.6g} {length} {subject} is {stated:.7g} {force}, minus the "
        "slope of the energy "
        f"is {expected:.7g} {force}; {evidence.wrong.size} of {evidence.force.size} separations "
        "disagree, and no "
        "known mistake explains them.",
        remedy="Find out how the force was made; or take the energy alone and let the force follow from it.",
        measured=abs(stated - expected) / abs(expected) if expected else None,
    )


POTENTIAL_CHECK: Check[PotentialFacts] = Check(
    "force-matches-slope",
    "The stated force is minus the slope of the energy",
    look_at_potential,
    requires=("finite",),
)
TABLE_CHECK: Check[TableFacts] = Check(
    "force-matches-slope",
    "The force column is minus the slope of the energy column",
    look_at_table,
    requires=("rows-readable", "rows-ordered"),
)
