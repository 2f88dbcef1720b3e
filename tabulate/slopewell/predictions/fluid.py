"""The fluid beyond the cutoff: long-range corrections to energy and pressure, and what the cutoff costs."""

from __future__ import annotations

from collections.abc import Iterator
from math import isinf, pi

import numpy as np
from numpy.typing import NDArray

from .curve import EnergyCurve
from .figures import ENERGY, GIGAPASCAL, Figure, Setting, System
from .quadrature import panels, to_infinity

Array = NDArray[np.float64]
LIQUID = 0.8
"""Particles per cubed collision diameter where no density is stated: a liquid near its triple point."""


def number_density(curve: EnergyCurve) -> float | None:
    """Return the density of a simple liquid of such particles, in Å⁻³, where the curve has a diameter."""
    diameter = curve.collision_diameter
    return LIQUID / diameter**3 if diameter is not None else None


def tail(curve: EnergyCurve, cutoff: float, density: float) -> tuple[float, float]:
    """Return the energy a particle in eV and the pressure in GPa that come from beyond a cutoff.

    Parameters
    ----------
    curve : EnergyCurve
        Without a cutoff of its own.
    cutoff : float
        In ångström.
    density : float
        In Å⁻³.

    Notes
    -----
    2π·ρ∫U·r²dr and −(2π/3)·ρ²∫U′·r³dr from the cutoff, with no structure in the fluid there (M. P. Allen
    and D. J. Tildesley, Computer Simulation of Liquids, 2nd ed., Oxford 2017, section 2.8).
    """
    r, weight = to_infinity(cutoff, 60)
    energy, slope = curve.all(r, 1)
    pressure = -2 * pi / 3 * density**2 * float(np.sum(weight * slope * r**3))
    return 2 * pi * density * float(np.sum(weight * energy * r**2)), pressure * GIGAPASCAL


def power_tail(curve: EnergyCurve, density: float) -> tuple[float, float] | None:
    """Return the same for a curve that ends, continued as the power law of its last slope."""
    energy, slope = curve.derivatives(np.array([curve.reach]), 1)[:, 0]
    power = -slope * curve.reach / energy if energy else 0.0
    if not 3.01 < power < 40:
        return None
    volume = density * float(energy) * curve.reach**3 / (power - 3)
    return 2 * pi * volume, 2 * pi / 3 * density * power * volume * GIGAPASCAL


def treatment_cost(treated: EnergyCurve, bare: EnergyCurve, density: float) -> float | None:
    """Return the energy a particle, in eV, by which the bare curve exceeds the treated one in a liquid.

    The fluid has no structure beyond the collision diameter, and nothing inside it.
    """
    diameter = bare.collision_diameter
    if diameter is None or diameter >= treated.reach:
        return None
    r, weight = panels(np.linspace(diameter, treated.reach, 401))
    inside = float(np.sum(weight * (bare.energy(r) - treated.energy(r)) * r**2))
    return 2 * pi * density * inside + tail(bare, treated.reach, density)[0]


def look(system: System, setting: Setting) -> Iterator[Figure]:
    """Predict the tail of every pair of like particles."""
    for one, other, curve in system.pairs():
        bare = system.untreated.get((one, other), curve)
        density = setting.number_density or number_density(bare)
        if one != other or density is None or bare.tail_power <= 3.01:
            continue
        keys = {"number_density": density}
        cutoff = min(curve.reach, curve.end)
        found = power_tail(curve, density) if isinf(bare.tail_power) and not isinf(bare.reach) else None
        if found is None and isinf(bare.reach):
            found = tail(bare, cutoff, density)
        if found is None:
            continue
        yield Figure(curve.name, "tail-energy", found[0], ENERGY, keys)
        yield Figure(curve.name, "tail-pressure", found[1] * 1e3, "MPa", keys)
        cost = treatment_cost(curve, bare, density) if not isinf(curve.reach) and isinf(bare.reach) else None
        if cost is not None:
            yield Figure(curve.name, "cutoff-cost", cost, ENERGY, keys)
