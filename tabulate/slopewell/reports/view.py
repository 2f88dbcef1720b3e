"""What of a curve is worth drawing: limits that show the well, the rows the eye resolves, round ticks."""

from __future__ import annotations

import re
from dataclasses import dataclass
from math import ceil, floor, log10

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Limits = tuple[float, float]

BUCKETS = 400
"""Strips of separation, about two pixels wide, of which each keeps its first, lowest and highest row."""


@dataclass(frozen=True, slots=True)
class View:
    """The limits of a drawing, in the units of its curve; None for a column that is missing."""

    separation: Limits
    energy: Limits | None
    force: Limits | None


def view_of(r: Array, energy: Array | None, force: Array | None, bottom: float | None, reach: float | None) -> View:
    """Return limits that show the well and the cutoff, and let the wall leave through the top.

    Parameters
    ----------
    r, energy, force : (n,) array
        Ascending separations; the columns may be missing.
    bottom : float or None
        The equilibrium separation.
    reach : float or None
        The cutoff.
    """
    if r.size < 2:
        return _point_view(r)
    end = float(r[-1]) if reach is None else min(float(r[-1]), reach + 0.04 * (reach - float(r[0])))
    inside = r <= end * (1 + 1e-12)
    lead = energy if energy is not None else force
    start = float(r[0])
    if lead is not None:
        anchor = _anchor(r[inside], lead[inside], bottom)
        _, top = _range(r[inside], lead[inside], anchor, headroom=1.0)
        entered = _entry(r[inside], lead[inside], top)
        start = max(start, entered - 0.05 * (end - entered))
        energy_limits = None if energy is None else _range(r[inside], energy[inside], anchor, headroom=1.0)
        force_limits = None if force is None else _range(r[inside], force[inside], anchor, headroom=0.8)
        return View((start, end), energy_limits, force_limits)
    return View((start, end), None, None)


def _point_view(r: Array) -> View:
    """Return limits around a single row, or around none."""
    place = float(r[0]) if r.size else 0.0
    return View((place - 0.5, place + 0.5), (-1.0, 1.0), (-1.0, 1.0))


def _anchor(r: Array, values: Array, bottom: float | None) -> float:
    """Return the separation from which on everything shall be seen."""
    if bottom is not None and r[0] < bottom < r[-1]:
        return bottom
    calm = _calm(values)
    lowest = int(np.argmin(calm))
    if 0 < lowest < r.size - 1 and calm[lowest] < 0:
        return float(r[lowest])
    return float(r[0] + 0.25 * (r[-1] - r[0]))


def _calm(values: Array) -> Array:
    """Return values without lone spikes, so that a spoilt row does not set the limits."""
    finite = np.where(np.isfinite(values), values, 0.0)
    if finite.size < 50:
        return finite
    padded = np.pad(finite, 2, mode="edge")
    result: Array = np.median(np.lib.stride_tricks.sliding_window_view(padded, 5), axis=1)
    return result


def _range(r: Array, values: Array, anchor: float, headroom: float) -> Limits:
    calm = _calm(values)
    far = calm[r >= anchor] if np.any(r >= anchor) else calm
    low, high = min(float(far.min()), 0.0), max(float(far.max()), 0.0)
    span = (high - low) or 1.0
    # Without a well there is more room above: a bounded repulsion is seen whole.
    top = min(float(calm.max()) + 0.08 * span, high + (headroom if low < 0 else 4.0) * span)
    base = low - (0.28 if low < 0 else 0.08) * span
    return base, max(top, 0.12 * span)


def _entry(r: Array, values: Array, top: float) -> float:
    """Return the separation from which on the values stay below the top."""
    calm = _calm(values)
    above = np.flatnonzero(calm > top)
    return float(r[above[-1]]) if above.size and above[-1] < r.size // 2 else float(r[0])


def thin(r: Array, columns: list[Array], limits: Limits, buckets: int = BUCKETS) -> NDArray[np.intp]:
    """Return the rows that a drawing between two separations needs.

    Each strip of separation keeps its first row and, for every column, its lowest and highest
    one, so that a spike is seen however many rows there are.
    """
    first = max(int(np.searchsorted(r, limits[0])) - 1, 0)
    last = min(int(np.searchsorted(r, limits[1], side="right")) + 1, r.size)
    if last - first <= 2 * buckets:
        return np.arange(first, last)
    edges = np.searchsorted(r, np.linspace(limits[0], limits[1], buckets + 1)).clip(first, last)
    kept = {first, last - 1}
    for low, high in zip(edges[:-1].tolist(), edges[1:].tolist(), strict=True):
        if low < high:
            kept.add(low)
            for column in columns:
                part = column[low:high]
                kept |= {low + int(part.argmin()), low + int(part.argmax())}
    return np.array(sorted(kept))


def round_step(span: float, count: int) -> float:
    """Return the step of 1, 2 or 5 times a power of ten that cuts a span into at most so many parts."""
    power = 10.0 ** floor(log10(span / count))
    return next((factor * power for factor in (1.0, 2.0, 5.0) if span / (factor * power) <= count), 10.0 * power)


def ticks(limits: Limits, count: int) -> list[tuple[float, str]]:
    """Return round numbers between two limits, with their texts."""
    step = round_step(limits[1] - limits[0], count)
    places = max(0, -floor(log10(step) + 1e-9))
    first, last = ceil(limits[0] / step - 1e-9), floor(limits[1] / step + 1e-9)
    return [(k * step, _tick_text(k * step, places)) for k in range(first, last + 1)]


def decades(limits: Limits) -> list[tuple[float, str]]:
    """Return whole powers of ten between two logarithms, at most about four, with their texts."""
    first, last = ceil(limits[0]), floor(limits[1])
    step = max(1, (last - first) // 3)
    return [(float(power), f"10{str(power).translate(RAISED)}") for power in range(first, last + 1, step)]


def _tick_text(value: float, places: int) -> str:
    if abs(value) >= 1e5 or places > 4:
        return number_text(value, 3)
    return f"{value:.{places}f}".replace("-", "−")


def number_text(value: float, digits: int = 6) -> str:
    """Return a number for people: so many significant digits, a true minus sign, ×10ⁿ where it is long."""
    mantissa, _, power = f"{value:.{digits}g}".partition("e")
    if power and "." in mantissa:
        mantissa = mantissa.rstrip("0").rstrip(".")
    tens = f"×10{str(int(power)).translate(RAISED)}" if power else ""
    return mantissa.replace("-", "−") + tens


RAISED = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def unit_text(text: str) -> str:
    """Return a unit for people: Å for angstrom, raised powers.

    Examples
    --------
    >>> unit_text("kJ/mol angstrom^6")
    'kJ/mol Å⁶'
    """
    return POWER.sub(lambda found: found[1].translate(RAISED), text).replace("angstrom", "Å")


POWER = re.compile(r"\^(-?\d+)")
