"""The catalogue: complete, consistent, and every form right to a few units in the last place."""

from __future__ import annotations

import re
import tomllib
from collections.abc import Callable
from fractions import Fraction
from itertools import product
from typing import Any

import mpmath
import numpy as np
import pytest
from slopewell.forms import Form, catalogue, form, paste_block
from slopewell.formula import Tree, bind, names, parse
from slopewell.formula.branches import resolve
from slopewell.formula.dimensions import dimension as dimension_of
from slopewell.formula.pairs import Pair
from slopewell.formula.parse import CONSTANTS
from slopewell.formula.taylor import accurate_derivatives, derivatives
from slopewell.formula.tree import Apply, multiply, negate
from slopewell.problems import UnusableInput
from slopewell.units import dimension, quantity
from slopewell.units.constants import BOLTZMANN, COULOMB

FORMS = catalogue().values()
every_form = pytest.mark.parametrize("form", FORMS, ids=lambda form: form.name)

WANTED = {
    *("lennard-jones", "mie", "lennard-jones-12-10", "wall-9-3", "buffered-14-7", "kihara", "sutherland"),
    *("inverse-power", "born-mayer", "buckingham", "exp-6", "tang-toennies", "hfd-b", "morse", "varshni"),
    *("universal-binding", "harmonic", "quartic", "fene", "stillinger-weber-pair", "dzugutov", "coulomb"),
    *("yukawa", "damped-shifted-force-coulomb", "reaction-field", "born-lande", "born-mayer-huggins", "zbl"),
    *("moliere", "wca", "gaussian-core", "c60-girifalco"),
}

SEPARATIONS = 200
MOST_UNITS = 4
"""Units in the last place of the largest term by which a form may be off."""


def values_of(form: Form, given: dict[str, str] | None = None) -> dict[str, Fraction]:
    """Parameters in eV and ångström, the examples where none is given, and the constants."""
    texts = {parameter.name: parameter.example for parameter in form.parameters} | (given or {})
    return {"kB": BOLTZMANN, "ke": COULOMB} | {name: quantity(text).value for name, text in texts.items()}


def bounds(form: Form) -> tuple[Fraction, Fraction]:
    return quantity(form.start).value, quantity(form.end).value


def paired(tree: Tree, r: np.ndarray, order: int) -> list[np.ndarray]:
    return [row.rounded() for row in accurate_derivatives(tree, Pair(r, np.zeros_like(r)), order)]


def test_the_catalogue_has_every_form() -> None:
    assert WANTED.issubset(catalogue())


@every_form
def test_a_form_says_what_it_is(form: Form) -> None:
    assert re.fullmatch(r"[a-z0-9]+(-[a-z0-9]+)*", form.name)
    assert form.title
    assert form.about.endswith(".")
    assert re.search(r"\d{4}", form.source), "a source has a year"


@every_form
def test_a_form_declares_just_the_parameters_it_uses(form: Form) -> None:
    used = names(parse(form.formula)) - {"r", *CONSTANTS}
    declared = [parameter.name for parameter in form.parameters]
    assert sorted(declared) == sorted(used)
    assert all(parameter.meaning for parameter in form.parameters)


@every_form
def test_a_form_is_an_energy(form: Form) -> None:
    known = {parameter.name: dimension(parameter.dimension) for parameter in form.parameters}
    known |= {"r": dimension("length"), "pi": dimension("1"), "ke": dimension("energy length")}
    known |= {"kB": dimension("energy temperature^-1")}
    pure = {p.name: quantity(p.example).value for p in form.parameters if p.dimension == "1"}
    assert dimension_of(parse(form.formula), form.formula, known, pure) == dimension("energy")


@every_form
def test_examples_and_defaults_fit_their_dimension_and_bounds(form: Form) -> None:
    for parameter in form.parameters:
        for text in filter(None, (parameter.example, parameter.default)):
            stated = quantity(text)
            assert stated.dimension == dimension(parameter.dimension), parameter.name
            assert parameter.violated(stated.value) == "", parameter.name
    start, end = bounds(form)
    assert 0 < start < end
    assert {quantity(form.start).dimension, quantity(form.end).dimension} == {dimension("length")}


