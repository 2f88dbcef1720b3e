"""How far the slopes of a cubic spline are from those of the curve, bounded knot by knot.

The slopes m of a spline on rows xᵢ solve λᵢ mᵢ₋₁ + 2 mᵢ + μᵢ mᵢ₊₁ = 3 (λᵢ U[xᵢ₋₁, xᵢ] + μᵢ U[xᵢ, xᵢ₊₁]) with
λᵢ + μᵢ = 1. What is left over when the curve's own slopes are put in is the residual ρᵢ; as the matrix is
diagonally dominant by 1, no slope is off by more than the largest |ρ| (C. A. Hall and W. W. Meyer, 1976).
"""

from __future__ import annotations

from dataclasses import dataclass
from math import floor, inf

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
    knots = {i: _knot(curve, grid.row(i)) for i in range(indices[0] - 1, indices[-1] + 2)}
    with precision():
        return max(_size(_interior_equation(*(knots[k] for k in (i - 1, i, i + 1)))[1]) for i in indices)


Knot = tuple[Ball, Ball, Ball]
"""Separation, energy and slope of a row."""


def _knot(curve: Curve, r: float) -> Knot:
    place = ball(r)
    value, slope = series(curve.piece_at(r).tree, place, 1)
    return place, value, slope


def _size(residual: Ball) -> float:
    return float(abs(residual).upper()) if residual.is_finite() else inf


def _interior_equation(before: Knot, knot: Knot, after: Knot) -> tuple[tuple[float, float], Ball]:
    """Return λ and μ of a knot, and what its equation leaves over for the curve's own slopes."""
    (x0, u0, s0), (x1, u1, s1), (x2, u2, s2) = before, knot, after
    left, right = x1 - x0, x2 - x1
    to_left, to_right = right / (left + right), left / (left + right)
    chords = 3 * (to_left * (u1 - u0) / left + to_right * (u2 - u1) / right)
    return (float(to_left.mid()), float(to_right.mid())), chords - (to_left * s0 + 2 * s1 + to_right * s2)


REACH = 30
"""Row intervals beyond which a residual no longer matters: its effect halves from knot to knot."""
END_KNOTS = 12
"""Knots at each end whose slope errors are solved for one by one."""


@dataclass(frozen=True, slots=True)
class SlopeErrors:
    """Bounds of the errors of a spline's slopes.

    Attributes
    ----------
    grid : Spacing
    parts : tuple of (low, high, residual)
        Every stretch with the largest residual at its knots, and every edge with its own; ascending.
    ends : tuple of (separation, error)
        The slope errors of the knots next to both ends.
    largest : float
        The largest residual.
    """

    grid: Spacing
    parts: tuple[tuple[float, float, float], ...]
    ends: tuple[tuple[float, float], ...]
    largest: float

    def about(self, low: float, high: float) -> float:
        """Return the largest slope error at the rows about a stretch.

        Away from the ends the residuals of the neighbourhood count in full; from further than 30 knots
        less than 2⁻³⁰ arrives. Next to an end the errors are known knot by knot.
        """
        if not self.parts:
            return 0.0
        first, last = floor(self.grid.position(low)), floor(self.grid.position(high)) + 1
        knots = self.grid.rows - 1
        if last <= END_KNOTS or first >= knots - END_KNOTS:
            # A little wider, so that rounding never leaves a knot out.
            start, end = self.grid.row(first) * (1 - 1e-9), self.grid.row(last) * (1 + 1e-9)
            return max((error for r, error in self.ends if start <= r <= end), default=0.0)
        start = self.grid.row(first - REACH) * (1 - 1e-9)
        end = self.grid.row(last + REACH) * (1 + 1e-9)
        near = 2.0**-REACH * self.largest
        for a, b, size in self.parts:
            if a > end:
                break
            if b >= start:
                near = max(near, size)
        beside = max((error for r, error in self.ends if start <= r <= end), default=0.0)
        inside = first >= END_KNOTS and last <= knots - END_KNOTS
        # Inside, what comes from an end has halved with each knot since; the last solved knot bounds it.
        return near + (self._handed_on(first, last) if inside else beside)

    def _handed_on(self, first: int, last: int) -> float:
        half = len(self.ends) // 2
        from_start = self.ends[half - 1][1] * 0.5 ** max(first - half, 0) if half else 0.0
        from_end = self.ends[half][1] * 0.5 ** max(self.grid.rows - 1 - half - last, 0) if half else 0.0
        return from_start + from_end


