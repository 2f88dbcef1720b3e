"""Slopes of energy rows, each with a band that certainly holds the true one for a sound table.

Divided differences over up to seven rows give the slope at a row by polynomials of rising order. How far
the last two orders moved it bounds what interpolation leaves; the digits of the rows bound what rounding
leaves. Every row is read centred, from its left and from its right, so that a kink or a step between two
rows spoils no reading on its own side, and with wider strides where rounding drowns the nearest rows.
The narrowest band wins. (Newton's divided differences: F. B. Hildebrand, Introduction to Numerical
Analysis, 2nd ed., 1974, chapter 2.)
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

Reading = tuple[int, Array, Array, Array]
"""First row, slopes, bands, and the part of the bands that rounding has."""

HIGHEST = 6
"""Highest order of divided differences: seven rows."""
SAFETY = 3.0
"""Band per movement of the slope by the last two orders."""
HIDDEN = 2.5
"""Multiple of the rounding charged to a wider stride: rounding hides whether it still converges."""
WIDEST = 0.1
"""Part of the separation that a wider stride may span: curves of pairs change over less than that."""
CONVERGENCE = 0.3
"""Movement of the last two orders per that of the two before, beyond which nothing converges."""
STRIDE_RATIO = 3
DROWNED = 0.1
"""Part of a band from which on rounding is worth a wider stride."""
WORTHWHILE, RARELY = 1e-6, 0.02
"""No wider stride is tried when rounding costs this part of the slope on fewer than so many rows."""
CENTRED = {4: (0, 8, 1), 6: (0, 45, 9, 1)}
SIDED = {4: (25, 48, 36, 16, 3), 6: (147, 360, 450, 400, 225, 72, 10)}
DENOMINATORS = {4: 12, 6: 60}
"""Sizes of the weights of even rows, by order: how each row's rounding enters the slope."""


@dataclass(frozen=True, slots=True)
class Slopes:
    """Slopes of energy rows.

    Attributes
    ----------
    values : (n,) array
        dU/dr; zero where nothing can be said.
    band : (n,) array
        Half-width within which the true slope lies; infinite where nothing can be said.
    """

    values: Array
    band: Array


def slopes(separation: Array, energy: Array, energy_noise: Array, separation_noise: Array) -> Slopes:
    """Return the slopes of energy rows.

    Parameters
    ----------
    separation : (n,) array
        Strictly ascending.
    energy : (n,) array
    energy_noise, separation_noise : (n,) array
        Largest rounding error of each row.
    """
    rows = separation.size
    values, band = np.zeros(rows), np.full(rows, np.inf)
    # Tables hold walls up to 1e300; what overflows leaves an infinite band, and nothing is said there.
    with np.errstate(all="ignore"):
        noise = energy_noise + _steepness(separation, energy) * separation_noise
        lowest, highest = np.full(rows, -np.inf), np.full(rows, np.inf)
        rounding = np.full(rows, np.inf)
        for stride in _strides(rows):
            drowned = rounding > DROWNED * band if stride > 1 else np.ones(rows, dtype=bool)
            if stride > 1 and np.mean(drowned & (rounding > WORTHWHILE * np.abs(values))) < RARELY:
                break
            for start, found, width, share in _Strided(separation, energy, noise, stride).readings():
                target = slice(start, start + found.size)
                width = np.where(drowned[target], width, np.inf)
                better = width < band[target]
                for kept, new in ((values, found), (band, width), (rounding, share)):
                    np.copyto(kept[target], new, where=better)
                np.fmax(lowest[target], found - width, out=lowest[target])
                np.fmin(highest[target], found + width, out=highest[target])
        # Where two readings exclude each other one of them looks across a kink; nobody can tell which.
        apart = lowest > highest
        band = np.where(apart, np.maximum(np.maximum(lowest - values, values - highest), band), band)
    return Slopes(values, band)


