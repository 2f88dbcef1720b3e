"""Collision integrals: what a dilute gas's viscosity and diffusion follow from (Chapman and Enskog)."""

from __future__ import annotations

from collections.abc import Iterator
from math import factorial, pi, sqrt

import numpy as np
from numpy.typing import NDArray

from ..units.constants import ATOMIC_MASS, BOLTZMANN, ELEMENTARY_CHARGE
from .curve import EnergyCurve
from .figures import Figure, Setting, System
from .quadrature import panels

Array = NDArray[np.float64]
ORDERS = ((1, 1), (2, 2))
ENERGIES = 110
"""Collision energies at which cross-sections are computed."""
NEAR_ENOUGH = 1e-8
"""To which ends of branches are found, in ångström."""
ANGLES = panels(np.linspace(0.0, pi / 2, 5), 14)
"""Nodes and weights of the integral over one encounter."""
NEAR = panels(np.linspace(0.0, 1.0, 7), 12)
"""Nodes and weights over distances of closest approach."""


def deflection(curve: EnergyCurve, energy: float, closest: Array) -> Array:
    """Return the angle of deflection of encounters by their distance of closest approach.

    Parameters
    ----------
    curve : EnergyCurve
    energy : float
        Of the relative motion far away, in eV.
    closest : (n,) array
        In ångström.

    Notes
    -----
    χ = π − 2b ∫ dr / (r²·√(1 − b²/r² − U/E)), with r₀/r = sin θ, which takes the end's singularity away.
    """
    theta, weight = ANGLES
    sine, cosine = np.sin(theta), np.cos(theta)
    shape = (closest.size, theta.size)
    along = curve.energy((closest[:, None] / sine).ravel()).reshape(shape) / energy
    at = curve.energy(closest)[:, None] / energy
    under = (1 - at) * cosine**2 + (at - along)
    ratio = np.sqrt(np.maximum(1 - at[:, 0], 0.0))
    integral = (weight * cosine / np.sqrt(np.maximum(under, 1e-14))).sum(axis=1)
    return np.asarray(pi - 2 * ratio * integral)


def branches(curve: EnergyCurve, energy: float, grid: tuple[Array, Array]) -> list[tuple[float, float]]:
    """Return the stretches of closest approach that encounters at an energy can have; the last has no end.

    Parameters
    ----------
    curve : EnergyCurve
    energy : float
        In eV.
    grid : (n,) array, (n,) array
        Separations, and the energies there.

    Notes
    -----
    Below a critical energy encounters orbit, and a stretch is left out.
    """
    from scipy.optimize import brentq

    def square(r: float) -> float:
        """Return b² of the encounter that turns around there."""
        return float(r * r * (1 - curve.energy(np.array([r]))[0] / energy))

    def growth(r: float) -> float:
        u, slope = curve.all(np.array([r]), 1)[:, 0]
        return float(2 * (1 - u / energy) - r * slope / energy)

    r, along = grid
    b = r**2 * (1 - along / energy)
    allowed = (b > 0) & (b <= np.minimum.accumulate(b[::-1])[::-1] * (1 + 1e-12))
    edges = np.flatnonzero(np.diff(allowed.astype(int)))
    starts = [int(k) + 1 for k in edges if allowed[k + 1]] or [0]
    ends = [int(k) for k in edges if allowed[k]]
    found: list[tuple[float, float]] = []
    for number, first in enumerate(starts):
        if number == 0:
            left = (
                brentq(square, r[first - 1], r[first], xtol=NEAR_ENOUGH)
                if first and b[first - 1] < 0
                else float(r[first])
            )
        else:
            low, high = r[max(first - 2, 0)], r[min(first + 2, r.size - 1)]
            left = brentq(growth, low, high, xtol=NEAR_ENOUGH) if growth(low) < 0 < growth(high) else float(r[first])
        if found:
            last = ends[number - 1]
            level = square(left)
            low, high = float(r[last]), float(r[last + 1])
            crosses = (square(low) - level) * (square(high) - level) < 0
            found[-1] = (
                found[-1][0],
                brentq(lambda x, b2=level: square(x) - b2, low, high, xtol=NEAR_ENOUGH) if crosses else low,
            )
        found.append((float(left), np.inf))
    return found


