"""Mistakes of rows: forces that belong to other rows, and single corrupted rows."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from .evidence import Evidence, Explanation, distance

Array = NDArray[np.float64]

FARTHEST = 64
"""Largest offset looked for, in rows."""
FIRST_LOOK = 60
"""Wrong rows that every offset is tried on before the best ones are tried on more."""
MOST_CORRUPTED = 0.05
"""Largest part of the rows that counts as single ones among good ones."""


def offset(evidence: Evidence) -> Iterator[Explanation]:
    """Shift the expected forces by whole and half rows, and keep what fits best."""
    if not evidence.rows:
        return
    farthest = min(FARTHEST, evidence.force.size // 4)
    columns = _Halves(evidence)
    every = [twice for twice in range(-2 * farthest, 2 * farthest + 1) if twice]
    few = evidence.sample[:: max(1, evidence.sample.size // FIRST_LOOK)]
    promising = columns.best(columns.best(every, few, 12), evidence.sample, 2)
    for twice in promising:
        for predicted, band in columns.predictions(twice):
            rows = twice / 2
            number = int(rows) if rows == int(rows) else rows
            where = f"{abs(rows):g} row{'' if abs(rows) <= 1 else 's'} further {'down' if rows > 0 else 'up'}"
            yield Explanation(
                predicted,
                band,
                f"The force in each row belongs to the separation {where}.",
                "Shift the force column back"
                + ("." if rows == int(rows) else "; half a row is what a difference of neighbouring energies gives."),
                measured=rows,
                details={"rows": number},
                weight=0.2 * (abs(rows) > 4),
            )


class _Halves:
    """Expected forces at rows and half-way between them."""

    def __init__(self, evidence: Evidence) -> None:
        self.evidence = evidence
        r, x = evidence.separation, evidence.expected
        band = evidence.band
        wide = np.maximum(band[:-1], band[1:])
        self.middles = []
        if x.size >= 4:
            around = np.maximum(wide, np.maximum(np.append(wide[1:], np.inf), np.insert(wide[:-1], 0, np.inf)))
            # Half-way in separation, and half-way in what the rows are even in.
            for weights in (_middle_weights(r), (-1 / 16, 9 / 16, 9 / 16, -1 / 16)):
                between = (x[:-1] + x[1:]) / 2
                moved = np.full(between.size, np.inf)
                inner = weights[0] * x[:-3] + weights[1] * x[1:-2] + weights[2] * x[2:-1] + weights[3] * x[3:]
                moved[1:-1] = np.abs(inner - between[1:-1]) / 4
                between[1:-1] = inner
                self.middles.append((between, around * 1.25 + moved))
        with np.errstate(all="ignore"):
            quotient = -np.diff(evidence.energy) / np.diff(r)
            slack = np.abs(quotient) * 1e-9 + (evidence.rounding[:-1] + evidence.rounding[1:]) * 2
        self.middles.append((quotient, slack))

    def best(self, offsets: list[int], chosen: NDArray[np.intp], count: int) -> list[int]:
        """Return the offsets, in half rows, that leave the fewest of some wrong rows wrong."""
        scored: list[tuple[float, int, int]] = []
        for part in ([n for n in offsets if n % 2 == 0], [n for n in offsets if n % 2]):
            if part:
                scores = self._scores(np.array(part), chosen)
                scored += [(score, abs(n), n) for score, n in zip(scores.tolist(), part, strict=True)]
        return [n for score, _, n in sorted(scored)[:count] if score < 1]

    def _scores(self, offsets: NDArray[np.intp], chosen: NDArray[np.intp]) -> Array:
        """Return the part of wrong rows that each offset leaves wrong; 1 where it says too little."""
        scores = np.ones(offsets.size)
        for predicted, band in self._at(offsets[:, None], chosen[None, :]):
            told = np.isfinite(band)
            enough = np.count_nonzero(told, axis=1) >= 0.5 * chosen.size
            misses = (distance(self.evidence.force[chosen][None, :], predicted, band) > 1) & told
            left = np.count_nonzero(misses, axis=1) / np.maximum(np.count_nonzero(told, axis=1), 1)
            scores = np.where(enough, np.minimum(scores, left), scores)
        return scores

    def predictions(self, twice: int) -> Iterator[tuple[Array, Array]]:
        """Yield the forces that an offset of so many half rows predicts, and their bands."""
        yield from self._at(np.array(twice), np.arange(self.evidence.force.size))

    def _at(self, twice: NDArray[np.intp], rows: NDArray[np.intp]) -> Iterator[tuple[Array, Array]]:
        """Yield predictions for offsets that are all whole or all half, in the shape of both together."""
        evidence = self.evidence
        whole = [(evidence.expected, evidence.band)]
        index = rows + twice // 2
        for values, band in whole if int(twice.flat[0]) % 2 == 0 else self.middles:
            inside = (index >= 0) & (index < values.size)
            safe = np.clip(index, 0, values.size - 1)
            width = np.where(inside, band[safe] + evidence.rounding[rows], np.inf)
            yield np.where(inside, values[safe], 0.0), width


def _middle_weights(separation: Array) -> tuple[Array, Array, Array, Array]:
    """Return the weights of four rows in the cubic through them, half-way between the middle two."""
    nodes = [separation[:-3], separation[1:-2], separation[2:-1], separation[3:]]
    middle = (nodes[1] + nodes[2]) / 2
    weights = []
    for node in nodes:
        weight = np.ones_like(middle)
        for other in nodes:
            if other is not node:
                weight = weight * (middle - other) / (node - other)
        weights.append(weight)
    return weights[0], weights[1], weights[2], weights[3]


def corrupted(evidence: Evidence) -> Iterator[Explanation]:
    """Take a few rows out of many as corrupted."""
    if not evidence.rows:
        return
    wrong = evidence.wrong
    if not 0 < wrong.size <= max(2.0, MOST_CORRUPTED * evidence.force.size):
        return
    runs = np.count_nonzero(np.diff(wrong) > 1) + 1
    if wrong.size > 3 * runs:
        return
    yield corrupted_rows(evidence, wrong)


def corrupted_rows(evidence: Evidence, wrong: NDArray[np.intp]) -> Explanation:
    """Return the explanation that some rows are corrupted."""
    predicted = evidence.expected.copy()
    predicted[wrong] = evidence.force[wrong]
    band = evidence.band + evidence.rounding
    band[wrong] = np.maximum(evidence.rounding[wrong], 1e-300)
    numbers = [int(row) + 1 for row in wrong]
    shown = ", ".join(map(str, numbers[:8])) + (", …" if len(numbers) > 8 else "")
    several = len(numbers) > 1
    return Explanation(
        predicted,
        band,
        f"{'Rows' if several else 'Row'} {shown} (of {evidence.force.size}) "
        f"{'do' if several else 'does'} not fit {'their' if several else 'its'} neighbours; all others "
        "agree.",
        "Recompute these rows, or take them out and interpolate.",
        measured=float(len(numbers)),
        details={"rows": numbers, "columns": _columns(evidence, wrong)},
        weight=0.3,
    )


def _columns(evidence: Evidence, wrong: NDArray[np.intp]) -> dict[str, list[int]]:
    """Return the corrupted rows by column: the energy where it spikes, else the force."""
    energy = set(evidence.spikes.get("energy", np.zeros(0, dtype=int)).tolist())
    split = {
        "energy": [int(row) + 1 for row in wrong if int(row) in energy],
        "force": [int(row) + 1 for row in wrong if int(row) not in energy],
    }
    return {name: rows for name, rows in split.items() if rows}
