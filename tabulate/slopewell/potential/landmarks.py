"""Landmarks of a curve: where it crosses zero, is deepest, attracts most; each one proved by balls."""

from __future__ import annotations

import itertools
from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from math import pi, sqrt

from flint import arb

from ..formula.balls import Ball, ball, precision, series
from ..formula.branches import Piece
from ..formula.roots import nearest_fraction, remembering, roots
from ..formula.tree import COORDINATE, names
from ..units.constants import BOLTZMANN, EV_PER_DALTON_SPEED, LIGHT_SPEED
from .curve import Curve


@dataclass(frozen=True, slots=True)
class Extremum:
    """A separation at which the slope changes sign."""

    separation: float
    energy: float
    minimum: bool


@dataclass(frozen=True, slots=True)
class Landmarks:
    """Landmarks of a curve on a range, in eV and ångström; None where there is none.

    Attributes
    ----------
    equilibrium_separation : float or None
        The deepest minimum.
    well_depth : float or None
        Minus the energy there, where that is positive.
    stiffness : float or None
        The curvature there.
    zero_crossing : float or None
        Where the energy falls through zero before the well.
    largest_attraction : (float, float) or None
        Separation and (negative) force.
    stationary_points : int
    extrema : tuple of Extremum
    proved : bool
        Whether balls prove that there are no others.
    """

    equilibrium_separation: float | None
    well_depth: float | None
    stiffness: float | None
    zero_crossing: float | None
    largest_attraction: tuple[float, float] | None
    stationary_points: int
    extrema: tuple[Extremum, ...]
    proved: bool


def find_landmarks(curve: Curve, start: Fraction, end: Fraction, cuts: Iterable[Fraction] = ()) -> Landmarks:
    """Find the landmarks of a curve between two separations.

    ``cuts`` are separations at which the search is cut in two; a curve that shares pieces with
    another one is searched faster when it is cut where that one is.
    """
    pieces = [part for piece in curve.within(start, end).pieces for part in _cut(piece, cuts)]
    found = [_on_piece(piece) for piece in pieces if COORDINATE in names(piece.tree)]
    stationary = [point for piece in found for point in piece.stationary]
    kinks = _kinks(curve.within(start, end))
    extrema = sorted((*_extrema(stationary), *kinks), key=lambda extremum: extremum.separation)
    wells = [extremum for extremum in extrema if extremum.minimum]
    deepest = min(wells, key=lambda extremum: extremum.energy, default=None)
    bottom = deepest.separation if deepest else None
    crossings = [crossing for piece in found for crossing in piece.falling_zeros]
    before = [crossing for crossing in crossings if bottom is None or crossing < bottom]
    pulls = [pull for piece in found for pull in piece.pulls if pull[1] < 0]
    return Landmarks(
        equilibrium_separation=bottom,
        well_depth=-deepest.energy if deepest and deepest.energy < 0 else None,
        stiffness=_stiffness(stationary, bottom),
        zero_crossing=before[-1] if before else (crossings[0] if crossings else None),
        largest_attraction=min(pulls, key=lambda pull: pull[1], default=None),
        stationary_points=len(stationary) + len(kinks),
        extrema=tuple(extrema),
        proved=all(piece.proved for piece in found),
    )


@dataclass(frozen=True, slots=True)
class _Found:
    """What one piece holds: stationary points as (r, U, U″), crossings, and places of extreme force."""

    stationary: tuple[tuple[float, float, float], ...]
    falling_zeros: tuple[float, ...]
    pulls: tuple[tuple[float, float], ...]
    proved: bool


def _cut(piece: Piece, cuts: Iterable[Fraction]) -> list[Piece]:
    inside = sorted(cut for cut in cuts if piece.start < cut < piece.end)
    edges = [piece.start, *inside, piece.end]
    parts = [Piece(low, high, piece.tree) for low, high in itertools.pairwise(edges)]
    return [*parts[:-1], Piece(edges[-2], piece.end, piece.tree, piece.closed)]


@lru_cache(maxsize=256)
def _on_piece(piece: Piece) -> _Found:
    enclosures = remembering(piece.tree, 3)
    zeros, stationary, bends = (roots(piece.tree, piece.start, piece.end, k, enclosures) for k in range(3))
    falling = [root for root in zeros.found if series(piece.tree, root, 1)[1] < 0]
    ends = [ball(piece.start), ball(piece.end)]
    return _Found(
        stationary=tuple(_point(piece, root) for root in stationary.found),
        falling_zeros=tuple(float(root.mid()) for root in falling),
        pulls=tuple(_pull(piece, place) for place in [*bends.found, *ends]),
        proved=zeros.proved and stationary.proved and bends.proved,
    )


def _point(piece: Piece, root: Ball) -> tuple[float, float, float]:
    energy, _, half_curvature = series(piece.tree, ball(nearest_fraction(root)), 2)
    return float(root.mid()), float(energy.mid()), 2 * float(half_curvature.mid())


def _pull(piece: Piece, place: Ball) -> tuple[float, float]:
    slope = series(piece.tree, ball(nearest_fraction(place)), 1)[1]
    # A force that can't be told from zero is rounding, no attraction.
    force = -float(slope.mid()) if slope.is_finite() and not slope.contains(0) else 0.0
    return float(place.mid()), force


def _extrema(stationary: list[tuple[float, float, float]]) -> list[Extremum]:
    return [Extremum(r, energy, curvature > 0) for r, energy, curvature in stationary if curvature]


def _kinks(curve: Curve) -> list[Extremum]:
    """Return the ends of pieces across which the slope changes sign without being zero."""
    kinks = []
    for before, after in zip(curve.pieces, curve.pieces[1:], strict=False):
        edge = ball(before.end)
        left, right = (series(piece.tree, edge, 1) for piece in (before, after))
        with precision():
            same = abs(left[0] - right[0]) <= (abs(left[0]) + abs(right[0])) * arb(2) ** -80
        turns = left[1] * right[1] < 0 and same
        if turns:
            kinks.append(Extremum(float(before.end), float(left[0].mid()), bool(left[1] < 0)))
    return kinks


def _stiffness(stationary: list[tuple[float, float, float]], bottom: float | None) -> float | None:
    return next((curvature for r, _, curvature in stationary if r == bottom), None)


def harmonic_wavenumber(stiffness: float, reduced_mass: float) -> float:
    """Return the wavenumber in cm⁻¹ of a harmonic spring.

    Parameters
    ----------
    stiffness : float
        In eV/Å².
    reduced_mass : float
        In dalton.
    """
    angular = sqrt(stiffness / (reduced_mass * float(EV_PER_DALTON_SPEED)))
    return angular / (2 * pi * float(LIGHT_SPEED) * 100)


def classical_amplitude(stiffness: float, temperature: float) -> float:
    """Return the root mean square displacement in ångström of a classical spring, √(k_B·T/k)."""
    return sqrt(float(BOLTZMANN) * temperature / stiffness)
