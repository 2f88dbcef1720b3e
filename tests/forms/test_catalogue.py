"""The catalogue: complete, consistent, and every form right to a few units in the last place."""

from __future__ import annotations

import re
from collections.abc import Callable
from fractions import Fraction
from itertools import product
from math import prod
from typing import Any

import mpmath
import numpy as np
import pytest

from slopewell.forms import Form, catalogue, form, paste_block
from slopewell.formula import Tree, bind, names, parse
from slopewell.formula.branches import resolve
from slopewell.formula.dimensions import dimension as formula_dimension
from slopewell.formula.pairs import Pair
from slopewell.formula.parse import CONSTANTS
from slopewell.formula.taylor import accurate_derivatives, derivatives
from slopewell.formula.tree import Apply, multiply, negate
from slopewell.problems import UnusableInput
from slopewell.units import dimension, quantity
from slopewell.units.constants import BOLTZMANN, COULOMB

FORMS = list(catalogue().values())
every_form = pytest.mark.parametrize("form", FORMS, ids=lambda form: form.name)

EXPECTED = """
lennard-jones mie lennard-jones-12-10 wall-9-3 buffered-14-7 morse buckingham exp-6 born-mayer
born-mayer-huggins born-lande coulomb yukawa damped-shifted-force-coulomb reaction-field zbl moliere
inverse-power gaussian-core wca fene harmonic quartic kihara universal-binding varshni tang-toennies hfd-b
stillinger-weber-pair dzugutov sutherland c60-girifalco
""".split()

SEPARATIONS = 200
DIGITS = 40
MOST_ULPS = 4


def example(form: Form) -> dict[str, Fraction]:
    """The example parameters in eV and ångström, with the constants a formula may use."""
    given = {parameter.name: quantity(parameter.example).value for parameter in form.parameters}
    return {"kB": BOLTZMANN, "ke": COULOMB} | given


def bound(form: Form) -> Tree:
    return bind(parse(form.formula), example(form))


def separations(form: Form) -> np.ndarray:
    start, end = (float(quantity(edge).value) for edge in (form.start, form.end))
    return np.linspace(start, end, SEPARATIONS)


def evaluator(form: Form) -> Callable[[Any], Any]:
    """The formula read by mpmath from its text, sharing no code with the package but the parameters."""
    python = re.sub(r"\d+\.?\d*(?:[eE][-+]?\d+)?", r"number('\g<0>')", re.sub(r"([A-Za-z_]\w*)", r"\1", form.formula))
    return python


def summands(tree: Tree) -> list[Tree]:
    """The terms of a tree after multiplying out, each a product of what is no sum."""
    match tree:
        case Apply(function="+"):
            return [term for part in tree.arguments for term in summands(part)]
        case Apply(function="negate"):
            return [negate(term) for term in summands(tree.arguments[0])]
        case Apply(function="*"):
            return [multiply(*factors) for factors in product(*map(summands, tree.arguments))]
        case Apply(function="/"):
            return [Apply("/", (term, tree.arguments[1])) for term in summands(tree.arguments[0])]
        case _:
            return [tree]
