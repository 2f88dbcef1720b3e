"""The bound pair: vibrational levels, spectroscopic constants, bond length, how far a spring holds."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import pi, sqrt

import numpy as np
from numpy.typing import NDArray

from ..potential.landmarks import harmonic_wavenumber
from ..units.constants import BOLTZMANN, EV_PER_WAVENUMBER
from .curve import EnergyCurve, Well
from .figures import ENERGY, HBAR_SQUARED, LENGTH, Figure, Setting, System

Array = NDArray[np.float64]
WAVENUMBER = float(EV_PER_WAVENUMBER)
MOST_POINTS = 700
"""Points of the finer of the two grids that levels are computed on."""
AGREEMENT = 1e-6
"""A level counts when two grids agree on it to this part of the depth."""
BEYOND = 20.0
"""How far a box reaches into what is forbidden: the damping exponent of the wave function there."""


@dataclass(frozen=True)
class Levels:
    """Bound levels of a pair without rotation.

    Attributes
    ----------
    energy : (n,) array
        In eV above the bottom of the well, ascending; each confirmed by a second grid.
    mean_separation : float
        Of the lowest level, in ångström.
    complete : bool
        Whether they reach up to dissociation.
    """

    energy: Array
    mean_separation: float
    complete: bool


def bound_levels(curve: EnergyCurve, reduced_mass: float) -> Levels | None:
    """Return the bound levels of a pair, None where there is none.

    Parameters
    ----------
    curve : EnergyCurve
    reduced_mass : float
        In dalton.

    Notes
    -----
    Sinc functions on an even grid (D. T. Colbert and W. H. Miller, J. Chem. Phys. 96, 1982 (1992)); a level
    counts when a second grid, 15 % finer over the same box and 10 % longer, agrees on it.
    """
    if curve.well is None:
        return None
    kinetic = HBAR_SQUARED / (2 * reduced_mass)
    low, high, top = _box(curve, curve.well, kinetic)
    wave = sqrt((top + curve.well.depth) / kinetic)
    rough, _, _ = _solve(curve, kinetic, low, high, pi / (2.6 * wave), top)
    fine, lowest, r = _solve(curve, kinetic, low, high + 0.1 * (high - low), pi / (3.0 * wave), top)
    count = min(rough.size, fine.size)
    agree = np.abs(rough[:count] - fine[:count]) < AGREEMENT * curve.well.depth
    kept = count if agree.all() else int(np.argmin(agree))
    if not kept:
        return None
    weight = lowest**2
    complete = top == 0.0 and kept == fine.size
    return Levels(fine[:kept] + curve.well.depth, float(weight @ r / weight.sum()), complete)


def _box(curve: EnergyCurve, well: Well, kinetic: float) -> tuple[float, float, float]:
    """Return where the grid begins and ends, and the highest energy it is made for."""
    stop = min(curve.reach * 1.5, 12 * well.separation)
    r = np.geomspace(0.05 * well.separation, stop, 6000)
    energy = np.minimum(curve.energy(r), 1e6)
    top = 0.0
    while True:
        bottom = int(np.argmin(np.abs(r - well.separation)))
        damping = np.sqrt(np.maximum(energy - top, 1e-9 * well.depth) / kinetic) * np.gradient(r)
        forbidden = np.where(energy > top, damping, 0.0)
        inward = np.cumsum(forbidden[:bottom][::-1])
        outward = np.cumsum(np.where(energy > top - 2e-4 * well.depth, damping, 0.0)[bottom:])
        first = bottom - 1 - min(int(np.searchsorted(inward, BEYOND)), bottom - 1)
        if top == 0.0:
            last = bottom + int(np.argmax(np.abs(energy[bottom:]) < 2e-5 * well.depth)) or r.size - 1
            last = last if last > bottom else r.size - 1
        else:
            last = bottom + min(int(np.searchsorted(outward, BEYOND)), r.size - 1 - bottom)
        length = 1.1 * (r[last] - r[first])
        if length * 3.0 * sqrt((top + well.depth) / kinetic) / pi <= MOST_POINTS:
            return float(r[first]), float(r[last]), top
        top = -well.depth + 0.7 * (top + well.depth)


def _solve(
    curve: EnergyCurve, kinetic: float, low: float, high: float, step: float, top: float
) -> tuple[Array, Array, Array]:
    """Return energies below the top, the wave function of the lowest, and the grid."""
    from scipy.linalg import eigh, toeplitz

    r = np.asarray(low + step * np.arange(1, int((high - low) / step) + 1), dtype=np.float64)
    distance = np.arange(1, r.size)
    column = np.concatenate([[pi**2 / 3], 2.0 * (-1.0) ** distance / distance**2])
    assert curve.well is not None
    ceiling = 1e3 * curve.well.depth
    matrix = kinetic / step**2 * toeplitz(column)
    matrix[np.diag_indices(r.size)] += np.minimum(curve.energy(r), ceiling)
    energies = eigh(matrix, eigvals_only=True, subset_by_value=(-np.inf, top), check_finite=False)
    return energies, _lowest(matrix, energies), r


def _lowest(matrix: Array, energies: Array) -> Array:
    """Return the wave function of the lowest energy by inverse iteration."""
    from scipy.linalg import lu_factor, lu_solve

    if energies.size < 2:
        return np.ones(len(matrix))
    shift = energies[0] - 1e-6 * (energies[1] - energies[0])
    factors = lu_factor(matrix - shift * np.eye(len(matrix)), check_finite=False)
    wave = np.ones(len(matrix))
    for _ in range(3):
        wave = lu_solve(factors, wave, check_finite=False)
        wave /= np.linalg.norm(wave)
    return np.asarray(wave)


def anharmonic_wavenumber(derivatives: Array, reduced_mass: float) -> float:
    """Return ω_e·x_e in cm⁻¹ from the second, third and fourth derivative at the minimum.

    Notes
    -----
    Second-order perturbation: 5·φ₃²/(48·ω) − φ₄/16 with the derivatives in the dimensionless
    coordinate (J. L. Dunham, Phys. Rev. 41, 721 (1932)). Exact for a Morse curve.
    """
    second, third, fourth = derivatives[2:5]
    scale = (HBAR_SQUARED / (reduced_mass * second)) ** 0.25
    quantum = second * scale**2
    return float(5 * (third * scale**3) ** 2 / (48 * quantum) - fourth * scale**4 / 16) / WAVENUMBER


def harmonic_range(curve: EnergyCurve, within: float = 0.05) -> tuple[float, float] | None:
    """Return how far in and out, in ångström, the spring of the minimum gives the force within a fraction."""
    if curve.well is None:
        return None
    bottom = curve.well.separation
    stiffness = float(curve.local(bottom, 2)[2])
    far = np.geomspace(1e-4, 0.3, 3000) * bottom
    found = []
    for side in (-1, 1):
        error = np.abs(curve.force(bottom + side * far) / (-stiffness * side * far) - 1)
        beyond = np.flatnonzero(error > within)
        if not beyond.size or not beyond[0]:
            return None
        k = int(beyond[0])
        found.append(float(np.interp(within, error[k - 1 : k + 1], far[k - 1 : k + 1])))
    return found[0], found[1]


def look(system: System, setting: Setting) -> Iterator[Figure]:
    """Predict the bound state of every pair with a well."""
    for one, other, curve in system.pairs():
        well = curve.well
        if well is None:
            continue
        name = curve.name
        yield Figure(name, "equilibrium-separation", well.separation, LENGTH)
        yield Figure(name, "well-depth", well.depth, ENERGY)
        local = curve.local(well.separation, 4)
        if local[2] > 0:
            expansion = -float(BOLTZMANN) * local[3] / (2 * local[2] ** 2)
            yield Figure(name, "bond-expansion", float(expansion), "length/K")
            spring = harmonic_range(curve)
            for side, distance in zip(("inward", "outward"), spring or (), strict=False):
                yield Figure(name, "harmonic-range", distance, LENGTH, {"side": side})
        mass = system.reduced_mass(one, other)
        if mass is not None and local[2] > 0:
            yield from _spectrum(curve, mass, local)


def _spectrum(curve: EnergyCurve, mass: float, local: Array) -> Iterator[Figure]:
    name = curve.name
    yield Figure(name, "harmonic-wavenumber", harmonic_wavenumber(float(local[2]), mass), "cm^-1")
    yield Figure(name, "anharmonic-wavenumber", anharmonic_wavenumber(local, mass), "cm^-1")
    levels = bound_levels(curve, mass)
    if levels is None or curve.well is None:
        return
    for number, energy in enumerate(levels.energy):
        yield Figure(name, "vibrational-level", float(energy) / WAVENUMBER, "cm^-1", {"level": number})
    yield Figure(name, "zero-point-energy", float(levels.energy[0]), ENERGY)
    yield Figure(name, "dissociation-energy", curve.well.depth - float(levels.energy[0]), ENERGY)
    yield Figure(name, "mean-bond-length", levels.mean_separation, LENGTH)
