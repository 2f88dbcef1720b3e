"""Read a formula with dimensions: an energy added to a length is refused at the offending operator."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import Any

from .bind import bind
from .parse import FormulaError
from .text import write
from .tree import Apply, Choice, Constant, Name, Number, Place, Tree, names

Dimension = Any
"""pint's ``UnitsContainer`` of a quantity's dimensionality."""


def dimension(tree: Tree, text: str, known: Mapping[str, Dimension], values: Mapping[str, Fraction]) -> Dimension:
    """Return the dimension of a formula.

    Parameters
    ----------
    tree, text
        The parsed formula and what it was parsed from.
    known : mapping of str to UnitsContainer
        The dimension of every name in it, ``r`` included.
    values : mapping of str to Fraction
        Values of dimensionless names, needed where a power of a dimension is one of them.

    Returns
    -------
    UnitsContainer or None
        None for a formula that is zero, which has every dimension.

    Raises
    ------
    FormulaError
        At the operator or function whose operands do not fit.
    """
    return _Reading(text, known, values).of(tree)


ANY = None
"""The dimension of a literal zero, which fits everywhere."""


class _Reading:
    def __init__(self, text: str, known: Mapping[str, Dimension], values: Mapping[str, Fraction]) -> None:
        self.text = text
        self.known = known
        self.values = values
        self.one = self.plain(known)

    @staticmethod
    def plain(known: Mapping[str, Dimension]) -> Dimension:
        some = next(iter(known.values()))
        return some / some

    def of(self, tree: Tree) -> Dimension:
        match tree:
            case Number():
                return self.one if tree.value else ANY
            case Constant():
                return self.one
            case Name():
                return self.known[tree.name]
            case Choice():
                self.same(tree.left, tree.right, tree.place, "compares")
                return self.same(tree.then, tree.otherwise, tree.place, "chooses between")
            case Apply(function="+"):
                return self.sum(tree)
            case Apply(function="negate" | "abs"):
                return self.of(tree.arguments[0])
            case Apply(function="min" | "max"):
                one, other = tree.arguments
                return self.same(one, other, tree.place, "compares")
            case Apply(function="*" | "/"):
                return self.product(tree)
            case Apply(function="^"):
                return self.power(tree)
            case Apply(function="sqrt"):
                found = self.of(tree.arguments[0])
                return ANY if found is ANY else found ** Fraction(1, 2)
            case Apply():
                return self.transcendental(tree)

    def sum(self, tree: Apply) -> Dimension:
        total = self.of(tree.arguments[0])
        for term, sign in zip(tree.arguments[1:], tree.signs, strict=True):
            found = self.of(term)
            if total is ANY:
                total = found
            elif found is not ANY and found != total:
                says = f"This operator joins {describe(total)} and {describe(found)}."
                raise FormulaError(self.text, sign, says, "Both sides of + and - must have the same dimension.")
        return total

    def same(self, first: Tree, second: Tree, place: Place, verb: str) -> Dimension:
        one, other = self.of(first), self.of(second)
        if one is ANY or other is ANY:
            return other if one is ANY else one
        if one != other:
            says = f"This function {verb} {describe(one)} and {describe(other)}."
            raise FormulaError(self.text, place, says, "Both must have the same dimension.")
        return one

    def product(self, tree: Apply) -> Dimension:
        found = [self.of(argument) for argument in tree.arguments]
        if found[0] is ANY or (tree.function == "*" and ANY in found):
            return ANY
        total = found[0]
        for factor in found[1:]:
            factor = self.one if factor is ANY else factor
            total = total * factor if tree.function == "*" else total / factor
        return total

    def power(self, tree: Apply) -> Dimension:
        base, exponent = tree.arguments
        found = self.of(base)
        self.pure(exponent, tree.signs[0], "An exponent must be a pure number")
        if found is ANY or found == self.one:
            return found
        fixed = self.number(exponent)
        if fixed is None:
            says = f"A base that is {describe(found)} needs a fixed number as its exponent."
            raise FormulaError(self.text, tree.signs[0], says, "Divide the base by a length, say (sigma/r)^n.")
        return found ** (int(fixed) if fixed.denominator == 1 else fixed)

    def number(self, tree: Tree) -> Fraction | None:
        if not names(tree) <= self.values.keys():
            return None
        bound = bind(tree, self.values)
        return bound.value if isinstance(bound, Number) else None

    def transcendental(self, tree: Apply) -> Dimension:
        for argument in tree.arguments:
            self.pure(argument, tree.place, f"The argument of {tree.function} must be a pure number")
        return self.one

    def pure(self, tree: Tree, place: Place, says: str) -> None:
        found = self.of(tree)
        if found is not ANY and found != self.one:
            raise FormulaError(
                self.text,
                place,
                f"{says}, but {write(tree)} is {describe(found)}.",
                "Divide it by its unit or scale.",
            )


NAMES = {"[energy]": "energy", "[length]": "length", "[temperature]": "temperature", "[mass]": "mass"}


def describe(found: Dimension) -> str:
    """Say a dimension in words.

    Examples
    --------
    >>> describe({"[energy]": 1, "[length]": -1})
    'energy/length'
    """
    if found is ANY or not len(found):
        return "a pure number"
    parts = [(NAMES.get(name, name), power) for name, power in sorted(found.items())]
    over = " ".join(_power(name, power) for name, power in parts if power > 0) or "1"
    under = [_power(name, -power) for name, power in parts if power < 0]
    return over + ("/" + "/".join(under) if under else "")


def _power(name: str, power: float) -> str:
    return name if power == 1 else f"{name}^{float(power):g}"
