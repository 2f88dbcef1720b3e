"""How many digits a column of numbers carries, and what rounding to them costs."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

SAMPLE = 150
"""Numbers looked at: enough that some end in no zero."""
RARE = 0.02
"""Part of the numbers that may carry more digits than the column does: corrupted rows among good ones."""
EPSILON = float(np.finfo(np.float64).eps)
MOST_JOINS = 3
"""Places at which the step of a grid may change on purpose."""
FULL = 16
"""From so many digits on, a column holds its doubles whole."""
SINGLE = 2.0**-24
LEAST_FOR_SINGLE = 8
"""Digits from which on single precision shows."""
TINIEST = 1e-320
LARGEST_POWER = 308
POWERS = 10.0 ** np.arange(-LARGEST_POWER, LARGEST_POWER + 1)


@dataclass(frozen=True, slots=True)
class Digits:
    """The resolution of a column.

    Attributes
    ----------
    significant : int
        Digits of a number, without leading zeros.
    decimals : int
        Digits behind the point of a plain decimal; negative where the last ones before it are zeros.
    single : bool
        Whether all numbers are of single precision, however many digits they were printed with.
    """

    significant: int
    decimals: int
    single: bool = False

    def rounding(self, column: Array) -> Array:
        """Return the largest rounding error of each number."""
        size = np.abs(column)
        own = (SINGLE if self.single else EPSILON / 2) * size
        if self.significant >= FULL:
            return own
        with np.errstate(all="ignore"):
            leading = np.floor(np.log10(np.maximum(size, TINIEST))).astype(np.intp)
        place = np.clip(leading + 1 - self.significant, -LARGEST_POWER, LARGEST_POWER)
        step = np.maximum(POWERS[place + LARGEST_POWER], 10.0 ** float(np.clip(-self.decimals, -300, 300)))
        rounding: Array = np.maximum(step / 2, own)
        return rounding


def digits(column: Array) -> Digits:
    """Return the digits that a column carries, from the shortest text of a sample of its numbers."""
    finite = column[np.isfinite(column) & (column != 0)]
    if not finite.size:
        return Digits(17, 400)
    sample = finite[np.linspace(0, finite.size - 1, min(SAMPLE, finite.size)).astype(int)]
    counts = np.array([_digits(number) for number in sample.tolist()])
    significant, decimals = np.quantile(counts, 1 - RARE, axis=0, method="lower").astype(int)
    return Digits(int(significant), int(decimals), _single(sample, int(significant)))


def _single(sample: Array, significant: int) -> bool:
    """Whether numbers are those of single precision, within the digits they were printed with."""
    if significant < LEAST_FOR_SINGLE:
        return False
    with np.errstate(all="ignore"):
        off = np.abs(sample.astype(np.float32).astype(np.float64) - sample)
    printed = 0.6 * 10.0 ** (1 - min(significant, 17))
    leading = 10.0 ** np.floor(np.log10(np.maximum(np.abs(sample), TINIEST)))
    return bool(np.all(off <= printed * leading) and np.count_nonzero(sample != np.rint(sample)) > 3)


def _digits(number: float) -> tuple[int, int]:
    mantissa, _, exponent = f"{number!r}".lstrip("-").partition("e")
    whole, _, fraction = mantissa.partition(".")
    fraction = fraction.rstrip("0")
    text = (whole + fraction).lstrip("0")
    shift = int(exponent or 0)
    stripped = text.rstrip("0")
    return len(stripped), len(fraction) - shift - (len(text) - len(stripped))


def separation_rounding(separation: Array) -> Array:
    """Return the rounding of separations: none where rows keep an even step at the digits they have.

    Separations such as 0.25, 0.26, 0.27 are short because the step is, not because they were rounded.
    """
    bound = digits(separation).rounding(separation)
    exact = EPSILON * np.abs(separation)
    if separation.size < 4:
        return exact
    uneven = np.abs(np.diff(separation, 2)) > 8 * exact[1:-1]
    return exact if np.count_nonzero(uneven) <= MOST_JOINS else np.maximum(bound, exact)