NO_SLOPE_ERRORS = SlopeErrors(Spacing(1.0, 2.0, 2, "separation"), (), (), 0.0)


def slope_errors(curve: Curve, grid: Spacing, ends: str, stretches: list[Stretch]) -> SlopeErrors:
    """Return the slope errors of the spline through the rows of a grid, its stretches being sharp already."""
    parts = [(part.low, part.high, residuals(part, grid)[0]) for part in stretches]
    for edge in curve.edges():
        place = float(edge)
        parts.append((place, place, knot_residual(curve, grid, place)))
    largest = max(size for _, _, size in parts)
    count = min(END_KNOTS, (grid.rows - 1) // 2)
    known = []
    for at_start in (True, False):
        errors = end_errors(curve, grid, ends, count, largest, at_start)
        places = [grid.row(i if at_start else grid.rows - 1 - i) for i in range(count + 1)]
        pairs = list(zip(places, errors, strict=True))
        known += pairs if at_start else pairs[::-1]
    return SlopeErrors(grid, tuple(sorted(parts)), tuple(known), largest)


def end_errors(curve: Curve, grid: Spacing, ends: str, count: int, largest: float, at_start: bool) -> list[float]:
    """Bound the slope errors of the knots next to an end, from the equations of the knots themselves.

    ``clamped`` ends have the stored slopes. At a ``natural`` end 2 m₀ + m₁ = 3 U[x₀, x₁]; at a
    ``not-a-knot`` end the first two cubics are one. The matrix of sizes, diagonal positive and the
    rest negative, is solved with the residuals' sizes; beyond the last knot no error exceeds ``largest``.
    """
    rows = [grid.row(i if at_start else grid.rows - 1 - i) for i in range(count + 2)]
    knots = [_knot(curve, r) for r in rows]
    with precision():
        equations = [_interior_equation(*knots[i - 1 : i + 2]) for i in range(1, count + 1)]
        weights, sizes = [w for w, _ in equations], [_size(rest) for _, rest in equations]
        # Each knot's error is at most (size + λ·before + μ·after)/2: iterate from a bound that holds for all.
        first, second = _end_equation(ends, knots, sizes[0], weights[0])
    # What holds for every knot to begin with; what an end adds has halved with each knot since.
    from_end = first if ends == "natural" else second * abs(rows[2] - rows[0]) / abs(rows[2] - rows[1])
    errors = [largest + from_end] * (count + 2)
    errors[-1] = largest + from_end * 0.5**count
    for _ in range(4 * count + 20):
        errors[0] = 0.0 if ends == "clamped" else _first_error(ends, first, errors[1], rows)
        for i in range(1, count + 1):
            to_before, to_after = weights[i - 1]
            reduced = (sizes[i - 1] + to_before * errors[i - 1] + to_after * errors[i + 1]) / 2
            if i == 1 and ends == "not-a-knot":
                reduced = second + to_after * errors[2]
            errors[i] = min(errors[i], reduced * (1 + 1e-12))
    return errors[: count + 1]


def _end_equation(ends: str, knots: list[Knot], next_size: float, weights: tuple[float, float]) -> tuple[float, float]:
    """Return the residual of the end's equation, and that of the next knot with the end's slope put out."""
    (x0, u0, s0), (x1, u1, s1), (x2, u2, _) = knots[:3]
    h, k = abs(x1 - x0), abs(x2 - x1)
    chord, next_chord = (u1 - u0) / (x1 - x0), (u2 - u1) / (x2 - x1)
    if ends == "clamped":
        return 0.0, 0.0
    if ends == "natural":
        return _size(2 * s0 + s1 - 3 * chord), 0.0
    wanted = ((3 * h + 2 * k) * k * chord + h**2 * next_chord) / (h + k)
    rest = _size(wanted - k * s0 - (h + k) * s1)
    return rest, next_size + rest / float((h + k).mid())


def _first_error(ends: str, first: float, next_error: float, rows: list[float]) -> float:
    if ends == "natural":
        return (first + next_error) / 2
    h, k = abs(rows[1] - rows[0]), abs(rows[2] - rows[1])
    return (first + (h + k) * next_error) / k
