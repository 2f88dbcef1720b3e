"""Proved bounds of the error that reading between rows makes, in energy and in force.

The code interpolates in the separation itself, whatever the rows are evenly spaced in.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import inf, isfinite

from ..document import Grid
from ..potential import Curve, Potential
from .edges import EdgeBound, edge_bounds
from .profile import Stretch, first_stretches
from .rules import RULES, SLOPE_IN_ENERGY, SLOPE_IN_FORCE, Rule
from .spacing import Spacing
from .spline import NO_SLOPE_ERRORS, SlopeErrors, residuals, slope_errors

SHARP = 1.02
"""A bound this close to the size that is certainly reached is not refined further."""
MOST_CUTS = 400
STORED = 2.0**-50
"""Relative rounding of a stored number, against the size of the terms it is made of."""


@dataclass(frozen=True, slots=True)
class Rounding:
    """Rounding of the digits that a text table prints, beyond that of double precision."""

    energy_relative: float = 0.0
    energy_absolute: float = 0.0
    force_relative: float = 0.0
    force_absolute: float = 0.0
    separation_relative: float = 0.0
    separation_absolute: float = 0.0


EXACT = Rounding()


@dataclass(frozen=True, slots=True)
class Bound:
    """Error bounds of a table, in eV and ångström.

    Attributes
    ----------
    energy, force : float
        The largest errors of the energy and force that the code reads.
    energy_at, force_at : float
        Where they lie.
    drift : float
        How far the force read may be from the slope of the energy read.
    proved : bool
        False where balls found no bound on some stretch; then the errors are infinite.
    """

    energy: float
    energy_at: float
    force: float
    force_at: float
    drift: float

    @property
    def proved(self) -> bool:
        """Whether there is a bound."""
        return isfinite(self.energy) and isfinite(self.force) and isfinite(self.drift)


Size = Callable[[Stretch, Spacing], tuple[float, float]]
"""The bound that a stretch brings, and what is certainly reached about its middle."""


class ErrorBounds:
    """Error bounds of one curve on one range; what was proved about stretches is kept between calls."""

    def __init__(self, curve: Curve, grid: Grid) -> None:
        self.curve = curve.within(grid.start, grid.end)
        self.grid = grid
        self.stretches = first_stretches(curve, grid.start, grid.end)

    def bound(self, rows: int, spacing: str, rule_name: str, ends: str = "clamped", rounding: Rounding = EXACT) -> Bound:
        """Return the error bounds of a table of so many rows.

        Parameters
        ----------
        rows : int
        spacing, rule_name, ends : str
            What the rows are even in, how the code reads between them, and a spline's ends.
        rounding : Rounding, optional
            Of the digits that a text layout prints.
        """
        rule = RULES[rule_name]
        grid = Spacing(float(self.grid.start), float(self.grid.end), rows, spacing)
        slopes = self.slopes(grid, ends) if rule_name == "cubic-spline" else NO_SLOPE_ERRORS
        energy, energy_at = self.largest(grid, self.energy_size(rule, slopes, rounding))
        force, force_at = self.largest(grid, self.force_size(rule, slopes, rounding))
        drift = self.largest(grid, self.drift_size(rule))[0] if rule.drift else 0.0
        for edge in edge_bounds(self.curve, grid, rule, (energy, force)):
            energy, energy_at = _larger(energy, energy_at, edge.energy + SLOPE_IN_ENERGY * edge.length * slopes.about(edge.at, edge.at), edge)
            force, force_at = _larger(force, force_at, edge.force + SLOPE_IN_FORCE * slopes.about(edge.at, edge.at), edge)
            drift = max(drift, edge.drift if rule.drift else 0.0)
        return Bound(energy, energy_at, force, force_at, drift)

    def energy_bound(self, rows: int, spacing: str, rule_name: str, ends: str = "clamped") -> float:
        """Return the bound of the energy error alone, which a search for a row count asks for often."""
        rule = RULES[rule_name]
        grid = Spacing(float(self.grid.start), float(self.grid.end), rows, spacing)
        slopes = self.slopes(grid, ends) if rule_name == "cubic-spline" else NO_SLOPE_ERRORS
        energy, _ = self.largest(grid, self.energy_size(rule, slopes, EXACT))
        for edge in edge_bounds(self.curve, grid, rule, (energy, inf)):
            energy = max(energy, edge.energy + SLOPE_IN_ENERGY * edge.length * slopes.about(edge.at, edge.at))
        return energy

    def largest(self, grid: Spacing, size: Size) -> tuple[float, float]:
        """Return the largest size over all stretches and where it lies, cutting stretches until it is sharp."""
        sizes = [size(part, grid) for part in self.stretches]
        reached = max((low for _, low in sizes), default=0.0)
        for _ in range(MOST_CUTS):
            top = max(range(len(sizes)), key=sizes.__getitem__)
            part = self.stretches[top]
            if sizes[top][0] <= SHARP * reached or part.high - part.low < 1e-4 * part.high:
                break
            halves = part.halves()
            self.stretches[top : top + 1] = halves
            sizes[top : top + 1] = [size(half, grid) for half in halves]
            reached = max(reached, sizes[top][1], sizes[top + 1][1])
        top = max(range(len(sizes)), key=sizes.__getitem__)
        part = self.stretches[top]
        return sizes[top][0], (part.low + part.high) / 2

    def energy_size(self, rule: Rule, slopes: SlopeErrors, rounding: Rounding) -> Size:
        """Return the size of the energy error."""

        def size(part: Stretch, grid: Spacing) -> tuple[float, float]:
            h = grid.longest(part.low, part.high)
            added = SLOPE_IN_ENERGY * h * slopes.about(part.low, part.high)
            return tuple(  # type: ignore[return-value]
                rule.energy.size(h, sizes[rule.energy.order])
                + added
                + _energy_rounding(sizes, part, h, rounding, rule)
                for sizes in (part.largest, part.middle)
            )

        return size

    def force_size(self, rule: Rule, slopes: SlopeErrors, rounding: Rounding) -> Size:
        """Return the size of the force error."""

        def size(part: Stretch, grid: Spacing) -> tuple[float, float]:
            h = grid.longest(part.low, part.high)
            added = SLOPE_IN_FORCE * slopes.about(part.low, part.high)
            return tuple(  # type: ignore[return-value]
                rule.force.size(h, sizes[rule.force.order]) + added + _force_rounding(sizes, part, h, rounding, rule)
                for sizes in (part.largest, part.middle)
            )

        return size

    def drift_size(self, rule: Rule) -> Size:
        """Return the size of the distance between the force read and the slope of the energy read."""

        def size(part: Stretch, grid: Spacing) -> tuple[float, float]:
            assert rule.drift is not None
            h, order = grid.longest(part.low, part.high), rule.drift.order
            return rule.drift.size(h, part.largest[order]), rule.drift.size(h, part.middle[order])

        return size

    def slopes(self, grid: Spacing, ends: str) -> SlopeErrors:
        """Return bounds on the errors of a cubic spline's slopes at its knots."""
        self.largest(grid, residuals)
        return slope_errors(self.curve, grid, ends, self.stretches)


