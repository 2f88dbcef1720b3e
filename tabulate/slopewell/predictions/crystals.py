"""Crystals of one or two species: lattice constant, energy, moduli, stability and frequencies."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property
from itertools import combinations
from math import pi, sqrt

import numpy as np
from numpy.typing import NDArray

from ..units.constants import COULOMB
from .curve import EnergyCurve
from .ewald import charged_hessian, madelung_energy
from .figures import DALTON_SPEED, ENERGY, GIGAPASCAL, LENGTH, Figure, Setting, System
from .lattice import Curves, Lattice, dynamical
from .structures import STRUCTURES, Structure

Array = NDArray[np.float64]
K_E = float(COULOMB)
SCAN = 50
"""Lattice constants that are tried before the best one is refined."""
COMPRESSIONS = (0.9, 0.95, 1.05)
"""Volumes, over that of lowest energy, at which the pressure is given."""
CUBIC = {"C11": (0, 0), "C12": (0, 1), "C44": (3, 3)}
HEXAGONAL = CUBIC | {"C13": (0, 2), "C33": (2, 2)}


@dataclass(frozen=True)
class Crystal:
    """A crystal of given curves and charges.

    Attributes
    ----------
    structure : Structure
    curves : mapping
        One a pair of species numbers, without the energy of the charges.
    charges : tuple of float
        Of each species; empty for none.
    """

    structure: Structure
    curves: Curves
    charges: tuple[float, ...] = ()

    @cached_property
    def lattice(self) -> Lattice:
        """The sums of the pair energies."""
        return Lattice(self.structure, self.curves)

    def sums(self, a: float, *, quick: bool = False) -> Array:
        """Return the energy E of a cell, a·dE/da and a²·d²E/da² in eV at a lattice constant in ångström."""
        found = self.lattice.sums(a, quick=quick)
        if self.charges:
            coulomb = K_E / a * madelung_energy(self.structure, self.charges)
            found = found + coulomb * np.array([1.0, -1.0, 2.0])
        return found

    @cached_property
    def constant(self) -> float | None:
        """The lattice constant of lowest energy in ångström, None where nothing is bound."""
        from scipy.optimize import brentq

        low, high = self._range()
        scan = np.geomspace(low, high, SCAN) / self.lattice.nearest
        energy = np.array([self.sums(float(a), quick=True)[0] for a in scan])
        inside = energy[1:-1]
        minima = 1 + np.flatnonzero((inside < energy[:-2]) & (inside <= energy[2:]) & (inside < 0))
        if not minima.size:
            return None
        best = int(minima[np.argmin(energy[minima])])
        before, after = float(scan[best - 1]), float(scan[best + 1])
        if not self.sums(before)[1] < 0 < self.sums(after)[1]:
            # A step at the cutoff moves the energy but not its slope: the row of lowest energy stands.
            return float(scan[best])
        return float(brentq(lambda a: self.sums(a)[1], before, after, xtol=1e-13))

    def _range(self) -> tuple[float, float]:
        """Return the nearest distances between which the lowest energy is looked for."""
        near = self.curves[0, self.structure.species - 1]
        if near.well is not None and not self.charges:
            return max(0.5 * near.well.separation, near.start), 1.3 * near.well.separation
        return near.start, min(near.end, near.reach)

    def volume(self, a: float) -> float:
        """Return the volume of a cell in Å³."""
        return self.structure.volume * a**3

    def pressure(self, a: float) -> float:
        """Return the pressure in GPa at a lattice constant in ångström."""
        return float(-self.sums(a)[1]) / (3 * self.volume(a)) * GIGAPASCAL

    def bulk_modulus(self, a: float) -> float:
        """Return V·d²E/dV² in GPa at the lattice constant of lowest energy."""
        _, first, second = self.sums(a)
        return float(second - 2 * first) / (9 * self.volume(a)) * GIGAPASCAL

    def elastic(self, a: float) -> Array:
        """Return the (6, 6) elastic constants in GPa, atoms inside the cell free to move."""
        hessian = self.lattice.hessian(a)
        if self.charges:
            hessian = hessian.plus(charged_hessian(self.structure, self.charges), a, K_E / a)
        return hessian.elastic() / self.volume(a) * GIGAPASCAL

    def frequencies(self, a: float, masses: tuple[float, ...]) -> tuple[Array, float | None]:
        """Return the Einstein frequency of each atom and the highest at the zone's edge, in THz."""
        own = self.lattice.hessian(a).own
        atoms = np.array([masses[kind] for kind, _ in self.structure.atoms])
        einstein = np.sqrt(np.maximum(np.trace(own, axis1=1, axis2=2), 0) / (3 * atoms * DALTON_SPEED))
        if self.charges:
            return einstein / (2e12 * pi), None
        matrix = dynamical(self.lattice, a, own, atoms, np.array(self.structure.edge))
        highest = float(np.linalg.eigvalsh(matrix)[-1])
        return einstein / (2e12 * pi), sqrt(max(highest, 0) / DALTON_SPEED) / (2e12 * pi)


