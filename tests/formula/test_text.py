"""A tree written as text."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula import bind, parse, write
from slopewell.formula.tree import Apply, Constant, Name


@given(st.data())
def test_what_is_written_parses_back_equal(any_formulas: st.SearchStrategy[str], data: st.DataObject) -> None:
    tree = parse(data.draw(any_formulas))
    assert parse(write(tree)) == tree


@pytest.mark.parametrize(
    "text",
    [
        "4*epsilon*((sigma/r)^12 - (sigma/r)^6)",
        "a - (b + c) - (-d)",
        "(-2)^(r^(-1))",
        "-(a + b)*c/(d*e)",
        "where(r <= a, exp(-r), 0.05)",
        "1e400*r + 2.5e-7",
        "3.14159265358979323846264338327950288*r",
    ],
)
def test_a_plain_formula_is_written_as_it_was(text: str) -> None:
    assert write(parse(text)) == text


def test_a_folded_fraction_is_written_as_a_quotient() -> None:
    assert write(bind(parse("r*(a/3)"), {"a": Fraction(2)})) == "(2/3)*r"


def test_a_negative_constant_keeps_its_brackets() -> None:
    assert write(Apply("^", (Constant(arb(-0.5), 1), Name("r")))) == "(-0.5)^r"
