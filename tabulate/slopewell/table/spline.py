"""How far the slopes of a cubic spline are from those of the curve, bounded knot by knot.

The slopes m of a spline on rows xᵢ solve λᵢ mᵢ₋₁ + 2 mᵢ + μᵢ mᵢ₊₁ = 3 (λᵢ U[xᵢ₋₁, xᵢ] + μᵢ U[xᵢ, xᵢ₊₁]) with
λᵢ + μᵢ = 1. What is left over when the curve's own slopes are put in is the residual ρᵢ; as the matrix is
diagonally dominant by 1, no slope is off by more than the largest |ρ| (C. A. Hall and W. W. Meyer, 1976).
"""

from __future__ import annotations

from dataclasses import dataclass
from math import floor

from ..formula.balls import Ball, ball, precision, series
from ..potential import Curve
from .profile import Stretch
from .spacing import Spacing


def residuals(part: Stretch, grid: Spacing) -> tuple[float, float]:
    """Bound the residual at knots of a smooth stretch, and say what is certainly reached about its middle.

    By Taylor's theorem ρ = (λ a³ U⁗ₗ − μ b³ U⁗ᵣ)/24 with means of U⁗ over the intervals a, b on both sides.
    """
    h = grid.longest(part.low, part.high)
    h = grid.longest(max(part.low - h, grid.start), min(part.high + h, grid.end))
    uneven = h**2 * grid.unevenness(part.low, part.high)
    return tuple(  # type: ignore[return-value]
        min(h**4 * sizes[5] + uneven * sizes[4], h**3 * sizes[4]) / 24 for sizes in (part.largest, part.middle)
    )


def knot_residual(curve: Curve, grid: Spacing, edge: float) -> float:
    """Bound the residual at the knots about an edge between pieces, from the rows themselves."""
    middle = floor(grid.position(edge))
    indices = [i for i in range(middle - 1, middle + 3) if 0 < i < grid.rows - 1]
    if not indices:
        return 0.0
    values = {i: _value_and_slope(curve, grid.row(i)) for i in range(indices[0] - 1, indices[-1] + 2)}
    with precision():
        return max(_residual_at(grid, values, i) for i in indices)


def _value_and_slope(curve: Curve, r: float) -> tuple[Ball, Ball, Ball]:
    place = ball(r)
    value, slope = series(curve.piece_at(r).tree, place, 1)
    return place, value, slope


def _residual_at(grid: Spacing, values: dict[int, tuple[Ball, Ball, Ball]], i: int) -> float:
    (x0, u0, s0), (x1, u1, s1), (x2, u2, s2) = (values[k] for k in (i - 1, i, i + 1))
    left, right = x1 - x0, x2 - x1
    to_left, to_right = right / (left + right), left / (left + right)
    chords = 3 * (to_left * (u1 - u0) / left + to_right * (u2 - u1) / right)
    return float(abs(chords - (to_left * s0 + 2 * s1 + to_right * s2)).upper())


REACH = 30
"""Row intervals beyond which a residual no longer matters: its effect halves from knot to knot."""


@dataclass(frozen=True, slots=True)
class SlopeErrors:
    """Bounds of the errors of a spline's slopes, from the residuals about each place.

    Attributes
    ----------
    grid : Spacing
    parts : tuple of (low, high, residual)
        Every stretch with the largest residual at its knots, and every edge and end with its own; ascending.
    largest : float
        The largest residual.
    """

    grid: Spacing
    parts: tuple[tuple[float, float, float], ...]
    largest: float

    def about(self, low: float, high: float) -> float:
        """Return the largest slope error on a stretch.

        Its own neighbourhood counts in full; from further than 30 knots less than 2⁻³⁰ arrives.
        """
        if not self.parts:
            return 0.0
        start = self.grid.row(floor(self.grid.position(low)) - REACH)
        end = self.grid.row(floor(self.grid.position(high)) + REACH + 1)
        near = 0.0
        for a, b, size in self.parts:
            if a > end:
                break
            if b >= start and size > near:
                near = size
        return near + 2.0**-REACH * self.largest


NO_SLOPE_ERRORS = SlopeErrors(Spacing(1.0, 2.0, 2, "separation"), (), 0.0)


def slope_errors(curve: Curve, grid: Spacing, ends: str, stretches: list[Stretch]) -> SlopeErrors:
    """Return the slope errors of the spline through the rows of a grid, its stretches being sharp already."""
    parts = [(part.low, part.high, residuals(part, grid)[0]) for part in stretches]
    for edge in curve.edges():
        place = float(edge)
        parts.append((place, place, knot_residual(curve, grid, place)))
    if ends != "clamped":
        for part, at_start in ((stretches[0], True), (stretches[-1], False)):
            r = grid.start if at_start else grid.end
            parts.append((r, r, end_residual(curve, grid, ends, part, at_start)))
    return SlopeErrors(grid, tuple(sorted(parts)), max(size for _, _, size in parts))


def end_residual(curve: Curve, grid: Spacing, ends: str, part: Stretch, at_start: bool) -> float:
    """Return what an end condition adds to the errors of the slopes next to it.

    ``clamped`` ends have the stored slopes. A ``natural`` end has no curvature: its equation
    2 m₀ + m₁ = 3 U[x₀, x₁] misses (h/2) U″. At a ``not-a-knot`` end the first two cubics are one,
    whose equation is exact for cubics and leaves the kernel norms of U⁗ below.
    """
    last = grid.rows - 1
    rows = [grid.row(i if at_start else last - i) for i in range(3)]
    h, k = abs(rows[1] - rows[0]), abs(rows[2] - rows[1])
    fourth = part.largest[4]
    if ends == "natural":
        curvature = 2 * float(abs(series(curve.piece_at(rows[0]).tree, ball(rows[0]), 2)[2]).upper())
        return h / 2 * curvature + h**3 / 24 * fourth
    return _not_a_knot(h, k, fourth, residuals(part, grid)[0])


def _not_a_knot(h: float, k: float, fourth: float, interior: float) -> float:
    """Bound the slope errors at a not-a-knot end with first intervals h and k.

    Its equation k m₀ + (h + k) m₁ = … leaves ρ₀; with that of the next knot, m₀ eliminated, the
    diagonal 1 dominates μ = h/(h + k).
    """
    kernel = k * h**3 / 6 - (3 * h + 2 * k) * k * h**3 / (24 * (h + k)) + h**2 * k**3 / (24 * (h + k))
    first = kernel * fourth
    next_knot = (interior + first / (h + k)) * (h + k) / k
    return max(next_knot, (first + (h + k) * next_knot) / k)
