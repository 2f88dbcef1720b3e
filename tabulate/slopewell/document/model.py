"""A potential document after it was read and understood."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Any

from ..potential import Potential
from ..potential.fitting import Fit
from ..showing import Shown
from ..units import UnitSystem

SPACINGS = ("separation", "separation-squared", "inverse", "logarithmic")
EVEN_IN = {"separation": "r", "separation-squared": "r²", "inverse": "1/r", "logarithmic": "log r"}
"""What the rows of each spacing are even in, for people."""
INTERPOLATIONS = ("linear", "cubic-hermite", "cubic-spline", "quintic-hermite")
FEWEST_ROWS = {"linear": 2, "cubic-hermite": 2, "cubic-spline": 4, "quintic-hermite": 2}
"""Rows that each interpolation rule needs at least; a spline's four hold for all its ends."""
ENDS = ("clamped", "natural", "not-a-knot")


@dataclass(frozen=True, slots=True)
class Grid:
    """The rows an interaction is tabulated on.

    Attributes
    ----------
    start, end : Fraction
        First and last separation in ångström.
    rows : int or None
        None where a tolerance decides.
    spacing, interpolation, ends : str
        What the rows are even in, how the code reads between them, and a spline's end conditions.
    tolerance, force_tolerance : Fraction or None
        Largest error of energy (eV) and force (eV/Å) that reading between rows may make.
    """

    start: Fraction
    end: Fraction
    rows: int | None
    spacing: str = "separation"
    interpolation: str = "cubic-hermite"
    ends: str = "clamped"
    tolerance: Fraction | None = None
    force_tolerance: Fraction | None = None


@dataclass(frozen=True, slots=True)
class Expectation:
    """A landmark that the source states, in the document's units."""

    landmark: str
    value: float
    within: float
    treated: bool


@dataclass(frozen=True, slots=True)
class Origin:
    """Where an interaction comes from.

    Attributes
    ----------
    kind : str
        ``stated`` or ``mixed``.
    rule, form : str
        Mixing rule and form of a mixed one.
    parameters : mapping
        Its parameters in the document's units, or with units of their own.
    """

    kind: str = "stated"
    rule: str = ""
    form: str = ""
    parameters: Mapping[str, Any] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Interaction:
    """One pair of species: its potential, its grid, what its source says, and where it comes from."""

    potential: Potential
    grid: Grid
    expectations: tuple[Expectation, ...] = ()
    origin: Origin = Origin()
    fits: tuple[Fit, ...] = ()


@dataclass(frozen=True, slots=True)
class Output:
    """A file to write.

    Attributes
    ----------
    file : str
        Name, with ``{a}`` and ``{b}`` for the species.
    layout : str
        Name of a layout file beside the document; empty for HDF5, CSV and JSON.
    units : UnitSystem or None
    """

    file: str
    layout: str = ""
    units: UnitSystem | None = None

    def file_for(self, between: tuple[str, str]) -> str:
        """Return the name of the file of one interaction."""
        return self.file.replace("{a}", between[0]).replace("{b}", between[1])


@dataclass(frozen=True, slots=True)
class Document(Shown):
    """A potential document.

    Attributes
    ----------
    file : str
        As the user named it.
    text : str
    sha256 : str
        Of the file's bytes.
    title, source, purpose : str
    units : UnitSystem
    interactions : tuple of Interaction
    outputs : tuple of Output
    masses : mapping
        From species to dalton, where they are given.
    charges : mapping
        From species to elementary charges, where they are given.
    number_density : float or None
        Particles per Å³ that tail corrections are for.
    """

    file: str
    text: str
    sha256: str
    title: str
    source: str
    purpose: str
    units: UnitSystem
    interactions: tuple[Interaction, ...]
    outputs: tuple[Output, ...]
    masses: Mapping[str, Fraction] = field(default_factory=dict)
    charges: Mapping[str, float] = field(default_factory=dict)
    number_density: float | None = None
