"""Lattice sums of a pair energy and its derivatives, to convergence however far the energy reaches."""

from __future__ import annotations

from collections.abc import Mapping
from math import pi

import numpy as np
from numpy.typing import NDArray

from .curve import EnergyCurve
from .quadrature import panels, to_infinity
from .structures import Structure, neighbours, shells

Array = NDArray[np.float64]
Curves = Mapping[tuple[int, int], EnergyCurve]
"""Curves by the numbers of two species, the smaller first."""

MIDDLE, WIDTH = 10.0, 1.5
"""Where a sum hands over to an integral, and how gradually, in nearest distances.

The error is the Fourier transform of what is integrated, at the reciprocal lattice: some 10⁻¹⁴.
"""
FARTHEST = MIDDLE + 6 * WIDTH


def handover(distance: Array) -> Array:
    """Return the part of a neighbour that is summed, by its distance in nearest distances."""
    from scipy.special import erfc

    return np.asarray(0.5 * erfc((distance - MIDDLE) / WIDTH))


class Lattice:
    """A crystal of given curves.

    Parameters
    ----------
    structure : Structure
    curves : mapping
        One a pair of species numbers.
    """

    def __init__(self, structure: Structure, curves: Curves) -> None:
        self.structure, self.curves = structure, curves
        self.nearest = structure.nearest
        self._hessians: dict[float, Hessian] = {}

    def radius(self, a: float) -> float:
        """Return how far neighbours are summed, in lattice constants, in steps to make few lists."""
        reach = max(curve.reach for curve in self.curves.values()) / a
        return float(min(FARTHEST * self.nearest, 1.0 + np.ceil(2 * reach) / 2))

    def _is_integrated(self, curve: EnergyCurve, a: float) -> bool:
        return curve.reach > FARTHEST * self.nearest * a

    def sums(self, a: float, *, quick: bool = False) -> Array:
        """Return ½ΣU, ½Σr·U′ and ½Σr²·U″ of a cell in eV, at a lattice constant in ångström.

        Parameters
        ----------
        a : float
        quick : bool
            Only the energy, from closely spaced points of the curves.
        """
        totals, order = np.zeros(3), 0 if quick else 2
        for first, second, distances, counts in shells(self.structure, self.radius(a)):
            curve = self.curves[first, second]
            curve = curve.sampled if quick else curve
            r = a * distances
            weight = 0.5 * counts
            weight = weight * self.weights(curve, r, a)
            kept = r <= curve.reach
            values = curve.all(r[kept], order)
            totals[: order + 1] += [np.sum(weight[kept] * r[kept] ** k * values[k]) for k in range(order + 1)]
            if self._is_integrated(curve, a):
                x, values, measure = self._beyond(curve, a, order)
                kinds = [kind for kind, _ in self.structure.atoms]
                ordered = kinds.count(first) * kinds.count(second) * (1 if first == second else 2)
                density = ordered / (self.structure.volume * a**3)
                totals[: order + 1] += [0.5 * density * np.sum(measure * x**k * values[k]) for k in range(order + 1)]
        return totals

    def _beyond(self, curve: EnergyCurve, a: float, order: int = 2) -> tuple[Array, Array, Array]:
        """Return nodes, values there, and 4πr²·weight of what is integrated and not summed."""
        unit = self.nearest * a
        near = np.linspace(MIDDLE - 6 * WIDTH, FARTHEST, 37) * unit
        r, weight = panels(near)
        if np.isinf(curve.reach):
            far, far_weight = to_infinity(float(near[-1]))
        else:
            far, far_weight = panels(np.linspace(near[-1], curve.reach, 60))
        r, weight = np.concatenate([r, far]), np.concatenate([weight, far_weight])
        return r, curve.all(r, order), 4 * pi * r**2 * weight * (1 - handover(r / unit))

    def within(self, i: int, j: int, vectors: Array, a: float) -> tuple[EnergyCurve, NDArray[np.bool_], Array]:
        """Return the curve of two atoms, which vectors it reaches, and their lengths in ångström."""
        atoms = self.structure.atoms
        first, second = sorted((atoms[i][0], atoms[j][0]))
        curve = self.curves[first, second]
        length = a * np.linalg.norm(vectors, axis=1)
        kept = length <= curve.reach
        return curve, kept, length[kept]

    def weights(self, curve: EnergyCurve, r: Array, a: float) -> Array:
        """Return how much of each neighbour is summed and not integrated."""
        return handover(r / (self.nearest * a)) if self._is_integrated(curve, a) else np.ones(r.size)

    def slopes(self, curve: EnergyCurve, r: Array) -> Array:
        """Return U′ and U″, each distance read once."""
        shell, index = np.unique(np.round(r, 9), return_index=True, return_inverse=True)[1:]
        return curve.all(r[shell], 2)[1:, index] if r.size else np.zeros((2, 0))

    def hessian(self, a: float) -> Hessian:
        """Return the second derivatives of a cell's energy in strains and displacements."""
        if a not in self._hessians:
            self._hessians[a] = self._hessian(a)
        return self._hessians[a]

    def _hessian(self, a: float) -> Hessian:
        result = Hessian.zero(len(self.structure.atoms))
        for i, j, vectors in neighbours(self.structure, self.radius(a)):
            curve, kept, r = self.within(i, j, vectors, a)
            slope, bend = self.slopes(curve, r)
            weight = self.weights(curve, r, a)
            result.add(i, j, vectors[kept] * a, weight * slope / r, weight * (bend - slope / r) / r**2)
            if self._is_integrated(curve, a):
                result.add_beyond(*self._beyond(curve, a), 1 / (self.structure.volume * a**3), i, j)
        return result


