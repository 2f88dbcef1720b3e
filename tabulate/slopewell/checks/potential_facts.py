"""What the checks of a potential look at, computed once."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from ..document import Document, Expectation, Grid, Interaction
from ..formula.balls import ball, series
from ..potential import Landmarks, Potential, find_landmarks
from ..table.bounds import ErrorBounds
from ..table.certificate import Certificate
from ..table.grid import separations
from ..table.rowcount import row_count
from ..units import UnitSystem, unit_system
from ..units.constants import BOLTZMANN

Array = NDArray[np.float64]
MOST_PROBES = 10_001


@dataclass(frozen=True)
class PotentialFacts:
    """One interaction of a document, with what several checks need of it.

    Energies are in eV and lengths in ångström until a finding is made.
    """

    potential: Potential
    grid: Grid
    units: UnitSystem
    expectations: tuple[Expectation, ...]

    @cached_property
    def treated(self) -> Landmarks:
        """Landmarks of the curve that the simulation sees."""
        return find_landmarks(self.potential.treated, self.potential.start, self.potential.end)

    @cached_property
    def bare(self) -> Landmarks:
        """Landmarks of the curve that the source states."""
        if self.potential.cutoff is None:
            return self.treated
        cuts = self.potential.treated.edges()
        return find_landmarks(self.potential.bare, self.potential.start, self.potential.end, cuts)

    @cached_property
    def probes(self) -> Array:
        """Separations in ångström at which curves are sampled: the rows, or a thinned grid like them."""
        rows = min(self.grid.rows or MOST_PROBES, MOST_PROBES)
        return separations(self.grid.start, self.grid.end, rows, self.grid.spacing, internal_units().length)

    @cached_property
    def thermal_energy(self) -> float | None:
        """k_B·T in eV, where the document gives a temperature."""
        temperature = self.potential.temperature
        return None if temperature is None else float(BOLTZMANN * temperature)

    @cached_property
    def energy_scale(self) -> float | None:
        """The energy that jumps are judged by: stated, else k_B·T, else the depth of the well."""
        if self.potential.energy_scale is not None:
            return float(self.potential.energy_scale)
        return self.thermal_energy or self.bare.well_depth

    @cached_property
    def bounds(self) -> ErrorBounds:
        """Proved error bounds of reading between rows."""
        return ErrorBounds(self.potential.treated, self.grid)

    @cached_property
    def rows(self) -> int:
        """The rows of the grid, stated or chosen by its tolerance."""
        return row_count(self.bounds, self.grid, self.potential.name)

    @cached_property
    def certificate(self) -> Certificate:
        """What is proved about a table on this grid."""
        grid = self.grid
        bound = self.bounds.bound(self.rows, grid.spacing, grid.interpolation, grid.ends)
        first = self.treated.extrema[0] if self.treated.extrema else None
        repels = self.pushes_at_start and (first is None or first.minimum)
        return Certificate(
            rows=self.rows,
            spacing=grid.spacing,
            interpolation=grid.interpolation,
            ends=grid.ends,
            bound=bound,
            landmarks=self.treated,
            repulsive_to_first_row=repels and self.treated.proved,
            tolerance=None if grid.tolerance is None else float(grid.tolerance),
            force_tolerance=None if grid.force_tolerance is None else float(grid.force_tolerance),
        )

    @cached_property
    def pushes_at_start(self) -> bool:
        """Whether the force at the first row is proved to be repulsive."""
        tree = self.potential.treated.pieces[0].tree
        return bool(series(tree, ball(self.potential.start), 1)[1] < 0)

    def length(self, angstrom: float) -> float:
        """Return a length in the document's unit, without the last digit that conversion spoils."""
        return float(f"{angstrom / float(self.units.length.factor):.15g}")

    def energy(self, electron_volt: float, per_length: int = 0) -> float:
        """Return an energy, or an energy per length to a power, in the document's units."""
        return electron_volt / float(self.units.per_length(per_length).factor)


def internal_units() -> UnitSystem:
    """Return the units that potentials compute in."""
    return unit_system("eV", "angstrom")


def potential_facts(document: Document, interaction: Interaction) -> PotentialFacts:
    """Return the facts of one interaction of a document."""
    return PotentialFacts(interaction.potential, interaction.grid, document.units, interaction.expectations)
