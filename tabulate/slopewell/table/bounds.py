"""Proved bounds of the error that reading between rows makes, in energy and in force.

The code interpolates in the separation itself, whatever the rows are evenly spaced in.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import inf, isfinite

from ..document import Grid
from ..potential import Curve, Potential
from .direct import interval_bound
from .edges import edge_bounds
from .profile import Stretch, first_stretches
from .rounding import EXACT, Rounding, energy_rounding, force_rounding
from .rules import RULES, SLOPE_IN_ENERGY, SLOPE_IN_FORCE, Rule, Term
from .spacing import Spacing
from .spline import NO_SLOPE_ERRORS, SlopeErrors, residuals, slope_errors

SHARP = 1.02
"""A bound this close to the size that is certainly reached is not refined further."""
MOST_CUTS = 400
MOST_DIRECT = 6
"""Row intervals whose error is enclosed directly at most."""
COARSE = 0.05
"""Length of a row interval, against its separation, from which on its error is enclosed directly."""
FINEST = 8
"""Part of half a row interval below which a stretch is not cut: the interval is what counts then."""


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


Size = Callable[[int], tuple[float, float]]
"""From the number of a stretch to the bound that it brings, and what is reached about its middle."""


class ErrorBounds:
    """Error bounds of one curve on one range; what was proved about stretches is kept between calls."""

    def __init__(self, curve: Curve, grid: Grid) -> None:
        self.curve = curve.within(grid.start, grid.end)
        self.grid = grid
        self.coarse = first_stretches(curve, grid.start, grid.end)
        self.stretches = list(self.coarse)
        self.known: dict[tuple[float, float], tuple[Stretch, Stretch]] = {}

    def bound(
        self, rows: int, spacing: str, rule_name: str, ends: str = "clamped", rounding: Rounding = EXACT
    ) -> Bound:
        """Return the error bounds of a table of so many rows.

        Parameters
        ----------
        rows : int
        spacing, rule_name, ends : str
            What the rows are even in, how the code reads between them, and a spline's ends.
        rounding : Rounding, optional
            Of the digits that a text layout prints.
        """
        rule, grid, slopes = self._setting(rows, spacing, rule_name, ends)
        energy = self.largest_energy(grid, rule, slopes, rounding)
        force = self.largest_force(grid, rule, slopes, rounding)
        drift = self.cut_until_sharp(grid, self.drift_size(grid, rule.drift))[0] if rule.drift else 0.0
        for edge in edge_bounds(self.curve, grid, rule, (energy[0], force[0])):
            off = slopes.about(edge.at, edge.at)
            energy = max(energy, (edge.energy + SLOPE_IN_ENERGY * edge.length * off, edge.at))
            force = max(force, (edge.force + SLOPE_IN_FORCE * off, edge.at))
            drift = max(drift, edge.drift if rule.drift else 0.0)
        return Bound(*energy, *force, drift)

    def energy_bound(
        self, rows: int, spacing: str, rule_name: str, ends: str = "clamped", *, edges: bool = True
    ) -> float:
        """Return the bound of the energy error alone, which a search for a row count asks for often.

        Without ``edges`` it leaves out the intervals about edges between pieces, which cost the most.
        """
        rule, grid, slopes = self._setting(rows, spacing, rule_name, ends)
        energy, _ = self.largest_energy(grid, rule, slopes, EXACT)
        for edge in edge_bounds(self.curve, grid, rule, (energy, inf)) if edges else ():
            off = slopes.about(edge.at, edge.at)
            energy = max(energy, edge.energy + SLOPE_IN_ENERGY * edge.length * off)
        return energy

    def _setting(self, rows: int, spacing: str, rule_name: str, ends: str) -> tuple[Rule, Spacing, SlopeErrors]:
        # Each bound starts from the coarse stretches, so that it does not depend on what was asked before.
        self.stretches = list(self.coarse)
        grid = Spacing(float(self.grid.start), float(self.grid.end), rows, spacing)
        slopes = self.slopes(grid, ends) if rule_name == "cubic-spline" else NO_SLOPE_ERRORS
        return RULES[rule_name], grid, slopes

    def cut_until_sharp(
        self, grid: Spacing, size: Size, directly: Callable[[int], float] | None = None
    ) -> tuple[float, float]:
        """Return the largest size and where it lies, cutting stretches until it is sharp.

        Where a stretch is as fine as the rows and the bound still is not sharp, the row interval is
        too long for its derivatives to tell: then ``directly`` encloses its error itself.
        """
        sizes = [size(index) for index in range(len(self.stretches))]
        reached = max((low for _, low in sizes), default=0.0)
        enclosed: set[float] = set()
        for _ in range(MOST_CUTS):
            top = max(range(len(sizes)), key=sizes.__getitem__)
            if sizes[top][0] <= SHARP * reached:
                break
            widest = self._to_cut(top, grid)
            if widest is None:
                place = self.stretches[top].low
                if directly is None or place in enclosed or len(enclosed) == MOST_DIRECT:
                    break
                enclosed.add(place)
                bound = min(sizes[top][0], directly(top))
                sizes[top], reached = (bound, bound / SHARP), max(reached, bound / SHARP)
                continue
            self.stretches[widest : widest + 1] = self._halves(self.stretches[widest])
            sizes[widest : widest + 1] = [size(widest), size(widest + 1)]
            changed = {widest, widest + 1, top + (top > widest)}
            sizes[top + (top > widest)] = size(top + (top > widest))
            reached = max(reached, *(sizes[index][1] for index in changed))
        top = max(range(len(sizes)), key=sizes.__getitem__)
        part = self.stretches[top]
        return sizes[top][0], (part.low + part.high) / 2

    def _halves(self, part: Stretch) -> tuple[Stretch, Stretch]:
        key = part.low, part.high
        if key not in self.known:
            self.known[key] = part.halves()
        return self.known[key]

    def _to_cut(self, top: int, grid: Spacing) -> int | None:
        """Return the widest stretch that the bound of one depends on; None if all are finer than the rows."""
        part = self.stretches[top]
        reach = grid.at((part.low + part.high) / 2) / 2
        widest = max(
            [top, *self._beside(top, reach)],
            key=lambda index: self.stretches[index].high - self.stretches[index].low,
        )
        width = self.stretches[widest].high - self.stretches[widest].low
        return None if width < max(reach / FINEST, 1e-6 * part.high) else widest

    def largest_energy(self, grid: Spacing, rule: Rule, slopes: SlopeErrors, rounding: Rounding) -> tuple[float, float]:
        """Return the largest energy error of intervals on one piece each, and where it lies."""

        def added(part: Stretch, h: float) -> float:
            rounded = energy_rounding(part.largest, part, h, rounding, rule)
            return SLOPE_IN_ENERGY * h * slopes.about(part.low, part.high) + rounded

        return self._largest(grid, rule, rule.energy, added)

    def largest_force(self, grid: Spacing, rule: Rule, slopes: SlopeErrors, rounding: Rounding) -> tuple[float, float]:
        """Return the largest force error of intervals on one piece each, and where it lies."""

        def added(part: Stretch, h: float) -> float:
            rounded = force_rounding(part.largest, part, h, rounding, rule)
            return SLOPE_IN_FORCE * slopes.about(part.low, part.high) + rounded

        return self._largest(grid, rule, rule.force, added)

    def _largest(
        self, grid: Spacing, rule: Rule, term: Term, added: Callable[[Stretch, float], float]
    ) -> tuple[float, float]:
        """Return the largest of a term and what is added to it, over the intervals centred in each stretch."""

        def size(index: int) -> tuple[float, float]:
            part = self.stretches[index]
            if not (h := grid.longest_of(*grid.centred(part.low, part.high))):
                return 0.0, 0.0
            beside = added(part, h)
            return self._term_size(term, index, h) + beside, self._reached(term, part, grid) + beside

        def directly(index: int) -> float:
            part = self.stretches[index]
            first, last = grid.centred(part.low, part.high)
            h = grid.longest_of(first, last)
            if first != last or h < COARSE * part.low:
                return inf
            errors = interval_bound(self.curve, grid.row(first), grid.row(first + 1), rule)
            return errors[0 if term is rule.energy else 1] + added(part, h)

        return self.cut_until_sharp(grid, size, directly)

    def drift_size(self, grid: Spacing, term: Term) -> Size:
        """Return the size of the distance between the force read and the slope of the energy read."""

        def size(index: int) -> tuple[float, float]:
            part = self.stretches[index]
            h = grid.longest_of(*grid.centred(part.low, part.high))
            return self._term_size(term, index, h), self._reached(term, part, grid)

        return size

    def _reached(self, term: Term, part: Stretch, grid: Spacing) -> float:
        return term.plain(grid.at((part.low + part.high) / 2), part.middle[term.order])

    def _term_size(self, term: Term, index: int, h: float) -> float:
        part = self.stretches[index]
        rest = self._largest_about(index, h / 2, term.order + 2)
        return term.size(h, part.largest[term.order], part.largest[term.order + 1], rest)

    def _largest_about(self, index: int, reach: float, order: int) -> float:
        """Return the largest derivative on a stretch and so far beyond its ends, on the same piece."""
        return max(self.stretches[i].largest[order] for i in (index, *self._beside(index, reach)))

    def _beside(self, index: int, reach: float) -> list[int]:
        """Return the numbers of the stretches so near to one, on the same piece."""
        part = self.stretches[index]
        near = []
        for step in (-1, 1):
            other = index + step
            while 0 <= other < len(self.stretches):
                beside = self.stretches[other]
                apart = part.low - beside.high if step < 0 else beside.low - part.high
                if beside.piece is not part.piece or apart >= reach:
                    break
                near.append(other)
                other += step
        return near

    def slopes(self, grid: Spacing, ends: str) -> SlopeErrors:
        """Return bounds on the errors of a cubic spline's slopes at its knots."""
        self.cut_until_sharp(grid, lambda index: residuals(self.stretches[index], grid))
        return slope_errors(self.curve, grid, ends, self.stretches)


def error_bounds(potential: Potential, grid: Grid) -> ErrorBounds:
    """Return the error bounds of a potential's treated curve on its grid's range."""
    return ErrorBounds(potential.treated, grid)


__all__ = ["EXACT", "Bound", "ErrorBounds", "Rounding", "error_bounds"]
