"""Landmarks against closed forms and published vibrations."""

from __future__ import annotations

import re
from collections.abc import Callable
from fractions import Fraction
from math import log, sqrt
from typing import Any

import numpy as np
import pytest
from documents import REDUCED_LENNARD_JONES, curve
from hypothesis import given
from hypothesis import strategies as st
from slopewell.potential import find_landmarks
from slopewell.potential.landmarks import Landmarks, classical_amplitude, harmonic_wavenumber
from slopewell.units import unit

Entries = Callable[[str], Any]
MORSE = "D*(exp(-2*a*(r - r0)) - 2*exp(-a*(r - r0)))"


def landmarks(formula: str, start: float, end: float, **values: float) -> Landmarks:
    return find_landmarks(curve(formula, start, end, **values), Fraction(start), Fraction(end))


def test_lennard_jones_landmarks_are_the_published_ones(published: Entries) -> None:
    found = landmarks(REDUCED_LENNARD_JONES, 0.8, 5)
    pull = found.largest_attraction
    assert found.equilibrium_separation == pytest.approx(published("T02-001").number, rel=1e-15)
    assert found.well_depth == pytest.approx(1.0, rel=1e-15)
    # U''' = -21 U''/r_min at the minimum.
    third = -21 * found.stiffness / found.equilibrium_separation
    assert third == pytest.approx(published("T02-003").number, rel=1e-13)
    assert found.zero_crossing == pytest.approx(1.0, rel=1e-15)
    assert pull[0] == pytest.approx(published("T02-004").number, rel=1e-15)
    assert found.stationary_points == 1
    assert found.proved


@given(st.floats(0.1, 5), st.floats(0.7, 3), st.floats(1.5, 4))
def test_morse_landmarks_are_the_closed_forms(depth: float, a: float, r0: float) -> None:
    # T04-018 and T04-019: r_e + ln 2/a, -a D/2 and 2 D a^2 (P. M. Morse, Phys. Rev. 34, 57 (1929)).
    found = landmarks(MORSE, r0 - 0.9, r0 + 5, D=depth, a=a, r0=r0)
    assert found.equilibrium_separation == pytest.approx(r0, rel=1e-14)
    assert found.well_depth == pytest.approx(depth, rel=1e-14)
    assert found.stiffness == pytest.approx(2 * depth * a * a, rel=1e-13)
    assert found.largest_attraction == pytest.approx((r0 + log(2) / a, -a * depth / 2), rel=1e-13)
    assert found.zero_crossing is None or found.zero_crossing == pytest.approx(r0 - log(2) / a, rel=1e-13)
    assert found.proved


@pytest.mark.parametrize("entry", ["T04-010", "T04-012", "T04-013"])
def test_a_diatomic_morse_curve_vibrates_at_the_handbook_wavenumber(entry: str, published: Entries) -> None:
    stated = published(entry)
    depth, a = stated.part("D_e"), stated.part("a")
    wavenumber = float(re.search(r"omega_e=([\d.]+)", stated.conditions)[1])
    r0 = float(re.search(r"r_e=([\d.]+)", stated.conditions)[1])
    # Reduced masses of the references (T04-001, T04-003, T04-004), from a table of isotopes.
    mass = {"T04-010": 0.50391251595, "T04-012": 7.0015370021, "T04-013": 6.856208638}[entry]
    found = landmarks(MORSE, r0 / 2, 3 * r0, D=depth, a=a, r0=r0)
    # The references give D_e and a with 7 digits.
    assert harmonic_wavenumber(found.stiffness, mass) == pytest.approx(wavenumber, rel=1e-6)


