"""What a document means: mistakes of meaning, all in one go, and what is understood."""

from __future__ import annotations

import json
import tomllib
from fractions import Fraction
from pathlib import Path

import pytest
from documents import GRID, HEAD, LENNARD_JONES, SWITCH, UNITS, curve, problems, read, text
from slopewell.document import read_document

CUTOFF = "interaction[0].cutoff"
SECOND = f'[[interaction]]\nbetween = ["A", "A"]\n{LENNARD_JONES}'


def cut(at: str, start: str = "7") -> str:
    return text(cutoff=f'cutoff = {{ at = {at}, treatment = "switch", from = {start} }}\n')


def expecting(landmark: str, between: str) -> str:
    return text(between=between, cutoff=f"{SWITCH}expect = {{ {landmark} = {{ value = 1, within = 1 }} }}\n")


CASES = {
    "undeclared-species": (
        text(between='["A", "Z"]'),
        [("interaction[0].between", 'The species "Z" is not declared.')],
    ),
    "pair-twice": (
        text(cutoff=f"{SWITCH}{SECOND}"),
        [("interaction[1].between", "A-A is given twice: interaction[0] has it already.")],
    ),
    "pair-twice-the-other-way-round": (
        text(between='["A", "B"]', cutoff=SWITCH + SECOND.replace('"A", "A"', '"B", "A"')),
        [("interaction[1].between", "B-A is given twice: interaction[0] has it already.")],
    ),
    "two-pairs-of-one-name": (
        text(
            between='["A-B", "C"]',
            units=UNITS + "[species.A-B]\n[species.C]\n[species.B-C]\n",
            cutoff=SWITCH + SECOND.replace('"A", "A"', '"A", "B-C"') + SWITCH,
        ),
        [("interaction[1].between", "interaction[0] is called A-B-C too.")],
    ),
    "cutoff-beyond-the-grid": (
        cut("9.01"),
        [(f"{CUTOFF}.at", "The cutoff lies beyond the end of the grid.")],
    ),
    "cutoff-before-the-grid": (
        cut("2.5", "2"),
        [(f"{CUTOFF}.at", "The cutoff lies before the start of the grid.")],
    ),
    "switch-from-its-end": (
        cut("9", "9"),
        [(f"{CUTOFF}.from", "The switch must start above zero and before the cutoff.")],
    ),
    "switch-from-zero": (
        cut("9", "0"),
        [(f"{CUTOFF}.from", "The switch must start above zero and before the cutoff.")],
    ),
    "cutoff-in-another-dimension": (
        cut('"9 eV"'),
        [(f"{CUTOFF}.at", '"9 eV" is energy; length is expected.')],
    ),
    "grid-from-zero": (
        text(grid=GRID.replace("2.5", "0")),
        [("grid.from", "The grid must start above zero separation.")],
    ),
    "grid-backwards": (
        text(grid=GRID.replace("to = 9", "to = 2.5")),
        [("grid.to", "The grid ends before it starts.")],
    ),
    "no-grid": (text(grid=""), [("interaction[0]", "This interaction has no grid.")]),
    "tolerance-of-nothing": (
        text(grid=GRID + "tolerance = 0\n"),
        [("grid.tolerance", "A tolerance must be positive.")],
    ),
    "tolerance-in-another-dimension": (
        text(grid=GRID + 'force-tolerance = "1 eV"\n'),
        [("grid.force-tolerance", '"1 eV" is energy; energy/length is expected.')],
    ),
    "unknown-unit": (
        text(units=UNITS.replace('energy = "eV"', 'energy = "eW"')),
        [("units", '"eW" is not a unit (unknown: eW).')],
    ),
    "length-as-energy": (
        text(units=UNITS.replace('energy = "eV"', 'energy = "nm"')),
        [("units", '"nm" is not a unit of energy.')],
    ),
    "negative-mass": (
        text(units=UNITS.replace("40 dalton", "-40 dalton")),
        [("species.A.mass", "A mass must be positive.")],
    ),
    "mass-in-another-dimension": (
        text(units=UNITS.replace("40 dalton", "40 nm")),
        [("species.A.mass", '"40 nm" is length; mass is expected.')],
    ),
    "temperature-in-another-dimension": (
        text(head=HEAD.replace("100 K", "100 eV")),
        [("temperature", '"100 eV" is not a positive temperature in kelvin.')],
    ),
    "energy-scale-of-nothing": (
        text(head=HEAD + 'energy-scale = "0 eV"\n'),
        [("energy-scale", "An energy scale must be positive.")],
    ),
    "wavenumber-without-mass": (
        expecting("harmonic-wavenumber", '["A", "B"]'),
        [("interaction[0].expect.harmonic-wavenumber", "A wavenumber needs the masses of both species.")],
    ),
    "output-without-a-format": (
        text(outputs='[[output]]\nfile = "pair.txt"\n'),
        [("output[0].file", 'The ending of "pair.txt" names no format.')],
    ),
    "output-of-several": (
        text(
            cutoff=SWITCH + SECOND.replace('"A", "A"', '"A", "B"') + SWITCH,
            outputs='[[output]]\nfile = "{a}.csv"\n',
        ),
        [("output[0].file", '"{a}.csv" would hold only one of 2 interactions.')],
    ),
    "branches-without-end": (
        text('energy = "where(sin(1e6*r/s) > 0, e, 0*e)"\nparameters = { e = "1 eV", s = "1 angstrom" }\n'),
        [
            (
                "interaction[0].energy",
                "where, abs, min or max can't be resolved: the sides of a comparison can't be told apart.",
            )
        ],
    ),
}


