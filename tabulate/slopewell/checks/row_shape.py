"""Does the curve of the rows repel at short range, and has it no more than one well?"""

from __future__ import annotations

from collections.abc import Iterator

from .findings import ERROR, WARNING, Check, Finding
from .table_facts import TableFacts


def look_at_core(facts: TableFacts) -> Iterator[Finding]:
    """Find rows that pull from the first one on."""
    r, energy, unit = facts.rows.separation, facts.energy, facts.units.length.text
    first = facts.landmarks.turns[0] if facts.landmarks.turns else None
    rising = first is not None and not first.minimum
    if first is None:
        rising = bool(
            energy[0] < energy[-1] - 4 * facts.rounding["energy"][0]
            if "energy" in facts.rounding
            else energy[0] < energy[-1]
        )
    if not rising:
        return
    if first is None:
        says = f"The curve attracts at the first row ({r[0]:.6g} {unit}) and has no repulsive core."
        remedy = "Start the table where a hard core keeps pairs apart, or add a repulsive term."
        end = float(r[0])
    else:
        end = float(r[first.row])
        says = (
            f"The curve turns over at {end:.6g} {unit}: inside this barrier of {energy[first.row]:.4g} "
            f"{facts.units.energy.text} it pulls particles together."
        )
        remedy = f"Start the table beyond {end:.6g} {unit}, or join a repulsive wall there."
    yield Finding(level=ERROR, says=says, remedy=remedy, start=float(r[0]), end=end)


def look_for_wells(facts: TableFacts) -> Iterator[Finding]:
    """Find more than one minimum."""
    r, unit = facts.rows.separation, facts.units.length.text
    wells = [float(r[turn.row]) for turn in facts.landmarks.turns if turn.minimum]
    if len(wells) < 2:
        return
    listing = ", ".join(f"{place:.6g}" for place in wells[:6]) + (", …" if len(wells) > 6 else "")
    yield Finding(
        level=WARNING,
        says=f"There are {len(wells)} minima, at {listing} {unit}.",
        remedy="Make sure that the source means them; else look for corrupted rows.",
        start=wells[0],
        end=wells[-1],
        measured=float(len(wells)),
        limit=1.0,
        unit="1",
    )


CORE_CHECK: Check[TableFacts] = Check(
    "repulsive-core",
    "The rows repel from the first one on",
    look_at_core,
    requires=("rows-readable", "rows-ordered"),
)
WELL_CHECK: Check[TableFacts] = Check(
    "single-well",
    "There is no more than one well",
    look_for_wells,
    requires=("rows-readable", "rows-ordered"),
)