VOIGT = ((0, 0), (1, 1), (2, 2), (1, 2), (0, 2), (0, 1))


class Hessian:
    """Second derivatives of a cell's energy, in eV and ångström.

    Attributes
    ----------
    strain : (6, 6) array
        In strains, in Voigt's order.
    mixed : (6, 3n) array
        In strains and displacements of atoms.
    inner : (3n, 3n) array
        In displacements.
    own : (n, 3, 3) array
        The stiffness of each atom's place when all others are held.
    """

    def __init__(self, strain: Array, mixed: Array, inner: Array, own: Array) -> None:
        self.strain, self.mixed, self.inner, self.own = strain, mixed, inner, own

    @classmethod
    def zero(cls, atoms: int) -> Hessian:
        """Return one without any energy."""
        shapes = ((6, 6), (6, 3 * atoms), (3 * atoms, 3 * atoms), (atoms, 3, 3))
        return cls(*(np.zeros(shape) for shape in shapes))

    def add(self, i: int, j: int, d: Array, pull: Array, bend: Array) -> None:
        """Add the neighbours of one kind: vectors (n, 3), U′/r and (U″ − U′/r)/r².

        The energy depends on ½|d + w|² after a strain η, whose derivatives are d·d in the strain and d in w.
        """
        voigt = np.stack([d[:, k] * d[:, m] for k, m in VOIGT])
        self.strain += 0.5 * (voigt * bend) @ voigt.T
        block = (d.T * bend) @ d + np.eye(3) * pull.sum()
        cross = (voigt * bend) @ d
        for row, (k, m) in enumerate(VOIGT):
            cross[row, k] += np.sum(pull * d[:, m])
            cross[row, m] += np.sum(pull * d[:, k])
        here, there = slice(3 * i, 3 * i + 3), slice(3 * j, 3 * j + 3)
        self.mixed[:, there] += 0.5 * cross
        self.mixed[:, here] -= 0.5 * cross
        for one, other in ((here, there), (there, here)):
            self.inner[one, one] += 0.5 * block
            self.inner[one, other] -= 0.5 * block
        self.own[i] += block

    def add_beyond(self, r: Array, values: Array, measure: Array, density: float, i: int, j: int) -> None:
        """Add neighbours that are spread evenly: their directions average out."""
        _, slope, bend = values
        isotropic = np.zeros((6, 6))
        isotropic[:3, :3] = 1.0
        isotropic += np.diag([2.0, 2.0, 2.0, 1.0, 1.0, 1.0])
        part = np.sum(measure * (bend - slope / r) * r**2) * density / 15
        self.strain += 0.5 * part * isotropic
        self.own[i] += np.eye(3) * np.sum(measure * (bend + 2 * slope / r)) * density / 3

    def plus(self, other: Hessian, length: float, energy: float) -> Hessian:
        """Return the sum with another one that counts in other units of length (Å) and energy (eV)."""
        return Hessian(
            self.strain + energy * other.strain,
            self.mixed + energy / length * other.mixed,
            self.inner + energy / length**2 * other.inner,
            self.own + energy / length**2 * other.own,
        )

    def elastic(self) -> Array:
        """Return the (6, 6) second derivatives in strain with atoms free to move inside the cell."""
        relaxed = self.mixed @ np.linalg.pinv(self.inner, rcond=1e-9) @ self.mixed.T
        return np.asarray(self.strain - relaxed)


def dynamical(lattice: Lattice, a: float, own: Array, masses: Array, wave: Array) -> Array:
    """Return the dynamical matrix of a crystal at a wave vector, in eV/Å²/dalton.

    Parameters
    ----------
    lattice : Lattice
    a : float
        Lattice constant in ångström.
    own : (n, 3, 3) array
        Of its Hessian.
    masses : (n,) array
        Of the atoms of a cell, in dalton.
    wave : (3,) array
        In 2π over the lattice constant.
    """
    structure, size = lattice.structure, len(lattice.structure.atoms)
    matrix = np.zeros((size, 3, size, 3), dtype=complex)
    for i, j, vectors in neighbours(structure, lattice.radius(a)):
        curve, kept, r = lattice.within(i, j, vectors, a)
        slope, bend = lattice.slopes(curve, r)
        d = vectors[kept] * a
        phase = np.exp(2j * pi * vectors[kept] @ wave) * lattice.weights(curve, r, a)
        block = (d.T * (phase * (bend - slope / r) / r**2)) @ d + np.eye(3) * np.sum(phase * slope / r)
        matrix[i, :, j, :] -= block
    for i in range(size):
        matrix[i, :, i, :] += own[i]
    scale = np.repeat(np.sqrt(masses), 3)
    return np.asarray(matrix.reshape(3 * size, 3 * size) / np.outer(scale, scale))