@every_form
def test_a_form_can_be_pasted_into_a_document(form: Form) -> None:
    (interaction,) = tomllib.loads(paste_block(form))["interaction"]
    assert interaction["form"] == form.name
    pasted = {name: quantity(str(value)).value for name, value in interaction["parameters"].items()}
    assert pasted == {parameter.name: quantity(parameter.example).value for parameter in form.parameters}


TOKEN = re.compile(r"(?P<name>[A-Za-z_]\w*)|(?P<number>\d+\.?\d*(?:[eE][-+]?\d+)?)|(?P<power>\^)")
MPMATH = {name: getattr(mpmath, name) for name in ("exp", "log", "sqrt", "cos", "erfc", "pi", "mpf")} | {
    "where": lambda holds, then, otherwise: then if holds else otherwise,
    "tang_toennies": lambda n, x: mpmath.gammainc(n + 1, 0, x, regularized=True),
}


def with_mpmath(form: Form) -> Callable[[Any], Any]:
    """The formula as mpmath reads its text, which shares nothing with the package but the parameters."""
    spelled = {"name": "{}", "number": "mpf('{}')", "power": "**"}
    code = TOKEN.sub(lambda found: spelled[str(found.lastgroup)].format(found[0]), form.formula)
    known = {name: mpmath.mpf(value.numerator) / value.denominator for name, value in values_of(form).items()}
    return eval(f"lambda r: {code}", MPMATH | known)  # the text is the catalogue's own


def summands(tree: Tree) -> list[Tree]:
    """The terms of a tree after multiplying out."""
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


@every_form
def test_energy_and_slope_are_right_to_4_units_in_the_last_place_of_the_largest_term(form: Form) -> None:
    start, end = bounds(form)
    tree = bind(parse(form.formula), values_of(form))
    with mpmath.workdps(40):
        right = with_mpmath(form)
        for piece in resolve(tree, start, end):
            share = float((piece.end - piece.start) / (end - start))
            r = np.linspace(float(piece.start), float(piece.end), 2 + round(share * SEPARATIONS))[1:-1]
            largest = np.max([np.abs(derivatives(term, r, 1)) for term in summands(piece.tree)], axis=0)
            for k, row in enumerate(paired(piece.tree, r, 1)):
                wanted = [mpmath.diff(right, mpmath.mpf(float(x)), k) for x in r]
                errors = [abs(float(mpmath.mpf(float(x)) - y)) for x, y in zip(row, wanted, strict=True)]
                assert np.all(np.array(errors) <= MOST_UNITS * np.spacing(largest[k]))


def curve(name: str, **given: str) -> Tree:
    return bind(parse(form(name).formula), values_of(form(name), given))


REDUCED = {"epsilon": "1 eV", "sigma": "1 angstrom"}


@pytest.mark.parametrize(
    ("entry", "r"),
    [
        ("T02-007", 0.8),
        ("T02-009", 1.0),
        ("T02-010", 1.1),
        ("T02-012", 2.0),
        ("T02-013", 2.5),
        ("T02-015", 3.5),
        ("T02-016", 4.0),
    ],
)
@pytest.mark.parametrize("name", ["lennard-jones", "mie"])
def test_lennard_jones_has_its_published_energy_and_force(
    published: Callable[[str], Any], name: str, entry: str, r: float
) -> None:
    # M. P. Allen and D. J. Tildesley, Computer Simulation of Liquids, 2nd ed. (Oxford 2017)
    exponents = {"n": "12", "m": "6"} if name == "mie" else {}
    energy, slope = paired(curve(name, **REDUCED, **exponents), np.array([r]), 1)
    assert energy[0] == pytest.approx(published(entry).part("U"), rel=1e-13)
    assert -slope[0] == pytest.approx(published(entry).part("F"), rel=1e-13)


