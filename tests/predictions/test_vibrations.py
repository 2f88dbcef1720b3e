"""Bound pairs against Morse's exact levels and handbook constants of diatomic molecules."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from typing import Any

import numpy as np
import pytest
from slopewell.potential.landmarks import harmonic_wavenumber
from slopewell.predictions.curve import EnergyCurve
from slopewell.predictions.figures import Setting, System
from slopewell.predictions.vibrations import (
    WAVENUMBER,
    anharmonic_wavenumber,
    bound_levels,
    harmonic_range,
    look,
)
from slopewell.units.constants import EV_PER_WAVENUMBER

from .conftest import MORSE, CurveOf

HYDROGEN_CHLORIDE = 0.9795925391
"""Reduced mass in dalton."""


@pytest.fixture(scope="module")
def hydrogen_chloride(curve_of: CurveOf) -> EnergyCurve:
    return curve_of(MORSE, "0.5", "8", D=Fraction(37242) * EV_PER_WAVENUMBER, a="1.8677", re="1.2746")


def test_levels_of_morse(published: Callable[[str], Any], hydrogen_chloride: EnergyCurve) -> None:
    # P. M. Morse, Phys. Rev. 34, 57 (1929): exact.
    levels = bound_levels(hydrogen_chloride, HYDROGEN_CHLORIDE)
    assert levels is not None
    assert levels.energy[1] / WAVENUMBER == pytest.approx(published("T04-015").number, abs=1e-6)
    assert levels.energy[5] / WAVENUMBER == pytest.approx(published("T04-016").number, abs=1e-6)
    assert levels.energy.size >= 23


def test_every_level_of_morse_follows_from_its_two_constants(hydrogen_chloride: EnergyCurve) -> None:
    assert hydrogen_chloride.well is not None
    local = hydrogen_chloride.local(hydrogen_chloride.well.separation, 4)
    harmonic = harmonic_wavenumber(float(local[2]), HYDROGEN_CHLORIDE)
    anharmonic = anharmonic_wavenumber(local, HYDROGEN_CHLORIDE)
    levels = bound_levels(hydrogen_chloride, HYDROGEN_CHLORIDE)
    assert levels is not None
    half = np.arange(levels.energy.size) + 0.5
    assert levels.energy / WAVENUMBER == pytest.approx(harmonic * half - anharmonic * half**2, abs=1e-4)


# Huber and Herzberg, Constants of Diatomic Molecules (1979): ω_e, ω_e·x_e, from memory; Morse parameters
# D_e and a follow from them and D_0 as the entries say.
DIATOMICS = [
    ("T04-010", 0.50391251595, 4401.213, "0.74144", 4.47813, "0.2"),
    ("T04-012", 7.0015370021, 2358.57, "1.097685", 9.759, "0.5"),
    ("T04-013", 6.856208638, 2169.81358, "1.128323", 11.09, "0.5"),
]


@pytest.mark.parametrize(("entry", "mass", "harmonic", "bond", "dissociation", "start"), DIATOMICS)
def test_constants_of_diatomics(
    published: Callable[[str], Any],
    curve_of: CurveOf,
    entry: str,
    mass: float,
    harmonic: float,
    bond: str,
    dissociation: float,
    start: str,
) -> None:
    stated = published(entry)
    depth, steepness = (float(stated.value.split(f"{name}=")[1].split()[0]) for name in ("D_e", "a"))
    curve = curve_of(MORSE, start, "8", D=str(depth), a=str(steepness), re=bond)
    system = System(("A", "B"), {("A", "B"): curve}, {"A": 2 * mass, "B": 2 * mass})
    found = {figure.quantity: figure.value for figure in look(system, Setting())}
    assert found["harmonic-wavenumber"] == pytest.approx(harmonic, rel=2e-6)
    # The Morse zero point has ω_e/4 of its own anharmonicity, not the handbook's: 0.1 % of D_0.
    assert found["dissociation-energy"] == pytest.approx(dissociation, rel=1e-3)
    assert found["mean-bond-length"] > float(bond)
    assert found["bond-expansion"] > 0


def test_harmonic_range_of_morse(curve_of: CurveOf) -> None:
    # The Morse force is a spring's times 1 − 3x/2 + 7x²/6 − …, x = a·(r − r_e): 5 % at x = 0.0342, −0.0325.
    spring = harmonic_range(curve_of(MORSE, "0.5", "8", D="1", a="1", re="2"))
    assert spring is not None
    assert spring == pytest.approx((0.0325, 0.0342), abs=2e-4)


def test_repulsion_binds_nothing(curve_of: CurveOf) -> None:
    repulsion = curve_of("1/r^12", "0.5", "8")
    assert bound_levels(repulsion, 1.0) is None
    assert list(look(System(("X",), {("X", "X"): repulsion}, {"X": 1.0}), Setting())) == []
