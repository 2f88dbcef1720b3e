"""How many rows a tolerance needs: the smallest count whose proved bound keeps it."""

from __future__ import annotations

from collections.abc import Callable
from math import isfinite

from ..document import Grid
from ..document.model import FEWEST_ROWS
from ..problems import Problem, UnusableInput
from .bounds import ErrorBounds
from .rules import RULES

MOST_ROWS = 10_000_000


def rows_needed(
    bounds: ErrorBounds,
    spacing: str,
    interpolation: str,
    ends: str,
    energy: float | None,
    force: float | None,
) -> int | None:
    """Return the smallest row count whose proved bounds keep tolerances.

    Parameters
    ----------
    bounds : ErrorBounds
    spacing, interpolation, ends : str
    energy, force : float or None
        Tolerances in eV and eV/Å.

    Returns
    -------
    int or None
        None if no table of up to ten million rows keeps them.
    """

    def excess(rows: int, edges: bool) -> float:
        worst = 0.0
        if energy is not None:
            worst = bounds.energy_bound(rows, spacing, interpolation, ends, edges=edges) / energy
        if force is not None and worst <= 1:
            worst = max(worst, bounds.bound(rows, spacing, interpolation, ends).force / force)
        return worst

    rule = RULES[interpolation]
    power = rule.energy.power if force is None else rule.force.power
    fewest = FEWEST_ROWS[interpolation]
    # Edges between pieces seldom decide: look at them only for the count that the pieces themselves need.
    enough = smallest(lambda rows: excess(rows, False), fewest, power)
    if enough is None or excess(enough, True) <= 1:
        return enough
    return smallest(lambda rows: excess(rows, True), enough, power)


def smallest(excess: Callable[[int], float], fewest: int, power: int) -> int | None:
    """Return the smallest count whose excess is at most 1.

    Parameters
    ----------
    excess : callable
        From a count to bound over tolerance, which falls about as the count to minus ``power``.
    fewest : int
        The smallest count that is taken.
    power : int
    """
    low, high = fewest - 1, 0
    guess = max(fewest, 64)
    for step in range(200):
        size = excess(guess)
        if size <= 1:
            high = guess
        else:
            low = guess
        if low >= MOST_ROWS or (high and high - low <= 1):
            break
        ahead = guess * size ** (1 / power) if isfinite(size) and size > 0 else 4 * guess
        # A nudge past the crossing closes the bracket from the other side; every third step halves it.
        aim = int(ahead * 1.0005) + 1 if size > 1 else int(ahead * 0.9995)
        if high and (step % 3 == 2 or not low < aim < high):
            aim = (low + high) // 2
        guess = min(max(aim, low + 1, fewest), MOST_ROWS)
    return high or None


def row_count(bounds: ErrorBounds, grid: Grid, name: str) -> int:
    """Return the rows of a grid: stated, or the fewest that keep its tolerance.

    Raises
    ------
    UnusableInput
        If no table keeps the tolerance.
    """
    if grid.rows is not None:
        return grid.rows
    energy = None if grid.tolerance is None else float(grid.tolerance)
    force = None if grid.force_tolerance is None else float(grid.force_tolerance)
    rows = rows_needed(bounds, grid.spacing, grid.interpolation, grid.ends, energy, force)
    if rows is None:
        says = (
            f"No table of up to {MOST_ROWS:,} rows keeps the tolerance for {name}: it is below the rounding "
            "of doubles, or the curve jumps or has no bound."
        )
        raise UnusableInput([Problem("grid.tolerance", says, "Allow more, or choose another interpolation rule.")])
    return rows
