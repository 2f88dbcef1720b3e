"""Take a table apart: how digits, rows and the reading between rows each differ from the curve."""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import inf

import numpy as np
from numpy.typing import NDArray

from ..table import Rows
from ..units import UnitSystem
from .compiled import compiled
from .curve import EnergyCurve, from_rows

Array = NDArray[np.float64]
EXACT = 1e-12
"""A row that is off by no more, relative to its value and the energy scale, counts as exact."""
DIGITS = 5e-3
"""A row that is off by no more, relative to its value, counts as rounded and not as wrong."""
DIGITS_OF_SCALE = 3e-3
RANDOM = 0.05
"""Rounding changes its sign between neighbouring rows at least this often."""
ROUGH = 1e-2
"""A smooth curve that misses the rows by more, relative to their values, is none."""
STEP = 1e-6
"""A step at the cutoff, relative to the energy scale, above which it is one."""


@dataclass(frozen=True)
class Parts:
    """One pair at several levels of fault; None where a level is the one before.

    Attributes
    ----------
    table : EnergyCurve
        As the simulation reads it.
    rounded : EnergyCurve or None
        With its digits but without its wrong rows.
    rows : EnergyCurve or None
        With exact rows.
    curve : EnergyCurve
        Without any rows.
    edge : (float, float)
        Separations between which a pair crosses a step at the cutoff; none where the first is larger.
    """

    table: EnergyCurve
    rounded: EnergyCurve | None
    rows: EnergyCurve | None
    curve: EnergyCurve
    edge: tuple[float, float]


def take_apart(rows: Rows, units: UnitSystem, curve: EnergyCurve | None, rule: str, scale: float) -> Parts:
    """Return the levels of fault of a table.

    Parameters
    ----------
    rows : Rows
    units : UnitSystem
        Of the rows.
    curve : EnergyCurve or None
        What the table should hold; without it, the smooth curve through its energies.
    rule : str
        Interpolation rule, instead of the one that the rows name.
    scale : float
        The energy in eV that deviations are judged by.
    """
    knots = rows.separation * float(units.length.factor)
    end, gap = _end(rows, knots)
    if curve is None:
        exact = _smooth(rows, units, knots, end, scale)
        reference = compiled(exact)
    else:
        end = min(curve.reach, float(knots[-1]))
        gap = float(knots[-1] - knots[-2]) if end < knots[-1] else 0.0
        exact = replace(curve, reach=end)
        reference = compiled(exact)
    table = compiled(from_rows(rows, units, rule), knots)
    rounded, clean = _cleaned(rows, units, exact, knots, scale)

    def read(some: Rows | None) -> EnergyCurve | None:
        return None if some is None else compiled(from_rows(some, units, rule), knots)

    energy, slope = np.abs(exact.derivatives(np.array([end]), 1)[:, 0])
    has_step = energy > STEP * scale or slope * end > STEP * scale
    return Parts(table, read(rounded), read(clean), reference, (end - gap, end + gap) if has_step else (inf, 0.0))


def _end(rows: Rows, knots: Array) -> tuple[float, float]:
    """Return the last separation at which the rows are not zero, and the gap to the row after it."""
    assert rows.energy is not None
    there = np.flatnonzero(rows.energy != 0)
    last = int(there[-1]) if there.size else knots.size - 1
    if last + 2 >= knots.size:
        return float(knots[-1]), 0.0
    return float(knots[last]), float(knots[last + 1] - knots[last])


def _smooth(rows: Rows, units: UnitSystem, knots: Array, end: float, scale: float) -> EnergyCurve:
    """Return a smooth curve through the energies: of as few polynomials as come as near as many do.

    So it follows neither the rounding of rows nor, for rows that are few, anything but the rows.
    """
    from scipy.interpolate import make_lsq_spline

    assert rows.energy is not None
    r = knots[knots <= end]
    energy = rows.energy[knots <= end] * float(units.energy.factor)
    weight = 1 / (np.abs(energy) + scale)
    best = None
    for count in (10, 20, 40, 80, 160, 320, r.size // 3):
        if 3 * count > r.size:
            continue
        inner = r[np.linspace(0, r.size - 1, count).astype(int)][1:-1]
        spline = make_lsq_spline(r, energy, np.concatenate([[r[0]] * 6, inner, [r[-1]] * 6]), k=5, w=weight)
        miss = float(np.sqrt(np.mean(((spline(r) - energy) * weight) ** 2)))
        if best is None or miss < 0.5 * best[0]:
            best = (miss, spline)
    if best is None or best[0] > ROUGH:
        plain = Rows(rows.name, rows.separation[knots <= end], rows.energy[knots <= end], None, ends="not-a-knot")
        return from_rows(plain, units, "cubic-spline")
    readers = [best[1], best[1].derivative(), best[1].derivative(2)]

    def derivatives(x: Array, order: int) -> Array:
        return np.array([read(x) for read in readers[: order + 1]])

    return EnergyCurve(rows.name, derivatives, float(r[0]), end, end, exact=False)


def _cleaned(
    rows: Rows, units: UnitSystem, exact: EnergyCurve, knots: Array, scale: float
) -> tuple[Rows | None, Rows | None]:
    """Return the rows without what is wrong, then without rounding; None where that changes nothing."""
    assert rows.energy is not None
    if rows.force is None:
        return None, None
    inside = np.clip(knots, exact.start, exact.reach)
    energy, slope = exact.derivatives(inside, 1) * (knots <= exact.reach * (1 + 1e-15))
    size = {"energy": scale, "force": scale / float(knots[knots.size // 2])}
    meant = {
        "energy": energy / float(units.energy.factor),
        "force": (0.0 - slope) / float(units.force.factor),
    }
    factor = {"energy": float(units.energy.factor), "force": float(units.force.factor)}
    kept, rounds, wrong = {}, False, False
    for name, true in meant.items():
        stored = rows.column(name)
        assert stored is not None
        off = np.abs(stored - true) * factor[name]
        value = np.abs(true) * factor[name]
        exactly = off <= EXACT * (value + size[name])
        rounded = off <= DIGITS * value + DIGITS_OF_SCALE * size[name]
        if not _is_random((stored - true)[rounded & ~exactly]):
            rounded = exactly
        rounds |= bool(np.any(rounded & ~exactly))
        wrong |= bool(np.any(~rounded))
        kept[name] = np.where(rounded, stored, true)
    clean = replace(rows, energy=meant["energy"], force=meant["force"])
    digits = replace(rows, energy=kept["energy"], force=kept["force"])
    return (digits if rounds and wrong else (clean if wrong else None)), (clean if rounds else None)


def _is_random(off: Array) -> bool:
    """Whether deviations change their sign often enough to be rounding."""
    signs = np.sign(off[off != 0])
    return signs.size < 4 or float(np.mean(signs[1:] != signs[:-1])) > RANDOM
