"""Turn the form or formula of an interaction into a bound tree, with every name and dimension checked."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from ..forms import Form, form
from ..formula import FormulaError, Tree, bind, names, parse
from ..formula.dimensions import describe
from ..formula.dimensions import dimension as dimension_of
from ..formula.parse import CONSTANTS, FUNCTIONS
from ..formula.tree import COORDINATE, Name, walk
from ..problems import UnusableInput, nearest
from ..units import Dimension, UnitSystem, dimension
from ..units.constants import BOLTZMANN, COULOMB
from .values import Notes, named_value, read_quantity

BUILT_IN = {"kB": (BOLTZMANN, "energy temperature^-1"), "ke": (COULOMB, "energy length")}
"""The constants of the formula language with a dimension."""


@dataclass(frozen=True, slots=True)
class Named:
    """The values of the names of a formula, and their dimensions."""

    values: dict[str, Fraction]
    dimensions: dict[str, Dimension]


@dataclass(frozen=True, slots=True)
class Formula:
    """A form or a formula of one's own, parsed and checked, with the values of its names.

    Attributes
    ----------
    texts : mapping
        The formulas of ``energy`` and, where it is stated, ``force``.
    trees : mapping
        The same, parsed.
    named : Named
    form : Form or None
    """

    texts: dict[str, str]
    trees: dict[str, Tree]
    named: Named
    form: Form | None

    def bound(self, key: str) -> Tree:
        """Return a formula with its values put in, in eV and ångström."""
        return bind(self.trees[key], self.named.values)


def read_formula(notes: Notes, path: str, entry: Mapping[str, Any], units: UnitSystem) -> Formula | None:
    """Read ``form`` or ``energy``, ``parameters`` and ``force`` of an interaction or one of its terms.

    Returns None, and notes the problems, if anything is wrong with them.
    """
    before = len(notes.problems)
    parameters = entry.get("parameters", {})
    chosen = None
    if "form" in entry:
        chosen = _form(notes, f"{path}.form", entry["form"])
        if chosen is None:
            return None
        named = _form_values(notes, f"{path}.parameters", chosen, parameters, units)
    else:
        named = _own_values(notes, f"{path}.parameters", parameters)
    texts = {"energy": chosen.formula if chosen else entry["energy"]}
    texts |= {"force": entry["force"]} if "force" in entry else {}
    parsed = {key: _parse(notes, f"{path}.{key}", formula) for key, formula in texts.items()}
    trees = {key: tree for key, tree in parsed.items() if tree is not None}
    if len(notes.problems) > before or len(trees) < len(texts):
        return None
    _check_names(notes, path, texts, trees, named, own=chosen is None)
    if len(notes.problems) == before:
        _check_dimensions(notes, path, texts, trees, named)
    return None if len(notes.problems) > before else Formula(texts, trees, named, chosen)


def _form(notes: Notes, path: str, name: str) -> Form | None:
    try:
        return form(name)
    except UnusableInput as error:
        notes.take(path, error)
        return None


def _parse(notes: Notes, path: str, text: str) -> Tree | None:
    try:
        return parse(text)
    except FormulaError as error:
        notes.take(path, error)
        return None


def _built_in() -> Named:
    return Named(
        {name: value for name, (value, _) in BUILT_IN.items()},
        {name: dimension(powers) for name, (_, powers) in BUILT_IN.items()}
        | {"pi": dimension("1"), COORDINATE: dimension("length")},
    )


def _form_values(notes: Notes, path: str, chosen: Form, given: dict[str, Any], units: UnitSystem) -> Named:
    named = _built_in()
    known = {parameter.name: parameter for parameter in chosen.parameters}
    for name in given:
        if name not in known:
            notes.add(f"{path}.{name}", f'{chosen.name} has no parameter "{name}".', nearest(name, known))
    for name, parameter in known.items():
        value = given.get(name, parameter.default)
        if value == "":
            says = f'{chosen.name} needs the parameter "{name}" ({parameter.meaning}).'
            notes.add(path, says, f"Add {name} = {_example(parameter.example, parameter.dimension)}")
            continue
        found = read_quantity(notes, f"{path}.{name}", value, parameter.dimension, units)
        if found is None:
            continue
        if broken := parameter.violated(found):
            notes.add(
                f"{path}.{name}",
                f"{name} ({parameter.meaning}) must be {broken}.",
                "Check its sign and unit.",
            )
        named.values[name] = found
        named.dimensions[name] = dimension(parameter.dimension)
    return named


def _example(example: str, powers: str) -> str:
    return example if powers == "1" else f'"{example}"'


def _own_values(notes: Notes, path: str, given: dict[str, Any]) -> Named:
    named = _built_in()
    for name, value in given.items():
        if name in (COORDINATE, *CONSTANTS, *FUNCTIONS):
            notes.add(f"{path}.{name}", f'"{name}" has a meaning of its own in formulas.', "Choose another name.")
            continue
        found = named_value(name, value, notes, f"{path}.{name}")
        if found is not None:
            named.values[name], named.dimensions[name] = found
    return named


def _check_names(
    notes: Notes, path: str, texts: dict[str, str], trees: dict[str, Tree], named: Named, *, own: bool
) -> None:
    used: set[str] = set()
    for key, tree in trees.items():
        used |= names(tree)
        unknown = {n.name: n for n in walk(tree) if isinstance(n, Name) and n.name not in named.dimensions}
        for name, node in unknown.items():
            error = FormulaError(texts[key], node.place, f'"{name}" has no value.', _advice(name, named))
            notes.take(f"{path}.{key}", error)
    if own:
        for name in named.dimensions:
            if name not in used and name not in (COORDINATE, *CONSTANTS):
                says = f'The parameter "{name}" is not used by the formula.'
                notes.add(f"{path}.parameters.{name}", says, "Take it out, or use it.")


def _advice(name: str, named: Named) -> str:
    return f"Give it under parameters. {nearest(name, named.dimensions)}"


def _check_dimensions(notes: Notes, path: str, texts: dict[str, str], trees: dict[str, Tree], named: Named) -> None:
    wanted = {"energy": dimension("energy"), "force": dimension("energy length^-1")}
    for key, tree in trees.items():
        try:
            found = dimension_of(tree, texts[key], named.dimensions, named.values)
        except FormulaError as error:
            notes.take(f"{path}.{key}", error)
            continue
        if found is not None and found != wanted[key]:
            says = f"The formula gives {describe(found)}; {describe(wanted[key])} is expected."
            notes.add(f"{path}.{key}", says, _slip(key, found), texts[key] if len(texts[key]) < 100 else "")


def _slip(key: str, found: Dimension) -> str:
    """Say which slip a force of another dimension looks like."""
    if key == "energy":
        return "Give the parameters their units."
    if found == dimension("energy"):
        return "This looks like r·F (a virial), or like the energy itself: divide by r, or take the slope."
    if found == dimension("energy length^-2"):
        return "This looks like F/r, or like dU/d(r²): multiply by r, or by -2*r."
    return "A force is minus the slope of the energy, -dU/dr."
