"""Read one interaction of a document: its energy, grid, cutoff, and what its source says of it."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import Any

from ..potential import Curve, Potential, treat
from .composition import Composition, read_composition, read_curve, with_charges
from .model import Expectation, Grid, Interaction, Origin
from .ranges import read_cutoff, read_grid
from .setting import Setting
from .values import Notes


def read_interaction(
    notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting, origin: Origin | None = None
) -> tuple[Interaction, Composition] | None:
    """Return an interaction and what its energy is made of; None, and problems noted, if anything is wrong.

    Parameters
    ----------
    notes : Notes
    path : str
        Its key path.
    entry : mapping
        What the document says of it, or what mixing made.
    setting : Setting
    origin : Origin, optional
        Where it comes from, unless it is stated.
    """
    grid = read_grid(notes, path, entry, setting)
    before = len(notes.problems)
    cutoff = read_cutoff(notes, path, entry, setting, grid)
    # Without a grid, what needs no range of its own is still looked through for mistakes.
    plain = not {"segment", "term", "points"} & entry.keys()
    within = (grid.start, grid.end) if grid else (Fraction(1), Fraction(2))
    found = read_composition(notes, path, entry, setting, within) if grid or plain else None
    if found is None or grid is None or len(notes.problems) > before:
        return None
    first, second = entry["between"]
    whole = _charged(notes, path, entry, setting, found)
    potential = Potential(
        name=f"{first}-{second}",
        between=(first, second),
        bare=whole.curve,
        treated=treat(whole.curve, cutoff, grid.end) if cutoff else whole.curve,
        start=grid.start,
        end=grid.end,
        cutoff=cutoff,
        formula=whole.text,
        form=whole.form,
        stated_force=_force(notes, f"{path}.force", found, grid),
        reduced_mass=setting.reduced_mass(first, second),
        temperature=setting.temperature,
        energy_scale=setting.energy_scale,
        purpose=setting.purpose,
        bridges=whole.bridges,
        segments="segment" in entry,
        splines=whole.splines,
    )
    expectations = _expectations(notes, f"{path}.expect", entry.get("expect", {}), potential)
    return Interaction(potential, grid, expectations, origin or Origin(), whole.fits), found


def _charged(notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting, found: Composition) -> Composition:
    if not entry.get("charges", False):
        return found
    if "force" in entry:
        says = "A stated force is held against the energy as its source states it, without charges."
        notes.add(f"{path}.charges", says, "Take out force or charges.")
    missing = sorted({name for name in entry["between"] if name not in setting.charges})
    for name in missing:
        notes.add(f"{path}.charges", f'The species "{name}" has no charge.', f"Add charge = … to [species.{name}].")
    if missing:
        return found
    first, second = entry["between"]
    return with_charges(found, setting.charges[first], setting.charges[second])


def _force(notes: Notes, path: str, found: Composition, grid: Grid) -> Curve | None:
    return None if found.force is None else read_curve(notes, path, found.force, (grid.start, grid.end))


def _expectations(notes: Notes, path: str, given: Mapping[str, Any], potential: Potential) -> tuple[Expectation, ...]:
    if "harmonic-wavenumber" in given and potential.reduced_mass is None:
        says = "A wavenumber needs the masses of both species."
        notes.add(f"{path}.harmonic-wavenumber", says, "Give them under species.")
    return tuple(
        Expectation(name, float(stated["value"]), float(stated["within"]), stated.get("of") == "treated")
        for name, stated in given.items()
    )
