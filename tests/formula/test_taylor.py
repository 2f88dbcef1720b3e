"""Taylor series over arrays and over pairs."""

from __future__ import annotations

from fractions import Fraction

import mpmath
import numpy as np
import pytest
from flint import arb
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula import Tree, bind, parse
from slopewell.formula.balls import fraction, series
from slopewell.formula.pairs import Pair
from slopewell.formula.taylor import BLOCK, accurate_derivatives, derivatives
from slopewell.formula.tree import Apply, Choice, Constant, Number

EPSILON = np.finfo(float).eps

WITH_MPMATH = {
    "exp(-1.5*r)": lambda r: mpmath.exp(-1.5 * r),
    "log(r)": mpmath.log,
    "sqrt(r)": mpmath.sqrt,
    "erf(r/2)": lambda r: mpmath.erf(r / 2),
    "erfc(r/2)": lambda r: mpmath.erfc(r / 2),
    "sin(2*r)": lambda r: mpmath.sin(2 * r),
    "cos(2*r)": lambda r: mpmath.cos(2 * r),
    "tan(r/4)": lambda r: mpmath.tan(r / 4),
    "sinh(r)": mpmath.sinh,
    "cosh(r)": mpmath.cosh,
    "tanh(r)": mpmath.tanh,
    "abs(1 - r)": lambda r: abs(1 - r),
    "min(r, r^2)": lambda r: min(r, r**2),
    "max(r, r^2)": lambda r: max(r, r**2),
    "where(r < 1, r^2, r^3)": lambda r: r**2 if r < 1 else r**3,
    "tang_toennies(6, 3*r)": lambda r: mpmath.gammainc(7, 0, 3 * r, regularized=True),
    "r^-7": lambda r: r**-7,
    "r^2.5": lambda r: r ** mpmath.mpf("2.5"),
    "r^-0.3": lambda r: r ** (mpmath.mpf(-3) / 10),
    "r^(2*sqrt(2))": lambda r: r ** (2 * mpmath.sqrt(2)),
    "r^r": lambda r: r**r,
    "2^r": lambda r: mpmath.mpf(2) ** r,
    "1/(r + 2)": lambda r: 1 / (r + 2),
    "(r - 4)^3": lambda r: (r - 4) ** 3,
}


@pytest.mark.parametrize("text", WITH_MPMATH)
def test_every_function_and_its_derivatives_agree_with_mpmath(text: str) -> None:
    points, order = np.array([0.3, 0.9, 1.25, 2.0, 3.5]), 6
    tree = bind(parse(text), {})
    fast = derivatives(tree, points, order)
    accurate = accurate_derivatives(tree, Pair(points, np.zeros_like(points)), order)
    with mpmath.workdps(60):
        for i, point in enumerate(points):
            wanted = mpmath.taylor(WITH_MPMATH[text], mpmath.mpf(float(point)), order)
            scale = max(abs(float(c)) * float(point) ** k for k, c in enumerate(wanted))
            for k, coefficient in enumerate(wanted):
                unit = EPSILON * scale * float(mpmath.factorial(k)) / float(point) ** k
                right = coefficient * mpmath.factorial(k)
                assert abs(float(accurate[k].rounded()[i] - right)) < 4 * unit
                assert abs(float(fast[k, i] - right)) < 60 * unit


def blurred(tree: Tree) -> Tree:
    """The tree with one unit in the last place of doubt in every number but exponents."""
    match tree:
        case Number() | Constant():
            middle = tree.ball if isinstance(tree, Constant) else arb(float(tree.value))
            return Constant(middle + arb(0, EPSILON) * middle, id(tree))
        case Apply(function="^" | "tang_toennies"):
            first, second = tree.arguments
            sharp = isinstance(second, Number) and tree.function == "^"
            return Apply(tree.function, (blurred(first), second) if sharp else (first, blurred(second)))
        case Apply():
            return Apply(tree.function, tuple(map(blurred, tree.arguments)))
        case _:
            return tree


