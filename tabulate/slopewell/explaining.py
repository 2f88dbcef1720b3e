"""What explains the difference of two curves: units, shifts, or the rows they are read from."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from .checks import TableFacts
from .checks.mistakes.evidence import weighted_median
from .checks.mistakes.factors import ENERGIES, LENGTHS
from .table import Rows
from .table.interpolation import interpolant
from .units import UnitSystem, unit

Array = NDArray[np.float64]
Reader = Callable[[Array], tuple[Array, Array]]

REMAINING = 1e-3
"""Part of the difference that an explanation may leave."""


@dataclass(frozen=True, slots=True)
class Explained:
    """What explains a difference: a name, the factor or shift, and words."""

    name: str
    factor: float | None
    says: str


def explain(
    r: Array,
    first: Array,
    second: Array,
    one: Rows,
    other: Rows,
    read: Reader,
    units: UnitSystem,
    allowed: float,
) -> Explained | None:
    """Find what explains the difference of two energies.

    Parameters
    ----------
    r, first, second : (n,) array
        Separations and the energies of both, in the first file's units.
    one, other : Rows
        The rows of both files.
    read : callable
        Reads the second between its rows.
    units : UnitSystem
        Units of the first.
    allowed : float
        Difference of energy that counts as none.
    """
    size = np.maximum(np.abs(first), np.abs(second))
    shifted = _of_shift(r, first, second, one, other, read, units, allowed)
    tries = [*_of_energy(first, second, units), *_of_length(r, first, one, other, read, units)]
    for found, left in tries:
        told = np.isfinite(left)
        enough = np.count_nonzero(told) > 0.3 * r.size
        if enough and np.all(np.abs(left[told]) <= allowed + REMAINING * size[told]):
            return found
    return shifted or _of_rows(r, first, second, other) or _of_constant(first, second, allowed, units)


def explain_force(first: Array, second: Array, units: UnitSystem, allowed: float) -> Explained | None:
    """Find what explains the difference of two forces whose energies agree.

    Parameters
    ----------
    first, second : (n,) array
        In the first file's units.
    units : UnitSystem
    allowed : float
        Difference of force that counts as none.
    """
    usable = (np.abs(first) > 1e-6 * np.abs(first).max()) & (second != 0)
    if np.count_nonzero(usable) < 3:
        return None
    gap = second - first
    offset = float(np.median(gap))
    if np.all(np.abs(gap - offset) <= allowed + 0.01 * np.abs(gap)):
        says = f"The energies agree; the forces differ by the constant {offset:.9g} {units.force.text}."
        return Explained("constant-force-offset", offset, says)
    factor = weighted_median(second[usable] / first[usable], np.abs(first[usable]))
    if not np.all(np.abs(second / factor - first) <= allowed + REMAINING * np.abs(first)):
        return None
    turned = ", with opposite signs" if factor < 0 else ""
    says = f"The energies agree; the forces differ by the factor {abs(factor):.9g}{turned}"
    for size, text in [(1.0, ""), *_force_units(units)]:
        if abs(abs(factor) / size - 1) < 1e-6:
            name = "force-in-other-units" if text else "force-sign-flipped"
            between = f", as between {units.force.text} and {text}." if text else "."
            return Explained(name, float(np.copysign(size, factor)), says + between)
    counted = abs(np.log2(abs(factor))) - 1
    return Explained("counted-twice" if abs(counted) < 1e-6 else "force-factor", factor, f"{says}.")


def _force_units(units: UnitSystem) -> Iterator[tuple[float, str]]:
    """Yield ratios between the unit of force and others, those that change one unit first."""
    energies = [(float(units.energy.factor / unit(name).factor), name) for name in (units.energy.text, *ENERGIES)]
    lengths = [(float(unit(name).factor / units.length.factor), name) for name in (units.length.text, *LENGTHS)]
    both = [(a != 1 and b != 1, a * b, f"{one}/{other}") for a, one in energies for b, other in lengths]
    for _, value, text in sorted(both, key=lambda entry: entry[0]):
        if value != 1:
            yield value, text
            yield 1 / value, text


def _of_shift(
    r: Array, first: Array, second: Array, one: Rows, other: Rows, read: Reader, units: UnitSystem, allowed: float
) -> Explained | None:
    """Return the shift of all separations that brings the two wells together, if it explains the difference."""
    places = [TableFacts(rows, units).landmarks.equilibrium_separation for rows in (one, other)]
    if places[0] is None or places[1] is None or abs(places[1] / places[0] - 1) < 1e-6:
        return None
    shift = places[1] - places[0]
    inside = (r + shift >= other.separation[0]) & (r + shift <= other.separation[-1])
    if np.count_nonzero(inside) < 0.3 * r.size:
        return None
    left = np.abs(read(r[inside] + shift)[0] - first[inside])
    if np.all(left <= allowed + 0.01 * np.abs(second - first)[inside]):
        says = f"The separations differ by the constant {shift:.7g} {units.length.text}."
        return Explained("separation-shift", shift, says)
    return None


def length_ratio(one: Rows, other: Rows, units: UnitSystem) -> Explained | None:
    """Return the ratio of units of length that brings the ends of two tables together."""
    ends = other.separation[[0, -1]] / one.separation[[0, -1]]
    for name in LENGTHS:
        known = float(units.length.factor / unit(name).factor)
        for value in (known, 1 / known):
            if value != 1 and np.all(np.abs(ends / value - 1) < 0.01):
                says = _between("separations", value, units.length.text, name)
                return Explained("length-units", value, says)
    return None


def _between(what: str, factor: float, unit_text: str, other: str) -> str:
    return f"The {what} differ by the factor {factor:.9g}, as between {unit_text} and {other}."


def _of_constant(first: Array, second: Array, allowed: float, units: UnitSystem) -> Explained | None:
    """Return a factor or a shift of no known origin that explains nearly all of the difference."""
    gap = second - first
    shift = float(np.median(gap))
    usable = (np.abs(first) > 1e-6 * np.abs(first).max()) & (second != 0)
    factor = weighted_median(second[usable] / first[usable], np.abs(first[usable])) if usable.any() else 0.0
    limit = allowed + 0.01 * np.abs(gap)
    if np.all(np.abs(gap - shift) <= limit):
        says = f"The energies differ by the constant {shift:.9g} {units.energy.text}."
        return Explained("energy-shift", shift, says)
    if factor and np.all(np.abs(second / factor - first) <= limit):
        return Explained("energy-factor", factor, f"The energies differ by the factor {factor:.9g}.")
    return None


def _of_energy(first: Array, second: Array, units: UnitSystem) -> Iterator[tuple[Explained, Array]]:
    """Yield known factors between the energies, with what each leaves."""
    usable = (np.abs(first) > 1e-6 * np.abs(first).max()) & (second != 0)
    if np.count_nonzero(usable) >= 3:
        factor = weighted_median(second[usable] / first[usable], np.abs(first[usable]))
        if abs(factor + 1) < 1e-6:
            yield Explained("energy-sign", -1.0, "The energies have opposite signs."), second + first
        for name in ENERGIES:
            known = float(units.energy.factor / unit(name).factor)
            for value in (known, 1 / known):
                if abs(abs(factor) / value - 1) < 1e-3 and value != 1:
                    says = _between("energies", value, units.energy.text, name)
                    signed = float(np.copysign(value, factor))
                    yield Explained("energy-units", signed, says), second / factor - first


def _of_length(
    r: Array, first: Array, one: Rows, other: Rows, read: Reader, units: UnitSystem
) -> Iterator[tuple[Explained, Array]]:
    """Yield the ratios of units of length, with what each leaves."""
    for name in LENGTHS:
        known = float(units.length.factor / unit(name).factor)
        for value in (known, 1 / known):
            if value == 1:
                continue
            moved = r * value
            inside = (moved >= other.separation[0]) & (moved <= other.separation[-1])
            left = np.full(r.size, np.nan)
            if np.count_nonzero(inside) >= 3:
                left[inside] = read(moved[inside])[0] - first[inside]
            says = _between("separations", value, units.length.text, name)
            yield Explained("length-units", value, says), left


def _of_rows(r: Array, first: Array, second: Array, other: Rows) -> Explained | None:
    """Tell whether the rows of the second are too far apart to read the first from them."""
    if other.separation.size < 9 or other.energy is None:
        return None
    thinned = replace(
        other,
        separation=other.separation[::2],
        energy=other.energy[::2],
        force=None if other.force is None else other.force[::2],
        curvature=None if other.curvature is None else other.curvature[::2],
    )
    coarse = interpolant(thinned)
    middle = other.separation[1:-1:2]
    inside = (middle >= coarse.start) & (middle <= coarse.end)
    # Twice the step costs a cubic sixteen times the error; a factor of four is left for rough curves.
    error = np.abs(coarse.energy(middle[inside]) - other.energy[1:-1:2][inside]) / 4
    near = np.interp(
        r, middle[inside], np.maximum(error, np.maximum(np.append(error[1:], 0), np.insert(error[:-1], 0, 0)))
    )
    rounding = 1e-12 * np.maximum(np.abs(first), np.abs(second))
    if np.all(np.abs(first - second) <= near + rounding):
        ratio = float(np.median(np.diff(other.separation)) / np.median(np.diff(r)))
        return Explained("grid", ratio, "The rows differ: reading between them costs this much.")
    return None
