"""Values put in the place of names, and the folding of what does not depend on the separation."""

from __future__ import annotations

from fractions import Fraction

import mpmath
import pytest
from flint import arb
from hypothesis import given
from hypothesis import strategies as st
from slopewell.formula import bind, names, parse
from slopewell.formula.bind import as_ball
from slopewell.formula.tree import Apply, Constant, Number, Tree

FRACTIONS = st.fractions(-50, 50, max_denominator=50)


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("a + b - 1", Fraction(-7, 2)),
        ("a*b", Fraction(-3, 2)),
        ("a/b", Fraction(-1, 6)),
        ("-a^3", Fraction(-1, 8)),
        ("b^-2", Fraction(1, 9)),
        ("abs(b)", Fraction(3)),
        ("min(a, b)", Fraction(-3)),
        ("max(a, b)", Fraction(1, 2)),
    ],
)
def test_rational_parts_fold_exactly(text: str, value: Fraction) -> None:
    assert bind(parse(text), {"a": Fraction(1, 2), "b": Fraction(-3)}) == Number(value)


@given(FRACTIONS, FRACTIONS, FRACTIONS)
def test_folding_is_exact_arithmetic(a: Fraction, b: Fraction, c: Fraction) -> None:
    folded = bind(parse("(a - b)*c + a^2*b - c/7"), {"a": a, "b": b, "c": c})
    assert folded == Number((a - b) * c + a**2 * b - c / 7)


@pytest.mark.parametrize(
    ("text", "exact"),
    [
        ("2^(1/6)", lambda: mpmath.mpf(2) ** (mpmath.mpf(1) / 6)),
        ("exp(-1/3)", lambda: mpmath.exp(-mpmath.mpf(1) / 3)),
        ("sqrt(pi)", lambda: mpmath.sqrt(mpmath.pi)),
        ("erfc(2)", lambda: mpmath.erfc(2)),
        ("tang_toennies(6, 0.01)", lambda: mpmath.gammainc(7, 0, mpmath.mpf("0.01"), regularized=True)),
    ],
)
def test_irrational_parts_fold_to_30_digits(text: str, exact: object) -> None:
    folded = as_ball(bind(parse(text), {"pi": arb.pi()}))
    with mpmath.workdps(50):
        wanted = exact()  # type: ignore[operator]
        assert abs(mpmath.mpf(folded.mid().str(45, radius=False)) / wanted - 1) < mpmath.mpf(10) ** -14
    assert folded.rad() < abs(folded.mid()) * 1e-14


@pytest.mark.parametrize(
    ("text", "bound"),
    [
        ("r/4", "0.25*r"),
        ("2*r*3", "6*r"),
        ("1 + r + 2", "3 + r"),
        ("r^1", "r"),
        ("r^0 + r", "1 + r"),
        ("0*r", "0"),
        ("0 + r", "r"),
        ("a*r^a", "2*r^2"),
    ],
)
def test_numbers_are_gathered(text: str, bound: str) -> None:
    assert bind(parse(text), {"a": Fraction(2)}) == bind(parse(bound), {})


def test_equal_parts_become_one_node() -> None:
    tree = bind(parse("(a/r)^12 - (a/r)^6"), {"a": Fraction(3)})
    assert isinstance(tree, Apply)
    first, second = (_base(term) for term in tree.arguments)
    assert first is second


def _base(tree: Tree) -> Tree:
    while isinstance(tree, Apply) and tree.function in ("^", "negate"):
        tree = tree.arguments[0]
    return tree


def test_a_bound_tree_depends_on_the_separation_alone() -> None:
    tree = bind(parse("a*exp(-r/b)"), {"a": Fraction(2), "b": Fraction(1, 3)})
    assert names(tree) == {"r"}


def test_a_name_without_a_value_is_an_error() -> None:
    with pytest.raises(KeyError, match="sigma"):
        bind(parse("sigma*r"), {})


def test_a_huge_number_folds_to_a_ball() -> None:
    folded = bind(parse("(1e300)^60"), {})
    assert isinstance(folded, Constant)
    assert folded.ball.overlaps(arb(10) ** 18_000)


def test_division_by_zero_folds_to_what_is_not_finite() -> None:
    folded = bind(parse("1/(a - a)"), {"a": Fraction(2)})
    assert isinstance(folded, Constant)
    assert not folded.ball.is_finite()
