"""An energy curve on a range: what every prediction takes, whether it comes from a formula or from rows."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from math import inf, isinf

import numpy as np
from numpy.typing import NDArray

from ..potential import Curve, Potential
from ..table import Rows
from ..table.interpolation import interpolant
from ..units import UnitSystem

Array = NDArray[np.float64]
Reader = Callable[[Array], Array]
Derivatives = Callable[[Array, int], Array]

WINDOW = 0.05
"""Half the width, relative to the separation, on which rows are fitted for their higher derivatives."""


@dataclass(frozen=True)
class Well:
    """The deepest minimum of a curve, in ångström and eV."""

    separation: float
    depth: float


@dataclass(frozen=True)
class EnergyCurve:
    """Energy of a pair at any separation, in eV and ångström.

    Attributes
    ----------
    name : str
        Such as ``"Ar-Ar"``.
    derivatives : callable
        From separations (n,) in [start, reach] and an order to an (order + 1, n) array of energy
        and derivatives. Rows give up to the second; :meth:`local` has more.
    start, end : float
        Where it is given. Below the start it is continued as a wall.
    reach : float
        Beyond it the energy is zero; infinite for a formula without a cutoff.
    exact : bool
        Whether derivatives of any order are those of a formula.
    breaks : tuple of float
        Separations at which it is not smooth.

    Notes
    -----
    The wall is U(start)·(start/r)ⁿ with the n that continues the force; where the curve is not
    positive and repulsive at its start, the wall is hard.
    """

    name: str
    derivatives: Derivatives
    start: float
    end: float
    reach: float
    exact: bool = True
    breaks: tuple[float, ...] = ()

    def energy(self, r: Array) -> Array:
        """Return the energy in eV at separations in ångström."""
        return np.asarray(self.all(r, 0)[0])

    def force(self, r: Array) -> Array:
        """Return the force −dU/dr in eV/Å."""
        return np.asarray(0.0 - self.all(r, 1)[1])

    def all(self, r: Array, order: int) -> Array:
        """Return energy and derivatives (order at most 2), with the wall below and zero beyond."""
        r = np.asarray(r, dtype=np.float64)
        core, outside = r < self.start, r > self.reach
        if not core.any() and not outside.any():
            return np.asarray(self.derivatives(r, order))
        result = np.zeros((order + 1, r.size))
        inside = ~(core | outside)
        result[:, inside] = self.derivatives(r[inside], order)
        if core.any():
            result[:, core] = self._wall(r[core], order)
        return result

    def _wall(self, r: Array, order: int) -> Array:
        energy, power = self.wall
        with np.errstate(all="ignore"):
            value = energy * (self.start / r) ** power if power else np.full(r.shape, inf)
            rows = [value, -power * value / r, power * (power + 1) * value / r**2]
        return np.array(rows[: order + 1])

    @cached_property
    def wall(self) -> tuple[float, float]:
        """Energy at the start and power of the wall; (inf, 0) for a hard one."""
        energy, slope = self.derivatives(np.array([self.start]), 1)[:, 0]
        repels = energy > 0 and slope < 0 and np.isfinite(slope)
        return (float(energy), float(-slope * self.start / energy)) if repels else (inf, 0.0)

    def local(self, r: float, order: int) -> Array:
        """Return energy and derivatives at one separation, up to the fourth.

        Notes
        -----
        Rows are fitted by a polynomial of degree 8 over 5 % to either side.
        """
        if self.exact:
            return self.derivatives(np.array([r]), order)[:, 0]
        half = min(WINDOW * r, r - self.start, self.reach - r)
        x = np.cos(np.pi * (np.arange(81) + 0.5) / 81)
        fit = np.polynomial.Polynomial(
            np.polynomial.chebyshev.cheb2poly(np.polynomial.chebyshev.chebfit(x, self.energy(r + half * x), 8))
        )
        return np.array([fit.deriv(k)(0.0) / half**k if k else fit(0.0) for k in range(order + 1)])

    @cached_property
    def well(self) -> Well | None:
        """The deepest minimum inside the range, None where there is none."""
        from scipy.optimize import brentq

        r = np.geomspace(self.start, min(self.end, self.reach), 4001)
        energy = self.energy(r)
        at = int(np.argmin(energy[1:-1])) + 1
        if not (energy[at] < energy[at - 1] and energy[at] <= energy[at + 1] and energy[at] < 0):
            return None
        low, high = self.force(r[[at - 1, at + 1]])
        bottom = r[at]
        if low > 0 > high:
            bottom = brentq(lambda x: self.force(np.array([x]))[0], r[at - 1], r[at + 1], xtol=1e-13)
        return Well(float(bottom), float(-self.energy(np.array([bottom]))[0]))

    @cached_property
    def collision_diameter(self) -> float | None:
        """The separation at which the energy falls through zero before the well, in ångström."""
        from scipy.optimize import brentq

        stop = self.well.separation if self.well else min(self.end, self.reach)
        energies = self.energy(np.array([self.start, stop]))
        if not (np.isfinite(energies).all() and energies[0] > 0 > energies[1]):
            return None
        return float(brentq(lambda x: self.energy(np.array([x]))[0], self.start, stop, xtol=1e-13))

    @cached_property
    def tail_power(self) -> float:
        """The n with which the energy falls as 1/rⁿ far away; infinite where it ends or falls faster."""
        if not isinf(self.reach):
            return inf
        far = np.array([100 * self.end])
        energy, slope = self.derivatives(far, 1)[:, 0]
        return float(-slope * far[0] / energy) if abs(energy) > 1e-250 else inf

    def without_charges(self, product: float) -> EnergyCurve:
        """Return the curve less the energy product/r of two charges, the product in eV·Å."""

        def derivatives(r: Array, order: int) -> Array:
            coulomb = [product / r, -product / r**2, 2 * product / r**3]
            return self.derivatives(r, order) - np.array(coulomb[: order + 1])

        return EnergyCurve(self.name, derivatives, self.start, self.end, self.reach, exact=False, breaks=self.breaks)

    @cached_property
    def charge_product(self) -> float:
        """What r·U tends to far away in eV·Å; zero unless the curve falls as 1/r."""
        if not abs(self.tail_power - 1) < 0.05:
            return 0.0
        far = 1e4 * self.end
        return float(far * self.derivatives(np.array([far]), 0)[0, 0])

    @cached_property
    def sampled(self) -> EnergyCurve:
        """The same curve through 8000 closely spaced points, for many readings at about 10⁻⁹ of the depth."""
        return _sampled(self)


def from_curve(curve: Curve, name: str, start: float, end: float, reach: float) -> EnergyCurve:
    """Return the energy curve of a formula."""
    edges = tuple(float(edge) for edge in curve.edges() if start < float(edge) < end)

    def derivatives(r: Array, order: int) -> Array:
        with np.errstate(all="ignore"):
            return curve.derivatives(r, order)

    return EnergyCurve(name, derivatives, start, end, reach, exact=True, breaks=edges)


def from_potential(potential: Potential, *, bare: bool = False) -> EnergyCurve:
    """Return the energy curve of an interaction: as the simulation sees it, or as its source states it.

    Without a cutoff it goes on by its formula beyond the grid.
    """
    start, end = float(potential.start), float(potential.end)
    if bare or potential.cutoff is None:
        return from_curve(potential.bare, potential.name, start, end, inf)
    return from_curve(potential.treated, potential.name, start, end, float(potential.cutoff.at))


def from_rows(rows: Rows, units: UnitSystem, rule: str = "") -> EnergyCurve:
    """Return the energy curve that a simulation code reads from rows, up to the last one.

    Parameters
    ----------
    rows : Rows
    units : UnitSystem
        The units of the rows.
    rule : str
        Interpolation rule instead of the one that the rows name.
    """
    read = interpolant(rows, rule)
    length, energy = float(units.length.factor), float(units.energy.factor)

    def derivatives(r: Array, order: int) -> Array:
        x = np.clip(r / length, read.start, read.end)
        result = np.empty((order + 1, r.size))
        result[0] = read.energy(x) * energy
        if order:
            result[1] = read.force(x) * (-energy / length)
        if order > 1:
            low, high = (np.clip(x * (1 + step), read.start, read.end) for step in (-1e-5, 1e-5))
            result[2] = (read.force(low) - read.force(high)) / (high - low) * (energy / length**2)
        return result

    start, end = read.start * length, read.end * length
    return EnergyCurve(rows.name, derivatives, start, end, end, exact=False)


def _sampled(curve: EnergyCurve) -> EnergyCurve:
    from scipy.interpolate import CubicHermiteSpline

    stop = min(curve.reach, 40 * curve.end)
    r = np.geomspace(curve.start, stop, 8001)
    r = np.unique(np.clip(np.concatenate([r, curve.breaks]), curve.start, stop))
    energy, slope = curve.derivatives(r, 1)
    spline = CubicHermiteSpline(r, energy, slope)
    readers = [spline, spline.derivative(), spline.derivative(2)]
    power = curve.tail_power

    def derivatives(x: Array, order: int) -> Array:
        result = np.array([reader(np.minimum(x, stop)) for reader in readers[: order + 1]])
        far = x > stop
        if far.any() and not isinf(power):
            value = energy[-1] * (stop / x[far]) ** power
            result[:, far] = np.array([value, -power * value / x[far], power * (power + 1) * value / x[far] ** 2])[
                : order + 1
            ]
        elif far.any():
            result[:, far] = 0.0
        return result

    return EnergyCurve(curve.name, derivatives, curve.start, curve.end, curve.reach, exact=False, breaks=curve.breaks)
