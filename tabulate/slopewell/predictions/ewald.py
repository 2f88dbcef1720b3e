"""Charges in a crystal by Ewald summation: Madelung energy and its derivatives."""

from __future__ import annotations

from functools import lru_cache
from math import pi, sqrt

import numpy as np
from numpy.typing import NDArray

from .lattice import VOIGT, Hessian
from .structures import Structure, neighbours

Array = NDArray[np.float64]
DAMPING = 6.0
"""Sums in both spaces stop where the damping has fallen to exp(−36), below rounding."""
STEP = 4e-3
"""Step of differences, in strain and lattice constants."""


def _grid(cell: Array, radius: float) -> Array:
    heights = 1 / np.linalg.norm(np.linalg.inv(cell), axis=0)
    axes = [np.arange(-count, count + 1) for count in np.ceil(radius / heights).astype(int) + 1]
    return np.stack(np.meshgrid(*axes, indexing="ij"), axis=-1).reshape(-1, 3) @ cell


class Charges:
    """Point charges in a crystal with a lattice constant of 1.

    Parameters
    ----------
    structure : Structure
    charges : tuple of float
        Of each species, in elementary charges; the cell must be neutral.

    Notes
    -----
    P. P. Ewald, Ann. Phys. 369, 253 (1921). Energies are of a cell, in e²/4πε₀ over the lattice constant.
    """

    def __init__(self, structure: Structure, charges: tuple[float, ...]) -> None:
        self.structure = structure
        self.cell = np.array(structure.cell)
        self.places = np.array([place for _, place in structure.atoms])
        self.charges = np.array([charges[kind] for kind, _ in structure.atoms])
        self.split = sqrt(pi) / structure.volume ** (1 / 3)
        waves = _grid(np.linalg.inv(self.cell).T, self.split * DAMPING / pi)
        turns = np.rint(waves @ self.cell.T)
        self.turns = turns[np.any(turns != 0, axis=1)]

    def energy(self) -> float:
        """Return the energy of the cell; a charge counts with each other one by half."""
        from scipy.special import erfc

        own = self.split / sqrt(pi) * float(np.sum(self.charges**2))
        near = 0.0
        for i, j, vectors in neighbours(self.structure, DAMPING / self.split):
            r = np.linalg.norm(vectors, axis=1)
            near += float(0.5 * self.charges[i] * self.charges[j] * np.sum(erfc(self.split * r) / r))
        return float(near + self._smooth(self.cell, self.places) - own)

    def _smooth(self, cell: Array, places: Array) -> float:
        """Return the energy of charges as smooth clouds, summed over waves."""
        waves = 2 * pi * self.turns @ np.linalg.inv(cell).T
        square = np.einsum("ij,ij->i", waves, waves)
        amplitude = np.exp(1j * waves @ places.T) @ self.charges
        volume = abs(float(np.linalg.det(cell)))
        damping = np.exp(-square / (4 * self.split**2)) / square
        return float(2 * pi / volume * np.sum(damping * np.abs(amplitude) ** 2))

    def hessian(self) -> Hessian:
        """Return second derivatives in strains and displacements.

        The part near is summed as any pair energy is; the smooth part by differences, right to about 10⁻⁹.
        """
        from scipy.special import erfc

        result = Hessian.zero(len(self.places))
        for i, j, d in neighbours(self.structure, DAMPING / self.split):
            r = np.linalg.norm(d, axis=1)
            both = self.charges[i] * self.charges[j]
            cloud = 2 * self.split / sqrt(pi) * np.exp(-((self.split * r) ** 2))
            slope = -(erfc(self.split * r) / r + cloud) / r
            bend = -2 * slope / r + 2 * self.split**2 * cloud
            result.add(i, j, d, both * slope / r, both * (bend - slope / r) / r**2)
        smooth = self._smooth_hessian()
        result.strain += smooth[:6, :6]
        result.mixed += smooth[:6, 6:]
        result.inner += smooth[6:, 6:]
        return result

    def _smooth_hessian(self) -> Array:
        size = 6 + self.places.size
        unit = np.eye(size) * STEP

        def energy(change: Array) -> float:
            metric = np.eye(3)
            for (k, m), amount in zip(VOIGT, change[:6], strict=True):
                metric[k, m] += amount * (2 if k == m else 1)
                metric[m, k] = metric[k, m]
            strain = np.linalg.cholesky(metric)
            return self._smooth(self.cell @ strain, (self.places + change[6:].reshape(-1, 3)) @ strain)

        def along(direction: Array) -> float:
            near, far = (energy(n * direction) + energy(-n * direction) - 2 * centre for n in (1, 2))
            return (16 * near - far) / (12 * STEP**2)

        centre = energy(np.zeros(size))
        result = np.diag([along(unit[k]) for k in range(size)])
        for k in range(size):
            for m in range(k):
                result[k, m] = result[m, k] = (along(unit[k] + unit[m]) - result[k, k] - result[m, m]) / 2
        return result


@lru_cache(maxsize=32)
def madelung_energy(structure: Structure, charges: tuple[float, ...]) -> float:
    """Return the energy of a cell with a lattice constant of 1, in e²/4πε₀."""
    return Charges(structure, charges).energy()


@lru_cache(maxsize=32)
def charged_hessian(structure: Structure, charges: tuple[float, ...]) -> Hessian:
    """Return the second derivatives of that energy in strains and displacements."""
    return Charges(structure, charges).hessian()


def madelung_constant(structure: Structure) -> float:
    """Return the Madelung constant of charges ±1, referred to the nearest distance."""
    return -madelung_energy(structure, (1.0, -1.0)) * structure.nearest / structure.units
