"""Switched forces: the force is the bare one times the weight, the energy its integral."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from documents import REDUCED_LENNARD_JONES, curve
from mpmath import mp, mpf, quad
from slopewell.formula.balls import ball, series
from slopewell.formula.pairs import Pair
from slopewell.formula.taylor import derivatives
from slopewell.potential import Curve, Cutoff, find_landmarks, treat
from slopewell.potential.cutoff import switch

START, END = Fraction(2), Fraction(5, 2)
FORMULAS = {
    "lennard-jones": REDUCED_LENNARD_JONES,
    "exponential": "1000*exp(-3.1*r) - tang_toennies(6, 2*r)/r^6",
    "branch-inside": "where(r < 2.2, 1/r, 1/r + (r - 2.2)^3)",
    "coulomb": "ke/r",
}


def treated(formula: str, continuity: int) -> tuple[Curve, Curve]:
    bare = curve(formula, Fraction(4, 5), 3, ke=Fraction(14))
    return bare, treat(bare, Cutoff(END, "force-switch", START, continuity), Fraction(3))


@pytest.mark.parametrize("continuity", [1, 2, 3])
@pytest.mark.parametrize("formula", FORMULAS.values(), ids=FORMULAS)
def test_the_force_is_the_bare_force_times_the_weight(formula: str, continuity: int) -> None:
    bare, found = treated(formula, continuity)
    r = np.array([1.0, 1.9, 2.05, 2.19, 2.21, 2.3, 2.45, 2.49])
    weight = np.where(r < 2, 1.0, derivatives(switch(START, END, continuity), r, 0)[0])
    assert found.derivatives(r, 1)[1] == pytest.approx(bare.derivatives(r, 1)[1] * weight, rel=1e-12, abs=1e-13)


def test_the_energy_is_the_integral_of_the_force() -> None:
    # By quadrature of mpmath, with the published weight 1 - 10x^3 + 15x^4 - 6x^5.
    _, found = treated(REDUCED_LENNARD_JONES, 2)

    def force(s: mpf) -> mpf:
        x = 2 * (s - 2)
        return (48 / s**13 - 24 / s**7) * (1 - 10 * x**3 + 15 * x**4 - 6 * x**5)

    with mp.workdps(30):
        for r in ("2.01", "2.2", "2.4", "2.49"):
            expected = quad(force, [mpf(r), mpf("2.5")])
            high, low = float(mpf(r)), float(mpf(r) - mpf(float(mpf(r))))
            energy = found.accurate_derivatives(Pair(np.array([high]), np.array([low])), 0)[0]
            assert float(energy.high[0]) == pytest.approx(float(expected), rel=1e-14)


def test_inside_the_switch_the_curve_is_shifted_by_a_constant() -> None:
    bare, found = treated(REDUCED_LENNARD_JONES, 2)
    r = np.linspace(0.8, 2.0, 20)
    shift = found.derivatives(r, 0)[0] - bare.derivatives(r, 0)[0]
    assert shift == pytest.approx(np.full(20, shift[-1]), abs=1e-12)


@pytest.mark.parametrize("continuity", [1, 2, 3])
def test_energy_and_force_do_not_jump_at_either_end(continuity: int) -> None:
    _, found = treated(REDUCED_LENNARD_JONES, continuity)
    for before, after in zip(found.pieces, found.pieces[1:], strict=False):
        left, right = (series(piece.tree, ball(before.end), 1) for piece in (before, after))
        assert [float((b - a).mid()) for a, b in zip(left, right, strict=True)] == pytest.approx([0, 0], abs=1e-24)


def test_landmarks_are_proved_up_to_the_cutoff() -> None:
    bare, found = treated(REDUCED_LENNARD_JONES, 2)
    one, other = (find_landmarks(c, Fraction(4, 5), Fraction(3)) for c in (bare, found))
    assert other.proved
    assert other.stationary_points == 1
    assert other.equilibrium_separation == pytest.approx(one.equilibrium_separation, rel=1e-12)
    assert other.stiffness == pytest.approx(one.stiffness, rel=1e-12)
