"""What makes the energy of a simulation drift: each cause accounted for along one and the same run."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from .dynamics import DALTON, Field, Moment, Motion, Particles

Array = NDArray[np.float64]
CAUSES = ("time-step", "cutoff", "interpolation", "force-not-slope", "digits")


@dataclass(frozen=True)
class Levels:
    """The same interaction at several levels of fault, from the table to the curve.

    Attributes
    ----------
    table : Field
        As the simulation reads it.
    rounded : Field or None
        The table without its faults, but with its digits; None where it is the table.
    rows : Field or None
        The table of exact numbers; None where it is the one before.
    curve : Field
        The curve itself.
    edges : mapping from a pair of species to (float, float)
        Between which separations a pair crosses the cutoff.
    """

    table: Field
    rounded: Field | None
    rows: Field | None
    curve: Field
    edges: dict[tuple[int, int], tuple[float, float]]


@dataclass(frozen=True)
class Course:
    """The energy of a run, step by step.

    Attributes
    ----------
    time : (steps,) array
        In femtoseconds.
    energy : (steps,) array
        Kinetic plus potential, in eV.
    conserved : (steps,) array
        The energy that the step itself conserves to its fourth order, in eV.
    causes : mapping from a cause to (steps,) array
        What each has added to it.
    """

    time: Array
    energy: Array
    conserved: Array
    causes: dict[str, Array]


def settle(particles: Particles, curve: Field, step: float, steps: int, thermal: float) -> Particles:
    """Let particles find their places under a curve at a thermal energy in eV, by rescaling velocities."""
    motion = Motion(particles, [curve], step)
    degrees = 3 * particles.count - 3
    for number in range(steps):
        motion.advance()
        if number % 5 == 0:
            now = motion.particles
            factor = np.sqrt(0.5 * degrees * thermal / now.kinetic_energy())
            motion.particles = replace(now, velocities=now.velocities * factor)
    return motion.particles


def follow(particles: Particles, levels: Levels, step: float, numbers: Iterable[int], steps: int) -> Course:
    """Run particles on a table and account for each cause of drift.

    Parameters
    ----------
    particles : Particles
    levels : Levels
    step : float
        In femtoseconds.
    numbers : iterable of int
        The numbers of the steps, from 0; it may show progress.
    steps : int
        How many there are.

    Notes
    -----
    A velocity Verlet step changes the kinetic energy by exactly ½·ΣΔx·(F + F′) but for a term that adds up to
    nothing lasting. So a field read along the run fails to conserve energy by ΔU + ½·ΣΔx·(F + F′), and
    the difference between two levels is what the fault between them does. Pairs that cross the cutoff count
    apart. The energy measured is H + Δt²·(v·U″·v/12 − F²/24m), which the step conserves up to Δt⁴, so
    that its ripple does not hide a drift.
    """
    chain = [levels.table, levels.rounded, levels.rows, levels.curve]
    fields = [field for field in chain if field is not None]
    where = _positions(chain)
    motion = Motion(particles, fields, step)
    edges = _edges(motion, levels)
    energies, corrections = np.empty(steps), np.empty(steps)
    added = np.zeros((steps, 4))
    forces = [motion.now.total[0]]
    velocities = [motion.particles.velocities]
    for number in numbers:
        list_before = motion.near
        places = motion.particles.places
        before, after = motion.advance()
        if motion.near is not list_before:
            edges = _edges(motion, levels)
        lack, at_edge = _lacks(before, after, motion.particles.places - places, edges)
        inner = lack - at_edge
        table, rounded, rows, curve = (inner[k] for k in where)
        added[number] = at_edge[0], rows - curve, table - rounded, rounded - rows
        energies[number] = motion.energy()
        forces, velocities = [*forces, after.total[0]][-3:], [*velocities, motion.particles.velocities][-2:]
        corrections[number] = _ripple(forces, velocities, particles.masses, step)
    # A correction is known one step late: it needs the force after it.
    conserved = energies[:-1] + corrections[1:]
    causes = dict(zip(CAUSES[1:], np.cumsum(added, axis=0)[:-1].T, strict=True))
    causes = {"time-step": conserved - sum(causes.values()), **causes}
    return Course(np.asarray(step * np.arange(1, steps), dtype=np.float64), energies[:-1], conserved, causes)


def _positions(chain: Sequence[Field | None]) -> list[int]:
    """Return the place of each level among those that differ; one that is not there is the one before."""
    places, last = [], -1
    for field in chain:
        last += field is not None
        places.append(last)
    return places


def _edges(motion: Motion, levels: Levels) -> Array:
    """Return for each listed pair between which separations it crosses its cutoff."""
    edges = np.empty((2, motion.near.first.size))
    for kinds, stretch in motion.near.stretches:
        edges[:, stretch] = np.array(levels.edges[kinds])[:, None]
    return edges


def _lacks(before: Moment, after: Moment, moved: Array, edges: Array) -> tuple[Array, Array]:
    """Return how much each field fails to conserve energy in a step: all pairs, and those at the cutoff."""
    energy = after.energy.sum(axis=1) - before.energy.sum(axis=1)
    whole = energy + 0.5 * np.einsum("fkn,kn->f", before.total + after.total, moved)
    low, high = edges
    least, most = (function(before.distance, after.distance) for function in (np.minimum, np.maximum))
    at = np.flatnonzero((most >= low) & (least <= high))
    way = after.apart[:, at] - before.apart[:, at]
    work = np.zeros(len(whole))
    for end in (before, after):
        along = np.einsum("kn,kn->n", end.apart[:, at], way) / end.distance[at]
        work += 0.5 * (end.force[:, at] * along).sum(axis=1)
    return whole, (after.energy[:, at] - before.energy[:, at]).sum(axis=1) + work


def _ripple(forces: list[Array], velocities: list[Array], masses: Array, step: float) -> float:
    """Return the correction at the last step but one, from the forces around it."""
    if len(forces) < 3:
        return 0.0
    change = (forces[2] - forces[0]) / (2 * step)
    bend = -float(np.sum(velocities[0] * change))
    return step**2 * (bend / 12 - float(np.sum(forces[1] ** 2 / (24 * DALTON * masses))))


@dataclass(frozen=True)
class Slope:
    """A rate with its statistical error."""

    value: float
    error: float


def slope(time: Array, series: Sequence[Array]) -> Slope:
    """Return the rate of change of what several runs give, and its error from their parts.

    Parameters
    ----------
    time : (n,) array
    series : sequence of (n,) array
        One a run.
    """
    rates, errors = [], []
    for values in series:
        rate, offset = np.polyfit(time - time.mean(), values, 1)
        rates.append(rate)
        parts = np.array_split(values - offset - rate * (time - time.mean()), 10)
        means = np.array([part.mean() for part in parts])
        span = time[-1] - time[0]
        errors.append(np.std(means, ddof=1) / np.sqrt(10) * np.sqrt(12) / span)
    within = float(np.sqrt(np.mean(np.square(errors)) / len(rates)))
    between = float(np.std(rates, ddof=1) / np.sqrt(len(rates))) if len(rates) > 1 else 0.0
    return Slope(float(np.mean(rates)), max(within, between))
