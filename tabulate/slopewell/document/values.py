"""Turn the values of a document into exact quantities, noting a problem where that can't be done."""

from __future__ import annotations

from dataclasses import dataclass, field
from decimal import Decimal
from fractions import Fraction

from ..formula.dimensions import describe
from ..problems import Problem, UnusableInput
from ..units import Dimension, Quantity, UnitSystem, dimension, quantity, temperature, unit_system
from .source import Source

Value = int | Decimal | str


@dataclass(slots=True)
class Notes:
    """The problems met while a document is read; reading goes on, so that all of them are reported."""

    source: Source
    problems: list[Problem] = field(default_factory=list)

    def add(self, path: str, says: str, remedy: str, excerpt: str = "") -> None:
        """Note a problem at a key path."""
        problem = Problem(path, says, remedy, excerpt, self.source.line(path))
        # A grid that several interactions share is one fault, not several.
        if problem not in self.problems:
            self.problems.append(problem)

    def take(self, path: str, error: UnusableInput) -> None:
        """Note the problems of an error at a key path."""
        for problem in error.problems:
            self.add(path, problem.says, problem.remedy, problem.excerpt)


def exact(value: int | Decimal) -> Fraction:
    """Return a number of the document as it is written."""
    return Fraction(value)


def scale(powers: str, units: UnitSystem) -> Fraction:
    """Return the document's unit of a dimension such as ``"energy length^6"`` in the internal units."""
    factor = Fraction(1)
    sizes = {"energy": units.energy.factor, "length": units.length.factor}
    for word in powers.split():
        name, _, power = word.partition("^")
        factor *= sizes.get(name, Fraction(1)) ** int(power or 1)
    return factor


def read_quantity(notes: Notes, path: str, value: Value, powers: str, units: UnitSystem) -> Fraction | None:
    """Return a value in eV, ångström, dalton and kelvin; None, and a problem noted, if it is of another kind.

    Parameters
    ----------
    notes : Notes
    path : str
        Its key path.
    value : number or str
        A plain number is in the document's units; a text carries its own.
    powers : str
        The dimension wanted, such as ``"energy length^6"``.
    units : UnitSystem
    """
    if not isinstance(value, str):
        return exact(value) * scale(powers, units)
    if powers == "temperature":
        return read_temperature(notes, path, value)
    found = read_own(notes, path, value)
    if found is None:
        return None
    if found.dimension != dimension(powers):
        says = f'"{value}" is {describe(found.dimension)}; {describe(dimension(powers))} is expected.'
        notes.add(path, says, "Give it in a unit of that dimension.")
        return None
    return found.value


def read_own(notes: Notes, path: str, value: str) -> Quantity | None:
    """Return the quantity that a text states; None, and a problem noted, if it states none."""
    try:
        return quantity(value)
    except UnusableInput as error:
        notes.take(path, error)
        return None


def read_temperature(notes: Notes, path: str, value: str) -> Fraction | None:
    """Return a temperature in kelvin; None, and a problem noted, if it is none."""
    try:
        return temperature(value)
    except UnusableInput as error:
        notes.take(path, error)
        return None


def read_units(notes: Notes, path: str, value: dict[str, str]) -> UnitSystem | None:
    """Return a system of units; None, and a problem noted, if it is none."""
    try:
        return unit_system(value["energy"], value["length"])
    except UnusableInput as error:
        notes.take(path, error)
        return None


def named_value(name: str, value: Value, notes: Notes, path: str) -> tuple[Fraction, Dimension] | None:
    """Return value and dimension of a parameter of a formula; a plain number is a pure number."""
    if not isinstance(value, str):
        return exact(value), dimension("1")
    if name == "temperature":
        kelvin = read_temperature(notes, path, value)
        return None if kelvin is None else (kelvin, dimension("temperature"))
    found = read_own(notes, path, value)
    return None if found is None else (found.value, found.dimension)
