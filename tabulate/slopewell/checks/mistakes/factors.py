"""Mistakes that multiply the force: sign, counting twice, units, and powers of the separation."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import NDArray

from ...units import unit
from .evidence import Evidence, Explanation, weighted_median

Array = NDArray[np.float64]

ENERGIES = ("eV", "kJ/mol", "kcal/mol", "hartree", "rydberg", "K", "cm^-1", "meV", "J", "zJ", "aJ")
LENGTHS = ("angstrom", "nm", "bohr", "pm", "m")
CLOSEST, LOOSEST = 3e-4, 0.02
"""How near a measured factor must lie to a known one: as near as the rows tell, within these bounds."""
USABLE = 4.0
"""Widths of its band that an expected force must have to tell a factor."""


@dataclass(frozen=True)
class Factor:
    """What the stated force is multiplied by, how well that is known, and what fits it."""

    measured: float
    tolerance: float

    def matches(self, *known: float) -> float | None:
        """Return the nearest of some numbers if it is this factor within what the rows tell."""
        nearest = min(known, key=lambda number: abs(self.measured / number - 1))
        return nearest if abs(self.measured / nearest - 1) <= self.tolerance else None


def fitted(evidence: Evidence, shape: Array) -> Factor | None:
    """Return the factor between the stated forces and some shape times the expected ones."""
    chosen = evidence.sample
    with np.errstate(all="ignore"):
        base = shape[chosen] * evidence.expected[chosen]
        sharpness = np.abs(evidence.expected[chosen]) / evidence.band[chosen]
        own = np.abs(evidence.force[chosen]) / evidence.rounding[chosen]
        ratio = evidence.force[chosen] / base
    sharpness = np.minimum(np.nan_to_num(sharpness, nan=0.0, posinf=1e15), np.nan_to_num(own, nan=0.0, posinf=1e15))
    usable = (sharpness > USABLE) & np.isfinite(ratio) & (ratio != 0)
    if np.count_nonzero(usable) < 3:
        return None
    factor = weighted_median(ratio[usable], np.minimum(sharpness[usable], 1e6))
    best = np.quantile(sharpness[usable], 0.9)
    return Factor(factor, float(np.clip(2.0 / best, CLOSEST, LOOSEST)))


def explanation(evidence: Evidence, shape: Array, factor: float, says: str, remedy: str, **more: object) -> Explanation:
    """Return the explanation that the force is a shape times the expected one, times a factor."""
    scale = factor * shape
    with np.errstate(all="ignore"):
        predicted, band = scale * evidence.expected, np.abs(scale) * evidence.band + evidence.rounding
    return Explanation(predicted, band, says, remedy, measured=factor, scale=scale, **more)  # type: ignore[arg-type]


def sign(evidence: Evidence) -> Iterator[Explanation]:
    """Return the slope itself instead of minus the slope."""
    yield explanation(
        evidence,
        np.ones_like(evidence.force),
        -1.0,
        "The stated force is the slope itself, not minus the slope.",
        "Put a minus sign in front of the stated force.",
    )


def counted_twice(evidence: Evidence) -> Iterator[Explanation]:
    """Return twice or half the force: each pair counted twice, or shared between two particles."""
    factor = fitted(evidence, np.ones_like(evidence.force))
    known = factor and factor.matches(2.0, 0.5, -2.0, -0.5)
    if not known:
        return
    how = "twice" if abs(known) == 2 else "half"
    flipped = " and with the wrong sign" if known < 0 else ""
    yield explanation(
        evidence,
        np.ones_like(evidence.force),
        known,
        f"The force is {how} what the slope of the energy says{flipped}, as when pairs are counted twice "
        "in one column.",
        f"Divide the force by {known:g}, or multiply the energy by it: only the source tells which column is right.",
        details={"factor": known} | ({"also": ["force-sign-flipped"]} if known < 0 else {}),
    )


def other_units(evidence: Evidence) -> Iterator[Explanation]:
    """Return a constant factor, such as the ratio of two units."""
    factor = fitted(evidence, np.ones_like(evidence.force))
    if factor is None or abs(factor.measured) in (0.0, 1.0):
        return
    if factor.matches(1.0, -1.0):
        return
    readings = unit_readings(evidence, factor)
    flipped = factor.measured < 0
    also = {"also": ["force-sign-flipped"]} if flipped else {}
    turned = ", with the opposite sign" if flipped else ""
    if not readings:
        yield explanation(
            evidence,
            np.ones_like(evidence.force),
            factor.measured,
            f"The force is {factor.measured:.6g} times what the slope of the energy says; no two usual "
            "units have this "
            "ratio.",
            "Divide the force by this factor, once its origin is known.",
            details={"factor": factor.measured, "likely": "a factor of unknown origin"} | also,
            weight=2.0,
        )
        return
    known, likely = readings
    for value in (known, factor.measured):
        yield explanation(
            evidence,
            np.ones_like(evidence.force),
            value,
            f"The force is {known:.7g} times what the slope of the energy says{turned}: {likely}.",
            f"Divide the force by {known:.9g}, or convert the column that is in the wrong unit.",
            details={"factor": value, "likely": likely} | also,
        )


@cache
def _ratios(names: tuple[str, ...]) -> tuple[tuple[float, str, str], ...]:
    return tuple(
        (float(unit(first).factor / unit(second).factor), first, second)
        for first in names
        for second in names
        if first != second
    )


def unit_readings(evidence: Evidence, factor: Factor) -> tuple[float, str] | None:
    """Return the known ratio of units that a factor is, and the ways in which it may have come about."""
    own_energy, own_length = evidence.units.energy.text, evidence.units.length.text
    wanted = abs(factor.measured)
    found: list[tuple[float, float, str]] = []
    for ratio, first, second in _ratios(ENERGIES):
        # A force that is too large is in the smaller unit, or the energy is in the larger one.
        far = 0.0 if own_energy in (first, second) else 1.0
        found.append((ratio, far, f"the force is in {second} and the energy in {first}"))
    for ratio, first, second in _ratios(LENGTHS):
        far = 0.0 if own_length in (first, second) else 1.0
        found.append((1 / ratio, far, f"the force is per {second} and the separation in {first}"))
    near = _nearest(found, wanted, factor.tolerance)
    if not near:
        found = [
            (
                energy / length,
                2.0 + (own_energy not in (a, b)) + (own_length not in (c, d)),
                _both(a, b, c, d),
            )
            for energy, a, b in _ratios(ENERGIES)
            for length, c, d in _ratios(LENGTHS)
        ]
        near = _nearest(found, wanted, min(factor.tolerance, 2e-3))
    if not near:
        return None
    return float(np.copysign(near[0][0], factor.measured)), "; or ".join(dict.fromkeys(entry[2] for entry in near[:2]))


def _both(energy: str, other_energy: str, length: str, other_length: str) -> str:
    force = f"{other_energy}/{other_length}"
    return f"the force is in {force}, energy and separation in {energy} and {length}"


def _nearest(found: list[tuple[float, float, str]], wanted: float, tolerance: float) -> list[tuple[float, float, str]]:
    near = [entry for entry in found if abs(wanted / entry[0] - 1) <= tolerance]
    return sorted(near, key=lambda entry: (entry[1], abs(wanted / entry[0] - 1)))


def divided_by_separation(evidence: Evidence) -> Iterator[Explanation]:
    """Return F/r, which many codes store to save a division."""
    yield from _shaped(
        evidence,
        1 / evidence.separation,
        (1.0, -1.0),
        "The force was divided by the separation.",
        "Multiply the force by the separation, or name the column force-over-separation.",
    )


def slope_per_squared(evidence: Evidence) -> Iterator[Explanation]:
    """Return dU/d(r²) of either sign."""
    yield from _shaped(
        evidence,
        1 / evidence.separation,
        (0.5, -0.5),
        "The stated force is the slope with respect to the squared separation, dU/d(r²) = (dU/dr)/(2r), "
        "up to its sign.",
        "Multiply it by −2r (2r if it is minus that slope).",
    )


def virial(evidence: Evidence) -> Iterator[Explanation]:
    """Return the pair virial r·F."""
    yield from _shaped(
        evidence,
        evidence.separation,
        (1.0, -1.0, 1 / 3, -1 / 3),
        "The stated force is the virial, separation times force.",
        "Divide it by the separation.",
    )


def _shaped(
    evidence: Evidence, shape: Array, simple: tuple[float, ...], says: str, remedy: str
) -> Iterator[Explanation]:
    factor = fitted(evidence, shape)
    if factor is None:
        return
    known = factor.matches(*simple)
    if known:
        also = {"also": ["force-sign-flipped"]} if known < 0 else {}
        yield explanation(evidence, shape, known, says, remedy, details=also)
    elif abs(simple[0]) == 1 and (readings := unit_readings(evidence, factor)):
        value, likely = readings
        more = f"{says} Besides, it is {value:.7g} times that: {likely}."
        details = {"factor": value, "likely": likely, "also": ["force-in-other-units"]}
        yield explanation(evidence, shape, value, more, remedy, details=details, weight=1.0)
