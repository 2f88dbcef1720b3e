"""Least squares from several starts: values, covariance, refusals."""

from __future__ import annotations

import numpy as np
import pytest
from slopewell.potential.fitting import Fit, FitError, FittedParameter, least_squares

X = np.linspace(0, 1, 21)
FREE = np.full(2, np.inf)


def test_a_straight_line_has_the_covariance_of_the_normal_equations() -> None:
    y = 3 * X + 2 + 0.1 * np.sin(50 * X)
    found = least_squares(lambda v: y - v[0] * X - v[1], [np.array([1.0, 1.0])], -FREE, FREE)
    slope, intercept = np.polyfit(X, y, 1)
    assert found.values == pytest.approx([slope, intercept], rel=1e-7)
    design = np.stack([X, np.ones_like(X)], axis=1)
    assert found.covariance == pytest.approx(np.linalg.inv(design.T @ design), rel=1e-6)
    assert found.chi_squared == pytest.approx(np.sum((y - slope * X - intercept) ** 2), rel=1e-9)


def test_the_deeper_of_two_valleys_is_found() -> None:
    # From the start alone descent ends in the valley at -1, where the residual is 0.3.
    def residuals(v: np.ndarray) -> np.ndarray:
        return np.array([(v[0] ** 2 - 1), 0.3 * (v[0] - 1) / 2])

    found = least_squares(residuals, [np.array([-1.2]), np.array([0.5])], -FREE[:1], FREE[:1])
    assert found.values == pytest.approx([1.0], abs=1e-6)


def test_bounds_hold() -> None:
    found = least_squares(lambda v: X - v[0], [np.array([3.0])], np.array([0.7]), np.array([9.0]))
    assert found.values == pytest.approx([0.7], abs=1e-6)


def test_parameters_that_the_points_do_not_tell_apart_are_refused() -> None:
    with pytest.raises(FitError, match="do not determine"):
        least_squares(lambda v: X - v[0] * v[1], [np.array([1.0, 1.0])], -FREE, FREE)


def test_starts_without_a_finite_value_are_refused() -> None:
    with pytest.raises(FitError, match="finite"):
        least_squares(lambda v: X * np.nan, [np.array([1.0])], -FREE[:1], FREE[:1])


def test_a_fit_tells_its_residuals() -> None:
    fit = Fit("f", "", 2, "uniform", None, (FittedParameter("a", 1, 0.1),), ((1.0,),), ((1.0, 3.0), (2.0, -4.0)))
    assert fit.largest == (2.0, -4.0)
    assert fit.root_mean_square == pytest.approx(12.5**0.5)
