"""Load the catalogue of published forms: every form is data, none has a force of its own."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from fractions import Fraction
from functools import cache
from importlib.resources import files
from typing import Any

from ..problems import Problem, UnusableInput, nearest

BOUNDS = ("above", "at-least", "below", "at-most")


@dataclass(frozen=True, slots=True)
class Parameter:
    """A parameter of a form.

    Attributes
    ----------
    name : str
    dimension : str
        Powers of energy, length, temperature and mass, such as ``"energy length^6"``; ``"1"`` for a pure number.
    meaning : str
    example, default : str
        Values with their unit; an empty default means that the parameter must be given.
    bounds : tuple of (str, Fraction)
        Pairs such as ``("above", 0)``.
    """

    name: str
    dimension: str
    meaning: str
    example: str
    default: str
    bounds: tuple[tuple[str, Fraction], ...]

    def violated(self, value: Fraction) -> str:
        """Return the bound that a value breaks, in words; empty if none."""
        for kind, bound in self.bounds:
            kept = {
                "above": value > bound,
                "at-least": value >= bound,
                "below": value < bound,
                "at-most": value <= bound,
            }[kind]
            if not kept:
                return f"{kind.replace('-', ' ')} {float(bound):g}"
        return ""


@dataclass(frozen=True, slots=True)
class Form:
    """A published form.

    Attributes
    ----------
    name, title, formula, about, source : str
    parameters : tuple of Parameter
    start, end : str
        A range over which one would tabulate it with the example parameters.
    """

    name: str
    title: str
    formula: str
    about: str
    source: str
    parameters: tuple[Parameter, ...]
    start: str
    end: str


@cache
def catalogue() -> dict[str, Form]:
    """Return every form by its name, in the order of the data file."""
    text = files("slopewell.forms").joinpath("catalogue.toml").read_text(encoding="utf-8")
    forms: dict[str, Form] = {}
    for entry in tomllib.loads(text)["form"]:
        form = _form(entry)
        if form.name in forms:
            raise ValueError(f"the catalogue has {form.name} twice")
        forms[form.name] = form
    return forms


def _form(entry: dict[str, Any]) -> Form:
    return Form(
        name=entry["name"],
        title=entry["title"],
        formula=" ".join(entry["formula"].split()),
        about=" ".join(entry["about"].split()),
        source=" ".join(entry["source"].split()),
        parameters=tuple(_parameter(parameter) for parameter in entry["parameter"]),
        start=entry["from"],
        end=entry["to"],
    )


def _parameter(entry: dict[str, Any]) -> Parameter:
    return Parameter(
        name=entry["name"],
        dimension=entry["dimension"],
        meaning=entry["meaning"],
        example=entry["example"],
        default=entry.get("default", ""),
        bounds=tuple((kind, Fraction(str(entry[kind]))) for kind in BOUNDS if kind in entry),
    )


def form(name: str) -> Form:
    """Return the form of a name.

    Raises
    ------
    UnusableInput
        With the nearest known name.
    """
    if name not in catalogue():
        raise UnusableInput([Problem("", f'There is no form "{name}".', nearest(name, catalogue()))])
    return catalogue()[name]


def paste_block(form: Form) -> str:
    """Return a form as a block of a potential document, ready to paste and change."""
    lines = ["[[interaction]]", 'between = ["A", "B"]', f'form = "{form.name}"', "[interaction.parameters]"]
    width = max(len(parameter.name) for parameter in form.parameters)
    for parameter in form.parameters:
        pure = parameter.dimension == "1"
        value = parameter.example if pure else f'"{parameter.example}"'
        lines.append(f"{parameter.name:<{width}} = {value}  # {parameter.meaning}")
    return "\n".join(lines)