def cross_sections(curve: EnergyCurve, energy: float, grid: tuple[Array, Array]) -> tuple[float, float]:
    """Return the transport cross-sections 2π∫(1 − cosˡχ) b db in Å² for l = 1 and 2."""
    totals = np.zeros(2)
    x, weight = NEAR
    for number, (left, right) in enumerate(branches(curve, energy, grid)):
        # Nodes crowd at the core, which may be steep, and where encounters orbit and the angle has no bound.
        if np.isinf(right):
            power = 4 if number else 2
            part, step = x**power, power * x ** (power - 1)
            closest, measure = left / (1 - part), left / (1 - part) ** 2 * step
        else:
            part, step = 1 - (1 - x**2) ** 4, 8 * x * (1 - x**2) ** 3
            closest, measure = left + (right - left) * part, (right - left) * step
        u, slope = curve.all(closest, 1)
        growth = 2 * closest * (1 - u / energy) - closest**2 * slope / energy
        cosine = np.cos(deflection(curve, energy, closest))
        factor = pi * weight * measure * growth
        totals += [float(np.sum(factor * (1 - cosine))), float(np.sum(factor * (1 - cosine**2)))]
    return float(totals[0]), float(totals[1])


def collision_integrals(curve: EnergyCurve, temperatures: Array) -> dict[tuple[int, int], Array]:
    """Return the collision integrals over those of rigid spheres of the collision diameter.

    Parameters
    ----------
    curve : EnergyCurve
        With a collision diameter.
    temperatures : (n,) array
        In kelvin.

    Returns
    -------
    mapping from (l, s) to (n,) array

    Notes
    -----
    Ω(l,s)* = ∫ e^(−x) x^(s+1) Q_l(x·kT) dx / ((s + 1)!·Q_l of rigid spheres). Distances of closest
    approach take the place of impact parameters, so that no turning point is searched for.
    """
    from scipy.interpolate import CubicSpline

    assert curve.collision_diameter is not None
    quick = curve.sampled
    thermal = float(BOLTZMANN) * np.asarray(temperatures, dtype=np.float64)
    energies = np.geomspace(0.02 * thermal.min(), 40 * thermal.max(), ENERGIES)
    r = np.geomspace(0.3 * curve.start, min(curve.reach, 12 * curve.end), 3000)
    grid = r, quick.energy(r)
    sections = np.array([cross_sections(quick, float(energy), grid) for energy in energies])
    spheres = pi * curve.collision_diameter**2 * np.array([1.0, 2 / 3])
    curves = CubicSpline(np.log(energies), sections / spheres)
    x, weight = panels(np.geomspace(0.02, 40.0, 60))
    reduced = curves(np.log(np.multiply.outer(thermal, x)))
    return {
        (order, power): (weight * np.exp(-x) * x ** (power + 1) * reduced[:, :, order - 1]).sum(axis=1)
        / factorial(power + 1)
        for order, power in ORDERS
    }


def viscosity(mass: float, temperature: float, diameter: float, integral: float) -> float:
    """Return the viscosity in µPa·s: mass in dalton, temperature in kelvin, diameter in ångström.

    Notes
    -----
    First approximation, 5/16·√(π·m·kT)/(π·σ²·Ω(2,2)*) (S. Chapman and T. G. Cowling, The
    Mathematical Theory of Non-Uniform Gases, Cambridge 1970).
    """
    momentum = sqrt(pi * mass * float(ATOMIC_MASS) * float(BOLTZMANN * ELEMENTARY_CHARGE) * temperature)
    return 5 / 16 * momentum / (pi * (diameter * 1e-10) ** 2 * integral) * 1e6


def diffusion(reduced_mass: float, temperature: float, diameter: float, integral: float) -> float:
    """Return the diffusion coefficient at 100 kPa in cm²/s: 3/8·√(kT/(2π·μ))·kT/(p·σ²·Ω(1,1)*)."""
    thermal = float(BOLTZMANN * ELEMENTARY_CHARGE) * temperature
    speed = sqrt(thermal / (2 * pi * reduced_mass * float(ATOMIC_MASS)))
    return 3 / 8 * speed * thermal / (1e5 * (diameter * 1e-10) ** 2 * integral) * 1e4


def look(system: System, setting: Setting) -> Iterator[Figure]:
    """Predict the collision integrals of every pair with a collision diameter, and what follows from them."""
    for one, other, curve in system.pairs():
        diameter = curve.collision_diameter
        if diameter is None or curve.tail_power <= 3.01 or not setting.temperatures:
            continue
        found = collision_integrals(curve, np.array(setting.temperatures))
        mass = system.reduced_mass(one, other)
        for index, temperature in enumerate(setting.temperatures):
            at = {"temperature": temperature}
            for (order, power), values in found.items():
                value = float(values[index])
                yield Figure(curve.name, "collision-integral", value, "1", {"order": f"{order},{power}", **at})
            if mass is not None:
                spread = diffusion(mass, temperature, diameter, float(found[1, 1][index]))
                yield Figure(curve.name, "diffusion-coefficient", spread, "cm^2/s", at)
                if one == other:
                    drag = viscosity(2 * mass, temperature, diameter, float(found[2, 2][index]))
                    yield Figure(curve.name, "viscosity", drag, "uPa s", at)