def _larger(value: float, at: float, other: float, edge: EdgeBound) -> tuple[float, float]:
    return (other, edge.at) if other > value else (value, at)


def _energy_rounding(derivatives: tuple[float, ...], part: Stretch, h: float, rounding: Rounding, rule: Rule) -> float:
    energy, force = derivatives[0], derivatives[1]
    stored = STORED * (energy + part.high * force)
    printed = rounding.energy_relative * energy + rounding.energy_absolute
    moved = (rounding.separation_relative * part.high + rounding.separation_absolute) * force
    slopes = 0.0
    if rule.name != "linear":
        slopes = h / 4 * (rounding.force_relative * force + rounding.force_absolute)
    return stored + printed + moved + slopes


def _force_rounding(derivatives: tuple[float, ...], part: Stretch, h: float, rounding: Rounding, rule: Rule) -> float:
    energy, force, stiffness = derivatives[:3]
    stored = STORED * (force + part.high * stiffness)
    printed = rounding.force_relative * force + rounding.force_absolute
    moved = (rounding.separation_relative * part.high + rounding.separation_absolute) * stiffness
    steep = 0.0
    if rule.name != "linear":
        steep = 3 / h * (rounding.energy_relative * energy + rounding.energy_absolute + STORED * energy)
    return stored + printed + moved + steep


def error_bounds(potential: Potential, grid: Grid) -> ErrorBounds:
    """Return the error bounds of a potential's treated curve on its grid's range."""
    return ErrorBounds(potential.treated, grid)


__all__ = ["EXACT", "Bound", "ErrorBounds", "Rounding", "error_bounds"]
