"""What the rounding of stored and printed numbers adds to the errors of reading a table."""

from __future__ import annotations

from dataclasses import dataclass

from .profile import Stretch
from .rules import Rule

STORED = 2.0**-50
"""Relative rounding of a stored number, against the size of the terms it is made of."""


@dataclass(frozen=True, slots=True)
class Rounding:
    """Rounding of the digits that a text table prints, beyond that of double precision.

    Absolute errors are in eV, eV/Å and Å.
    """

    energy_relative: float = 0.0
    energy_absolute: float = 0.0
    force_relative: float = 0.0
    force_absolute: float = 0.0
    separation_relative: float = 0.0
    separation_absolute: float = 0.0


EXACT = Rounding()
"""No rounding but that of doubles."""


def energy_rounding(derivatives: tuple[float, ...], part: Stretch, h: float, rounding: Rounding, rule: Rule) -> float:
    """Return what rounding adds to the energy error on intervals of length h in a stretch."""
    energy, force = derivatives[0], derivatives[1]
    stored = STORED * (energy + part.high * force)
    printed = rounding.energy_relative * energy + rounding.energy_absolute
    moved = (rounding.separation_relative * part.high + rounding.separation_absolute) * force
    slopes = 0.0
    if rule.name != "linear":
        slopes = h / 4 * (rounding.force_relative * force + rounding.force_absolute)
    return stored + printed + moved + slopes


def force_rounding(derivatives: tuple[float, ...], part: Stretch, h: float, rounding: Rounding, rule: Rule) -> float:
    """Return what rounding adds to the force error on intervals of length h in a stretch."""
    energy, force, stiffness = derivatives[:3]
    stored = STORED * (force + part.high * stiffness)
    printed = rounding.force_relative * force + rounding.force_absolute
    moved = (rounding.separation_relative * part.high + rounding.separation_absolute) * stiffness
    steep = 0.0
    if rule.name != "linear":
        steep = 3 / h * (rounding.energy_relative * energy + rounding.energy_absolute + STORED * energy)
    return stored + printed + moved + steep
