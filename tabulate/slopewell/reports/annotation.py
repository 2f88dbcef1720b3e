"""What is written into a drawing: landmarks and findings, each at its place and in the drawing's units."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from ..units import UnitSystem, ratio, unit

MARK_WORDS = {
    "zero-crossing": "zero crossing",
    "equilibrium": "bottom of the well",
    "largest-attraction": "largest attraction",
}
"""What each kind of mark is called."""


@dataclass(frozen=True, slots=True)
class Mark:
    """A landmark as a point of the ``energy`` or the ``force`` panel."""

    kind: str
    panel: str
    separation: float
    value: float

    @property
    def words(self) -> str:
        """Its name for people."""
        return MARK_WORDS[self.kind]


@dataclass(frozen=True, slots=True)
class Flag:
    """A finding, as its record in the report, with the separations between which it happens."""

    finding: Mapping[str, Any]
    start: float | None
    end: float | None


def landmarks_in(record: Mapping[str, Any], name: str, units: UnitSystem) -> dict[str, Any]:
    """Return the landmarks of an interaction from a subject's record, converted to the given units."""
    found = next((entry for entry in record.get("landmarks", ()) if entry.get("interaction") == name), None)
    if found is None:
        return {}
    length = float(ratio(unit(found["units"]["length"]), units.length))
    energy = float(ratio(unit(found["units"]["energy"]), units.energy))

    def scaled(key: str, factor: float) -> float | None:
        value = found.get(key)
        return None if value is None else value * factor

    pull = found.get("largest_attraction")
    return {
        **found,
        "units": {"energy": units.energy.text, "length": units.length.text},
        "equilibrium_separation": scaled("equilibrium_separation", length),
        "zero_crossing": scaled("zero_crossing", length),
        "classical_amplitude": scaled("classical_amplitude", length),
        "well_depth": scaled("well_depth", energy),
        "stiffness": scaled("stiffness", energy / length**2),
        "largest_attraction": pull
        and {"separation": pull["separation"] * length, "force": pull["force"] * energy / length},
    }


def certificate_in(record: Mapping[str, Any], name: str) -> Mapping[str, Any]:
    """Return what a subject's record certifies about an interaction; empty if nothing."""
    return next((each for each in record.get("certificates", ()) if each.get("interaction") == name), {})


def flags_in(record: Mapping[str, Any], name: str, units: UnitSystem) -> tuple[Flag, ...]:
    """Return the findings about an interaction from a subject's record, placed in the given units."""
    written = next((entry["units"]["length"] for entry in record.get("landmarks", ())), units.length.text)
    factor = float(ratio(unit(written), units.length))

    def place(finding: Mapping[str, Any], key: str) -> float | None:
        value = finding.get(key)
        return None if value is None else value * factor

    return tuple(
        Flag(finding, place(finding, "from"), place(finding, "to"))
        for finding in record.get("findings", ())
        if finding.get("interaction") == name
    )


def marks_of(landmarks: Mapping[str, Any]) -> Iterator[Mark]:
    """Yield the landmarks that have a point of their own in a panel."""
    crossing, bottom = landmarks.get("zero_crossing"), landmarks.get("equilibrium_separation")
    depth, pull = landmarks.get("well_depth"), landmarks.get("largest_attraction")
    if crossing is not None:
        yield Mark("zero-crossing", "energy", crossing, 0.0)
    if bottom is not None and depth is not None:
        yield Mark("equilibrium", "energy", bottom, -depth)
    if pull is not None:
        yield Mark("largest-attraction", "force", pull["separation"], pull["force"])
