"""Splines through points, and what follows before the first and beyond the last."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from scipy.interpolate import CubicSpline
from slopewell.formula.balls import ball, series
from slopewell.potential import Curve, find_landmarks
from slopewell.potential.splines import BEYOND, SPLINES, Points, SplineError, extended, spline

R = np.linspace(0.9, 2.5, 41)


def lennard_jones(r: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    return 4 * (r**-12 - r**-6), 4 * (6 * r**-7 - 12 * r**-13)


def points(r: np.ndarray = R, *, slopes: bool = False, error: float = 0.0, noise: float = 0.0) -> Points:
    energy, slope = lennard_jones(r)
    energy = energy + noise * np.random.default_rng(5).standard_normal(r.size)
    return Points(
        tuple(map(Fraction, r.tolist())),
        tuple(map(Fraction, energy.tolist())),
        tuple(map(Fraction, slope.tolist())) if slopes else (),
        (error,) * r.size if error else (),
    )


def jumps(curve: Curve, order: int) -> float:
    found = []
    for before, after in zip(curve.pieces, curve.pieces[1:], strict=False):
        left, right = (series(piece.tree, ball(before.end), order)[order] for piece in (before, after))
        found.append(abs(float((right - left).mid())))
    return max(found)


@pytest.mark.parametrize("kind", ["cubic", "quintic", "monotone"])
def test_a_spline_goes_through_its_points(kind: str) -> None:
    assert spline(points(), kind).derivatives(R, 0)[0] == pytest.approx(lennard_jones(R)[0], rel=1e-14)


def test_a_cubic_is_the_not_a_knot_spline_between_points_too() -> None:
    middle = (R[1:] + R[:-1]) / 2
    expected = CubicSpline(R, lennard_jones(R)[0])
    assert spline(points(), "cubic").derivatives(middle, 2)[2] == pytest.approx(expected(middle, 2), rel=1e-9)


@pytest.mark.parametrize(("kind", "continuous"), [("cubic", 2), ("quintic", 4), ("monotone", 1), ("smoothing", 2)])
def test_so_many_derivatives_do_not_jump(kind: str, continuous: int) -> None:
    curve = spline(points(error=0.01), kind)
    scale = float(np.abs(curve.derivatives(R, continuous)[continuous]).max())
    assert jumps(curve, 1) < 1e-25
    assert jumps(curve, continuous) < 1e-9 * scale
    assert jumps(curve, continuous + 1) > 1e-4


@pytest.mark.parametrize(("kind", "better"), [("cubic", 3), ("quintic", 3)])
def test_stated_slopes_are_used_and_help(kind: str, better: float) -> None:
    middle = (R[1:] + R[:-1]) / 2
    with_slopes, without = (spline(points(slopes=flag), kind) for flag in (True, False))
    assert with_slopes.derivatives(R, 1)[1] == pytest.approx(lennard_jones(R)[1], rel=1e-12)
    off = [np.abs(c.derivatives(middle, 1)[1] - lennard_jones(middle)[1]).max() for c in (with_slopes, without)]
    assert off[0] * better < off[1]


def test_a_monotone_spline_turns_only_at_points() -> None:
    steps = Points(tuple(map(Fraction, range(1, 9))), tuple(map(Fraction, (9, 8, 8, 2, 1, 1, 3, 3))))
    r = np.linspace(1, 8, 500)
    slope = spline(steps, "monotone").derivatives(r, 1)[1]
    assert (slope[r < 6] <= 1e-12).all()
    assert (slope[r > 6] >= -1e-12).all()


def test_a_smoothing_spline_is_one_standard_error_off_on_average() -> None:
    # The defining condition of C. H. Reinsch, Numer. Math. 10, 177 (1967).
    scattered = points(error=0.02, noise=0.02)
    curve = spline(scattered, "smoothing")
    x, y = scattered.arrays()
    assert np.mean(((y - curve.derivatives(x, 0)[0]) / 0.02) ** 2) == pytest.approx(1, abs=1e-3)
    middle = np.linspace(1.2, 2.4, 100)
    assert np.abs(curve.derivatives(middle, 0)[0] - lennard_jones(middle)[0]).max() < 2 * 0.02


@pytest.mark.parametrize("kind", SPLINES)
def test_before_the_first_point_stands_an_exponential_with_its_energy_and_slope(kind: str) -> None:
    inner = spline(points(error=1e-3), kind)
    curve = extended(inner, Fraction(1, 2), Fraction(2), "zero")
    energy, slope = inner.derivatives(R[:1], 1)[:, 0]
    r = np.array([0.5, 0.7, 0.89])
    assert curve.derivatives(r, 0)[0] == pytest.approx(energy * np.exp(slope / energy * (r - 0.9)), rel=1e-12)


def test_beyond_the_last_point_stands_its_inverse_power() -> None:
    inner = spline(points(slopes=True), "cubic")
    curve = extended(inner, Fraction(1), Fraction(20), "inverse-power")
    energy, slope = lennard_jones(np.array([2.5]))
    power = float(-slope[0] * 2.5 / energy[0])
    assert power == pytest.approx(6, abs=0.03)
    r = np.array([3.0, 10.0, 20.0])
    assert curve.derivatives(r, 0)[0] == pytest.approx(energy[0] * (2.5 / r) ** power, rel=1e-10)


def test_beyond_the_last_point_may_be_zero() -> None:
    curve = extended(spline(points(), "cubic"), Fraction(1), Fraction(4), "zero")
    assert not curve.derivatives(np.array([2.6, 4.0]), 2).any()


def test_a_range_inside_the_points_is_cut_out() -> None:
    curve = extended(spline(points(), "cubic"), Fraction(1), Fraction(2), BEYOND[0])
    assert (curve.pieces[0].start, curve.pieces[-1].end) == (1, 2)


def test_without_a_wall_or_a_tail_there_is_no_continuation() -> None:
    inner = spline(points(np.linspace(1.05, 1.12, 8)), "cubic")
    with pytest.raises(SplineError, match="not that of a wall") as wall:
        extended(inner, Fraction(1), Fraction(11, 10), "zero")
    with pytest.raises(SplineError, match="no inverse power"):
        extended(inner, Fraction(107, 100), Fraction(2), "inverse-power")
    assert "Add points" in wall.value.remedy


def test_landmarks_over_hundreds_of_pieces_are_proved() -> None:
    curve = spline(points(np.linspace(0.9, 2.5, 400)), "quintic")
    found = find_landmarks(curve, Fraction(9, 10), Fraction(5, 2))
    assert found.proved
    assert found.equilibrium_separation == pytest.approx(2 ** (1 / 6), rel=1e-9)
    assert found.stationary_points == 1
