"""Fit parameters of a curve to points by least squares, from several starts."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

STARTS = 8
"""Starts beyond those given: each value is multiplied by up to two, or divided."""
WEIGHTS = ("uniform", "boltzmann", "column")


@dataclass(frozen=True, slots=True)
class FittedParameter:
    """A parameter of a fit, in the unit of the document.

    Attributes
    ----------
    name : str
    value, error : float
        Best value and standard error.
    unit : str
        Empty where the document gives plain numbers.
    """

    name: str
    value: float
    error: float
    unit: str = ""


@dataclass(frozen=True, slots=True)
class Fit:
    """Parameters fitted to points.

    Attributes
    ----------
    file, sha256 : str
        Of the points.
    points : int
    weight : str
        One of ``WEIGHTS``.
    temperature : float or None
        In kelvin, with Boltzmann weights.
    parameters : tuple of FittedParameter
    correlations : tuple of tuple of float
        The correlation matrix, in the order of the parameters.
    residuals : tuple of (float, float)
        Separation in ångström, and energy of the point minus that of the curve in eV.
    reduced_chi_squared : float or None
        Where the points have standard errors.
    """

    file: str
    sha256: str
    points: int
    weight: str
    temperature: float | None
    parameters: tuple[FittedParameter, ...]
    correlations: tuple[tuple[float, ...], ...]
    residuals: tuple[tuple[float, float], ...]
    reduced_chi_squared: float | None = None

    @property
    def root_mean_square(self) -> float:
        """The root mean square of the residuals in eV, without weights."""
        return float(np.sqrt(np.mean([energy**2 for _, energy in self.residuals])))

    @property
    def largest(self) -> tuple[float, float]:
        """Separation in ångström and size in eV of the largest residual."""
        return max(self.residuals, key=lambda residual: abs(residual[1]))


@dataclass(frozen=True, slots=True)
class Solution:
    """What least squares found.

    Attributes
    ----------
    values : (n,) array
    chi_squared : float
        The sum of the squared weighted residuals.
    covariance : (n, n) array
        The inverse of JᵀJ, J being the Jacobian of the weighted residuals.
    """

    values: Array
    chi_squared: float
    covariance: Array


class FitError(ValueError):
    """Parameters that the points do not determine."""


def least_squares(residuals: Callable[[Array], Array], starts: Sequence[Array], low: Array, high: Array) -> Solution:
    """Return the values that make the sum of squared residuals smallest.

    Parameters
    ----------
    residuals : callable
        From (n,) values to (m,) weighted residuals.
    starts : sequence of (n,) arrays
        The first one sets the scale of each value; more are spread around each, the same on every machine.
    low, high : (n,) arrays
        Bounds.

    Raises
    ------
    FitError
        If no start leads to finite residuals, or the parameters found are not determined by the points.

    Notes
    -----
    A trust region with bounds (M. A. Branch, T. F. Coleman and Y. Li, SIAM J. Sci. Comput. 21, 1 (1999)) as
    SciPy has it.
    """
    from scipy import optimize

    def finite(values: Array) -> Array:
        return np.nan_to_num(residuals(values), nan=1e150, posinf=1e150, neginf=-1e150)

    scale = np.where(starts[0] != 0, np.abs(starts[0]), 1.0)
    best = None
    for start in _spread(starts):
        inside = np.clip(start, low + 1e-9 * scale, high - 1e-9 * scale)
        with np.errstate(all="ignore"):
            if not np.isfinite(residuals(inside)).all():
                continue
            found = optimize.least_squares(
                finite,
                inside,
                jac="3-point",
                bounds=(low, high),
                x_scale=scale,
                xtol=1e-15,
                ftol=1e-15,
                gtol=1e-15,
                max_nfev=400,
            )
        if best is None or found.cost < best.cost * (1 - 1e-9):
            best = found
    if best is None:
        raise FitError("no start gives a finite energy at every point")
    return Solution(best.x, 2 * float(best.cost), _covariance(np.asarray(best.jac), scale))


def _spread(starts: Sequence[Array]) -> list[Array]:
    from scipy.stats import qmc

    shifts = qmc.Halton(starts[0].size, scramble=False).random(STARTS + 1)[1:]
    return [*starts, *(start * 4.0 ** (shift - 0.5) for start in starts for shift in shifts)]


def _covariance(jacobian: Array, scale: Array) -> Array:
    scaled = jacobian * scale
    _, sizes, axes = np.linalg.svd(scaled, full_matrices=False)
    if sizes[-1] <= 1e-9 * sizes[0]:
        raise FitError("the points do not determine all of the parameters")
    covariance: Array = (axes.T / sizes**2) @ axes * np.outer(scale, scale)
    return covariance
