"""What a diagnosis starts from: stated forces beside expected ones, and how far apart they may lie."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from ...units import UnitSystem

Array = NDArray[np.float64]
Numbers = NDArray[np.intp]

CLEAR = 1.5
"""Widths of the band beyond which a single row is a contradiction."""
MOST_LOOKED_AT = 1000
"""Wrong rows that explanations are tried on first."""


@dataclass(frozen=True, eq=False)
class Evidence:
    """Stated and expected force at each separation.

    Attributes
    ----------
    separation, energy, force : (n,) array
        As stated, in the subject's units.
    expected : (n,) array
        Minus the slope of the energy.
    band : (n,) array
        How far the expected force may be off; infinite where nothing can be said.
    rounding : (n,) array
        How far the stated force may be off by its own digits.
    units : UnitSystem
    rows : bool
        Whether the separations are rows of a table, which may be shifted or corrupted one by one.
    spikes : mapping
        By column, rows whose number does not fit its neighbours although no slope contradicts it.
    exchanged : callable or None
        Gives the same evidence with energy and force columns exchanged.
    """

    separation: Array
    energy: Array
    force: Array
    expected: Array
    band: Array
    rounding: Array
    units: UnitSystem
    rows: bool = True
    spikes: Mapping[str, Numbers] = field(default_factory=dict)
    exchanged: Callable[[], Evidence] | None = None

    @cached_property
    def excess(self) -> Array:
        """Distance of stated and expected force in widths of the band; zero where they agree exactly."""
        return distance(self.force, self.expected, self.band + self.rounding)

    @cached_property
    def wrong(self) -> Numbers:
        """The rows that clearly contradict their slope, and those that do not fit their neighbours."""
        found = np.flatnonzero(self.excess > 1.0)
        clear = found.size > 1 or float(self.excess.max(initial=0.0)) > CLEAR
        spiking = [row for rows in self.spikes.values() for row in rows]
        wrong: Numbers = np.union1d(found if clear else found[:0], spiking).astype(np.intp)
        return wrong

    @cached_property
    def sample(self) -> Numbers:
        """Wrong rows, thinned, that explanations are tried on first."""
        if self.wrong.size <= MOST_LOOKED_AT:
            return self.wrong
        thinned: Numbers = self.wrong[np.linspace(0, self.wrong.size - 1, MOST_LOOKED_AT).astype(int)]
        return thinned

    @cached_property
    def live(self) -> int:
        """The number of rows before the energy is exactly zero for good."""
        nonzero = np.flatnonzero(self.energy)
        return int(nonzero[-1]) + 1 if nonzero.size else 0


@dataclass(frozen=True, eq=False)
class Explanation:
    """A mistake that would lead to the stated forces.

    Attributes
    ----------
    predicted, band : (n,) array
        The forces that the mistake makes of the expected ones, and how far they may be off.
    says, remedy : str
    measured : float or None
        The factor, offset or other size of the mistake.
    unit : str
    details : mapping
        Further keys of the finding.
    scale : (n,) array or float
        What the expected forces were multiplied with, or what was added to them, for mending.
    weight : float
        Larger for an explanation that needs more coincidence; ranks it behind others that fit as well.
    """

    predicted: Array
    band: Array
    says: str
    remedy: str
    measured: float | None = None
    unit: str = "1"
    details: dict[str, Any] = field(default_factory=dict)
    scale: Array | float = 1.0
    weight: float = 0.0


def distance(stated: Array, expected: Array, band: Array) -> Array:
    """Return how far apart two columns are, in widths of a band."""
    with np.errstate(all="ignore"):
        gap = np.abs(stated - expected)
        ratio = np.where(gap == 0, 0.0, gap / band)
    return np.nan_to_num(ratio, nan=0.0, posinf=1e9)


def weighted_median(values: Array, weights: Array) -> float:
    """Return the value that half of the weight lies below."""
    order = np.argsort(values)
    running = np.cumsum(weights[order])
    return float(values[order][np.searchsorted(running, running[-1] / 2)])
