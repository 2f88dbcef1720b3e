"""Dimensions: what fits passes, what doesn't is marked at its operator."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula import FormulaError, parse
from slopewell.formula.dimensions import describe, dimension
from slopewell.units import dimension as named

KNOWN = {
    "r": named("length"),
    "sigma": named("length"),
    "epsilon": named("energy"),
    "C": named("energy length^6"),
    "T": named("temperature"),
    "kB": named("energy temperature^-1"),
    "n": named("1"),
    "half": named("1"),
    "x": named("1"),
}
VALUES = {"n": Fraction(6), "half": Fraction(1, 2)}


def read(text: str) -> object:
    return dimension(parse(text), text, KNOWN, VALUES)


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("4*epsilon*((sigma/r)^12 - (sigma/r)^6)", "energy"),
        ("epsilon*exp(-r/sigma) - C/r^6", "energy"),
        ("C/r^n", "energy"),
        ("C/r^(n/2 + 3)", "energy"),
        ("C*r^-(2*3)", "energy"),
        ("kB*T*log(r/sigma)", "energy"),
        ("epsilon^2/sqrt(epsilon^2)", "energy"),
        ("(epsilon^(1/7))^7", "energy"),
        ("epsilon^half*epsilon^0.5", "energy"),
        ("epsilon + 0", "energy"),
        ("0 + epsilon - 0*r", "energy"),
        ("where(r < sigma, epsilon, 0)", "energy"),
        ("max(epsilon, 0)*x^x", "energy"),
        ("-abs(r)", "length"),
        ("min(r, sigma)^2", "length^2"),
        ("epsilon/r", "energy length^-1"),
        ("tang_toennies(6, r/sigma)", "1"),
        ("2", "1"),
        ("1/r", "length^-1"),
    ],
)
def test_a_consistent_formula_has_its_dimension(text: str, words: str) -> None:
    assert read(text) == named(words)


@pytest.mark.parametrize("text", ["0", "sqrt(0)", "0*epsilon"])
def test_a_formula_that_is_zero_has_every_dimension(text: str) -> None:
    assert read(text) is None


@pytest.mark.parametrize(
    ("text", "carets", "says"),
    [
        ("epsilon + r", "        ^", "joins energy and length"),
        ("epsilon - -r", "        ^", "joins energy and length"),
        ("epsilon*(1 + r)", "           ^", "joins a pure number and length"),
        ("(epsilon + epsilon)*r - epsilon", "                      ^", "joins energy length and energy"),
        ("epsilon - C/r^5 + epsilon", "        ^", "joins energy and energy length"),
        ("epsilon + C/r^6 + r", "                ^", "joins energy and length"),
        ("1/r^2 + 1/r", "      ^", "joins 1/length^2 and 1/length"),
        ("exp(-r)", "^^^^^^^", "argument of exp must be a pure number, but -r is length"),
        ("epsilon*erfc(r)", "        ^^^^^^^", "argument of erfc"),
        ("tang_toennies(6, r)", "^^^^^^^^^^^^^^^^^^^", "argument of tang_toennies"),
        ("r^x", " ^", "needs a fixed number as its exponent"),
        ("r^(x + 1)", " ^", "needs a fixed number as its exponent"),
        ("2^r", " ^", "exponent must be a pure number, but r is length"),
        ("r**epsilon", " ^^", "exponent must be a pure number"),
        ("1 + min(epsilon, r)", "    ^^^^^^^^^^^^^^^", "compares energy and length"),
        ("where(r < epsilon, 1, 2)", "^^^^^^^^^^^^^^^^^^^^^^^^", "compares length and energy"),
        ("where(r < sigma, epsilon, r)", "^^^^^^^^^^^^^^^^^^^^^^^^^^^^", "chooses between energy and length"),
    ],
)
def test_an_inconsistent_formula_is_marked_at_its_operator(text: str, carets: str, says: str) -> None:
    with pytest.raises(FormulaError) as caught:
        read(text)
    (problem,) = caught.value.problems
    assert problem.excerpt == f"{text}\n{carets}"
    assert says in problem.says


@given(st.fractions(-8, 8, max_denominator=12).filter(bool))
def test_a_power_and_its_inverse_cancel(power: Fraction) -> None:
    assert read(f"(epsilon^({power}))^(1/({power}))") == named("energy")


@pytest.mark.parametrize(
    ("words", "said"),
    [
        ("1", "a pure number"),
        ("energy", "energy"),
        ("energy length^-1", "energy/length"),
        ("energy length^6", "energy length^6"),
        ("length^-2", "1/length^2"),
        ("energy length^-1 temperature^-1", "energy/length/temperature"),
        ("mass", "mass"),
    ],
)
def test_a_dimension_is_said_in_words(words: str, said: str) -> None:
    assert describe(named(words)) == said
