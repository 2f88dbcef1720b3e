"""What the parts of a document share while they are read: units, folder, species, grid and cutoff."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from pathlib import Path
from typing import Any

from ..units import UnitSystem


@dataclass(frozen=True, slots=True)
class Setting:
    """What holds for a whole document.

    Attributes
    ----------
    units : UnitSystem
        Of plain numbers.
    folder : Path
        That of the document, where its other files are.
    purpose : str
    temperature, energy_scale : Fraction or None
        In kelvin and eV.
    masses, charges : mapping
        By species, in dalton and elementary charges.
    grid, cutoff : mapping or None
        As they stand in the document, for interactions without their own.
    """

    units: UnitSystem
    folder: Path
    purpose: str = "dynamics"
    temperature: Fraction | None = None
    energy_scale: Fraction | None = None
    masses: Mapping[str, Fraction] = field(default_factory=dict)
    charges: Mapping[str, Fraction] = field(default_factory=dict)
    grid: Mapping[str, Any] | None = None
    cutoff: Mapping[str, Any] | None = None

    def reduced_mass(self, one: str, other: str) -> Fraction | None:
        """Return the reduced mass of a pair in dalton, where both masses are known."""
        first, second = self.masses.get(one), self.masses.get(other)
        return None if first is None or second is None else first * second / (first + second)
