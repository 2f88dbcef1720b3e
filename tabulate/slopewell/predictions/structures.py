"""Crystals as data: cells, places of atoms, and the vectors between them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from math import sqrt

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Vector = tuple[float, float, float]


@dataclass(frozen=True)
class Structure:
    """A crystal with a lattice constant of 1.

    Attributes
    ----------
    name : str
    cell : three vectors
        Of a cell that repeats.
    atoms : tuple of (int, vector)
        The number of the species (0 or 1) and the place of each atom of the cell.
    edge : vector
        Wave vector at the edge of the zone, over 2π.
    cubic : bool
    """

    name: str
    cell: tuple[Vector, Vector, Vector]
    atoms: tuple[tuple[int, Vector], ...]
    edge: Vector
    cubic: bool = True

    @property
    def species(self) -> int:
        """How many species it is made of."""
        return 1 + max(kind for kind, _ in self.atoms)

    @property
    def volume(self) -> float:
        """The volume of the cell, in cubes of the lattice constant."""
        return abs(float(np.linalg.det(np.array(self.cell))))

    @property
    def units(self) -> int:
        """What energies are counted per: atoms of one species, or formula units of two."""
        kinds = [kind for kind, _ in self.atoms]
        return len(kinds) if self.species == 1 else min(kinds.count(0), kinds.count(1))

    @property
    def nearest(self) -> float:
        """The nearest distance, in lattice constants."""
        return float(min(np.linalg.norm(d, axis=1).min() for _, _, d in neighbours(self, 2.0)))


SAME = 1e-10
"""Distances that differ by no more count as one, in lattice constants."""
ORIGIN = (0.0, 0.0, 0.0)
SIMPLE = ((1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (0.0, 0.0, 1.0))
BODY = ((-0.5, 0.5, 0.5), (0.5, -0.5, 0.5), (0.5, 0.5, -0.5))
FACE = ((0.0, 0.5, 0.5), (0.5, 0.0, 0.5), (0.5, 0.5, 0.0))
IDEAL = sqrt(8 / 3)
HEXAGONAL = ((1.0, 0.0, 0.0), (-0.5, sqrt(3) / 2, 0.0), (0.0, 0.0, IDEAL))
QUARTER = (0.25, 0.25, 0.25)

STRUCTURES = (
    Structure("sc", SIMPLE, ((0, ORIGIN),), (0.5, 0.0, 0.0)),
    Structure("bcc", BODY, ((0, ORIGIN),), (1.0, 0.0, 0.0)),
    Structure("fcc", FACE, ((0, ORIGIN),), (1.0, 0.0, 0.0)),
    Structure("hcp", HEXAGONAL, ((0, ORIGIN), (0, (0.5, 0.5 / sqrt(3), IDEAL / 2))), (0.0, 0.0, 0.5 / IDEAL), False),
    Structure("diamond", FACE, ((0, ORIGIN), (0, QUARTER)), (1.0, 0.0, 0.0)),
    Structure("rocksalt", FACE, ((0, ORIGIN), (1, (0.5, 0.0, 0.0))), (1.0, 0.0, 0.0)),
    Structure("caesium-chloride", SIMPLE, ((0, ORIGIN), (1, (0.5, 0.5, 0.5))), (0.5, 0.0, 0.0)),
    Structure("zinc-blende", FACE, ((0, ORIGIN), (1, QUARTER)), (1.0, 0.0, 0.0)),
)
"""The crystals that are tried; hcp has the ideal ratio of its axes."""


@lru_cache(maxsize=128)
def neighbours(structure: Structure, radius: float) -> tuple[tuple[int, int, Array], ...]:
    """Return the vectors from each atom of the cell to every atom within a radius, by pair of atoms.

    Parameters
    ----------
    structure : Structure
    radius : float
        In lattice constants.

    Returns
    -------
    tuple of (i, j, (n, 3) array)
    """
    cell = np.array(structure.cell)
    heights = 1 / np.linalg.norm(np.linalg.inv(cell), axis=0)
    counts = np.ceil((radius + 2.0) / heights).astype(int)
    axes = [np.arange(-count, count + 1) for count in counts]
    cells = np.stack(np.meshgrid(*axes, indexing="ij"), axis=-1).reshape(-1, 3) @ cell
    found = []
    for i, (_, start) in enumerate(structure.atoms):
        for j, (_, end) in enumerate(structure.atoms):
            vectors = cells + np.array(end) - np.array(start)
            square = np.einsum("ij,ij->i", vectors, vectors)
            found.append((i, j, vectors[(square <= radius**2) & (square > 1e-12)]))
    return tuple(found)


@lru_cache(maxsize=512)
def shells(structure: Structure, radius: float) -> tuple[tuple[int, int, Array, Array], ...]:
    """Return distances between atoms within a radius and how many there are in a cell, by pair of species."""
    gathered: dict[tuple[int, int], list[Array]] = {}
    for i, j, vectors in neighbours(structure, radius):
        first, second = sorted((structure.atoms[i][0], structure.atoms[j][0]))
        gathered.setdefault((first, second), []).append(np.linalg.norm(vectors, axis=1))
    result = []
    for (first, second), parts in sorted(gathered.items()):
        every = np.sort(np.concatenate(parts))
        starts = np.flatnonzero(np.diff(every, prepend=0.0) > SAME)
        counts = np.diff(np.append(starts, every.size))
        result.append((first, second, np.add.reduceat(every, starts) / counts, counts.astype(float)))
    return tuple(result)
