"""What the checks of a table look at, computed once an interaction."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from ..table import Rows
from ..units import UnitSystem
from .digits import EPSILON, digits, separation_rounding
from .mistakes import Evidence
from .slopes import slopes

Array = NDArray[np.float64]

TERMS = 8.0
"""Units in the last place of the largest term that a clean number may be off by."""


@dataclass(frozen=True)
class TableFacts:
    """The rows of one interaction, in the table's own units, with what several checks need of them.

    Attributes
    ----------
    rows : Rows
    units : UnitSystem
    purpose : str
        What the table is for; empty where it is not known.
    """

    rows: Rows
    units: UnitSystem
    purpose: str = ""

    @cached_property
    def evidence(self) -> Evidence | None:
        """Stated against expected forces; None where the rows lack energy or force."""
        rows = self.rows
        if rows.energy is None or rows.force is None:
            return None
        return rows_evidence(rows.separation, rows.energy, rows.force, self.units)


def rows_evidence(separation: Array, energy: Array, force: Array, units: UnitSystem) -> Evidence:
    """Return stated against expected forces of rows.

    Parameters
    ----------
    separation, energy, force : (n,) array
        Separations strictly ascending.
    units : UnitSystem
    """
    own = separation_rounding(separation)
    with np.errstate(all="ignore"):
        steep, bend = _size_of_slope(separation, energy), _size_of_bend(separation, energy)
        largest = np.abs(energy) + steep * separation + bend * separation**2
        found = slopes(separation, energy, digits(energy).rounding(energy) + TERMS * EPSILON * largest, own)
        band = found.band + bend * own + TERMS * EPSILON * (steep + bend * separation)
    return Evidence(
        separation=separation,
        energy=energy,
        force=force,
        expected=0.0 - found.values,
        band=np.where(np.isfinite(band), band, np.inf),
        rounding=digits(force).rounding(force),
        units=units,
        exchanged=lambda: rows_evidence(separation, force, energy, units),
    )


def _size_of_slope(separation: Array, energy: Array) -> Array:
    steps = np.abs(np.diff(energy) / np.diff(separation))
    return np.maximum(np.append(steps, steps[-1:]), np.insert(steps, 0, steps[:1]))


def _size_of_bend(separation: Array, energy: Array) -> Array:
    if separation.size < 3:
        return np.zeros(separation.size)
    slope = np.diff(energy) / np.diff(separation)
    bend = np.abs(np.diff(slope) / (separation[2:] - separation[:-2])) * 2
    return np.pad(bend, 1, mode="edge")
