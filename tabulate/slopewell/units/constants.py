"""Physical constants, CODATA 2022, as exact fractions in eV, ångström, dalton and kelvin."""

from __future__ import annotations

from fractions import Fraction

CODATA = "CODATA 2022"

ELEMENTARY_CHARGE = Fraction("1.602176634e-19")
"""In coulomb; exact."""
PLANCK = Fraction("6.62607015e-34")
"""In joule second; exact."""
LIGHT_SPEED = Fraction(299792458)
"""In metre per second; exact."""
AVOGADRO = Fraction("6.02214076e23")
"""Per mole; exact."""
ATOMIC_MASS = Fraction("1.66053906892e-27")
"""One dalton in kilogram."""

BOLTZMANN = Fraction("1.380649e-23") / ELEMENTARY_CHARGE
"""In eV per kelvin; exact."""
HARTREE = Fraction("27.211386245981")
"""In eV."""
BOHR = Fraction("0.529177210544")
"""In ångström."""
COULOMB = HARTREE * BOHR
"""e²/4πε₀ = 1 hartree·bohr, in eV·ångström."""
EV_PER_WAVENUMBER = PLANCK * LIGHT_SPEED * 100 / ELEMENTARY_CHARGE
"""The energy h·c·cm⁻¹ in eV; exact."""
EV_PER_DALTON_SPEED = ATOMIC_MASS * Fraction(10) ** -20 / ELEMENTARY_CHARGE
"""1 dalton·(ångström/second)² in eV."""
