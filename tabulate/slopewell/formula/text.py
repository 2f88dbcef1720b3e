"""Read a tree as text: the formula, written plainly."""

from __future__ import annotations

from decimal import Decimal, localcontext
from fractions import Fraction

from .tree import Apply, Choice, Constant, Name, Number, Tree

SUM, PRODUCT, NEGATE, POWER, ATOM = range(5)
"""How tightly a piece of text holds together."""
DIGITS = 60
"""Digits up to which a number is written as a decimal."""


def write(tree: Tree) -> str:
    """Return a formula that parses back to an equal tree (but for folded constants)."""
    return _piece(tree)[0]


def _piece(tree: Tree) -> tuple[str, int]:
    match tree:
        case Number():
            return _number(tree.value)
        case Constant():
            return f"{float(tree.ball.mid()):.17g}", NEGATE if tree.ball < 0 else ATOM
        case Name():
            return tree.name, ATOM
        case Choice():
            left, right, then, otherwise = (write(part) for part in (tree.left, tree.right, tree.then, tree.otherwise))
            return f"where({left} {tree.comparison} {right}, {then}, {otherwise})", ATOM
        case Apply(function="+"):
            return _sum(tree), SUM
        case Apply(function="*"):
            return "*".join(_held(part, NEGATE) for part in tree.arguments), PRODUCT
        case Apply(function="/"):
            over, under = tree.arguments
            return f"{_held(over, PRODUCT)}/{_held(under, POWER)}", PRODUCT
        case Apply(function="negate"):
            return f"-{_held(tree.arguments[0], POWER)}", NEGATE
        case Apply(function="^"):
            base, exponent = tree.arguments
            return f"{_held(base, ATOM)}^{_held(exponent, ATOM)}", POWER
        case Apply():
            return f"{tree.function}({', '.join(write(part) for part in tree.arguments)})", ATOM


def _held(tree: Tree, tightness: int) -> str:
    """Return the text of a part, in brackets where it would fall apart."""
    text, own = _piece(tree)
    return text if own >= tightness else f"({text})"


def _sum(tree: Apply) -> str:
    text = _held(tree.arguments[0], PRODUCT)
    for term in tree.arguments[1:]:
        if isinstance(term, Apply) and term.function == "negate":
            text += f" - {_held(term.arguments[0], POWER)}"
        elif isinstance(term, Number) and term.value < 0:
            text += f" - {_held(Number(-term.value), POWER)}"
        else:
            text += f" + {_held(term, PRODUCT)}"
    return text


def _number(value: Fraction) -> tuple[str, int]:
    if value < 0:
        return f"-{_number(-value)[0]}", NEGATE
    if value.denominator == 1 and value < 10**15:
        return str(value.numerator), ATOM
    with localcontext(prec=DIGITS):
        decimal = (Decimal(value.numerator) / Decimal(value.denominator)).normalize()
    if Fraction(decimal) == value:
        return str(decimal).replace("E+", "e").replace("E", "e"), ATOM
    return f"{value.numerator}/{value.denominator}", PRODUCT
