"""Is the energy finite everywhere on the grid?"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from ..formula.balls import ball, precision, series, stretch
from ..formula.branches import Piece
from .findings import ERROR, Check, Finding
from .potential_facts import PotentialFacts

NARROW = 1e-7
"""Width, relative to the piece, of a stretch that still has no bound: a pole is sought in it."""
MOST_STRETCHES = 4000


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Find rows without a finite value, and poles between rows."""
    values = facts.potential.treated.derivatives(facts.probes, 1)
    broken = ~np.isfinite(values).all(axis=0)
    if broken.any():
        places = facts.probes[broken]
        first, last = (f"{facts.length(float(place)):.6g}" for place in (places[0], places[-1]))
        where = f"at {first}" if first == last else f"from {first} to {last}"
        yield Finding(
            level=ERROR,
            says=f"Energy or force has no finite value {where} {facts.units.length.text}: a pole, an overflow, "
            "or a root or logarithm of a negative number.",
            remedy="Check parameters and units; start the grid further out, or end it before the pole.",
            start=facts.length(float(places[0])),
            end=facts.length(float(places[-1])),
        )
        return
    for piece in facts.potential.treated.within(facts.potential.start, facts.potential.end).pieces:
        for place in poles(piece):
            yield Finding(
                level=ERROR,
                says=f"The energy has a pole at {facts.length(place):.6g} {facts.units.length.text}, between two rows.",
                remedy="Keep the grid away from the pole, or mend the formula.",
                start=facts.length(place),
                end=facts.length(place),
            )


def poles(piece: Piece) -> list[float]:
    """Return the poles of a piece: where balls find no bound and the energy grows without one."""
    suspects: list[tuple[float, float]] = []
    pending = [(float(piece.start), float(piece.end))]
    width = (pending[0][1] - pending[0][0]) * NARROW
    visited = 0
    while pending and visited < MOST_STRETCHES:
        low, high = pending.pop()
        visited += 1
        if series(piece.tree, stretch(low, high), 0)[0].is_finite():
            continue
        if high - low < width:
            suspects.append((low, high))
            continue
        middle = (low + high) / 2
        pending += [(middle, high), (low, middle)]
    return _distinct([(low + high) / 2 for low, high in suspects if _grows(piece, low, high)], 3 * width)


def _grows(piece: Piece, low: float, high: float) -> bool:
    """Tell a pole from a place where only the enclosure fails."""
    near = [abs(_value(piece, low + (high - low) * share)) for share in (0.0, 0.37, 0.5, 0.71, 1.0)]
    far = [abs(_value(piece, edge)) for edge in (low - 1e4 * (high - low), high + 1e4 * (high - low))]
    around = [value for value in far if np.isfinite(value)]
    largest = max(near)
    return not np.isfinite(largest) or (bool(around) and largest > 100 * max(min(around), 1e-300))


def _value(piece: Piece, r: float) -> float:
    inside = min(max(r, float(piece.start)), float(piece.end))
    with precision():
        value = series(piece.tree, ball(inside), 0)[0]
        return float(value.mid()) if value.is_finite() else float("inf")


def _distinct(places: list[float], width: float) -> list[float]:
    result: list[float] = []
    for place in sorted(places):
        if not result or place - result[-1] > width:
            result.append(place)
    return result


CHECK: Check[PotentialFacts] = Check("finite", "Energy and force are finite everywhere on the grid", look)
