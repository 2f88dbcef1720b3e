"""What reading a table between its rows really costs, found by dense sampling."""

from __future__ import annotations

import numpy as np
from slopewell.document import Grid
from slopewell.potential import Curve
from slopewell.table import Rows, evaluate, separations
from slopewell.table.interpolation import interpolant
from slopewell.units import unit_system

INTERNAL = unit_system("eV", "angstrom")


def sampled(reading: Curve, grid: Grid, rows: int, spacing: str, rule: str, ends: str) -> tuple[float, float]:
    """The largest errors seen at 20,000 separations and densely in the first and last intervals."""
    r = separations(grid.start, grid.end, rows, spacing, INTERNAL.length)
    energy, slope, curvature = evaluate(reading, r, 2, INTERNAL)
    table = Rows("A-A", r, energy, 0.0 - slope, curvature, interpolation=rule, ends=ends)
    code = interpolant(table)
    inside = np.linspace(0, 1, 21)
    ends_of_grid = np.r_[0 : min(40, rows - 1), max(rows - 41, 0) : rows - 1]
    close = (r[ends_of_grid, None] + np.diff(r)[ends_of_grid, None] * inside).ravel()
    x = np.clip(np.concatenate([np.linspace(r[0], r[-1], 20_000), close]), r[0], r[-1])
    exact = reading.derivatives(x, 1)
    return float(np.abs(code.energy(x) - exact[0]).max()), float(np.abs(code.force(x) + exact[1]).max())
