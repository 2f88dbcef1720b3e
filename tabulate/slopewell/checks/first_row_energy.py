"""Can the simulation get below the first row?"""

from __future__ import annotations

from collections.abc import Iterator
from math import exp, isfinite

import numpy as np

from .findings import ERROR, NOTE, WARNING, Check, Finding
from .potential_facts import PotentialFacts

TOO_LOW, LOW = 5.0, 20.0
"""Energies of the first row, in k_B·T, below which it is an error and a warning."""
NEARLY_ZERO = 0.02
"""Part of the cutoff within which a bounded repulsion must be tabulated from."""


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Hold the first row's energy against k_B·T."""
    potential = facts.potential
    start = float(potential.start)
    energy = float(potential.treated.derivatives(np.array([start]), 0)[0, 0])
    bounded = _bounded(facts, energy)
    if bounded and start <= NEARLY_ZERO * float(potential.reach):
        return
    place, unit = facts.length(start), facts.units.length.text
    shown = f"{facts.energy(energy):.4g} {facts.units.energy.text}"
    if facts.thermal_energy is None:
        yield Finding(
            level=NOTE,
            says=f"The first row, at {place:.6g} {unit}, has {shown}; without a temperature nobody can tell whether a "
            "pair gets below it.",
            remedy='Add temperature = "…" to the document.',
            start=place,
            end=place,
            measured=facts.energy(energy),
            unit=facts.units.energy.text,
        )
        return
    barrier = energy / facts.thermal_energy
    if barrier >= LOW:
        return
    below = "the curve goes on smoothly to zero separation" if bounded else "the code reads outside its table"
    yield Finding(
        level=ERROR if barrier < TOO_LOW else WARNING,
        says=f"The first row, at {place:.6g} {unit}, has only {barrier:.3g} k_B·T "
        f"({shown}): a pair gets there with "
        f"a Boltzmann factor of {_boltzmann(barrier):.2g}, and below it {below}.",
        remedy="Start the grid closer in.",
        start=place,
        end=place,
        measured=barrier,
        limit=TOO_LOW if barrier < TOO_LOW else LOW,
        unit="1",
    )


def _boltzmann(barrier: float) -> float:
    """Return exp(-barrier), kept within the range of doubles."""
    return exp(-max(min(barrier, 700.0), -700.0))


def _bounded(facts: PotentialFacts, energy: float) -> bool:
    """Whether the curve stays finite and moderate down to zero separation."""
    near = np.array([1e-9, 1e-5, 1e-2]) * float(facts.potential.start)
    values = facts.potential.treated.derivatives(near, 0)[0]
    return (
        bool(np.isfinite(values).all())
        and isfinite(energy)
        and bool(np.abs(values).max() < 1e3 * max(abs(energy), 1e-12))
    )


CHECK: Check[PotentialFacts] = Check(
    "first-row-energy",
    "The first row is too high in energy for a pair to get below it",
    look,
    requires=("finite", "repulsive-core"),
)
