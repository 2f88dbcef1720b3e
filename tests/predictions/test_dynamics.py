"""Motion in a box: pairs as a plain loop finds them, order 2 in the step, and back to the start."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest
from slopewell.predictions.compiled import compiled
from slopewell.predictions.curve import EnergyCurve
from slopewell.predictions.drift import settle
from slopewell.predictions.dynamics import DALTON, Motion, Neighbours, Particles, moment, start

from .conftest import CurveOf

THERMAL = 0.01
SWITCHED = "4*e*((s/r)^12 - (s/r)^6)*((8 - r)/5)^4"


@pytest.fixture(scope="module")
def curve(curve_of: CurveOf) -> EnergyCurve:
    return compiled(curve_of(SWITCHED, "2.2", "8", e="1/30", s="3.4", reach=8.0))


@pytest.fixture(scope="module")
def liquid(curve: EnergyCurve) -> Particles:
    begin = start(108, 19.0, [40.0], 116.0, 3, THERMAL / 116.0)
    return settle(begin, {(0, 0): curve}, 8.0, 150, THERMAL)


def test_a_compiled_curve_is_the_curve(curve_of: CurveOf) -> None:
    plain = curve_of(SWITCHED, "2.2", "8", e="1/30", s="3.4", reach=8.0)
    r = np.random.default_rng(1).uniform(1.8, 8.5, 5000)
    size = np.abs(plain.all(r, 1))
    assert np.all(np.abs(compiled(plain).all(r, 1) - plain.all(r, 1)) <= 1e-11 * (size + 1.0))


def test_energy_and_forces_of_a_mixture_against_a_plain_loop(curve: EnergyCurve, curve_of: CurveOf) -> None:
    other = compiled(curve_of("(6/r)^8/1000*((7 - r)/4)^4", "2", "7", reach=7.0))
    field = {(0, 0): curve, (0, 1): other, (1, 1): curve}
    particles = start(64, 17.5, [40.0, 20.0], 100.0, 5, THERMAL / 116.0)
    rattled = particles.places + np.random.default_rng(2).normal(scale=0.2, size=particles.places.shape)
    particles = Particles(rattled, particles.velocities, particles.masses, particles.kinds, particles.box)
    found = moment(particles, Neighbours(particles, 8.0), [field])
    energy, forces = 0.0, np.zeros((3, 64))
    for i, j in combinations(range(64), 2):
        apart = rattled[:, j] - rattled[:, i]
        apart -= 17.5 * np.round(apart / 17.5)
        r = np.array([np.linalg.norm(apart)])
        kinds = sorted((int(particles.kinds[i]), int(particles.kinds[j])))
        used = field[kinds[0], kinds[1]]
        energy += float(used.energy(r)[0])
        push = float(used.force(r)[0]) * apart / r[0]
        forces[:, i] -= push
        forces[:, j] += push
    assert found.energy[0].sum() == pytest.approx(energy, rel=1e-12)
    assert found.total[0] == pytest.approx(forces, abs=1e-12)


def test_a_run_reversed_in_time_returns_to_its_start(curve: EnergyCurve, liquid: Particles) -> None:
    motion = Motion(liquid, [{(0, 0): curve}], 8.0)
    for _ in range(60):
        motion.advance()
    away = np.abs(motion.particles.places - liquid.places).max()
    back = Motion(motion.particles.reversed(), [{(0, 0): curve}], 8.0)
    for _ in range(60):
        back.advance()
    assert away > 0.3
    assert back.particles.places == pytest.approx(liquid.places, abs=1e-9)


def test_the_ripple_of_the_energy_is_of_order_two_in_the_step(curve: EnergyCurve, liquid: Particles) -> None:
    ripples = []
    for parts in (1, 2):
        motion, energies = Motion(liquid, [{(0, 0): curve}], 8.0 / parts), []
        for _ in range(80 * parts):
            motion.advance()
            energies.append(motion.energy())
        ripples.append(np.std(energies))
    assert np.log2(ripples[0] / ripples[1]) == pytest.approx(2.0, abs=0.15)


def test_particles_start_at_rest_as_a_whole_and_the_same_for_a_seed() -> None:
    one, again, other = (start(500, 30.0, [40.0, 4.0], 300.0, seed, 8.617e-5) for seed in (1, 1, 2))
    assert np.array_equal(one.velocities, again.velocities)
    assert not np.array_equal(one.velocities, other.velocities)
    assert (one.velocities * one.masses).sum(axis=1) == pytest.approx([0, 0, 0], abs=1e-9)
    assert one.kinetic_energy() == pytest.approx(1.5 * 500 * 8.617e-5 * 300, rel=0.1)
    assert pytest.approx(1.036427e2, rel=1e-6) == DALTON  # u·Å²/fs² in eV, CODATA 2022 (T01-037)
