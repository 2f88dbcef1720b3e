"""A run by neighbour lists against a plain loop over all pairs: only their ratio is held."""

from __future__ import annotations

import time
from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest
from slopewell.predictions.compiled import compiled
from slopewell.predictions.curve import EnergyCurve
from slopewell.predictions.dynamics import DALTON, Motion, Particles, start

pytestmark = pytest.mark.speed

SPEEDUP = 5.0
COUNT, BOX, STEP = 500, 29.0, 8.0


def curve() -> EnergyCurve:
    def derivatives(r: np.ndarray, order: int) -> np.ndarray:
        six, weight = (3.4 / r) ** 6, (8.5 - r) / 5
        energy, slope = 0.04 * (six**2 - six), 0.04 * (-12 * six**2 + 6 * six) / r
        return np.array([energy * weight**4, slope * weight**4 - 0.8 * energy * weight**3])[: order + 1]

    return compiled(EnergyCurve("A-A", derivatives, 2.2, 8.5, 8.5))


def plain_step(
    particles: Particles, table: tuple[np.ndarray, np.ndarray], force: np.ndarray
) -> tuple[Particles, np.ndarray]:
    """Make one step with every pair, reading the force by NumPy's own linear rule."""
    inverse = 1 / (DALTON * particles.masses)
    half = particles.velocities + 0.5 * STEP * force * inverse
    places = particles.places + STEP * half
    apart = places[:, None, :] - places[:, :, None]
    apart -= BOX * np.round(apart / BOX)
    distance = np.sqrt((apart**2).sum(axis=0)) + np.eye(COUNT) * BOX
    push = np.where(distance < 8.5, np.interp(distance, *table), 0.0) / distance
    force = -(push * apart).sum(axis=2)
    return replace(particles, places=places, velocities=half + 0.5 * STEP * force * inverse), force


def seconds(work: Callable[[], object], repeats: int) -> float:
    best = np.inf
    for _ in range(repeats):
        begun = time.perf_counter()
        work()
        best = min(best, time.perf_counter() - begun)
    return float(best)


def test_neighbour_lists_are_five_times_as_fast_as_all_pairs() -> None:
    particles = start(COUNT, BOX, [40.0], 120.0, 1, 8.617e-5)
    r = np.linspace(2.2, 8.5, 2001)
    motion = Motion(particles, [{(0, 0): curve()}], STEP)
    ours = seconds(lambda: [motion.advance() for _ in range(15)], 3) / 15
    force = motion.now.total[0]
    theirs = seconds(lambda: plain_step(motion.particles, (r, curve().force(r)), force), 3)
    assert theirs / ours > SPEEDUP
