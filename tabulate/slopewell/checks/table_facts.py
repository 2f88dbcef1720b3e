"""What the checks of a table look at, computed once an interaction."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from ..table import Rows
from ..units import UnitSystem
from ..units.constants import BOLTZMANN
from .digits import EPSILON, digits, separation_rounding
from .mistakes import Evidence
from .mistakes.rows import MOST_CORRUPTED
from .row_landmarks import RowLandmarks, row_landmarks
from .slopes import Slopes, slopes
from .spikes import energy_spikes, force_spikes

Array = NDArray[np.float64]

TERMS = 8.0
"""Units in the last place of the largest term that a clean number may be off by."""
NEGLIGIBLE = 3e-8
"""Part of the largest term of a force below which a difference is no mistake that anybody makes."""
TINY = 1e-9
"""Part of the usual force below which a force is as good as none."""
ROOM_TEMPERATURE = 300
"""In kelvin: the energy scale of a table without a well."""


@dataclass(frozen=True)
class TableFacts:
    """The rows of one interaction, in the table's own units, with what several checks need of them.

    Attributes
    ----------
    rows : Rows
    units : UnitSystem
    purpose : str
        What the table is for; empty where it is not known.
    stored : mapping
        Largest rounding error of the numbers of a column, where its digits do not show it.
    """

    rows: Rows
    units: UnitSystem
    purpose: str = ""
    stored: Mapping[str, Array] = field(default_factory=dict)

    @cached_property
    def rounding(self) -> dict[str, Array]:
        """Largest rounding error of each number, by column."""
        found = {"separation": separation_rounding(self.rows.separation)}
        for name in ("energy", "force"):
            column = self.rows.column(name)
            if column is not None:
                found[name] = digits(column).rounding(column)
        return found | dict(self.stored)

    @cached_property
    def energy(self) -> Array:
        """The energies; where the table has none, the integral of the force, zero at the last row."""
        if self.rows.energy is not None:
            return self.rows.energy
        assert self.rows.force is not None
        return integral(self.rows.separation, self.rows.force)

    @cached_property
    def evidence(self) -> Evidence | None:
        """Stated against expected forces; None where the rows lack energy or force."""
        rows = self.rows
        if rows.energy is None or rows.force is None:
            return None
        return _evidence(rows.separation, rows.energy, rows.force, self.units, self.rounding, self.slopes)

    @cached_property
    def slopes(self) -> Slopes:
        """Slopes of the energies, with a band around each."""
        return _slopes(self.rows.separation, self.energy, self.rounding)

    @cached_property
    def landmarks(self) -> RowLandmarks:
        """Landmarks of the curve that the rows stand for."""
        return row_landmarks(self.rows.separation, self.energy, self.slopes, self.rounding.get("energy"))

    @cached_property
    def energy_scale(self) -> float:
        """The energy that steps are judged by: the depth of the well, else k_B·T at 300 K."""
        depth = self.landmarks.well_depth
        return depth or float(BOLTZMANN * ROOM_TEMPERATURE / self.units.energy.factor)


def rows_evidence(
    separation: Array,
    energy: Array,
    force: Array,
    units: UnitSystem,
    rounding: Mapping[str, Array] | None = None,
) -> Evidence:
    """Return stated against expected forces of rows.

    Parameters
    ----------
    separation, energy, force : (n,) array
        Separations strictly ascending.
    units : UnitSystem
    rounding : mapping, optional
        Largest rounding error of each number by column; by default as the digits of the columns show.
    """
    known = {
        "separation": separation_rounding(separation),
        "energy": digits(energy).rounding(energy),
        "force": digits(force).rounding(force),
    } | dict(rounding or {})
    return _evidence(separation, energy, force, units, known, _slopes(separation, energy, known))


def _evidence(
    separation: Array,
    energy: Array,
    force: Array,
    units: UnitSystem,
    rounding: Mapping[str, Array],
    found: Slopes,
) -> Evidence:
    turned = {"separation": rounding["separation"], "energy": rounding["force"], "force": rounding["energy"]}
    plain = Evidence(
        separation=separation,
        energy=energy,
        force=force,
        expected=0.0 - found.values,
        band=found.band,
        rounding=rounding["force"],
        units=units,
        exchanged=lambda: rows_evidence(separation, force, energy, units, turned),
    )
    if plain.wrong.size > MOST_CORRUPTED * energy.size:
        return plain
    return replace(plain, spikes=_spikes(plain, rounding))


def _spikes(evidence: Evidence, rounding: Mapping[str, Array]) -> dict[str, NDArray[np.intp]]:
    """Return single rows of energy and force that do not fit their neighbours."""
    separation, energy, force = evidence.separation, evidence.energy, evidence.force
    with np.errstate(all="ignore"):
        steep, bend = _size_of_slope(separation, energy), _size_of_bend(separation, energy)
    own = rounding["separation"]
    of_energy = rounding["energy"] + NEGLIGIBLE * np.abs(energy) + steep * own
    of_force = rounding["force"] + NEGLIGIBLE * np.abs(force) + bend * own

    def slopes_of(window: slice, energies: Array) -> Slopes:
        part = {name: column[window] for name, column in rounding.items()}
        found = _slopes(separation[window], energies, part)
        return Slopes(found.values, found.band + part["force"])

    return {
        "energy": energy_spikes(separation, energy, force, of_energy, slopes_of),
        "force": force_spikes(separation, energy, force, of_force, evidence.band),
    }


def _slopes(separation: Array, energy: Array, rounding: Mapping[str, Array]) -> Slopes:
    """Return slopes of rows, their band widened by what the rounding of a separation does to them."""
    own = rounding["separation"]
    with np.errstate(all="ignore"):
        steep, bend = _size_of_slope(separation, energy), _size_of_bend(separation, energy)
        largest = np.abs(energy) + steep * separation + bend * separation**2
        noise = rounding["energy"] if "energy" in rounding else np.zeros_like(energy)
        found = slopes(separation, energy, noise + TERMS * EPSILON * largest, own)
        usual = np.median(steep[steep > 0]) if steep.any() else 0.0
        band = found.band + bend * own + NEGLIGIBLE * (steep + bend * separation) + TINY * usual
    return Slopes(found.values, np.where(np.isfinite(band), band, np.inf))


def integral(separation: Array, force: Array) -> Array:
    """Return the energy of forces, zero at the last row, by cubic interpolation of the force."""
    from scipy.interpolate import CubicSpline

    area: Array = CubicSpline(separation, force).antiderivative()(separation)
    energy: Array = area[-1] - area
    return energy


def _size_of_slope(separation: Array, energy: Array) -> Array:
    steps = np.abs(np.diff(energy) / np.diff(separation))
    larger: Array = np.maximum(np.append(steps, steps[-1:]), np.insert(steps, 0, steps[:1]))
    return larger


def _size_of_bend(separation: Array, energy: Array) -> Array:
    if separation.size < 3:
        return np.zeros(separation.size)
    slope = np.diff(energy) / np.diff(separation)
    bend = np.abs(np.diff(slope) / (separation[2:] - separation[:-2])) * 2
    return np.pad(bend, 1, mode="edge")