def test_lennard_jones_has_its_published_landmarks(published: Callable[[str], Any]) -> None:
    # M. P. Allen and D. J. Tildesley, Computer Simulation of Liquids, 2nd ed. (Oxford 2017)
    landmarks = np.array([published("T02-001").number, published("T02-004").number])
    rows = paired(curve("lennard-jones", **REDUCED), landmarks, 3)
    assert rows[0] == pytest.approx([-1, published("T02-006").number], rel=1e-13)
    assert rows[1][0] == pytest.approx(0, abs=1e-13)
    assert rows[2][1] == pytest.approx(0, abs=1e-12)
    assert rows[3][0] == pytest.approx(published("T02-003").number, rel=1e-13)


@pytest.mark.parametrize(
    ("entry", "first", "second", "r"),
    [
        ("T07-010", 14, 14, 0.5),
        ("T07-012", 14, 14, 2.0),
        ("T07-013", 18, 29, 0.5),
        ("T07-015", 18, 29, 2.0),
        ("T07-016", 26, 26, 0.5),
        ("T07-018", 26, 26, 2.0),
        ("T07-019", 74, 74, 0.5),
        ("T07-021", 74, 74, 2.0),
        ("T07-022", 1, 1, 0.5),
        ("T07-024", 1, 1, 2.0),
        ("T07-025", 6, 14, 0.5),
        ("T07-027", 6, 14, 2.0),
    ],
)
def test_zbl_has_its_published_energy_and_force(
    published: Callable[[str], Any], entry: str, first: int, second: int, r: float
) -> None:
    # J. F. Ziegler, J. P. Biersack and U. Littmark, The Stopping and Range of Ions in Solids (Pergamon 1985);
    # computed from coefficients that are from memory
    energy, slope = paired(curve("zbl", Z1=str(first), Z2=str(second)), np.array([r]), 1)
    assert energy[0] == pytest.approx(published(entry).part("U"), rel=1e-10)
    assert -slope[0] == pytest.approx(published(entry).part("F"), rel=1e-10)


def test_the_zbl_screening_starts_at_one_and_falls_as_published(published: Callable[[str], Any]) -> None:
    # Ziegler, Biersack and Littmark (1985), as above; r = x with a = 1 needs this bohr_radius
    unit_screening = {"Z1": "1", "Z2": "1", "bohr_radius": f"{2 / 0.88534:.17g} angstrom"}
    x = np.array([1e-9, 0.1, 1, 5, 10])
    (energy,) = paired(curve("zbl", **unit_screening), x, 0)
    wanted = [published(entry).number for entry in ("T07-001", "T07-003", "T07-004", "T07-006", "T07-007")]
    assert energy * x / float(COULOMB) == pytest.approx(wanted, rel=1e-8)


def test_an_unknown_form_is_answered_with_the_nearest() -> None:
    with pytest.raises(UnusableInput, match='There is no form "lenard-jones"') as caught:
        form("lenard-jones")
    assert caught.value.problems[0].remedy.startswith('Did you mean "lennard-jones"?')


@pytest.mark.parametrize(
    ("name", "parameter", "inside", "outside", "broken"),
    [
        ("lennard-jones", "epsilon", Fraction(1, 10**9), Fraction(0), "above 0"),
        ("exp-6", "alpha", Fraction(71, 10), Fraction(7), "above 7"),
        ("reaction-field", "epsilon_outside", Fraction(1), Fraction(999, 1000), "at least 1"),
        ("hfd-b", "beta", Fraction(0), Fraction(1, 1000), "at most 0"),
    ],
)
def test_a_value_out_of_bounds_is_told(
    name: str, parameter: str, inside: Fraction, outside: Fraction, broken: str
) -> None:
    (bounded,) = (p for p in form(name).parameters if p.name == parameter)
    assert bounded.violated(inside) == ""
    assert bounded.violated(outside) == broken
