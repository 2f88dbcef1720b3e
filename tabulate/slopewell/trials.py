"""The verb ``trial``: a short simulation on a table, and what makes its energy drift."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from itertools import combinations_with_replacement
from math import sqrt
from pathlib import Path
from typing import Any

import numpy as np

from .predictions.curve import EnergyCurve
from .predictions.drift import CAUSES, Course, Levels, Slope, follow, settle, slope
from .predictions.dynamics import DALTON, SKIN, Motion, Particles, RunsAwayError, start
from .predictions.faults import Parts, take_apart
from .predictions.fluid import LIQUID
from .problems import Problem, UnusableInput
from .studies import Studied, study
from .tables import Reading
from .units.constants import BOLTZMANN
from .workflow import Track, silently

K_B = float(BOLTZMANN)
USUAL_MASS = 40.0
"""In dalton, where none is given."""
USUAL_TEMPERATURE = 300.0
MOST_PARTICLES = 4000
FEWEST_PARTICLES = 256
PAIRS = 2e7
"""Pairs times steps of a run whose length is not stated."""
SETTLING = 250
HALVING = 60
ALLOWED, TOO_MUCH = 0.05, 0.5
"""Growth of a particle's energy over the whole run, in k_B·T: up to which it passes, beyond which it fails.

Common practice, no source.
"""
UNIT = "k_B*T/ns"


@dataclass(frozen=True)
class Conditions:
    """What a trial run is made under.

    Attributes
    ----------
    temperature : float
        In kelvin.
    number_density : float
        In Å⁻³.
    particles, steps, seeds : int
    step : float
        In femtoseconds.
    length : float
        Of the run that the verdict is about, in nanoseconds.
    assumed : tuple of str
        What was not stated, one line each.
    """

    temperature: float
    number_density: float
    particles: int
    steps: int
    seeds: int
    step: float
    length: float
    assumed: tuple[str, ...]

    @property
    def thermal(self) -> float:
        """k_B·T in eV."""
        return K_B * self.temperature

    @property
    def box(self) -> float:
        """The edge of the box in ångström."""
        return float((self.particles / self.number_density) ** (1 / 3))


@dataclass(frozen=True)
class Cause:
    """What one cause adds to the drift, in k_B·T a particle and nanosecond, and its share of all."""

    name: str
    drift: Slope
    size: float
    share: float


@dataclass(frozen=True)
class Trial:
    """What a trial run showed.

    Attributes
    ----------
    studied : Studied
    conditions : Conditions
    drift : Slope
        In k_B·T a particle and nanosecond.
    causes : tuple of Cause
    ripple : float
        Root mean square of the energy around its drift, in k_B·T a particle.
    order : float
        The order in the time step by which that ripple shrinks when the step is halved.
    """

    studied: Studied
    conditions: Conditions
    drift: Slope
    causes: tuple[Cause, ...]
    ripple: float
    order: float

    @property
    def growth(self) -> float:
        """How far the energy of a particle certainly gets over the stated run, in k_B·T."""
        rates = [self.drift, *(cause.drift for cause in self.causes)]
        return self.conditions.length * max(max(abs(rate.value) - 2 * rate.error, 0.0) for rate in rates)

    @property
    def possible(self) -> float:
        """How far it may get by a fault of the table, if that is no bounded wander."""
        return self.conditions.length * max(cause.size for cause in self.causes if cause.name != "time-step")

    @property
    def verdict(self) -> str:
        """``pass``, ``warn`` or ``fail``: a growth that is not certain only warns."""
        if self.growth > TOO_MUCH:
            return "fail"
        return "warn" if max(self.growth, self.possible) > ALLOWED else "pass"

    def record(self) -> dict[str, Any]:
        """Return it as JSON data."""
        conditions = self.conditions
        return {
            "drift": {"value": self.drift.value, "error": self.drift.error, "unit": UNIT},
            "causes": [
                {
                    "cause": cause.name,
                    "drift": cause.drift.value,
                    "error": cause.drift.error,
                    "size": cause.size,
                    "share": cause.share,
                }
                for cause in self.causes
            ],
            "verdict": self.verdict,
            "growth": {
                "value": self.growth,
                "possible": self.possible,
                "length": conditions.length,
                "unit": "k_B*T",
            },
            "ripple": {"value": self.ripple, "unit": "k_B*T", "order": self.order},
            "conditions": {
                "temperature": conditions.temperature,
                "number_density": conditions.number_density,
                "particles": conditions.particles,
                "steps": conditions.steps,
                "seeds": conditions.seeds,
                "time_step": conditions.step,
                "units": {
                    "temperature": "K",
                    "number_density": "angstrom^-3",
                    "time_step": "fs",
                    "length": "ns",
                },
            },
            "notes": list(conditions.assumed),
        }


def trial(
    path: str | Path,
    *,
    reading: Reading | None = None,
    document: str | Path | None = None,
    masses: Mapping[str, float] | None = None,
    rule: str = "",
    temperature: float | None = None,
    number_density: float | None = None,
    step: float | None = None,
    particles: int | None = None,
    steps: int | None = None,
    seeds: int = 2,
    length: float = 1.0,
    track: Track = silently,
) -> Trial:
    """Run a short constant-energy simulation on a table, and find what makes its energy drift.

    Parameters
    ----------
    path : path
        A table, or a document whose table is taken.
    reading, document, masses
        As in :func:`slopewell.studies.study`.
    rule : str
        Interpolation rule, instead of the one that the table names.
    temperature : float, optional
        In kelvin.
    number_density : float, optional
        In Å⁻³.
    step : float, optional
        In femtoseconds; by default a tenth of the shortest vibration's period over 2π.
    particles, steps, seeds : int, optional
    length : float
        Of the run that the verdict is about, in nanoseconds.
    track : callable, optional
        Shows progress.

    Raises
    ------
    UnusableInput
        If the file can't be used, a pair is missing, or the table lets particles fall into each other.
    """
    studied = study(path, reading=reading, document=document, masses=masses)
    wanted = {"temperature": temperature, "density": number_density, "step": step, "particles": particles}
    conditions, weights = _conditions(studied, wanted, steps, seeds, length)
    levels = _levels(studied, rule, conditions.thermal)
    courses, order = [], 0.0
    for seed in range(seeds):
        begin = start(conditions.particles, conditions.box, weights, conditions.temperature, seed, K_B)
        begin = settle(begin, levels.curve, conditions.step, SETTLING, conditions.thermal)
        if seed == 0:
            order = _order(begin, levels, conditions.step)
        numbers = track(range(conditions.steps), f"run {seed + 1} of {seeds}")
        try:
            courses.append(follow(begin, levels, conditions.step, numbers, conditions.steps))
        except RunsAwayError:
            says = "The simulation breaks down: particles come so near each other that no force is left to part them."
            remedy = "See what slopewell check says of the table; or shorten the time step."
            raise UnusableInput([Problem("", says, remedy)], studied.file) from None
    return _judged(studied, conditions, courses, order)


def _judged(studied: Studied, conditions: Conditions, courses: list[Course], order: float) -> Trial:
    per = 1e6 / (conditions.thermal * conditions.particles)
    time = courses[0].time[2:]

    def rate(series: list[Any]) -> Slope:
        found = slope(time, [one[2:] for one in series])
        return Slope(found.value * per, found.error * per)

    slopes = {name: rate([course.causes[name] for course in courses]) for name in CAUSES}
    sizes = {
        name: float(np.sqrt(np.mean([rate([course.causes[name]]).value ** 2 for course in courses]))) for name in CAUSES
    }
    whole = sum(sizes.values()) or 1.0
    causes = tuple(Cause(name, slopes[name], sizes[name], sizes[name] / whole) for name in CAUSES)
    around = [course.energy - np.polyval(np.polyfit(course.time, course.energy, 1), course.time) for course in courses]
    ripple = float(np.sqrt(np.mean(np.square(around)))) / (conditions.thermal * conditions.particles)
    return Trial(studied, conditions, rate([course.conserved for course in courses]), causes, ripple, order)


def _order(begin: Particles, levels: Levels, step: float) -> float:
    """Return the order in the step by which the ripple of the energy shrinks when the step is halved."""
    ripples = []
    for parts in (1, 2):
        motion, energies = Motion(begin, [levels.curve], step / parts), []
        for _ in range(HALVING * parts):
            motion.advance()
            energies.append(motion.energy())
        ripples.append(float(np.std(energies)))
    return float(np.log2(ripples[0] / ripples[1])) if ripples[1] > 0 else 0.0


def _levels(studied: Studied, rule: str, thermal: float) -> Levels:
    species = studied.table.species
    parts: dict[tuple[int, int], Parts] = {}
    for first, second in combinations_with_replacement(range(len(species)), 2):
        pair = (species[first], species[second])
        pair = pair if pair in studied.rows else pair[::-1]
        curve = studied.curve.curves[pair] if studied.curve else None
        parts[first, second] = take_apart(studied.rows[pair], studied.units, curve, rule, thermal)

    def field(choose: Any) -> dict[tuple[int, int], EnergyCurve]:
        return {pair: choose(one) for pair, one in parts.items()}

    any_rounded = any(one.rounded for one in parts.values())
    any_rows = any(one.rows for one in parts.values())
    return Levels(
        field(lambda one: one.table),
        field(lambda one: one.rounded or one.table) if any_rounded else None,
        field(lambda one: one.rows or one.rounded or one.table) if any_rows else None,
        field(lambda one: one.curve),
        {pair: one.edge for pair, one in parts.items()},
    )


def _conditions(
    studied: Studied, wanted: Mapping[str, float | None], steps: int | None, seeds: int, length: float
) -> tuple[Conditions, list[float]]:
    """Return the conditions of a run, with what was not stated taken from the curves; and the masses."""
    system, assumed = studied.table, []
    if missing := system.missing(system.species):
        says = f"A simulation needs every pair; missing: {', '.join(missing)}."
        raise UnusableInput([Problem("interaction", says, "Give those interactions too.")], studied.file)
    weights = [system.masses.get(name, USUAL_MASS) for name in system.species]
    if without := [name for name in system.species if name not in system.masses]:
        assumed.append(f"mass of {', '.join(without)}: {USUAL_MASS:g} dalton")
    curves = [curve for _, _, curve in system.pairs()]
    temperature = wanted["temperature"] or studied.temperature
    if temperature is None:
        depth = max((curve.well.depth for curve in curves if curve.well), default=USUAL_TEMPERATURE * K_B)
        temperature = depth / K_B
        assumed.append(f"temperature: {temperature:.4g} K, of the deepest well")
    size = max(_size(curve, K_B * temperature) for curve in curves)
    density = wanted["density"]
    if density is None:
        density = LIQUID / size**3
        assumed.append(f"number density: {density:.4g} angstrom^-3, {LIQUID} per cubed diameter of {size:.4g} angstrom")
    reach = max(curve.reach for curve in curves) * (1 + SKIN)
    least = int(np.ceil(density * (2.001 * reach) ** 3))
    count = int(wanted["particles"] or max(FEWEST_PARTICLES, least))
    if count > MOST_PARTICLES or count < least:
        count = max(min(count, MOST_PARTICLES), FEWEST_PARTICLES if wanted["particles"] is None else 1)
        density = min(density, count / (2.001 * reach) ** 3)
        assumed.append(f"number density lowered to {density:.4g} angstrom^-3, so that the box is twice the cutoff")
    step = wanted["step"]
    if step is None:
        step = _tenth_of_vibration(studied, K_B * temperature, weights)
        assumed.append(f"time step: {step:.3g} fs, a tenth of the shortest vibration's period over 2π")
    if steps is None:
        pairs = 0.5 * count * density * 4.19 * reach**3
        steps = int(np.clip(PAIRS / pairs, 200, 1500))
    return Conditions(temperature, density, count, steps, seeds, step, length, tuple(assumed)), weights


def _size(curve: EnergyCurve, thermal: float) -> float:
    """Return the collision diameter, or where a repulsion falls to k_B·T, or half its reach."""
    if curve.collision_diameter is not None:
        return curve.collision_diameter
    r = np.linspace(curve.start, min(curve.reach, curve.end), 4001)
    high = np.flatnonzero(curve.energy(r) > thermal)
    return float(r[high[-1]]) if high.size else 0.5 * min(curve.reach, curve.end)


def _tenth_of_vibration(studied: Studied, thermal: float, weights: list[float]) -> float:
    """Return √(μ/k)/10 in femtoseconds of the stiffest pair: at its well, else where it repels with k_B·T."""
    fastest = 0.0
    system = studied.curve or studied.table
    by_name = dict(zip(system.species, weights, strict=True))
    for one, other, curve in system.pairs():
        at = curve.well.separation if curve.well else _size(curve, thermal)
        near = curve.all(np.array([0.97 * at, at, 1.03 * at]), 1)[1]
        stiffness = max(abs(float(near[2] - near[0])) / (0.06 * at), 1e-9)
        mass = by_name[one] * by_name[other] / (by_name[one] + by_name[other])
        fastest = max(fastest, sqrt(stiffness / (mass * DALTON)))
    return 0.1 / fastest


def read_time(text: str, at: str) -> float:
    """Return the time in femtoseconds of a text such as ``100 ns`` or ``2 fs``.

    Raises
    ------
    UnusableInput
        If it is none.
    """
    number, _, name = text.strip().partition(" ")
    try:
        value = float(number) * TIMES[name.strip()]
        if not 0 < value < float("inf"):
            raise ValueError
    except (KeyError, ValueError):
        says = f'"{text}" is no time.'
        raise UnusableInput([Problem(at, says, 'Write it like "100 ns" or "2 fs".')]) from None
    return value


TIMES = {"fs": 1.0, "ps": 1e3, "ns": 1e6, "us": 1e9, "ms": 1e12, "s": 1e15}
"""Units of time in femtoseconds."""
