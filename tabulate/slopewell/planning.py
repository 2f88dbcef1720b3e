"""The verb plan: how many rows each spacing and interpolation rule needs for a tolerance."""

from __future__ import annotations

import os
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from fractions import Fraction
from pathlib import Path
from typing import Any

from .document import INTERPOLATIONS, SPACINGS, Document, Grid, Interaction, read_document
from .problems import Problem, UnusableInput
from .table.bounds import ErrorBounds
from .table.rowcount import rows_needed
from .table.rules import RULES
from .units import UnitSystem, dimension, quantity

BYTES_A_NUMBER = 8
WORTH_PROCESSES = 4
"""Interactions from which on starting further processes is worth its second."""


@dataclass(frozen=True, slots=True)
class Plan:
    """What one spacing and rule need for one interaction, in the document's units.

    Attributes
    ----------
    interaction, spacing, interpolation : str
    rows : int or None
        None where no table of up to ten million rows keeps the tolerance.
    size : int or None
        Bytes of its numbers in double precision.
    energy_error_bound, force_error_bound, drift_bound : float or None
    """

    interaction: str
    spacing: str
    interpolation: str
    rows: int | None
    size: int | None
    energy_error_bound: float | None
    force_error_bound: float | None
    drift_bound: float | None

    def record(self) -> dict[str, Any]:
        """Return the plan as JSON data."""
        return {
            "interaction": self.interaction,
            "spacing": self.spacing,
            "interpolation": self.interpolation,
            "rows": self.rows,
            "bytes": self.size,
            "energy_error_bound": self.energy_error_bound,
            "force_error_bound": self.force_error_bound,
            "drift_bound": self.drift_bound,
            "proved": self.rows is not None,
        }


def plan(
    path: str | Path,
    tolerance: str | None = None,
    *,
    track: Callable[[Iterable[Any], str], Iterator[Any]] = lambda items, label: iter(items),
) -> tuple[Document, list[Plan]]:
    """Plan every interaction of a document with every spacing and rule.

    Parameters
    ----------
    path : path
        The document.
    tolerance : str, optional
        Largest energy error, such as ``"1e-6 kJ/mol"``; else that of each grid.

    Raises
    ------
    UnusableInput
        If the document can't be used, or there is no tolerance.
    """
    document = read_document(path)
    stated = None if tolerance is None else _energy(tolerance)
    wanted: list[Fraction] = []
    for interaction in document.interactions:
        found = stated or interaction.grid.tolerance
        if found is None:
            says = f"{interaction.potential.name} has no tolerance to plan for."
            remedy = 'Give --tolerance "1e-6 kJ/mol", or one in the grid.'
            raise UnusableInput([Problem("grid.tolerance", says, remedy)])
        wanted.append(found)
    plans: list[Plan] = []
    for group in track(_groups(document, path, wanted), "planning"):
        plans += group
    return document, plans


def _groups(document: Document, path: str | Path, wanted: list[Fraction]) -> Iterable[list[Plan]]:
    """Yield the plans of each interaction, worked out on all processors where there are several."""
    workers = min(os.cpu_count() or 1, len(wanted))
    if len(wanted) < WORTH_PROCESSES or workers < 2:
        return (list(plans_of(i, document.units, t)) for i, t in zip(document.interactions, wanted, strict=True))
    return _by_processes(path, wanted, workers)


def _by_processes(path: str | Path, wanted: list[Fraction], workers: int) -> Iterator[list[Plan]]:
    import multiprocessing
    from concurrent.futures import ProcessPoolExecutor

    with ProcessPoolExecutor(workers, multiprocessing.get_context("spawn")) as pool:
        yield from pool.map(plans_of_one, [path] * len(wanted), range(len(wanted)), wanted)


def plans_of_one(path: str | Path, index: int, tolerance: Fraction) -> list[Plan]:
    """Return the plans of one interaction of a document, read anew: a process of its own calls this."""
    document = read_document(path)
    return list(plans_of(document.interactions[index], document.units, tolerance))


def _energy(text: str) -> Fraction:
    found = quantity(text)
    if found.dimension != dimension("energy") or found.value <= 0:
        raise UnusableInput(
            [Problem("--tolerance", f'"{text}" is no positive energy.', 'Write it like "1e-6 kJ/mol".')]
        )
    return found.value


def plans_of(interaction: Interaction, units: UnitSystem, tolerance: Fraction) -> Iterator[Plan]:
    """Yield the plan of each spacing and rule for one interaction."""
    bounds = ErrorBounds(interaction.potential.treated, interaction.grid)
    for spacing in SPACINGS:
        for interpolation in INTERPOLATIONS:
            yield _plan(interaction.potential.name, interaction.grid, bounds, spacing, interpolation, units, tolerance)


def _plan(
    name: str,
    grid: Grid,
    bounds: ErrorBounds,
    spacing: str,
    interpolation: str,
    units: UnitSystem,
    tolerance: Fraction,
) -> Plan:
    rows = rows_needed(bounds, spacing, interpolation, grid.ends, float(tolerance), None)
    if rows is None:
        return Plan(name, spacing, interpolation, None, None, None, None, None)
    bound = bounds.bound(rows, spacing, interpolation, grid.ends)
    energy, force = float(units.energy.factor), float(units.force.factor)
    return Plan(
        interaction=name,
        spacing=spacing,
        interpolation=interpolation,
        rows=rows,
        size=rows * RULES[interpolation].columns * BYTES_A_NUMBER,
        energy_error_bound=bound.energy / energy,
        force_error_bound=bound.force / force,
        drift_bound=bound.drift / force,
    )
