"""The panels of a drawing: which curves each shows, between which limits, and what its sides mean."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from .drawing import Drawing
from .view import Limits

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class Panel:
    """One panel: a column of a drawing, what it is called, and how its unit is made.

    The values of a logarithmic panel, and its limits, are logarithms to base 10.
    """

    kind: str
    title: str
    limits: Limits
    curves: tuple[tuple[str, Array], ...]
    per_length: int
    words: tuple[str, str] = ("", "")
    high: bool = True
    logarithmic: bool = False


def panels_of(drawing: Drawing) -> list[Panel]:
    """Return the panels of a drawing: energy, force, and the differences where two are compared."""
    view, other = drawing.view, drawing.other
    second_energy, second_force = (other.energy, other.force) if other else (None, None)
    panels: list[Panel] = []
    for kind, column, limits, second, per_length in (
        ("energy", drawing.energy, view.energy, second_energy, 0),
        ("force", drawing.force, view.force, second_force, 1),
    ):
        if column is None or limits is None:
            continue
        curves = ((kind, column),) if second is None else ((kind, column), ("other", second))
        words = FORCE_WORDS if kind == "force" else ("", "")
        panels.append(Panel(kind, kind.capitalize(), limits, curves, per_length, words))
        if second is not None:
            panels.append(_difference(kind, second - column, limits, per_length, drawing))
    return panels


def bound_panels(drawing: Drawing) -> list[Panel]:
    """Return the panels of the proved error of reading between rows, where there is one."""
    if drawing.error is None:
        return []
    panels = []
    for kind, bound in zip(("energy", "force"), drawing.error.at(drawing.separation), strict=True):
        logarithm = np.log10(np.maximum(bound, np.finfo(np.float64).tiny))
        seen = logarithm[_inside(drawing) & (bound > 0)]
        if seen.size:
            limits = float(np.floor(seen.min() - 0.2)), float(np.ceil(seen.max() + 0.2))
            panels.append(
                Panel(
                    kind=f"{kind}-bound",
                    title=f"Error of {kind} between rows, at most",
                    limits=limits,
                    curves=((kind, np.where(bound > 0, logarithm, np.nan)),),
                    per_length=int(kind == "force"),
                    high=False,
                    logarithmic=True,
                )
            )
    return panels


def _difference(kind: str, difference: Array, limits: Limits, per_length: int, drawing: Drawing) -> Panel:
    shown = difference[_inside(drawing) & np.isfinite(difference)]
    title, around = f"Difference of {kind}", _difference_limits(shown, limits)
    return Panel(f"{kind}-difference", title, around, ((kind, difference),), per_length, high=False)


FORCE_WORDS = ("▴ repulsion: pushes apart", "▾ attraction: pulls together")


def _inside(drawing: Drawing) -> NDArray[np.bool_]:
    low, high = drawing.view.separation
    result: NDArray[np.bool_] = (drawing.separation >= low) & (drawing.separation <= high)
    return result


def _difference_limits(shown: Array, limits: Limits) -> Limits:
    """Return limits around a difference, the wall's part left out."""
    if shown.size == 0 or not np.any(shown):
        return -1e-6 * (limits[1] - limits[0]), 1e-6 * (limits[1] - limits[0])
    far = shown[shown.size // 8 :] if np.any(shown[shown.size // 8 :]) else shown
    size = float(np.abs(far).max()) * 1.15
    return -size, size


def senses(panel: Panel) -> list[tuple[str, str]]:
    """Return what the two sides of the zero line mean, each where there is room for it."""
    zero = share(0.0, panel.limits)
    sides = zip(panel.words, ("above", "below"), (zero, 100 - zero), strict=True)
    return [(text, side) for text, side, room in sides if text and room > 20]


def share(value: float, limits: Limits) -> float:
    """Return how far down a value lies in a panel, in per cent."""
    return 100 * (limits[1] - value) / (limits[1] - limits[0])
