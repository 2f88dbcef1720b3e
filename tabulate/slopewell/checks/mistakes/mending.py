"""Undo a mistake that was named: from evidence and its explanation to sound columns."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from .evidence import Evidence, Explanation

Array = NDArray[np.float64]
Mend = Callable[[Evidence, Explanation], "Columns"]


@dataclass(frozen=True, eq=False)
class Columns:
    """Columns after a mistake was undone.

    Attributes
    ----------
    separation, energy, force : (n,) array
    says : str
        What was done, for the table's history.
    derived : tuple of str
        Columns that were computed from others in part or as a whole.
    """

    separation: Array
    energy: Array
    force: Array
    says: str
    derived: tuple[str, ...] = ()


def divide(evidence: Evidence, explanation: Explanation) -> Columns:
    """Divide the force by what it was multiplied with."""
    with np.errstate(all="ignore"):
        shape = explanation.scale
        force = evidence.force / shape
    return Columns(evidence.separation, evidence.energy, force, _division(evidence, explanation))


def _division(evidence: Evidence, explanation: Explanation) -> str:
    """Return what a division did, such as "force multiplied by the separation"."""
    factor = float(explanation.measured or 1.0)
    shape = np.broadcast_to(np.asarray(explanation.scale) / factor, evidence.separation.shape)
    constant = np.ptp(shape) == 0
    steps = []
    if abs(factor) != 1 or (constant and factor == 1):
        small = abs(factor) < 1
        steps.append(f"multiplied by {1 / abs(factor):.9g}" if small else f"divided by {abs(factor):.9g}")
    if not constant:
        grows = shape[-1] > shape[0]
        steps.append("divided by the separation" if grows else "multiplied by the separation")
    says = f"force {' and '.join(steps)}" if steps else ""
    turned = "sign of the force turned" if factor < 0 else ""
    return ", ".join(part for part in (says, turned) if part)


def exchange(evidence: Evidence, explanation: Explanation) -> Columns:
    """Exchange energy and force."""
    turned = "force-sign-flipped" in explanation.details.get("also", ())
    force = -evidence.energy if turned else evidence.energy
    says = "columns energy and force exchanged" + (", sign of the force turned" if turned else "")
    return Columns(evidence.separation, evidence.force, force, says)


def subtract(evidence: Evidence, explanation: Explanation) -> Columns:
    """Take the offset off the forces."""
    offset = np.where(np.isfinite(explanation.scale), explanation.scale, 0.0)
    size = float(explanation.measured or 0.0)
    way = "added to" if size < 0 else "taken off"
    says = f"{abs(size):.6g} {explanation.unit} {way} the force"
    return Columns(evidence.separation, evidence.energy, evidence.force - offset, says)


def shift(evidence: Evidence, explanation: Explanation) -> Columns:
    """Put each force beside the separation it belongs to; rows that lose their partner are left out."""
    rows = float(explanation.details["rows"])
    if rows != int(rows):
        return from_slope(evidence, explanation)
    n, size = int(rows), evidence.force.size
    kept = slice(max(0, n), size + min(0, n))
    force = evidence.force[kept.start - n : kept.stop - n]
    says = f"force shifted by {n} rows; {abs(n)} rows without a partner left out"
    return Columns(evidence.separation[kept], evidence.energy[kept], force, says)


def from_slope(evidence: Evidence, explanation: Explanation) -> Columns:
    """Take the force from the slope of the energy where the two disagree."""
    wrong = np.zeros(evidence.force.size, dtype=bool)
    first, last = int(evidence.wrong[0]), int(evidence.wrong[-1])
    wrong[first : last + 1] = np.isfinite(evidence.band[first : last + 1])
    force = np.where(wrong, evidence.expected, evidence.force)
    says = f"force of rows {first + 1} to {last + 1} replaced by minus the slope of the energy"
    return Columns(evidence.separation, evidence.energy, force, says, ("force",))


def interpolate(evidence: Evidence, explanation: Explanation) -> Columns:
    """Replace corrupted rows by what their neighbours say."""
    rows = np.array(explanation.details["rows"]) - 1
    energy, force = evidence.energy.copy(), evidence.force.copy()
    damaged = explanation.details.get("columns", {"force": rows + 1})
    derived = []
    for name, column in (("energy", energy), ("force", force)):
        places = np.array(damaged.get(name, ()), dtype=int) - 1
        if places.size:
            column[places] = _between(evidence.separation, column, places)
            derived.append(name)
    shown = ", ".join(map(str, (rows + 1).tolist()))
    return Columns(evidence.separation, energy, force, f"rows {shown} interpolated", tuple(derived))


def _between(separation: Array, column: Array, places: NDArray[np.int_]) -> Array:
    from scipy.interpolate import CubicSpline

    good = np.ones(separation.size, dtype=bool)
    good[places] = False
    filled: Array = CubicSpline(separation[good], column[good])(separation[places])
    return filled
