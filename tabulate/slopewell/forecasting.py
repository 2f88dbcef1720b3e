"""The verb ``predict``: what handbooks list, from formulas and from tables as a code reads them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import isinf
from pathlib import Path
from typing import Any

from .predictions.figures import ENERGY, LENGTH, Figure, Setting
from .predictions.register import Compared, compare
from .predictions.structures import STRUCTURES
from .problems import Problem, UnusableInput, nearest
from .studies import Studied, study
from .tables import Reading
from .units import dimension, quantity

MOST_TEMPERATURES = 1000
CENTRAL = (
    "A pair potential has no angles and no many-body cohesion; where atoms are centres of inversion it gives "
    "C12 = C44 (Cauchy): what differs from that in a real crystal is beyond it."
)


@dataclass(frozen=True)
class Forecast:
    """What was predicted.

    Attributes
    ----------
    studied : Studied
    setting : Setting
    compared : tuple of Compared
    notes : tuple of str
    """

    studied: Studied
    setting: Setting
    compared: tuple[Compared, ...]
    notes: tuple[str, ...]

    def record(self) -> dict[str, Any]:
        """Return it as JSON data."""
        return {"predictions": [self.row(one) for one in self.compared], "notes": list(self.notes)}

    def row(self, one: Compared) -> dict[str, Any]:
        """Return one prediction in the units of the file."""
        factor, unit = self._unit(one.figure.unit)
        keys = dict(one.figure.keys)
        if "number_density" in keys:
            keys["number_density"] = float(keys["number_density"]) * float(self.studied.units.length.factor) ** 3
            keys["number_density_unit"] = f"{self.studied.units.length.text}^-3"
        return {
            "subject": one.figure.subject,
            "quantity": one.figure.quantity,
            **keys,
            "curve": None if one.curve is None else one.curve / factor,
            "table": None if one.table is None else one.table / factor,
            "expected": self._expected(one.figure),
            "unit": unit,
        }

    def _unit(self, unit: str) -> tuple[float, str]:
        units = self.studied.units
        energy, length = float(units.energy.factor), float(units.length.factor)
        known = {ENERGY: (energy, units.energy.text), LENGTH: (length, units.length.text)}
        return (known | {"length/K": (length, f"{units.length.text}/K")}).get(unit, (1.0, unit))

    def _expected(self, figure: Figure) -> float | None:
        stated = self.studied.expectations.get(figure.subject, ())
        wanted = STATED.get(figure.quantity, figure.quantity)
        return next((one.value for one in stated if one.landmark == wanted and not figure.keys), None)


STATED = {"collision-diameter": "zero-crossing"}
"""Landmarks of a document that are called otherwise here."""


def predict(
    path: str | Path,
    *,
    temperatures: Sequence[float] | None = None,
    number_density: float | None = None,
    structures: Sequence[str] = (),
    reading: Reading | None = None,
    document: str | Path | None = None,
    masses: Mapping[str, float] | None = None,
) -> Forecast:
    """Predict what handbooks list, from the curves and the tables of a file.

    Parameters
    ----------
    path : path
        A document or a table.
    temperatures : sequence of float, optional
        Of the gas, in kelvin.
    number_density : float, optional
        Of the fluid, in Å⁻³; that of the document by default.
    structures : sequence of str
        Names of crystals; all by default.
    reading, document, masses
        As in :func:`slopewell.studies.study`.

    Raises
    ------
    UnusableInput
        If the file can't be used, or a crystal that is asked for lacks a pair.
    """
    for name in structures:
        known = [structure.name for structure in STRUCTURES]
        if name not in known:
            raise UnusableInput([Problem("--structure", f'There is no structure "{name}".', nearest(name, known))])
    studied = study(path, reading=reading, document=document, masses=masses)
    _require_pairs(studied, structures)
    usual = Setting().temperatures
    if studied.temperature is not None:
        usual = tuple(sorted({*usual, studied.temperature}))
    density = number_density or studied.number_density
    setting = Setting(tuple(temperatures) if temperatures is not None else usual, density, tuple(structures))
    compared = tuple(compare(studied.curve, studied.table, setting))
    return Forecast(studied, setting, compared, tuple(notes(studied, compared)))


def _require_pairs(studied: Studied, structures: Sequence[str]) -> None:
    system = studied.table
    species = {structure.name: structure.species for structure in STRUCTURES}
    if any(species[name] > 1 for name in structures) and (missing := system.missing(system.species)):
        says = f"A crystal of two species needs every pair; missing: {', '.join(missing)}."
        raise UnusableInput([Problem("--structure", says, "Give those interactions too.")], studied.file)


def notes(studied: Studied, compared: Sequence[Compared]) -> list[str]:
    """Return what must be known to read the predictions, one line each."""
    system, length = studied.table, studied.units.length
    found = []
    missing = system.missing(system.species)
    if len(system.species) > 1 and missing:
        found.append(f"No crystal or mixture that needs {', '.join(missing)}: the pair is missing.")
    without = [name for name in system.species if name not in system.masses]
    if without:
        found.append(f"No vibrations, frequencies or quantum correction where a mass is missing: {', '.join(without)}.")
    for pair, curve in system.curves.items():
        power = curve.wall[1]
        first = f"{curve.start / float(length.factor):.6g} {length.text}"
        wall = f"continued as r^-{power:.3g}" if power else "a hard wall"
        found.append(f"{curve.name}: below the first row, at {first}, the energy is {wall}.")
        bare = system.untreated.get(pair)
        if bare is not None and isinf(bare.reach) and pair not in studied.cut:
            last = f"{curve.end / float(length.factor):.6g} {length.text}"
            found.append(f"{curve.name}: no cutoff: the curve goes on by its formula, the table ends at {last}.")
    if studied.screened:
        found.append("Formulas with ke hold their own charges; none are added by Ewald summation.")
    if any(one.part == "crystal" for one in compared):
        found.append(CENTRAL)
    return found


def read_temperatures(text: str) -> tuple[float, ...]:
    """Return the temperatures in kelvin of a text such as ``150:700:50`` or ``100,300``.

    Raises
    ------
    UnusableInput
        If it is neither.
    """
    try:
        parts = [Fraction(part) for part in text.removesuffix("K").strip().replace(",", ":").split(":")]
        if ":" in text:
            first, last, step = parts if len(parts) == 3 else (*parts, Fraction(50))
            count = int((last - first) / step) + 1
            parts = [first + k * step for k in range(min(count, MOST_TEMPERATURES + 1))]
    except (ValueError, ZeroDivisionError):
        parts = []
    if not parts or min(parts) <= 0 or len(parts) > MOST_TEMPERATURES:
        says = f'"{text}" gives no positive temperatures.'
        raise UnusableInput([Problem("--temperatures", says, "Write them like 150:700:50 or 100,300.")])
    return tuple(float(part) for part in parts)


def read_density(text: str) -> float:
    """Return the number density in Å⁻³ of a text such as ``0.021 angstrom^-3``.

    Raises
    ------
    UnusableInput
        If it is none.
    """
    found = quantity(text)
    if found.dimension != dimension("length^-3") or found.value <= 0:
        says = f'"{text}" is no number density.'
        raise UnusableInput([Problem("--density", says, 'Write it like "0.021 angstrom^-3".')])
    return float(found.value)


def read_masses(texts: Sequence[str]) -> dict[str, float]:
    """Return the masses in dalton of texts such as ``Ar=39.95 dalton``.

    Raises
    ------
    UnusableInput
        If one is none.
    """
    masses = {}
    for text in texts:
        name, _, given = text.partition("=")
        found = quantity(given)
        if found.dimension != dimension("mass") or found.value <= 0:
            says = f'"{text}" is no mass.'
            raise UnusableInput([Problem("--mass", says, 'Write it like "Ar=39.95 dalton".')])
        masses[name.strip()] = float(found.value)
    return masses
