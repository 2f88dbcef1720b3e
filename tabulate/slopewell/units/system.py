"""Units by pint, with exact factors: a text to a unit, a quantity, and the factor between two units."""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass
from decimal import Decimal, localcontext
from fractions import Fraction
from functools import cache
from importlib.resources import files
from typing import Any

from ..problems import Problem, UnusableInput

Dimension = Any
"""pint's ``UnitsContainer``."""

NUMBER = r"[-+]?(?:\d{1,60}(?:\.\d{0,60})?|\.\d{1,60})(?:[eE][-+]?\d{1,3})?"
QUANTITY = re.compile(rf"\s*({NUMBER})\s*(.*?)\s*", re.DOTALL)
POWER = re.compile(r"(?<=[A-Za-z])\^(?:[-+]?\d{1,2}(?:\.\d{1,2})?|\([-+]?\d{1,2}(?:[./]\d{1,2})?\))(?![\d.])")
UNIT = re.compile(r"(?!.*//)(?:1|1/)?[A-Za-z_*/() ]{0,80}")
WAVENUMBER = re.compile(r"\bcm\^(?:-1|\(-1\))(?![\d.])")
SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")


class UnitError(UnusableInput):
    """A text that is no unit or no quantity, or has the wrong dimension."""

    def __init__(self, says: str, remedy: str) -> None:
        super().__init__([Problem("", says, remedy)])


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit.

    Attributes
    ----------
    text : str
        Its plain ASCII text, as files store it.
    factor : Fraction
        Its size in eV, ångström, dalton and kelvin, exact as defined.
    dimension : UnitsContainer
    """

    text: str
    factor: Fraction
    dimension: Dimension


@dataclass(frozen=True, slots=True)
class Quantity:
    """A value in eV, ångström, dalton and kelvin, with its dimension."""

    value: Fraction
    dimension: Dimension


@dataclass(frozen=True, slots=True)
class UnitSystem:
    """The units of energy and length of a document or a table; the others follow from them."""

    energy: Unit
    length: Unit

    @property
    def force(self) -> Unit:
        """The unit of force, energy/length."""
        return self.per_length(1)

    @property
    def stiffness(self) -> Unit:
        """The unit of curvature, energy/length²."""
        return self.per_length(2)

    def per_length(self, power: int) -> Unit:
        """Return the unit energy/lengthⁿ."""
        suffix = "" if power == 0 else f"/{self.length.text}" + (f"^{power}" if power > 1 else "")
        dimension = self.energy.dimension / self.length.dimension**power
        return Unit(self.energy.text + suffix, self.energy.factor / self.length.factor**power, dimension)


@cache
def registry() -> Any:
    """Return pint's registry of the project's own definitions, in exact fractions."""
    import pint

    definitions = files("slopewell.units").joinpath("definitions.txt").read_text(encoding="utf-8")
    made: Any = pint.UnitRegistry(None, non_int_type=Fraction, cache_folder=None)
    made.load_definitions(definitions.splitlines())
    return made


@cache
def unit(text: str) -> Unit:
    """Return the unit that a text names.

    Parameters
    ----------
    text : str
        A product, quotient and power of unit names, such as ``"kJ/(mol nm)"`` or ``"kcal mol^-1 Å^-1"``.

    Raises
    ------
    UnitError
        If it names none.
    """
    plain = _plain(text)
    readable = WAVENUMBER.sub("wavenumber", plain)
    if not UNIT.fullmatch(POWER.sub("", readable)):
        raise UnitError(f'"{text[:60]}" is not a unit.', KNOWN)
    try:
        parsed = registry().Quantity(Fraction(1), registry().parse_units(readable.replace("^", "**")))
        base = parsed.to_base_units()
    except Exception as error:
        # pint raises whatever its tokenizer meets, from AttributeError to ZeroDivisionError
        raise UnitError(f'"{text[:60]}" is not a unit ({_reason(error)}).', KNOWN) from None
    factor = Fraction(base.magnitude)
    return Unit(_canonical(plain, factor, base.dimensionality), factor, base.dimensionality)


KNOWN = (
    "Use eV, meV, J, kJ/mol, kcal/mol, hartree, rydberg, K, cm^-1, zJ, aJ; angstrom, nm, pm, bohr, m; dalton; e; "
    "and products, quotients and powers of them."
)


def _plain(text: str) -> str:
    composed = unicodedata.normalize("NFC", text).strip()
    raised = re.sub("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+", lambda found: "^" + found.group().translate(SUPERSCRIPTS), composed)
    tight = re.sub(r"\s*(\*\*|\^)\s*", "^", raised)
    return re.sub(r"\s*([*·/])\s*", lambda sign: sign[1].replace("·", "*"), tight.replace("Å", "angstrom"))


def _reason(error: Exception) -> str:
    name = getattr(error, "unit_names", None)
    return f"unknown: {name if isinstance(name, str) else ', '.join(name)}" if name else "it can't be read"


CANONICAL = {
    "eV": "eV",
    "meV": "meV",
    "J": "J",
    "zJ": "zJ",
    "aJ": "aJ",
    "kJ/mol": "kJ/mol",
    "kcal/mol": "kcal/mol",
    "hartree": "hartree",
    "rydberg": "rydberg",
    "K": "K",
    "cm^-1": "wavenumber",
    "angstrom": "angstrom",
    "nm": "nm",
    "pm": "pm",
    "bohr": "bohr",
    "m": "m",
}
"""Stored text of the usual units of energy and length, and how the registry calls them."""


@cache
def _canonical_factors() -> dict[tuple[Fraction, Any], str]:
    made = registry()
    found = {}
    for text, name in CANONICAL.items():
        base = made.Quantity(Fraction(1), made.parse_units(name)).to_base_units()
        found[Fraction(base.magnitude), base.dimensionality] = text
    return found


def _canonical(plain: str, factor: Fraction, dimension: Dimension) -> str:
    return _canonical_factors().get((factor, dimension), plain)


LARGEST = 10**300
"""Size of a quantity in internal units that doubles still hold."""


def quantity(text: str) -> Quantity:
    """Return the quantity that a text such as ``"41.9 hartree bohr^6"`` states.

    Raises
    ------
    UnitError
        If it is no number with a unit.
    """
    found = QUANTITY.fullmatch(text)
    if not found:
        raise UnitError(f'"{text[:60]}" is not a number with a unit.', 'Write it like "0.47 nm".')
    named = unit(found.group(2))
    value = Fraction(found.group(1)) * named.factor
    if abs(value) > LARGEST:
        raise UnitError(f'"{text[:60]}" is beyond the range of doubles.', "Give a number within ±1e300.")
    return Quantity(value, named.dimension)


def temperature(text: str) -> Fraction:
    """Return the temperature in kelvin that a text such as ``"300 K"`` states."""
    found = QUANTITY.fullmatch(text)
    if not found or found.group(2) != "K" or Fraction(found.group(1)) <= 0:
        raise UnitError(f'"{text[:60]}" is not a positive temperature in kelvin.', 'Write it like "300 K".')
    return Fraction(found.group(1))


def dimension(text: str) -> Dimension:
    """Return the dimension that words name: powers of energy, length, mass and temperature, or ``1``."""
    container = registry().UnitsContainer()
    for word in text.split():
        if word != "1":
            name, _, power = word.partition("^")
            container = container * registry().UnitsContainer({f"[{name}]": 1}) ** int(power or 1)
    return container


def ratio(old: Unit, new: Unit) -> Fraction:
    """Return what a number in the old unit is multiplied by to be in the new one.

    Raises
    ------
    UnitError
        If they differ in dimension.
    """
    if old.dimension != new.dimension:
        from ..formula.dimensions import describe

        says = f"{old.text} is {describe(old.dimension)}, {new.text} is {describe(new.dimension)}."
        raise UnitError(says, "Name two units of one dimension.")
    return old.factor / new.factor


def convert_text(text: str, new: str) -> str:
    """Return a quantity in another unit, as text with all its digits: exact where a decimal can be.

    Examples
    --------
    >>> convert_text("1 eV/angstrom", "kJ/mol/nm")
    '964.853321233100184 kJ/mol/nm'
    """
    found = QUANTITY.fullmatch(text)
    if not found:
        raise UnitError(f'"{text[:60]}" is not a number with a unit.', 'Write it like "0.47 nm".')
    target = unit(new)
    value = Fraction(found.group(1)) * ratio(unit(found.group(2)), target)
    return f"{_decimal(value)} {target.text}".rstrip()


LONGEST_DECIMAL = 30


def _decimal(value: Fraction) -> str:
    """Return the exact decimal of a fraction if it is short, else 17 significant digits."""
    with localcontext() as context:
        context.prec = LONGEST_DECIMAL
        exact = Decimal(value.numerator) / Decimal(value.denominator)
        if Fraction(exact) == value and abs(exact.adjusted()) < LONGEST_DECIMAL // 2:
            return f"{exact:f}"
    return f"{float(value):.17g}"


def unit_system(energy: str, length: str) -> UnitSystem:
    """Return the system of two units, refusing what is no energy or no length."""
    system = UnitSystem(unit(energy), unit(length))
    if system.energy.dimension != dimension("energy"):
        raise UnitError(f'"{energy}" is not a unit of energy.', 'Write it like "kJ/mol".')
    if system.length.dimension != dimension("length"):
        raise UnitError(f'"{length}" is not a unit of length.', 'Write it like "nm".')
    return system
