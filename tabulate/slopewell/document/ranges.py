"""Read where an interaction holds: its grid, and the cutoff that ends it."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import Any

from ..potential import Cutoff
from ..potential.cutoff import SWITCHED
from ..units import UnitSystem
from .model import FEWEST_ROWS, Grid
from .setting import Setting
from .values import Notes, read_quantity

TOLERANCES = (("tolerance", "energy"), ("force-tolerance", "energy length^-1"))


def read_grid(notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting) -> Grid | None:
    """Return the grid of an interaction, its own or the document's; None, and problems noted, if none."""
    place = f"{path}.grid" if "grid" in entry else "grid"
    given = entry.get("grid", setting.grid)
    if given is None:
        notes.add(path, "This interaction has no grid.", "Add [grid] to the document, or a grid of its own.")
        return None
    units = setting.units
    start, end = (read_quantity(notes, f"{place}.{key}", given[key], "length", units) for key in ("from", "to"))
    if start is None or end is None:
        return None
    if start <= 0:
        notes.add(f"{place}.from", "The grid must start above zero separation.", "Give a positive start.")
        return None
    if end <= start:
        notes.add(f"{place}.to", "The grid ends before it starts.", "Let to be larger than from.")
        return None
    rule = given.get("interpolation", "cubic-hermite")
    if given.get("rows", FEWEST_ROWS[rule]) < FEWEST_ROWS[rule]:
        says = f"Reading by {rule} needs {FEWEST_ROWS[rule]} rows at least."
        notes.add(f"{place}.rows", says, "Give more rows, or read by another rule.")
        return None
    tolerances = [_tolerance(notes, f"{place}.{key}", given.get(key), powers, units) for key, powers in TOLERANCES]
    return Grid(
        start=start,
        end=end,
        rows=given.get("rows"),
        spacing=given.get("spacing", "separation"),
        interpolation=rule,
        ends=given.get("ends", "clamped"),
        tolerance=tolerances[0],
        force_tolerance=tolerances[1],
    )


def _tolerance(notes: Notes, path: str, value: Any, powers: str, units: UnitSystem) -> Fraction | None:
    if value is None:
        return None
    found = read_quantity(notes, path, value, powers, units)
    if found is not None and found <= 0:
        notes.add(path, "A tolerance must be positive.", "Give its size.")
        return None
    return found


def read_cutoff(
    notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting, grid: Grid | None
) -> Cutoff | None:
    """Return the cutoff of an interaction, its own or the document's; None if there is none, or a fault."""
    place = f"{path}.cutoff" if "cutoff" in entry else "cutoff"
    given = entry.get("cutoff", setting.cutoff)
    if given is None:
        return None
    at = read_quantity(notes, f"{place}.at", given["at"], "length", setting.units)
    start = read_quantity(notes, f"{place}.from", given["from"], "length", setting.units) if "from" in given else None
    if at is None or ("from" in given and start is None):
        return None
    if given["treatment"] in SWITCHED and (start is None or not 0 < start < at):
        says = "The switch must start above zero and before the cutoff."
        notes.add(f"{place}.from", says, "Let from be smaller than at.")
        return None
    if grid is None:
        return None
    if at > grid.end:
        notes.add(f"{place}.at", "The cutoff lies beyond the end of the grid.", "Let the grid reach the cutoff.")
        return None
    if at <= grid.start:
        notes.add(f"{place}.at", "The cutoff lies before the start of the grid.", "Start the grid closer in.")
        return None
    return Cutoff(at, given["treatment"], start, given.get("continuity", 2))
