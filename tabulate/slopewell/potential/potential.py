"""What an interaction of a document means: a bare curve, a treated one, and the range it is used on."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from ..showing import Shown
from .curve import Curve
from .cutoff import Cutoff
from .joins import Bridge
from .splines import Points


@dataclass(frozen=True, slots=True)
class Potential(Shown):
    """The energy of a pair of species.

    Attributes
    ----------
    name : str
        The species joined by a hyphen, such as ``"W-P"``.
    between : (str, str)
    bare, treated : Curve
        The curve as its source states it, and as the simulation sees it.
    start, end : Fraction
        The range of its grid in ångström.
    cutoff : Cutoff or None
    formula : str
        What the user or the catalogue wrote.
    form : str
        Name of the form; empty for a formula of one's own.
    stated_force : Curve or None
        The force that the source states for the bare curve, in eV/Å.
    reduced_mass : Fraction or None
        In dalton, where both masses are given.
    temperature : Fraction or None
        In kelvin.
    energy_scale : Fraction or None
        In eV, where the document names it.
    purpose : str
        ``sampling``, ``dynamics`` or ``lattice-dynamics``.
    bridges : tuple of Bridge
        Those between its segments.
    segments : bool
        Whether it is made of segments by range.
    splines : tuple of (Points, Curve)
        Points that it goes through or near, and the spline between the first and the last.
    """

    name: str
    between: tuple[str, str]
    bare: Curve
    treated: Curve
    start: Fraction
    end: Fraction
    cutoff: Cutoff | None
    formula: str
    form: str = ""
    stated_force: Curve | None = None
    reduced_mass: Fraction | None = None
    temperature: Fraction | None = None
    energy_scale: Fraction | None = None
    purpose: str = "dynamics"
    bridges: tuple[Bridge, ...] = ()
    segments: bool = False
    splines: tuple[tuple[Points, Curve], ...] = ()

    @property
    def reach(self) -> Fraction:
        """The cutoff, or the end of the grid where there is none."""
        return self.cutoff.at if self.cutoff else self.end