@pytest.mark.parametrize(
    ("entry", "mass", "wavenumber"),
    [
        ("T04-001", 0.50391251595, 4401.213),
        ("T04-003", 7.0015370021, 2358.57),
        ("T04-004", 6.856208638, 2169.81358),
        ("T04-006", 7.9974573096, 1580.193),
        ("T04-007", 7.4664330304, 1904.204),
        ("T04-009", 9.499201581, 916.64),
    ],
)
def test_published_force_constants_give_the_handbook_wavenumber(
    entry: str, mass: float, wavenumber: float, published: Entries
) -> None:
    # Wavenumbers from memory: K. P. Huber and G. Herzberg, Constants of Diatomic Molecules (1979).
    stiffness = published(entry).number * float(unit("J/m^2").factor) * 100
    rounding = 0.005 / published(entry).number
    assert harmonic_wavenumber(stiffness, mass) == pytest.approx(wavenumber, rel=rounding)


def test_a_stiffer_well_vibrates_faster_and_less_far() -> None:
    # Common practice, no source.
    assert harmonic_wavenumber(4.0, 10.0) == pytest.approx(2 * harmonic_wavenumber(1.0, 10.0))
    assert classical_amplitude(4.0, 300.0) == pytest.approx(classical_amplitude(1.0, 300.0) / 2)


def test_the_classical_amplitude_is_that_of_equipartition() -> None:
    # k <x²>/2 = k_B T/2, common practice, no source; k_B from CODATA 2022 (T01-015).
    assert classical_amplitude(2.0, 300.0) == pytest.approx(sqrt(8.617333262145e-5 * 300 / 2), rel=1e-12)


def test_at_equilibrium_the_force_vanishes_and_the_energy_is_lowest() -> None:
    # Common practice, no source.
    formula, values = "A*exp(-r/rho) - C/r^6", {"A": 9576.0, "rho": 0.27614, "C": 62.03}
    found = landmarks(formula, 2.5, 12, **values)
    r = np.linspace(2.5, 12, 4001)
    energy = curve(formula, 2.5, 12, **values).derivatives(r, 0)[0]
    slope = curve(formula, 2.5, 12, **values).derivatives(np.array([found.equilibrium_separation]), 1)[1, 0]
    assert -found.well_depth <= energy.min()
    assert abs(slope) < 1e-14


def test_a_curve_without_a_well_has_none() -> None:
    found = landmarks("1/r", 1, 9)
    assert (found.equilibrium_separation, found.well_depth, found.stiffness) == (None, None, None)
    assert (found.zero_crossing, found.largest_attraction) == (None, None)
    assert (found.stationary_points, found.proved) == (0, True)


def test_a_pure_attraction_pulls_most_at_its_start() -> None:
    found = landmarks("-1/r^2", 1, 9)
    assert found.equilibrium_separation is None
    assert found.largest_attraction == pytest.approx((1.0, -2.0))


def test_a_minimum_above_zero_has_no_depth() -> None:
    found = landmarks("1 + (r - 2)^2", 1, 3)
    assert found.equilibrium_separation == pytest.approx(2.0)
    assert found.well_depth is None
    assert found.stiffness == pytest.approx(2.0)


def test_of_several_minima_the_deepest_counts() -> None:
    found = landmarks("-exp(-(r - 2)^2*10) - 2*exp(-(r - 4)^2*10)", 1, 6)
    assert found.equilibrium_separation == pytest.approx(4.0)
    assert [extremum.minimum for extremum in found.extrema] == [True, False, True]
    assert found.stationary_points == 3


def test_a_kink_that_turns_the_slope_is_a_minimum() -> None:
    found = landmarks("abs(r - 2) - 1", 1, 4)
    assert found.equilibrium_separation == 2.0
    assert found.well_depth == pytest.approx(1.0)
    assert found.stiffness is None


def test_a_jump_is_no_minimum() -> None:
    assert landmarks("where(r < 2, -r, r)", 1, 4).equilibrium_separation is None


def test_a_constant_stretch_holds_no_stationary_point() -> None:
    assert landmarks("where(r < 2, (2 - r)^3, 0)", 1, 4).stationary_points == 0


def test_a_flat_point_is_not_taken_for_a_minimum() -> None:
    found = landmarks("(r - 2)^3", 1, 3)
    assert found.equilibrium_separation is None
    assert not found.proved
