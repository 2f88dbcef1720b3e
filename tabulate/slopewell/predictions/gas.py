"""The dilute gas: second virial coefficient, its first quantum correction, Boyle temperature."""

from __future__ import annotations

from collections.abc import Iterator
from math import pi

import numpy as np
from numpy.typing import NDArray

from ..units.constants import BOLTZMANN
from .curve import EnergyCurve
from .figures import CUBIC_CENTIMETRE_PER_MOLE, HBAR_SQUARED, LENGTH, Figure, Setting, System
from .quadrature import radial

Array = NDArray[np.float64]
K_B = float(BOLTZMANN)
UNIT = "cm^3/mol"


class Gas:
    """A pair of a dilute gas, read once on the nodes of a quadrature.

    Parameters
    ----------
    curve : EnergyCurve

    Raises
    ------
    ValueError
        If the curve falls no faster than 1/r³, so that no virial coefficient exists.
    """

    def __init__(self, curve: EnergyCurve) -> None:
        if curve.tail_power <= 3.01:
            raise ValueError(f"{curve.name} falls as 1/r^{curve.tail_power:.3g}: it has no second virial coefficient")
        self.r, self.weight = radial(curve.start, curve.end, curve.reach, curve.breaks)
        with np.errstate(all="ignore"):
            self.energy, self.slope = curve.all(self.r, 1)
        self.depth = curve.well.depth if curve.well else 0.0

    def second_virial(self, temperature: float) -> float:
        """Return the classical second virial coefficient in cm³/mol at a temperature in kelvin.

        Notes
        -----
        B = −2π·N_A ∫ (e^(−U/kT) − 1) r² dr.
        """
        with np.errstate(over="ignore"):
            mayer = np.expm1(-self.energy / (K_B * temperature))
            return float(-2 * pi * np.sum(self.weight * mayer * self.r**2)) * CUBIC_CENTIMETRE_PER_MOLE

    def quantum_correction(self, temperature: float, reduced_mass: float) -> float:
        """Return the first quantum correction to it, in cm³/mol, for a reduced mass in dalton.

        Notes
        -----
        π·N_A·ħ²/(12·μ·(kT)³) ∫ e^(−U/kT) U′² r² dr (J. O. Hirschfelder, C. F. Curtiss and R. B. Bird,
        Molecular Theory of Gases and Liquids, Wiley 1954, chapter 6). A step of the energy is left out.
        """
        thermal = K_B * temperature
        with np.errstate(all="ignore"):
            integrand = np.exp(-self.energy / thermal) * self.slope**2 * self.r**2
        integral = float(np.sum(self.weight * np.where(np.isfinite(integrand), integrand, 0.0)))
        return pi * HBAR_SQUARED / (12 * reduced_mass * thermal**3) * integral * CUBIC_CENTIMETRE_PER_MOLE

    def boyle_temperature(self) -> float | None:
        """Return the temperature in kelvin at which the classical coefficient is zero, if there is one."""
        from scipy.optimize import brentq

        if not self.depth:
            return None
        scan = self.depth / K_B * np.geomspace(0.3, 100, 40)
        values = [self.second_virial(float(t)) for t in scan]
        for low, high, before, after in zip(scan, scan[1:], values, values[1:], strict=False):
            if before < 0 <= after:
                return float(brentq(self.second_virial, low, high, xtol=1e-9 * high))
        return None


def look(system: System, setting: Setting) -> Iterator[Figure]:
    """Predict the gas of every pair whose curve falls fast enough."""
    for one, other, curve in system.pairs():
        if curve.tail_power <= 3.01:
            continue
        gas, mass = Gas(curve), system.reduced_mass(one, other)
        for temperature in setting.temperatures:
            keys = {"temperature": temperature}
            classical = gas.second_virial(temperature)
            yield Figure(curve.name, "second-virial", classical, UNIT, keys)
            if mass is not None:
                corrected = classical + gas.quantum_correction(temperature, mass)
                yield Figure(curve.name, "second-virial-quantum", corrected, UNIT, keys)
        boyle = gas.boyle_temperature()
        if boyle is not None:
            yield Figure(curve.name, "boyle-temperature", boyle, "K")
        if curve.collision_diameter is not None:
            yield Figure(curve.name, "collision-diameter", curve.collision_diameter, LENGTH)
