"""The certificate of a table: what is proved about the errors that reading it will make."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from ..potential import Landmarks
from ..units import UnitSystem
from .bounds import Bound


@dataclass(frozen=True, slots=True)
class Certificate:
    """What is proved about the rows of one interaction, in eV and ångström.

    Attributes
    ----------
    rows : int
    spacing, interpolation, ends : str
        The code interpolates in the separation itself, whatever the rows are even in.
    bound : Bound
    landmarks : Landmarks
    repulsive_to_first_row : bool
        Whether the curve is proved to repel at the first row and not to turn over inside the grid.
    tolerance, force_tolerance : float or None
        The largest errors that the document allows.
    """

    rows: int
    spacing: str
    interpolation: str
    ends: str
    bound: Bound
    landmarks: Landmarks
    repulsive_to_first_row: bool
    tolerance: float | None = None
    force_tolerance: float | None = None

    def record(self, units: UnitSystem) -> dict[str, Any]:
        """Return the certificate as plain values in the given units, without a bound that was not found."""
        length, energy, force = (float(u.factor) for u in (units.length, units.energy, units.force))
        record: dict[str, Any] = {
            "rows": self.rows,
            "spacing": self.spacing,
            "interpolation": self.interpolation,
            "interpolated_in": "separation",
            "proved": self.bound.proved,
        }
        if self.interpolation == "cubic-spline":
            record["ends"] = self.ends
        if self.bound.proved:
            record |= {
                "energy_error_bound": self.bound.energy / energy,
                "energy_error_at": self.bound.energy_at / length,
                "force_error_bound": self.bound.force / force,
                "force_error_at": self.bound.force_at / length,
                "drift_bound": self.bound.drift / force,
            }
        if self.tolerance is not None:
            record["energy_tolerance"] = self.tolerance / energy
        if self.force_tolerance is not None:
            record["force_tolerance"] = self.force_tolerance / force
        return record | {
            "stationary_points": self.landmarks.stationary_points,
            "stationary_points_proved": self.landmarks.proved,
            "repulsive_to_first_row": self.repulsive_to_first_row,
        }
