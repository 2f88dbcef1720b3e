"""An energy curve: smooth pieces side by side, read by Taylor series, by pairs and by balls alike."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from ..formula.branches import Piece
from ..formula.pairs import Pair
from ..formula.taylor import accurate_derivatives, derivatives
from ..formula.tree import ZERO

Array = NDArray[np.float64]

SNAP = 4 * float(np.finfo(np.float64).eps)
"""Relative distance within which a separation counts as lying on the end of a piece.

A separation stated in one unit and converted to another may land beside the end it stands for.
"""


@dataclass(frozen=True)
class Curve:
    """Energy as a function of one coordinate.

    Attributes
    ----------
    pieces : tuple of Piece
        Smooth stretches side by side, in ångström and eV. Separations before the first or after
        the last belong to that piece.
    coordinate : str
        What the energy depends on.
    """

    pieces: tuple[Piece, ...]
    coordinate: str = "separation"

    def derivatives(self, r: Array, order: int) -> Array:
        """Return energy and derivatives in eV/Åᵏ.

        Parameters
        ----------
        r : (n,) array
            Separations in ångström.
        order : int
            Highest derivative.

        Returns
        -------
        (order + 1, n) array
        """
        result = np.zeros((order + 1, r.size))
        for piece, members in self._parts(r):
            if piece.tree != ZERO:
                result[:, members] = derivatives(piece.tree, r[members], order)
        return result

    def accurate_derivatives(self, r: Pair, order: int) -> list[Pair]:
        """Return the same as pairs of doubles, right to about one unit in the last place."""
        size = r.high.size
        highs, lows = np.zeros((order + 1, size)), np.zeros((order + 1, size))
        for piece, members in self._parts(r.high):
            if piece.tree != ZERO:
                part = accurate_derivatives(piece.tree, Pair(r.high[members], r.low[members]), order)
                for k, coefficient in enumerate(part):
                    highs[k, members], lows[k, members] = coefficient.high, coefficient.low
        return [Pair(high, low) for high, low in zip(highs, lows, strict=True)]

    def piece_at(self, r: float) -> Piece:
        """Return the piece that a separation belongs to."""
        return self.pieces[int(self.indices(np.array([r]))[0])]

    def indices(self, r: Array) -> NDArray[np.intp]:
        """Return for each separation the number of the piece it belongs to."""
        closed, opened = self._ends
        return np.searchsorted(closed, r, side="left") + np.searchsorted(opened, r, side="right")

    @cached_property
    def _ends(self) -> tuple[Array, Array]:
        """Ends of inner pieces that hold their own end, and of those that do not, widened by ``SNAP``."""
        ends = {closed: [float(p.end) for p in self.pieces[:-1] if p.closed == closed] for closed in (True, False)}
        return np.array(ends[True]) * (1 + SNAP), np.array(ends[False]) * (1 - SNAP)

    def _parts(self, r: Array) -> Iterator[tuple[Piece, slice | NDArray[np.intp]]]:
        """Yield each piece with the separations that belong to it, as a slice where they are in order."""
        if len(self.pieces) == 1:
            yield self.pieces[0], slice(None)
            return
        index = self.indices(r)
        if np.all(index[1:] >= index[:-1]):
            ends = np.searchsorted(index, np.arange(len(self.pieces) + 1))
            parts: list[slice | NDArray[np.intp]] = [slice(a, b) for a, b in pairwise(ends)]
        else:
            parts = [np.flatnonzero(index == number) for number in range(len(self.pieces))]
        for piece, members in zip(self.pieces, parts, strict=True):
            if isinstance(members, slice) or members.size:
                yield piece, members

    def edges(self) -> tuple[Fraction, ...]:
        """Return the separations at which one piece ends and the next begins."""
        return tuple(piece.end for piece in self.pieces[:-1])

    def within(self, start: Fraction, end: Fraction) -> Curve:
        """Return the part of the curve between two separations."""
        kept = [
            Piece(max(piece.start, start), min(piece.end, end), piece.tree, piece.closed)
            for piece in self.pieces
            if piece.end > start and piece.start < end
        ]
        return Curve(tuple(kept), self.coordinate)