def _steepness(separation: Array, energy: Array) -> Array:
    """Return the larger of the two neighbouring difference quotients, in size."""
    steps = np.abs(np.diff(energy) / np.diff(separation))
    larger: Array = np.maximum(np.append(steps, steps[-1:]), np.insert(steps, 0, steps[:1]))
    return larger


def _strides(rows: int) -> Iterator[int]:
    stride = 1
    while HIGHEST * stride < rows:
        yield stride
        stride *= STRIDE_RATIO


class _Strided:
    """Divided differences of every row with rows a stride apart."""

    def __init__(self, separation: Array, energy: Array, noise: Array, stride: int) -> None:
        self.r, self.noise, self.stride = separation, noise, stride
        self.differences = [energy]
        for order in range(1, HIGHEST + 1):
            last = self.differences[-1]
            width = separation[order * stride :] - separation[: -order * stride]
            self.differences.append((last[stride:] - last[:-stride]) / width)

    def readings(self) -> Iterator[Reading]:
        """Yield what each way to read gives."""
        outward = (1, -1, 2, -2, 3, -3)
        yield from self._read(outward, CENTRED)
        yield from self._read((-1, -2, -3, -4, -5, -6), SIDED)
        yield from self._read((1, 2, 3, 4, 5, 6), SIDED)

    def _read(self, nodes: tuple[int, ...], weights: dict[int, tuple[int, ...]]) -> Iterator[Reading]:
        """Add Newton's terms for rows in the order ``nodes`` around each row."""
        s = self.stride
        first = -min(0, *nodes) * s
        count = self.r.size - (max(0, *nodes) - min(0, *nodes)) * s
        if count <= 0:
            return
        here = self.r[first : first + count]
        product: Array | float = 1.0
        # One-sided rows further apart than the origin is away tell nothing of a curve that diverges there.
        gap = np.abs(self.r[first + nodes[0] * s : first + nodes[0] * s + count] - here)
        reach = np.abs(here) * (WIDEST if s > 1 else 1.0) if s > 1 or min(nodes) > 0 else np.inf
        value = np.zeros(count)
        moved: list[Array] = []
        for order, node in enumerate(nodes, start=1):
            lowest = min(0, *nodes[:order])
            begin = first + lowest * s
            term = self.differences[order][begin : begin + count] * product
            value = value + term
            moved.append(np.abs(term))
            product = product * (here - self.r[first + node * s : first + node * s + count])
            if order in weights:
                rounding = self._rounding(first, count, nodes, weights[order], order)
                change, before = moved[-1] + moved[-2], moved[-3] + moved[-4]
                lost = ((change > CONVERGENCE * before) & (change > rounding)) | (gap > reach)
                charged = rounding if s == 1 else HIDDEN * rounding
                yield first, value, np.where(lost, np.inf, SAFETY * widest(change, s) + charged), rounding

    def _rounding(self, first: int, count: int, nodes: tuple[int, ...], weights: tuple[int, ...], order: int) -> Array:
        """Return what the rounding of all rows may do to the slope together."""
        s = self.stride
        sides = sorted({1 if node > 0 else -1 for node in nodes})
        total = np.zeros(count)
        for side in sides:
            for distance, weight in enumerate(weights):
                begin = first + side * distance * s
                total += weight * self.noise[begin : begin + count]
        gaps = [
            np.abs(self.r[first + side * s : first + side * s + count] - self.r[first : first + count])
            for side in sides
        ]
        gap = gaps[0] if len(gaps) == 1 else np.minimum(*gaps)
        cost: Array = total / (DENOMINATORS[order] * gap)
        return cost


def widest(movement: Array, stride: int) -> Array:
    """Return the largest value of each row and its neighbours, so that no lucky small one counts."""
    result = movement.copy()
    np.maximum(result[stride:], movement[:-stride], out=result[stride:])
    np.maximum(result[:-stride], movement[stride:], out=result[:-stride])
    return result
