"""Small documents and curves for tests."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

from slopewell.checks import PotentialFacts, potential_facts
from slopewell.document import Document, read_document
from slopewell.formula import bind, parse
from slopewell.formula.branches import resolve
from slopewell.potential import Curve
from slopewell.problems import UnusableInput

HEAD = """schema = "slopewell/potential/1"
title = "Argon-like pair for tests"
temperature = "100 K"
"""
UNITS = """[units]
energy = "eV"
length = "angstrom"
[species.A]
mass = "40 dalton"
[species.B]
"""
LENNARD_JONES = """form = "lennard-jones"
parameters = { epsilon = 0.01, sigma = 3.4 }
"""
SWITCH = 'cutoff = { at = 9, treatment = "switch", from = 7 }\n'
GRID = """[grid]
from = 2.5
to = 9
rows = 101
"""


def text(
    interaction: str = LENNARD_JONES,
    *,
    between: str = '["A", "A"]',
    cutoff: str = SWITCH,
    grid: str = GRID,
    head: str = HEAD,
    units: str = UNITS,
    outputs: str = "",
) -> str:
    """A document with one interaction, of parts that can be exchanged."""
    return f"{head}{units}[[interaction]]\nbetween = {between}\n{interaction}{cutoff}{grid}{outputs}"


def curve(formula: str, start: float | Fraction, end: float | Fraction, **values: float | Fraction) -> Curve:
    """The curve of a formula in eV and ångström."""
    named = {name: Fraction(value) for name, value in values.items()}
    return Curve(resolve(bind(parse(formula), named), Fraction(start), Fraction(end)))


REDUCED_LENNARD_JONES = "4*((1/r)^12 - (1/r)^6)"
"""Lennard-Jones with epsilon = 1 eV and sigma = 1 Å."""


def read(document: str, folder: Path) -> Document:
    """Read the text of a document from a file in a folder."""
    path = folder / "pair.toml"
    path.write_text(document, encoding="utf-8")
    return read_document(path)


def problems(document: str, folder: Path) -> list[tuple[str, str]]:
    """Place and words of everything that is wrong with a document; empty if it can be used."""
    try:
        read(document, folder)
    except UnusableInput as error:
        return [(problem.at, problem.says) for problem in error.problems]
    return []


def facts(document: str, folder: Path) -> PotentialFacts:
    """What the checks look at, of a document's first interaction."""
    understood = read(document, folder)
    return potential_facts(understood, understood.interactions[0])
