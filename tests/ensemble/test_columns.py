"""Which value of the document a column stands for."""

from __future__ import annotations

import pytest
from slopewell.ensemble.columns import find_column
from slopewell.problems import UnusableInput

DATA = {
    "title": "Pair",
    "temperature": "300 K",
    "species": {"A": {"charge": 1}, "B": {"mass": "40 dalton"}},
    "interaction": [
        {"between": ["A", "A"], "parameters": {"epsilon": "0.01 eV", "sigma": 3.4}},
        {
            "between": ["A", "B"],
            "term": [{"parameters": {"A": "5 eV", "rho": 0.3}}, {"parameters": {"A": "9 eV"}}],
            "cutoff": {"at": "9 angstrom"},
        },
    ],
}


@pytest.mark.parametrize(
    ("title", "path", "unit"),
    [
        ("A-A.sigma", ("interaction", 0, "parameters", "sigma"), ""),
        ("A-A.epsilon", ("interaction", 0, "parameters", "epsilon"), "eV"),
        (" A-A.epsilon  [kJ/mol] ", ("interaction", 0, "parameters", "epsilon"), "kJ/mol"),
        ("A-B.rho", ("interaction", 1, "term", 0, "parameters", "rho"), ""),
        ("A-B.term[1].A", ("interaction", 1, "term", 1, "parameters", "A"), "eV"),
        ("A-B.cutoff.at", ("interaction", 1, "cutoff", "at"), "angstrom"),
        ("interaction[0].parameters.sigma", ("interaction", 0, "parameters", "sigma"), ""),
        ("temperature", ("temperature",), "K"),
        ("species.A.charge", ("species", "A", "charge"), ""),
    ],
)
def test_a_title_names_a_value_and_its_unit(title: str, path: tuple[str | int, ...], unit: str) -> None:
    found = find_column(title, DATA)
    assert (found.path, found.unit) == (path, unit)


@pytest.mark.parametrize(
    ("title", "says", "remedy"),
    [
        ("A-A.epsilom", 'The document states no value "A-A.epsilom".', 'Did you mean "A-A.epsilon"?'),
        ("A-B.A", '"A-B.A" may mean 2 values of the document.', "Write one of: interaction[1].term[0]"),
        ("A-A.epsilon [nm]", "[nm] can't be the unit of A-A.epsilon, which", "Give it in a unit"),
    ],
)
def test_a_title_that_names_no_single_value_is_refused(title: str, says: str, remedy: str) -> None:
    with pytest.raises(UnusableInput) as error:
        find_column(title, DATA)
    (problem,) = error.value.problems
    assert problem.says.startswith(says)
    assert problem.remedy.startswith(remedy)