def smallest_stiffness(elastic: Array) -> float:
    """Return the smallest eigenvalue of elastic constants: below zero a crystal gives way to a strain."""
    return float(np.linalg.eigvalsh(0.5 * (elastic + elastic.T))[0])


def ionic(system: System, names: tuple[str, ...]) -> tuple[tuple[float, ...], dict[tuple[int, int], EnergyCurve]]:
    """Return the charges to be summed apart, and the curves without their part.

    Charges that a curve falls off by, as q·q/r, are taken out of it; else those of the species count.
    """
    curves: dict[tuple[int, int], EnergyCurve] = {}
    products: dict[tuple[int, int], float] = {}
    for k, one in enumerate(names):
        for m in range(k, len(names)):
            curve = system.curve(one, names[m])
            assert curve is not None
            bare = system.untreated.get((one, names[m])) or system.untreated.get((names[m], one)) or curve
            curves[k, m], products[k, m] = curve, bare.charge_product
    if all(products.values()) and len(names) > 1:
        first = sqrt(abs(products[0, 0]) / K_E)
        charges = (first, products[0, 1] / K_E / first)
        return charges, {pair: curve.without_charges(products[pair]) for pair, curve in curves.items()}
    declared = tuple(system.charges.get(name, 0.0) for name in names)
    return (declared if any(declared) else ()), curves


def look(system: System, setting: Setting) -> Iterator[Figure]:
    """Predict every crystal that the species can form, of one or of two of them."""
    groups = [(name,) for name in system.species] + list(combinations(system.species, 2))
    for names in groups:
        if system.missing(names):
            continue
        charges, curves = ionic(system, names)
        if charges and abs(sum(charges)) > 1e-6:
            continue
        for structure in STRUCTURES:
            wanted = not setting.structures or structure.name in setting.structures
            if structure.species == len(names) and wanted:
                yield from _figures(Crystal(structure, curves, charges), names, system)


def _figures(crystal: Crystal, names: tuple[str, ...], system: System) -> Iterator[Figure]:
    a = crystal.constant
    if a is None:
        return
    structure, subject = crystal.structure, f"{names[0]}-{names[-1]}"
    keys = {"structure": structure.name}

    def figure(quantity: str, value: float, unit: str, **more: str | float) -> Figure:
        return Figure(subject, quantity, float(value), unit, {**keys, **more})

    yield figure("lattice-constant", a, LENGTH)
    yield figure("nearest-distance", a * structure.nearest, LENGTH)
    yield figure("cohesive-energy", -crystal.sums(a)[0] / structure.units, ENERGY)
    yield figure("bulk-modulus", crystal.bulk_modulus(a), "GPa")
    elastic = crystal.elastic(a)
    for component, place in (CUBIC if structure.cubic else HEXAGONAL).items():
        yield figure("elastic-constant", elastic[place], "GPa", component=component)
    yield figure("smallest-stiffness", smallest_stiffness(elastic), "GPa")
    for part in COMPRESSIONS:
        yield figure("pressure", crystal.pressure(a * part ** (1 / 3)), "GPa", relative_volume=part)
    if all(name in system.masses for name in names):
        einstein, edge = crystal.frequencies(a, tuple(system.masses[name] for name in names))
        for name in names:
            kind = names.index(name)
            atom = next(index for index, (of, _) in enumerate(structure.atoms) if of == kind)
            yield figure("einstein-frequency", einstein[atom], "THz", species=name)
        if edge is not None:
            yield figure("zone-boundary-frequency", edge, "THz")
