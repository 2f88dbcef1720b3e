"""The grammar of formulas, and what is refused with its place."""

from __future__ import annotations

import builtins
from fractions import Fraction

import pytest
from hypothesis import example, given
from hypothesis import strategies as st
from slopewell.formula import FormulaError, parse
from slopewell.formula.parse import DEEPEST, LONGEST
from slopewell.formula.tree import Apply, Choice, Name, Number

a, b, r = Name("a"), Name("b"), Name("r")


def test_a_formula_becomes_a_tree_of_exact_numbers() -> None:
    assert parse("0.1*(a/r)^12 - 1.5e-3") == Apply(
        "+",
        (
            Apply("*", (Number(Fraction(1, 10)), Apply("^", (Apply("/", (a, r)), Number(Fraction(12)))))),
            Number(Fraction(-15, 10_000)),
        ),
    )


@pytest.mark.parametrize("comparison", ["<", "<=", ">", ">="])
def test_where_becomes_a_choice(comparison: str) -> None:
    assert parse(f"where(r {comparison} a, b, r)") == Choice(comparison, r, a, b, r)


@pytest.mark.parametrize(
    ("text", "meant"),
    [
        ("a + b*r", "a + (b*r)"),
        ("a*b + r", "(a*b) + r"),
        ("a - b - r", "(a - b) - r"),
        ("a/b/r", "(a/b)/r"),
        ("a/b*r", "(a/b)*r"),
        ("a*b/r", "(a*b)/r"),
        ("a*b^r", "a*(b^r)"),
        ("a^b^r", "a^(b^r)"),
        ("-a^b", "-(a^b)"),
        ("-a*b", "(-a)*b"),
        ("-a + b", "(-a) + b"),
        ("a^-b^r", "a^(-(b^r))"),
        ("a - -b", "a - (-b)"),
        ("+a", "a"),
        ("a**b", "a^b"),
        ("\ta +\n  b ", "a+b"),
        (".5*r", "0.5*r"),
        ("2.*r", "2*r"),
        ("1E+2", "100"),
    ],
)
def test_operators_bind_as_on_paper(text: str, meant: str) -> None:
    assert parse(text) == parse(meant)


@pytest.mark.parametrize(
    ("text", "other"),
    [("a^b^r", "(a^b)^r"), ("-a^b", "(-a)^b"), ("a/b*r", "a/(b*r)"), ("a - b - r", "a - (b - r)")],
)
def test_brackets_change_the_meaning(text: str, other: str) -> None:
    assert parse(text) != parse(other)


@pytest.mark.parametrize(
    ("text", "carets", "says"),
    [
        ("r $ 2", "  ^", "no meaning"),
        ("r_é", "  ^", "no meaning"),
        ("r[0]", " ^", "no meaning"),
        ("'r'", "^", "no meaning"),
        ("(r + 1", "^", "never closed"),
        ("2*((r + 1)", "  ^", "never closed"),
        ("r + 1)", "     ^", "closes nothing"),
        ("2r", " ^", "operator is missing"),
        ("4*a (b) 2", "        ^", "operator is missing"),
        ("(r)(a)", "   ^", "operator is missing"),
        ("2 (r)", "  ^", "operator is missing"),
        ("1.5.2*r", "   ^^", "operator is missing"),
        ("0x10", " ^^^", "operator is missing"),
        ("2*lambda*r", "  ^^^^^^", "reserved word"),
        ("r if a else b", "  ^^", "reserved word"),
        ("None", "^^^^", "reserved word"),
        ("r +", "   ^", "can't be read"),
        ("r + * 2", "    ^", "can't be read"),
        ("r^^2", "  ^", "can't be read"),
        ("exp + r", "^^^", "needs its arguments"),
        ("2*sigm(r)", "  ^^^^", 'no function "sigm"'),
        ("r*__import__(r)", "  ^^^^^^^^^^", "no function"),
        ("2*exp(r, 2)", "  ^^^^^^^^^", "takes 1 argument, not 2"),
        ("min(r)", "^^^^^^", "takes 2 arguments, not 1"),
        ("exp(x=r)", "    ^^^", "has no name"),
        ("exp(*r)", "    ^^", "no part of the formula language"),
        ("1 + r.real", "    ^^^^^^", "no part of the formula language"),
        ("r // 2", "^^^^^^", "no part of the formula language"),
        ("(r, 2)", "^^^^^^", "no part of the formula language"),
        ("2*...", "  ^^^", "not a number"),
        ("1e1000*r", "^^^^^^", "not a number"),
        ("1 + (r > 2)", "     ^^^^^", "only inside where"),
        ("where(r, 1, 2)", "      ^", "needs one comparison"),
        ("where(1 < r < 2, 1, 2)", "      ^^^^^^^^^", "needs one comparison"),
        ("where(r == 2, 1, 0)", "      ^^^^^^", "Only < <= > >="),
        ("r^1001", "  ^^^^", "exponent is larger"),
        ("r^-1000.5", "  ^^^^^^^", "exponent is larger"),
        ("tang_toennies(6.5, r)", "              ^^^", "whole number from 0 to 60"),
        ("tang_toennies(61, r)", "              ^^", "whole number from 0 to 60"),
        ("tang_toennies(a, r)", "              ^", "whole number from 0 to 60"),
    ],
)
def test_a_fault_is_marked_where_it_is(text: str, carets: str, says: str) -> None:
    with pytest.raises(FormulaError) as caught:
        parse(text)
    (problem,) = caught.value.problems
    assert problem.excerpt == f"{text}\n{carets}"
    assert says in problem.says
    assert problem.remedy.endswith(".")