@pytest.mark.parametrize(("document", "said"), CASES.values(), ids=CASES)
def test_a_mistake_of_meaning_is_said_with_its_place(
    document: str, said: list[tuple[str, str]], tmp_path: Path
) -> None:
    assert problems(document, tmp_path) == said


def test_all_mistakes_of_a_document_are_said_in_one_go(tmp_path: Path) -> None:
    document = text(
        LENNARD_JONES.replace("0.01", "-0.01"),
        between='["A", "Z"]',
        head=HEAD.replace("100 K", "100 eV"),
        units=UNITS.replace("40 dalton", "40 nm"),
        cutoff='cutoff = { at = 9, treatment = "switch", from = 9 }\n',
        outputs='[[output]]\nfile = "pair.txt"\n',
    )
    assert sorted(at for at, _ in problems(document, tmp_path)) == [
        "interaction[0].between",
        "interaction[0].cutoff.from",
        "interaction[0].parameters.epsilon",
        "output[0].file",
        "species.A.mass",
        "temperature",
    ]


def test_a_mistake_in_both_energy_and_grid_is_said_twice(tmp_path: Path) -> None:
    document = text('form = "lenard-jones"\n', grid=GRID.replace("2.5", "-1"))
    assert [at for at, _ in problems(document, tmp_path)] == ["interaction[0].form", "grid.from"]


def test_a_document_says_what_it_means(tmp_path: Path) -> None:
    document = read(text(head=HEAD + 'source = "Nowhere"\n'), tmp_path)
    (interaction,) = document.interactions
    potential = interaction.potential
    assert (document.title, document.source, document.purpose) == (
        "Argon-like pair for tests",
        "Nowhere",
        "dynamics",
    )
    assert (potential.name, potential.between, potential.form) == ("A-A", ("A", "A"), "lennard-jones")
    assert (potential.start, potential.end, potential.reach) == (Fraction(5, 2), 9, 9)
    assert (potential.temperature, potential.reduced_mass) == (100, 20)
    assert (interaction.grid.rows, interaction.grid.spacing) == (101, "separation")
    assert (potential.cutoff.start, potential.cutoff.continuity) == (7, 2)


def test_an_interaction_may_have_its_own_grid(tmp_path: Path) -> None:
    own = 'grid = { from = 3, to = 10, rows = 5, spacing = "inverse" }\n'
    (interaction,) = read(text(cutoff=SWITCH + own), tmp_path).interactions
    assert (interaction.grid.start, interaction.grid.rows, interaction.grid.spacing) == (3, 5, "inverse")
    assert interaction.potential.end == 10


def test_a_stated_force_is_a_curve_beside_the_energy(tmp_path: Path) -> None:
    stated = 'energy = "c/r"\nforce = "c/r^2"\nparameters = { c = "2 eV angstrom" }\n'
    (interaction,) = read(text(stated), tmp_path).interactions
    assert interaction.potential.stated_force == curve("c/r^2", Fraction(5, 2), 9, c=2)


def test_values_of_expectations_stay_in_the_documents_units(tmp_path: Path) -> None:
    stated = 'expect = { well-depth = { value = 0.01, within = 0.001, of = "treated" } }\n'
    ((expectation,),) = [i.expectations for i in read(text(cutoff=SWITCH + stated), tmp_path).interactions]
    assert (expectation.landmark, expectation.value, expectation.within) == ("well-depth", 0.01, 0.001)
    assert expectation.treated


def test_json_means_the_same_as_toml(tmp_path: Path) -> None:
    document = text(outputs='[[output]]\nfile = "pair.h5"\nunits = { energy = "K", length = "nm" }\n')
    (tmp_path / "pair.json").write_text(json.dumps(tomllib.loads(document)))
    one, other = read(document, tmp_path), read_document(tmp_path / "pair.json")
    assert (one.interactions, one.outputs, one.units) == (other.interactions, other.outputs, other.units)
