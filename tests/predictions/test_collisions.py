"""Collision integrals against printed tables, an independent quadrature and limits in closed form."""

from __future__ import annotations

from math import gamma

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.optimize import brentq
from slopewell.predictions.collisions import collision_integrals, deflection, diffusion, viscosity
from slopewell.predictions.curve import EnergyCurve
from slopewell.units.constants import BOLTZMANN

from .conftest import CurveOf

# Hirschfelder, Curtiss and Bird, Molecular Theory of Gases and Liquids (1954), table I-M, from memory.
PRINTED = {
    0.5: (2.066, 2.257),
    1.0: (1.439, 1.587),
    2.0: (1.075, 1.175),
    5.0: (0.8422, 0.9269),
    10.0: (0.7424, 0.8242),
}


def test_collision_integrals_of_lennard_jones(reduced: EnergyCurve) -> None:
    temperatures = np.array(list(PRINTED))
    found = collision_integrals(reduced, temperatures / float(BOLTZMANN))
    printed = np.array(list(PRINTED.values()))
    assert found[1, 1] == pytest.approx(printed[:, 0], rel=2e-3)
    # The printed (2,2) is known to be up to 1.3 % low below T* = 1, where encounters orbit.
    assert found[2, 2] == pytest.approx(printed[:, 1], rel=1.4e-2)
    assert found[2, 2][2:] == pytest.approx(printed[2:, 1], rel=1.5e-3)


@pytest.mark.parametrize(("energy", "impact"), [(2.0, 0.9), (5.0, 1.2), (1.0, 1.5)])
def test_deflection_by_an_independent_quadrature(reduced: EnergyCurve, energy: float, impact: float) -> None:
    def radial(r: float) -> float:
        return 1 - impact**2 / r**2 - 4 * (r**-12 - r**-6) / energy

    grid = np.linspace(4.0, 0.7, 20000)
    first = int(np.argmax(np.array([radial(r) for r in grid]) < 0))
    closest = brentq(radial, grid[first], grid[first - 1], xtol=1e-15)
    whole, _ = quad(
        lambda y: 2 * y / ((closest + y * y) ** 2 * np.sqrt(max(radial(closest + y * y), 1e-300))),
        0,
        np.inf,
        limit=400,
    )
    expected = np.pi - 2 * impact * whole
    assert deflection(reduced, energy, np.array([closest]))[0] == pytest.approx(expected, abs=2e-6)


def test_collision_integrals_of_steep_spheres_tend_to_rigid_ones(curve_of: CurveOf) -> None:
    # Rigid spheres have Ω* = 1; a power n this steep is as wide as (1/kT)^(1/n), but for terms of order 1/n.
    power, thermal = 300, np.array([0.2, 0.3])
    steep = curve_of(f"1/r^{power} - 1e-9", "0.9", "3", reach=3.0)
    diameter = steep.collision_diameter
    assert diameter is not None
    found = collision_integrals(steep, thermal / float(BOLTZMANN))
    width = thermal ** (-2 / power) * gamma(3 - 2 / power) / 2
    assert found[1, 1] * diameter**2 == pytest.approx(width, rel=6e-3)
    assert found[2, 2] * diameter**2 == pytest.approx(width, rel=2e-2)


def test_viscosity_and_diffusion_of_argon() -> None:
    # Handbook values of argon at 300 K: 22.7 µPa·s, and self-diffusion 0.19 cm²/s at 100 kPa; from memory.
    assert viscosity(39.95, 300.0, 3.35279, 1.14667) == pytest.approx(22.7, rel=0.01)
    assert diffusion(39.95 / 2, 300.0, 3.35279, 1.04007) == pytest.approx(0.19, rel=0.03)
