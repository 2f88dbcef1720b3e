"""The register of observables: one line each, and the merging of what a curve and a table give."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from math import isfinite

from . import collisions, crystals, fluid, gas, vibrations
from .figures import Figure, Setting, System

Observable = Callable[[System, Setting], Iterator[Figure]]

OBSERVABLES: tuple[tuple[str, Observable], ...] = (
    ("pair", vibrations.look),
    ("crystal", crystals.look),
    ("gas", gas.look),
    ("collisions", collisions.look),
    ("fluid", fluid.look),
)
"""Every observable: the part of the report it belongs to, and what predicts it."""


@dataclass(frozen=True, slots=True)
class Compared:
    """One figure as the curve gives it, and as the table does; None where there is none."""

    part: str
    figure: Figure
    curve: float | None
    table: float | None


def compare(curve: System | None, table: System | None, setting: Setting) -> list[Compared]:
    """Predict everything from a curve, a table or both, each figure side by side.

    Parameters
    ----------
    curve, table : System or None
    setting : Setting
    """
    result: list[Compared] = []
    for part, look in OBSERVABLES:
        found = [{} if system is None else _by_key(look(system, setting)) for system in (curve, table)]
        for key in dict.fromkeys([*found[0], *found[1]]):
            both = [figures.get(key) for figures in found]
            figure = both[0] or both[1]
            assert figure is not None
            values = [None if one is None else one.value for one in both]
            result.append(Compared(part, figure, values[0], values[1]))
    return result


def _by_key(figures: Iterator[Figure]) -> dict[tuple[object, ...], Figure]:
    # An attraction of many k_B·T makes a gas coefficient overflow: there is no such number.
    finite = (figure for figure in figures if isfinite(figure.value))
    return {(figure.subject, figure.quantity, *sorted(figure.keys.items())): figure for figure in finite}