@given(st.data(), st.floats(0.5, 3.0))
def test_the_two_numerical_readings_agree(
    smooth_formulas: st.SearchStrategy[str], data: st.DataObject, r: float
) -> None:
    tree, order = bind(parse(data.draw(smooth_formulas)), {}), 6
    right = series(tree, arb(r), order)
    # What a unit in the last place of every number can do is the scale that rounding is measured on.
    doubt = series(blurred(tree), arb(r, r * EPSILON), order)
    fast = derivatives(tree, np.array([r]), order)[:, 0]
    pairs = accurate_derivatives(tree, Pair(np.array([r]), np.zeros(1)), order)
    largest = max(abs(float(c.mid())) for c in right)
    for k in range(order + 1):
        coefficient, factorial = float(right[k].mid()), float(mpmath.factorial(k))
        unit = float(doubt[k].rad()) + EPSILON * largest + np.finfo(float).tiny
        assert abs(fast[k] / factorial - coefficient) <= 20 * unit
        assert abs(float(pairs[k].rounded()[0]) / factorial - coefficient) <= 4 * unit


def test_what_overflows_or_has_no_value_is_not_finite() -> None:
    for text in ("1e400*r", "10^400*r", "1/(r - 1)", "log(-r)", "sqrt(r - 2)", "exp(1e3*r)", "r/(1 - 1)"):
        tree = bind(parse(text), {})
        assert not np.isfinite(derivatives(tree, np.array([1.0]), 1)[0, 0]), text
        assert not np.isfinite(accurate_derivatives(tree, Pair(np.array([1.0]), np.zeros(1)), 1)[0].rounded()[0])


def test_a_huge_power_is_a_power_still() -> None:
    tree = bind(parse("r^(1e3*1e300)"), {})
    assert derivatives(tree, np.array([0.5, 1.0, 2.0]), 0).tolist() == [[0.0, 1.0, np.inf]]


def test_a_constant_has_no_slope() -> None:
    tree = bind(parse("2^0.5"), {})
    assert derivatives(tree, np.array([1.0, 2.0]), 2).tolist() == [[2**0.5] * 2, [0.0] * 2, [0.0] * 2]


def test_blocks_do_not_show() -> None:
    r = np.linspace(0.8, 3.0, 2 * BLOCK + 3)
    tree = bind(parse("4*(r^-12 - r^-6)*exp(-r)"), {})
    whole = derivatives(tree, r, 2)
    assert whole.shape == (3, r.size)
    assert whole[:, BLOCK - 1 : BLOCK + 1].tolist() == derivatives(tree, r[BLOCK - 1 : BLOCK + 1], 2).tolist()
    assert whole[:, -1].tolist() == derivatives(tree, r[-1:], 2)[:, 0].tolist()


def test_no_separations_give_no_values() -> None:
    assert derivatives(bind(parse("erfc(r) + tang_toennies(6, r)"), {}), np.zeros(0), 3).shape == (4, 0)


@given(st.floats(0.8, 3.0))
def test_the_terms_of_lennard_jones_are_right_to_half_a_unit(r: float) -> None:
    tree = bind(parse("(sigma/r)^12"), {"sigma": Fraction(3405, 1000)})
    energy, slope = accurate_derivatives(tree, Pair(np.array([r]), np.zeros(1)), 1)
    exact = (Fraction(3405, 1000) / Fraction(r)) ** 12
    for found, right in ((energy, exact), (slope, -12 * exact / Fraction(r))):
        rounded = float(found.rounded()[0])
        assert abs(Fraction(rounded) - right) <= Fraction(np.spacing(abs(rounded))) * Fraction(501, 1000)


def test_the_low_part_of_a_separation_counts() -> None:
    tree = bind(parse("r^-12"), {})
    r = Fraction(1, 3)
    high = float(r)
    given_ = Pair(np.array([high]), np.array([float(r - Fraction(high))]))
    (energy,) = accurate_derivatives(tree, given_, 0)
    assert energy.rounded()[0] == 3.0**12


def test_a_choice_is_made_point_by_point() -> None:
    tree = bind(parse("where(r <= 2, r^2, 8 - r)"), {})
    assert isinstance(tree, Choice)
    assert derivatives(tree, np.array([1.0, 2.0, 3.0]), 1).tolist() == [[1.0, 4.0, 5.0], [2.0, 4.0, -1.0]]


def test_the_fraction_of_a_ball_is_its_middle() -> None:
    assert fraction(arb(0.75, 0.01)) == Fraction(3, 4)
