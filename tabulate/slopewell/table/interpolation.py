"""Read between rows as a simulation code does, by the rule that a table names."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .model import Rows

Array = NDArray[np.float64]
Reader = Callable[[Array], Array]


@dataclass(frozen=True, slots=True)
class Interpolant:
    """Energy and force between rows, in the table's units, from the first separation to the last.

    Attributes
    ----------
    energy, force : callable
        From separations to values. For ``linear`` the force is read between force rows; for the
        other rules it is minus the derivative of the interpolated energy.
    start, end : float
    """

    energy: Reader
    force: Reader
    start: float
    end: float


def interpolant(rows: Rows, rule: str = "") -> Interpolant:
    """Return how a code reads between rows.

    Parameters
    ----------
    rows : Rows
        With energy and force (and curvature for ``quintic-hermite``).
    rule : str
        Instead of the rule that the rows name; rows that name none are read as ``cubic-hermite``
        where they have energy and force, else as a not-a-knot cubic spline.
    """
    chosen = rule or rows.interpolation
    if not chosen:
        both = rows.energy is not None and rows.force is not None
        chosen = "cubic-hermite" if both else "cubic-spline"
    return Interpolant(*READERS[chosen](rows), float(rows.separation[0]), float(rows.separation[-1]))


def _linear(rows: Rows) -> tuple[Reader, Reader]:
    r, energy, force = rows.separation, rows.energy, rows.force
    assert energy is not None
    assert force is not None
    return (lambda x: np.interp(x, r, energy)), (lambda x: np.interp(x, r, force))


def _cubic_hermite(rows: Rows) -> tuple[Reader, Reader]:
    from scipy.interpolate import CubicHermiteSpline

    assert rows.energy is not None
    assert rows.force is not None
    return _by_slope(CubicHermiteSpline(rows.separation, rows.energy, -rows.force))


def _cubic_spline(rows: Rows) -> tuple[Reader, Reader]:
    from scipy.interpolate import CubicSpline

    assert rows.energy is not None
    clamped = rows.force is not None and rows.ends in ("", "clamped") and rows.interpolation == "cubic-spline"
    if clamped and rows.force is not None:
        ends: Any = ((1, -rows.force[0]), (1, -rows.force[-1]))
    else:
        ends = "natural" if rows.ends == "natural" else "not-a-knot"
    return _by_slope(CubicSpline(rows.separation, rows.energy, bc_type=ends))


def _quintic_hermite(rows: Rows) -> tuple[Reader, Reader]:
    from scipy.interpolate import BPoly

    assert rows.energy is not None
    assert rows.force is not None
    assert rows.curvature is not None
    at_rows = np.column_stack([rows.energy, -rows.force, rows.curvature])
    return _by_slope(BPoly.from_derivatives(rows.separation, at_rows))


def _by_slope(curve: Any) -> tuple[Reader, Reader]:
    slope = curve.derivative()
    return (lambda x: curve(x)), (lambda x: -slope(x))


READERS: dict[str, Callable[[Rows], tuple[Reader, Reader]]] = {
    "linear": _linear,
    "cubic-hermite": _cubic_hermite,
    "cubic-spline": _cubic_spline,
    "quintic-hermite": _quintic_hermite,
}
"""The interpolation rules and how each reads rows."""
