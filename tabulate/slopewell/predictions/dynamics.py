"""Particles in a periodic box: neighbours, forces from curves, and the velocity Verlet step."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from .curve import EnergyCurve
from .figures import DALTON_SPEED

Array = NDArray[np.float64]
Indices = NDArray[np.intp]
Field = Mapping[tuple[int, int], EnergyCurve]
"""Curves by the numbers of two species, the smaller first."""

DALTON = DALTON_SPEED * 1e30
"""1 dalton·(Å/fs)² in eV."""
SKIN = 0.12
"""How much farther than the curves reach neighbours are listed, relative to that."""


@dataclass(frozen=True)
class Particles:
    """Particles in a cubic periodic box.

    Attributes
    ----------
    places, velocities : (3, n) array
        In ångström and Å/fs; places are not folded back into the box.
    masses : (n,) array
        In dalton.
    kinds : (n,) array
        The number of the species of each.
    box : float
        The edge of the box in ångström.
    """

    places: Array
    velocities: Array
    masses: Array
    kinds: Indices
    box: float

    @property
    def count(self) -> int:
        """How many there are."""
        return self.masses.size

    def kinetic_energy(self) -> float:
        """Return the kinetic energy in eV."""
        return float(0.5 * DALTON * np.sum(self.masses * self.velocities**2))

    def reversed(self) -> Particles:
        """Return the same particles moving backward."""
        return replace(self, velocities=-self.velocities)


class RunsAwayError(ArithmeticError):
    """Particles came where their force is not finite."""


class Neighbours:
    """Pairs of particles near each other, listed once for many steps.

    Parameters
    ----------
    particles : Particles
    reach : float
        How far the curves reach, in ångström; the box must be more than twice that and a skin.
    """

    def __init__(self, particles: Particles, reach: float) -> None:
        from scipy.spatial import cKDTree

        self.skin = min(SKIN * reach, 0.499 * particles.box - reach)
        folded = np.mod(particles.places, particles.box)
        tree = cKDTree(folded.T, boxsize=np.full(3, particles.box))
        pairs = tree.query_pairs(reach + self.skin, output_type="ndarray")
        kinds = np.sort(particles.kinds[pairs], axis=1)
        order = np.lexsort((kinds[:, 1], kinds[:, 0])) if particles.kinds.any() else slice(None)
        self.kinds = kinds[order]
        self.first, self.second = np.ascontiguousarray(pairs[order].T)
        apart = particles.places.take(self.second, axis=1) - particles.places.take(self.first, axis=1)
        self.shift = -particles.box * np.rint(apart / particles.box)
        self.places = particles.places
        self.stretches = self._stretches()

    def is_stale(self, places: Array) -> bool:
        """Whether some particle has moved so far that a pair may be missing."""
        moved = places - self.places
        return bool(np.max(np.einsum("kn,kn->n", moved, moved)) > (0.5 * self.skin) ** 2)

    def _stretches(self) -> list[tuple[tuple[int, int], slice]]:
        """Return each pair of species with the stretch of pairs that are of it."""
        code = self.kinds[:, 0] * 1_000_000 + self.kinds[:, 1]
        edges = np.flatnonzero(np.diff(code, prepend=-1))
        ends = [*edges[1:], code.size]
        return [
            ((int(self.kinds[a, 0]), int(self.kinds[a, 1])), slice(int(a), int(b)))
            for a, b in zip(edges, ends, strict=True)
        ]


@dataclass(frozen=True)
class Moment:
    """Energies and forces of all listed pairs at one moment, for several fields at once.

    Attributes
    ----------
    apart : (3, m) array
        From the first particle of a pair to the second, in ångström.
    distance : (m,) array
    energy, force : (fields, m) array
        In eV and eV/Å; a positive force pushes apart.
    total : (fields, 3, n) array
        Force on each particle.
    """

    apart: Array
    distance: Array
    energy: Array
    force: Array
    total: Array


def moment(particles: Particles, near: Neighbours, fields: Sequence[Field]) -> Moment:
    """Read every field at every pair."""
    places = particles.places
    apart = places.take(near.second, axis=1) - places.take(near.first, axis=1) + near.shift
    distance = np.sqrt(np.einsum("kn,kn->n", apart, apart))
    energy, force = np.zeros((2, len(fields), distance.size))
    for number, field in enumerate(fields):
        for kinds, stretch in near.stretches:
            curve = field[kinds]
            r = distance[stretch]
            within = np.flatnonzero(r <= curve.reach)
            at = within + stretch.start
            energy[number, at], slope = curve.all(r[within], 1)
            force[number, at] = -slope
    total = np.empty((len(fields), 3, particles.count))
    for number in range(len(fields)):
        push = force[number] / distance
        for axis in range(3):
            with np.errstate(invalid="ignore"):
                part = push * apart[axis]
            total[number, axis] = np.bincount(near.second, part, particles.count) - np.bincount(
                near.first, part, particles.count
            )
    return Moment(apart, distance, energy, force, total)


class Motion:
    """Particles under the first of several fields, moved by velocity Verlet steps.

    Parameters
    ----------
    particles : Particles
    fields : sequence of Field
        The first one moves the particles; the others are only read.
    step : float
        In femtoseconds.

    Notes
    -----
    W. C. Swope, H. C. Andersen, P. H. Berens and K. R. Wilson, J. Chem. Phys. 76, 637 (1982).
    """

    def __init__(self, particles: Particles, fields: Sequence[Field], step: float) -> None:
        self.particles, self.fields, self.step = particles, fields, step
        self.reach = max(curve.reach for field in fields for curve in field.values())
        self.near = Neighbours(particles, self.reach)
        self.now = moment(particles, self.near, fields)

    def advance(self) -> tuple[Moment, Moment]:
        """Make one step; return the moments before and after it, on the same list of pairs.

        Raises
        ------
        RunsAwayError
            If a force is not finite.
        """
        old, step = self.particles, self.step
        if self.near.is_stale(old.places):
            self.near = Neighbours(old, self.reach)
            self.now = moment(old, self.near, self.fields)
        before = self.now
        inverse = 1 / (DALTON * old.masses)
        if not np.isfinite(before.total[0]).all():
            raise RunsAwayError
        half = old.velocities + 0.5 * step * before.total[0] * inverse
        moved = replace(old, places=old.places + step * half)
        self.now = moment(moved, self.near, self.fields)
        velocities = half + 0.5 * step * self.now.total[0] * inverse
        self.particles = replace(moved, velocities=velocities)
        return before, self.now

    def energy(self) -> float:
        """Return kinetic plus potential energy in eV."""
        return self.particles.kinetic_energy() + float(self.now.energy[0].sum())


def start(
    count: int, box: float, masses: Sequence[float], temperature: float, seed: int, boltzmann: float
) -> Particles:
    """Return particles on the sites of a face-centred lattice, moving as at a temperature.

    Parameters
    ----------
    count : int
    box : float
        In ångström.
    masses : sequence of float
        Of each species, in dalton; the species are taken in turn and shuffled.
    temperature : float
        In kelvin.
    seed : int
    boltzmann : float
        In eV per kelvin.
    """
    random = np.random.default_rng(seed)
    cells = int(np.ceil((count / 4) ** (1 / 3) - 1e-9))
    corners = np.stack(np.meshgrid(*[np.arange(cells)] * 3, indexing="ij"), axis=-1).reshape(-1, 1, 3)
    sites = corners + np.array([[0, 0, 0], [0, 0.5, 0.5], [0.5, 0, 0.5], [0.5, 0.5, 0]])
    chosen = np.sort(random.permutation(4 * cells**3)[:count])
    places = (sites.reshape(-1, 3)[chosen] * box / cells).T
    kinds = random.permutation(np.arange(count) % len(masses))
    weights = np.array(masses)[kinds]
    velocities = random.normal(size=(3, count)) * np.sqrt(boltzmann * temperature / (DALTON * weights))
    velocities -= (velocities * weights).sum(axis=1, keepdims=True) / weights.sum()
    return Particles(np.ascontiguousarray(places), velocities, weights, kinds, box)
