"""Lengths of the row intervals of a grid, by its spacing rule, without computing its rows."""

from __future__ import annotations

from dataclasses import dataclass, field
from math import exp, floor, log, sqrt

SLACK = 1e-12
"""Relative margin that covers the rounding of interval lengths."""


@dataclass(frozen=True, slots=True)
class Spacing:
    """The rows of a grid as a rule, in ångström."""

    start: float
    end: float
    rows: int
    rule: str
    first: float = field(init=False)
    last: float = field(init=False)

    def __post_init__(self) -> None:
        """Work out once what the rows are even in at both ends."""
        object.__setattr__(self, "first", self.even(self.start))
        object.__setattr__(self, "last", self.even(self.end))

    def position(self, r: float) -> float:
        """Return the number of a separation, counted in row intervals from the first row."""
        return (self.even(r) - self.first) / (self.last - self.first) * (self.rows - 1)

    def even(self, r: float) -> float:
        """Return what the rows are even in."""
        match self.rule:
            case "separation":
                return r
            case "separation-squared":
                return r * r
            case "inverse":
                return 1 / r
            case _:
                return log(r)

    def row(self, index: int) -> float:
        """Return the separation of a row, counted from 0."""
        share = min(max(index, 0), self.rows - 1) / (self.rows - 1)
        value = self.first + (self.last - self.first) * share
        match self.rule:
            case "separation":
                return value
            case "separation-squared":
                return sqrt(value)
            case "inverse":
                return 1 / value
            case _:
                return exp(value)

    def longest(self, low: float, high: float) -> float:
        """Return the length of the longest row interval that touches a stretch."""
        if self.rule == "separation":
            return (self.end - self.start) / (self.rows - 1) * (1 + SLACK)
        # Intervals shrink outwards in r² and grow outwards in the other rules.
        at = self.position(low) - 1e-6 if self.rule == "separation-squared" else self.position(high) + 1e-6
        return self._length(floor(at))

    def centred(self, low: float, high: float) -> tuple[int, int]:
        """Return the first and last row interval whose middle lies in a stretch; none if they are crossed."""
        first, last = (floor(self.position(edge)) for edge in (low, high))
        first += self._middle(first) < low * (1 - SLACK)
        last -= self._middle(last) > high * (1 + SLACK)
        return max(first, 0), min(last, self.rows - 2)

    def longest_of(self, first: int, last: int) -> float:
        """Return the length of the longest of some row intervals; 0 if there are none."""
        if first > last:
            return 0.0
        return self._length(first if self.rule == "separation-squared" else last)

    def at(self, r: float) -> float:
        """Return the length of the row interval that holds a separation."""
        return self._length(floor(self.position(r)))

    def _middle(self, index: int) -> float:
        return (self.row(index) + self.row(index + 1)) / 2

    def _length(self, index: int) -> float:
        inside = min(max(index, 0), self.rows - 2)
        return (self.row(inside + 1) - self.row(inside)) * (1 + SLACK)

    def unevenness(self, low: float, high: float) -> float:
        """Return by how much neighbouring intervals that touch a stretch differ at most."""
        if self.rule == "separation" or self.rows < 3:
            return 0.0
        at = self.position(low) - 1 if self.rule == "separation-squared" else self.position(high) + 1
        index = min(max(floor(at), 0), self.rows - 3)
        return abs(self.row(index + 2) - 2 * self.row(index + 1) + self.row(index)) * (1 + 1e-6)

    def around(self, r: float) -> tuple[float, float]:
        """Return the ends of the row interval that holds a separation."""
        index = min(max(floor(self.position(r)), 0), self.rows - 2)
        return self.row(index), self.row(index + 1)

    def on_row(self, r: float) -> bool:
        """Whether a separation is that of a row, to rounding."""
        position = self.position(r)
        return abs(position - round(position)) < 1e-9 * max(1.0, abs(position))
