"""Does reading between the rows keep the document's tolerance?"""

from __future__ import annotations

from collections.abc import Iterator

from ..table.rowcount import rows_needed
from .findings import ERROR, NOTE, Check, Finding
from .potential_facts import PotentialFacts
from .table_facts import TableFacts


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Hold the proved error bounds of energy and force against the tolerances of the grid."""
    grid, bound = facts.grid, facts.certificate.bound
    if not bound.proved:
        yield Finding(
            level=ERROR if grid.tolerance is not None or grid.force_tolerance is not None else NOTE,
            says="No bound on the error between rows could be proved: some derivative of the curve is not bounded.",
            remedy="Keep the grid away from where the formula breaks down, or use a rule for rougher curves (linear).",
        )
        return
    errors = (
        ("energy", bound.energy, bound.energy_at, grid.tolerance, 0),
        ("force", bound.force, bound.force_at, grid.force_tolerance, 1),
    )
    for name, error, at, tolerance, power in errors:
        if tolerance is None or error <= float(tolerance):
            continue
        unit, place = facts.units.per_length(power).text, facts.length(at)
        yield Finding(
            level=ERROR,
            says=f"Reading {facts.rows} rows by {grid.interpolation} makes {ARTICLES[name]} {name} error of up to "
            f"{facts.energy(error, power):.3g} {unit} (proved), near {place:.4g} {facts.units.length.text}; "
            f"{facts.energy(float(tolerance), power):.3g} {unit} is allowed.",
            remedy=_remedy(facts),
            start=place,
            end=place,
            measured=facts.energy(error, power),
            limit=facts.energy(float(tolerance), power),
            unit=unit,
        )


ARTICLES = {"energy": "an", "force": "a"}


def _remedy(facts: PotentialFacts) -> str:
    grid = facts.grid
    energy = None if grid.tolerance is None else float(grid.tolerance)
    force = None if grid.force_tolerance is None else float(grid.force_tolerance)
    rows = rows_needed(facts.bounds, grid.spacing, grid.interpolation, grid.ends, energy, force)
    if rows is None:
        return "No row count keeps it by this rule: allow more, or choose another rule."
    return f"Use rows = {rows}, or leave rows out and let the tolerance choose; slopewell plan compares the rules."


def look_at_table(facts: TableFacts) -> Iterator[Finding]:
    """Hold the bounds of a table's certificate against the tolerances of the document it was made from."""
    certificate = facts.rows.certificate
    for name, unit in (("energy", facts.units.energy.text), ("force", facts.units.force.text)):
        bound, tolerance = certificate.get(f"{name}_error_bound"), certificate.get(f"{name}_tolerance")
        if bound is None or tolerance is None or bound <= tolerance:
            continue
        place = certificate[f"{name}_error_at"]
        yield Finding(
            level=ERROR,
            says=f"By its certificate, reading the table makes {ARTICLES[name]} {name} error of up to "
            f"{bound:.3g} {unit}, near {place:.4g} {facts.units.length.text}; "
            f"its document allows {tolerance:.3g} {unit}.",
            remedy="Tabulate its document anew with more rows; slopewell plan says how many.",
            start=place,
            end=place,
            measured=bound,
            limit=tolerance,
            unit=unit,
        )


TABLE_CHECK: Check[TableFacts] = Check(
    "table-error", "Reading between rows keeps the stated tolerance", look_at_table, requires=("rows-readable",)
)

POTENTIAL_CHECK: Check[PotentialFacts] = Check(
    "table-error", "Reading between rows keeps the stated tolerance", look, requires=("finite",)
)