@pytest.mark.parametrize("text", ["", " \n\t"])
def test_an_empty_formula_is_refused(text: str) -> None:
    with pytest.raises(FormulaError, match="The formula is empty"):
        parse(text)


def test_a_long_formula_is_shown_around_the_fault() -> None:
    text = "r + " * 30 + "r ? 2" + " + r" * 30
    with pytest.raises(FormulaError) as caught:
        parse(text)
    shown, carets = caught.value.problems[0].excerpt.splitlines()
    assert shown.startswith("… ")
    assert shown.endswith(" …")
    assert shown[carets.index("^")] == "?"
    assert caught.value.place == (122, 123)


@pytest.mark.parametrize("text", ["r^1000", "r^-1000", "r" * 80 + "*2", "1e999", "0." + "1" * 60])
def test_what_lies_on_a_limit_is_taken(text: str) -> None:
    assert parse(text) is not None


def test_a_text_too_long_is_refused_unread() -> None:
    with pytest.raises(FormulaError, match="10,000,000 characters; at most 100,000") as caught:
        parse("r" * 10_000_000)
    assert len(caught.value.text) < 100
    assert parse(" " * (LONGEST - 1) + "r") == r


@pytest.mark.parametrize(
    "text",
    [
        "(" * (DEEPEST + 1) + "r" + ")" * (DEEPEST + 1),
        "-" * 1000 + "r",
        "r" + "/r" * 1000,
        "^".join("r" * 1000),
        "-" * 90_000 + "r",
        "r" + "+r" * 45_000,
        "^".join("r" * 45_000),
    ],
    ids=["brackets", "signs", "quotients", "powers", "many signs", "many terms", "many powers"],
)
def test_a_text_too_deep_is_refused(text: str) -> None:
    with pytest.raises(FormulaError, match="nested"):
        parse(text)


def test_brackets_of_calls_count_as_others_do() -> None:
    assert parse("sin(" * (DEEPEST - 1) + "r" + ")" * (DEEPEST - 1))


def test_a_long_sum_is_not_deep() -> None:
    tree = parse(" + ".join(["r"] * 500))
    assert isinstance(tree, Apply)
    assert len(tree.arguments) == 500


ALPHABET = "r2.e*+-/^()<>=, \n_ax"
WORDS = [
    "r",
    "2",
    "1e3",
    "(",
    ")",
    "+",
    "*",
    "^",
    ",",
    "exp(",
    "where(",
    "<",
    "sigma",
    "lambda",
    ".",
    "__",
    "=",
    "if",
]


@given(st.text() | st.text(ALPHABET) | st.lists(st.sampled_from(WORDS)).map(" ".join))
@example("\x00")
@example("r\\\n")
@example("9" * 5000)
@example("(r for r in r)")
@example("\N{NO-BREAK SPACE}r")
@example("r\x85+1")
def test_any_text_is_read_or_refused(text: str) -> None:
    try:
        good = parse(text) is not None
    except FormulaError as error:
        good = 0 <= error.place[0] <= len(text) and "^" in error.problems[0].excerpt
    assert good


@pytest.mark.parametrize("name", ["print", "exit", "breakpoint", "globals"])
def test_nothing_is_ever_run(name: str, monkeypatch: pytest.MonkeyPatch) -> None:
    ran: list[str] = []
    with monkeypatch.context() as patched:
        patched.setattr(builtins, name, lambda *_: ran.append(name))
        with pytest.raises(FormulaError, match="There is no function"):
            parse(f"exp({name}(r))")
    assert not ran
