"""What predictions take and give: a system of curves, a setting, and figures."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from ..units.constants import ATOMIC_MASS, ELEMENTARY_CHARGE, EV_PER_DALTON_SPEED, PLANCK
from .curve import EnergyCurve

ENERGY, LENGTH = "energy", "length"
"""Units of a figure that are the subject's own; every other text is the unit itself."""

GIGAPASCAL = 1e21 * float(ELEMENTARY_CHARGE)
"""1 eV/Å³ in GPa."""
CUBIC_CENTIMETRE_PER_MOLE = 0.602214076
"""1 Å³ a particle in cm³/mol; exact."""
DALTON_SPEED = float(EV_PER_DALTON_SPEED)
"""1 dalton·(Å/s)² in eV."""
HBAR_SQUARED = float(PLANCK / ATOMIC_MASS / ELEMENTARY_CHARGE * PLANCK * 10**20) / (4 * 3.141592653589793**2)
"""ħ² in eV·Å²·dalton."""


@dataclass(frozen=True, slots=True)
class Figure:
    """One predicted number.

    Attributes
    ----------
    subject : str
        The pair or crystal, such as ``"Ar-Ar"``.
    quantity : str
    value : float
        In eV or ångström where the unit says ``energy`` or ``length``.
    unit : str
    keys : mapping
        What qualifies it, such as the temperature.
    """

    subject: str
    quantity: str
    value: float
    unit: str
    keys: Mapping[str, str | float | int] = field(default_factory=dict)


@dataclass(frozen=True)
class System:
    """Species, their masses and charges, and the curves of their pairs.

    Attributes
    ----------
    species : tuple of str
    curves : mapping
        From two names, in the order of the species, to the curve of the pair.
    masses : mapping
        In dalton, where they are known.
    charges : mapping
        In elementary charges.
    untreated : mapping
        Curves before their cutoff treatment, where they are known.
    """

    species: tuple[str, ...]
    curves: Mapping[tuple[str, str], EnergyCurve]
    masses: Mapping[str, float] = field(default_factory=dict)
    charges: Mapping[str, float] = field(default_factory=dict)
    untreated: Mapping[tuple[str, str], EnergyCurve] = field(default_factory=dict)

    def curve(self, one: str, other: str) -> EnergyCurve | None:
        """Return the curve of two species in either order."""
        return self.curves.get((one, other)) or self.curves.get((other, one))

    def reduced_mass(self, one: str, other: str) -> float | None:
        """Return the reduced mass in dalton, where both are known."""
        if one not in self.masses or other not in self.masses:
            return None
        first, second = self.masses[one], self.masses[other]
        return first * second / (first + second)

    def missing(self, names: tuple[str, ...]) -> list[str]:
        """Return the pairs of some species that have no curve, as names."""
        pairs = [(one, other) for k, one in enumerate(names) for other in names[k:]]
        return [f"{one}-{other}" for one, other in pairs if self.curve(one, other) is None]

    def pairs(self) -> Iterator[tuple[str, str, EnergyCurve]]:
        """Yield every pair with its curve."""
        for (one, other), curve in self.curves.items():
            yield one, other, curve


@dataclass(frozen=True)
class Setting:
    """What the user asks for.

    Attributes
    ----------
    temperatures : tuple of float
        In kelvin.
    number_density : float or None
        In Å⁻³; None lets it follow from the curve.
    structures : tuple of str
        Names of crystals; empty for all that fit.
    """

    temperatures: tuple[float, ...] = (100.0, 200.0, 300.0, 500.0, 700.0, 1000.0)
    number_density: float | None = None
    structures: tuple[str, ...] = ()
