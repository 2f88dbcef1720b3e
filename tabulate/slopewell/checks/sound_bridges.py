"""Do the bridges between segments go over from one curve to the other without a bend of their own?"""

from __future__ import annotations

from collections.abc import Iterator
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from ..formula.balls import ball, series
from ..formula.roots import roots
from ..potential import Curve
from ..potential.joins import Bridge, bridge
from .findings import NOTE, WARNING, Check, Finding
from .potential_facts import PotentialFacts

Array = NDArray[np.float64]
SAMPLES = 401
"""Separations at which a bridge is held against the curves that it joins."""
ROUNDING = 1e-12
"""Part of the bridge's largest energy from which on a distance from both curves counts."""


class Crossing:
    """A bridge with what is asked of it, in eV and ångström."""

    def __init__(self, built: Bridge) -> None:
        self.built = built
        self.curve: Curve = bridge(built)

    @cached_property
    def slopes(self) -> tuple[float, float]:
        """The slopes at both ends."""
        first, last = self.curve.pieces[0], self.curve.pieces[-1]
        return tuple(float(series(p.tree, ball(at), 1)[1].mid()) for p, at in ((first, first.start), (last, last.end)))  # type: ignore[return-value]

    @cached_property
    def extrema(self) -> list[float]:
        """The separations at which the slope is zero."""
        found = [roots(piece.tree, piece.start, piece.end, 1) for piece in self.curve.pieces]
        return [float(root.mid()) for part in found for root in part.found]

    @property
    def too_many(self) -> bool:
        """Whether there are more extrema than the slopes at the ends ask for."""
        first, last = self.slopes
        return len(self.extrema) > (first * last < 0)

    @cached_property
    def samples(self) -> Array:
        """Separations from end to end."""
        join = self.built.join
        return np.linspace(float(join.start), float(join.end), SAMPLES)

    @property
    def falls_below_zero(self) -> bool:
        """Whether it has a negative energy between two positive ends."""
        energy = self.curve.derivatives(self.samples, 0)[0]
        return bool(energy[0] > 0 and energy[-1] > 0 and energy.min() <= 0)

    def bulge(self) -> tuple[float, float]:
        """Return where and by how much the bridge leaves the band between the two curves that it joins."""
        between, before, after = (
            curve.derivatives(self.samples, 0)[0] for curve in (self.curve, self.built.before, self.built.after)
        )
        out = np.maximum(between - np.fmax(before, after), np.fmin(before, after) - between)
        out = np.where(np.isfinite(out) & (out > ROUNDING * np.abs(between).max()), out, 0.0)
        most = int(np.argmax(out))
        return float(self.samples[most]), max(float(out[most]), 0.0)


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Find bridges that turn, or fall below zero, between their ends; say how far each of them bulges."""
    for built in facts.potential.bridges:
        crossing = Crossing(built)
        start, end = (facts.length(float(edge)) for edge in (built.join.start, built.join.end))
        unit = facts.units.length.text
        name = f"The bridge from {start:.6g} to {end:.6g} {unit}"
        faults = []
        if crossing.too_many:
            listing = ", ".join(f"{facts.length(r):.6g}" for r in crossing.extrema[:4])
            faults.append(f"turns at {listing} {unit}, which its ends do not ask for")
        if crossing.falls_below_zero:
            faults.append("falls below zero between two positive ends")
        place, size = crossing.bulge()
        if not (faults or size):
            continue
        height = facts.energy(size)
        bulge = (
            f"bulges by {height:.4g} {facts.units.energy.text} beyond both curves, at {facts.length(place):.6g} {unit}"
            if size
            else "stays between the two curves"
        )
        yield Finding(
            level=WARNING if faults else NOTE,
            says=f"{name} {' and '.join([*faults, bulge])}.",
            remedy="Move its ends, or choose another method." if faults else "Nothing needs to be done.",
            start=start,
            end=end,
            measured=height,
            unit=facts.units.energy.text,
        )


CHECK: Check[PotentialFacts] = Check(
    "sound-bridges", "No bridge between segments has a turn of its own", look, requires=("finite",)
)
