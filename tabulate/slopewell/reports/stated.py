"""What a document states of each interaction, taken from its text: formula, parameters, cutoff, grid."""

from __future__ import annotations

import json
import re
import tomllib
from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from typing import Any

from ..document.model import Interaction
from ..forms import Form, catalogue
from ..units import UnitSystem, quantity, unit_system
from .view import number_text, unit_text

PLAIN = re.compile(r"[-−]?[\d.]+(?:×10[⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+)?")
"""A number without a unit."""
TREATMENTS = {
    "truncate": "cut off without a correction",
    "shifted-energy": "shifted, so that the energy ends at zero",
    "shifted-force": "shifted, so that energy and force end at zero",
    "shifted-stiffness": "shifted, so that energy, force and stiffness end at zero",
    "switch": "switched off",
    "force-switch": "ended by switching its force off",
}


@dataclass(frozen=True, slots=True)
class StatedParameter:
    """A parameter as the document gives it: its name, its value with unit, and what it means."""

    name: str
    value: str
    meaning: str = ""


@dataclass(frozen=True, slots=True)
class Stated:
    """What a document says of one interaction.

    Attributes
    ----------
    formula : str
        In the formula language.
    title, source : str
        Of the catalogue's form; empty for a formula of one's own.
    parameters : tuple of StatedParameter
    treatment : str
        How the curve is ended, in words; empty without a cutoff.
    cutoff, switch_start : float or None
        In ångström.
    grid : str
        The grid in words.
    """

    formula: str
    title: str = ""
    source: str = ""
    parameters: tuple[StatedParameter, ...] = ()
    treatment: str = ""
    cutoff: float | None = None
    switch_start: float | None = None
    grid: str = ""


def stated_interactions(text: str) -> dict[str, Stated]:
    """Return what a document's text states, by the names of its interactions; empty if it can't be read."""
    try:
        data = _data(text)
        units = unit_system(data["units"]["energy"], data["units"]["length"])
        return {"-".join(entry["between"]): _stated(entry, data, units) for entry in data["interaction"]}
    except (ValueError, KeyError, TypeError, AttributeError):
        # The text came with a table from elsewhere: what can't be read is left out, not refused.
        return {}


def mixed(interaction: Interaction, units: UnitSystem) -> Stated:
    """Return what stands for the words of a document where mixing filled in a pair."""
    origin, cutoff = interaction.origin, interaction.potential.cutoff
    form = catalogue().get(origin.form)
    plain = {name: v if isinstance(v, str) else number_text(float(v)) for name, v in origin.parameters.items()}
    return Stated(
        formula=form.formula if form else "",
        title=f"{form.title}, mixed from like pairs ({origin.rule})" if form else "",
        source=form.source if form else "",
        parameters=_parameters(plain, form, units) if form else (),
        cutoff=None if cutoff is None else float(cutoff.at),
    )


def _data(text: str) -> Any:
    if text.lstrip()[:1] == "{":
        return json.loads(text, parse_float=Decimal)
    return tomllib.loads(text, parse_float=Decimal)


def _stated(entry: dict[str, Any], data: dict[str, Any], units: UnitSystem) -> Stated:
    form = catalogue().get(entry.get("form", ""))
    cutoff = entry.get("cutoff", data.get("cutoff", {}))
    at, start = (_angstrom(cutoff[key], units) if key in cutoff else None for key in ("at", "from"))
    return Stated(
        formula=form.formula if form else entry.get("energy", ""),
        title=form.title if form else "",
        source=form.source if form else "",
        parameters=tuple(_all_parameters(entry, units)),
        treatment=_treatment(cutoff, units),
        cutoff=at,
        switch_start=start,
        grid=_grid(entry.get("grid", data.get("grid", {})), units),
    )


def _all_parameters(entry: dict[str, Any], units: UnitSystem, part: str = "") -> Iterator[StatedParameter]:
    """Yield the parameters of an entry and of its terms and segments, each with the part it belongs to."""
    form = catalogue().get(entry.get("form", ""))
    for parameter in _parameters(entry.get("parameters", {}), form, units):
        meaning = ", ".join(words for words in (parameter.meaning, part) if words)
        yield StatedParameter(parameter.name, parameter.value, meaning)
    for kind in ("segment", "term"):
        for number, inner in enumerate(entry.get(kind, ()), 1):
            yield from _all_parameters(
                inner, units, " of ".join(words for words in (f"{kind} {number}", part) if words)
            )


def _parameters(given: dict[str, Any], form: Form | None, units: UnitSystem) -> tuple[StatedParameter, ...]:
    if form is None:
        return tuple(StatedParameter(name, _value(value, "1", units)) for name, value in given.items())
    return tuple(
        StatedParameter(known.name, _value(given.get(known.name, known.default), known.dimension, units), known.meaning)
        for known in form.parameters
    )


def _value(value: Any, dimension: str, units: UnitSystem) -> str:
    """Return a value with its unit; a plain number is in the document's."""
    if isinstance(value, str) and not PLAIN.fullmatch(value):
        return unit_text(value)
    names = {"energy": units.energy.text, "length": units.length.text, "temperature": "K", "mass": "dalton"}
    words = [word.partition("^") for word in dimension.split() if word != "1"]
    unit = " ".join(f"{names[name]}{hat}{power}" for name, hat, power in words)
    return unit_text(f"{value} {unit}".strip())


def _length(value: Any, units: UnitSystem) -> str:
    return unit_text(value if isinstance(value, str) else f"{value} {units.length.text}")


def _angstrom(value: Any, units: UnitSystem) -> float:
    return float(quantity(value).value if isinstance(value, str) else Fraction(value) * units.length.factor)


def _treatment(cutoff: dict[str, Any], units: UnitSystem) -> str:
    if not cutoff:
        return ""
    words, at = TREATMENTS[cutoff["treatment"]], _length(cutoff["at"], units)
    if "from" not in cutoff:
        return f"{words} at {at}"
    order = cutoff.get("continuity", 2)
    smooth = f"{order} continuous derivative{'s' if order > 1 else ''}"
    return f"{words} between {_length(cutoff['from'], units)} and {at}, with {smooth}"


def _grid(grid: dict[str, Any], units: UnitSystem) -> str:
    if not grid:
        return ""
    even = {
        "separation-squared": "squared separation",
        "inverse": "inverse separation",
        "logarithmic": "logarithm",
    }
    rows = f"{grid['rows']:,} rows" if "rows" in grid else f"rows for {_value(grid['tolerance'], 'energy', units)}"
    spacing = even.get(grid.get("spacing", ""), "separation")
    ends = f"from {_length(grid['from'], units)} to {_length(grid['to'], units)}"
    return f"{rows} {ends}, even in {spacing}, read as {grid.get('interpolation', 'cubic-hermite')}"
