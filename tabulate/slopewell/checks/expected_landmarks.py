"""Are the landmarks where the source says they are?"""

from __future__ import annotations

from collections.abc import Iterator

from ..potential import Landmarks
from ..potential.landmarks import harmonic_wavenumber
from .findings import ERROR, Check, Finding
from .potential_facts import PotentialFacts


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Hold each stated landmark against the curve's own."""
    for stated in facts.expectations:
        landmarks = facts.treated if stated.treated else facts.bare
        found, unit = landmark(facts, landmarks, stated.landmark)
        which = "treated" if stated.treated else "bare"
        name = stated.landmark.replace("-", " ")
        if found is not None and abs(found - stated.value) <= stated.within:
            continue
        has = "has none" if found is None else f"has {found:.7g} {unit}"
        yield Finding(
            level=ERROR,
            says=f"The source states {name} = {stated.value:.7g} {unit} within {stated.within:.3g}; "
            f"the {which} curve {has}.",
            remedy="Check parameters, units and form against the source.",
            measured=found,
            limit=stated.value,
            unit=unit,
            details={"landmark": stated.landmark, "within": stated.within},
        )


def landmark(facts: PotentialFacts, landmarks: Landmarks, name: str) -> tuple[float | None, str]:
    """Return a landmark by its name in documents, in the document's units, and its unit."""
    units = facts.units
    energy, length, stiffness = landmarks.well_depth, landmarks.equilibrium_separation, landmarks.stiffness
    match name:
        case "equilibrium-separation":
            return None if length is None else facts.length(length), units.length.text
        case "well-depth":
            return None if energy is None else facts.energy(energy), units.energy.text
        case "stiffness":
            return None if stiffness is None else facts.energy(stiffness, 2), units.stiffness.text
        case "zero-crossing":
            zero = landmarks.zero_crossing
            return None if zero is None else facts.length(zero), units.length.text
        case "largest-attraction":
            pull = landmarks.largest_attraction
            return None if pull is None else facts.energy(pull[1], 1), units.force.text
        case _:
            mass = facts.potential.reduced_mass
            if stiffness is None or mass is None or stiffness <= 0:
                return None, "cm^-1"
            return harmonic_wavenumber(stiffness, float(mass)), "cm^-1"


CHECK: Check[PotentialFacts] = Check(
    "expected-landmarks", "The landmarks are where the source says they are", look, requires=("finite",)
)
