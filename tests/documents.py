"""Small documents and curves for tests."""

from __future__ import annotations

from fractions import Fraction

from slopewell.formula import bind, parse
from slopewell.formula.branches import resolve
from slopewell.potential import Curve

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
