"""Does a text layout print enough digits for a code that takes the force from differences of energies?"""

from __future__ import annotations

from collections.abc import Iterator
from math import ceil, log10

import numpy as np
from numpy.typing import NDArray

from .findings import WARNING, Finding
from .potential_facts import PotentialFacts

Array = NDArray[np.float64]
ALLOWED = 1e-4
"""Part of the largest attraction that rounding may cost."""


def look(
    facts: PotentialFacts, separation: Array, energy: Array, rounding: tuple[float, float], file: str
) -> Iterator[Finding]:
    """Hold the rounding of printed energies against the force in the well.

    Parameters
    ----------
    facts : PotentialFacts
    separation, energy : (n,) arrays
        The rows, in ångström and eV.
    rounding : (float, float)
        Relative and absolute rounding error of a printed energy, the latter in eV.
    file : str
        The file that is printed.
    """
    pull = facts.treated.largest_attraction
    if pull is None or separation.size < 2:
        return
    doubt = rounding[0] * np.abs(energy) + rounding[1]
    noise = (doubt[1:] + doubt[:-1]) / np.diff(separation)
    in_well = separation[:-1] >= (facts.treated.zero_crossing or separation[0])
    if not in_well.any():
        return
    worst, limit = float(noise[in_well].max()), ALLOWED * -pull[1]
    if worst <= limit:
        return
    place = facts.length(float(separation[:-1][in_well][np.argmax(noise[in_well])]))
    missing = ceil(log10(worst / limit))
    unit = facts.units.force.text
    yield Finding(
        level=WARNING,
        says=f"In {file} the printed digits of the energy put a noise of {facts.energy(worst, 1):.2g} {unit} "
        f"into a force taken from differences of rows; "
        f"the largest attraction is {facts.energy(-pull[1], 1):.3g} {unit}.",
        remedy=f"Print {missing} more digit{'s' if missing > 1 else ''} of the energy, or use fewer rows.",
        check="enough-digits",
        interaction=facts.potential.name,
        start=place,
        end=place,
        measured=facts.energy(worst, 1),
        limit=facts.energy(limit, 1),
        unit=unit,
        details={"file": file, "missing_digits": missing},
    )
