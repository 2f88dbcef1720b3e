"""Form or formula of an interaction: every name, dimension and range is checked."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from documents import problems, read, text
from slopewell.problems import UnusableInput

PARAMETERS = "interaction[0].parameters"
ENERGY = "interaction[0].energy"
FORCE = "interaction[0].force"
EXP_6 = 'energy = "A*exp(-r/rho) - C/r^6"\n'
VALUES = 'parameters = { A = "9576 eV", rho = "0.27614 angstrom", C = "62.03 eV angstrom^6" }\n'

CASES = {
    "unknown-form": (
        'form = "lenard-jones"\n',
        [("interaction[0].form", 'There is no form "lenard-jones".')],
    ),
    "unknown-parameter": (
        'form = "lennard-jones"\nparameters = { epsilon = 0.01, sigma = 3.4, sigm = 1 }\n',
        [(f"{PARAMETERS}.sigm", 'lennard-jones has no parameter "sigm".')],
    ),
    "missing-parameter": (
        'form = "lennard-jones"\nparameters = { epsilon = 0.01 }\n',
        [(PARAMETERS, 'lennard-jones needs the parameter "sigma" (separation where the potential is zero).')],
    ),
    "out-of-range": (
        'form = "lennard-jones"\nparameters = { epsilon = -0.01, sigma = 3.4 }\n',
        [(f"{PARAMETERS}.epsilon", "epsilon (well depth) must be above 0.")],
    ),
    "other-dimension": (
        'form = "lennard-jones"\nparameters = { epsilon = "0.01 eV", sigma = "3.4 eV" }\n',
        [(f"{PARAMETERS}.sigma", '"3.4 eV" is energy; length is expected.')],
    ),
    "unknown-unit": (
        'form = "lennard-jones"\nparameters = { epsilon = "0.01 eW", sigma = 3.4 }\n',
        [(f"{PARAMETERS}.epsilon", '"eW" is not a unit (unknown: eW).')],
    ),
    "name-without-value": (
        EXP_6 + 'parameters = { A = "9576 eV", C = "62.03 eV angstrom^6" }\n',
        [(ENERGY, '"rho" has no value.')],
    ),
    "unused": (
        EXP_6 + VALUES.replace("}", ", D = 1 }"),
        [(f"{PARAMETERS}.D", 'The parameter "D" is not used by the formula.')],
    ),
    "reserved-name": (
        EXP_6 + VALUES.replace("}", ", pi = 3 }"),
        [(f"{PARAMETERS}.pi", '"pi" has a meaning of its own in formulas.')],
    ),
    "energy-of-another-dimension": (
        EXP_6 + VALUES.replace("angstrom^6", "angstrom^5"),
        [(ENERGY, "This operator joins energy and energy/length.")],
    ),
    "energy-that-is-a-number": (
        'energy = "1/(2 + 3)"\n',
        [(ENERGY, "The formula gives a pure number; energy is expected.")],
    ),
    "syntax": (
        'energy = "ke/r +"\n',
        [
            (
                ENERGY,
                "The formula can't be read from here on: an operator, a number, a name or a bracket is missing.",
            )
        ],
    ),
    "plain-number-in-a-formula": (
        EXP_6 + VALUES.replace('"9576 eV"', "9576"),
        [(ENERGY, "This operator joins a pure number and energy.")],
    ),
}


@pytest.mark.parametrize(("interaction", "said"), CASES.values(), ids=CASES)
def test_a_mistake_of_an_interaction_is_said(interaction: str, said: list[tuple[str, str]], tmp_path: Path) -> None:
    assert problems(text(interaction), tmp_path) == said


@pytest.mark.parametrize(
    ("force", "hint"),
    [
        ("r*(A/rho*exp(-r/rho) - 6*C/r^7)", "r·F (a virial)"),
        ("(A/rho*exp(-r/rho) - 6*C/r^7)/r", "F/r, or like dU/d(r²)"),
        ("A*rho/r^2*rho^2", "A force is minus the slope"),
    ],
)
def test_a_force_of_another_dimension_is_told_what_it_looks_like(force: str, hint: str, tmp_path: Path) -> None:
    with pytest.raises(UnusableInput) as caught:
        read(text(f'{EXP_6}force = "{force}"\n{VALUES}'), tmp_path)
    (problem,) = caught.value.problems
    assert problem.at == FORCE
    assert "energy/length is expected" in problem.says
    assert hint in problem.remedy


def test_a_mistake_in_a_formula_is_shown_with_a_caret_and_its_line(tmp_path: Path) -> None:
    with pytest.raises(UnusableInput) as caught:
        read(
            text(f"{EXP_6}{VALUES}".replace("C/r^6", "D/r^6").replace("C =", "D =").replace("A*", "B*")),
            tmp_path,
        )
    problem = caught.value.problems[0]
    assert problem.line == 12
    assert problem.excerpt.splitlines()[1].index("^") == problem.excerpt.splitlines()[0].index("B")


def test_a_plain_number_of_a_form_is_in_the_documents_units(tmp_path: Path) -> None:
    bare = [
        read(text(parameters), tmp_path).interactions[0].potential.bare
        for parameters in (
            'form = "lennard-jones"\nparameters = { epsilon = 0.01, sigma = 3.4 }\n',
            'form = "lennard-jones"\nparameters = { epsilon = "10 meV", sigma = "0.34 nm" }\n',
        )
    ]
    assert bare[0] == bare[1]


def test_a_default_of_a_form_is_taken_where_nothing_is_given(tmp_path: Path) -> None:
    given = 'form = "coulomb"\nparameters = { q1 = 1, q2 = -1 }\n'
    assert (
        read(text(given), tmp_path).interactions[0].potential.bare
        == read(text(given.replace("}", ", epsilon_r = 1 }")), tmp_path).interactions[0].potential.bare
    )


def test_a_form_is_a_formula_of_the_catalogue_and_nothing_more(tmp_path: Path) -> None:
    form = 'form = "buckingham"\nparameters = { A = 9576, rho = 0.27614, C = 62.03 }\n'
    own, known = (read(text(part), tmp_path).interactions[0].potential.bare for part in (EXP_6 + VALUES, form))
    r = np.linspace(2.5, 9, 20)
    assert np.array_equal(own.derivatives(r, 2), known.derivatives(r, 2))


def test_built_in_constants_need_no_parameter(tmp_path: Path) -> None:
    # e²/4πε₀ = 14.399645 eV Å (CODATA 2022), k_B in eV/K.
    interaction = 'energy = "ke*q^2/r + kB*temperature*(1 - 1)"\nparameters = { q = 2, temperature = "300 K" }\n'
    bare = read(text(interaction), tmp_path).interactions[0].potential.bare
    assert bare.derivatives(np.array([4.0]), 0)[0, 0] == pytest.approx(14.3996454787, rel=1e-9)


def test_kelvin_is_an_energy_except_where_the_key_says_temperature(tmp_path: Path) -> None:
    found = problems(text('energy = "kB*temperatur*r/r"\nparameters = { temperatur = "300 K" }\n'), tmp_path)
    assert found[0][0] == ENERGY
    assert "energy^2" in found[0][1]
