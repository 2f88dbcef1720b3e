"""Problems: what an error says about an input."""

from __future__ import annotations

import pytest
from slopewell.problems import Problem, UnusableInput, nearest


def test_an_unusable_input_says_every_problem_with_its_place() -> None:
    problems = [Problem("interaction[1].cutoff", "The cutoff is negative."), Problem("", "No units.")]
    error = UnusableInput(problems, file="argon.toml")
    assert str(error) == "interaction[1].cutoff: The cutoff is negative.; No units."
    assert error.problems == tuple(problems)
    assert error.file == "argon.toml"


def test_an_unusable_input_can_be_caught_as_a_value_error() -> None:
    with pytest.raises(ValueError, match="No units"):
        raise UnusableInput([Problem("", "No units.")])


@pytest.mark.parametrize(
    ("name", "known", "said"),
    [
        ("sigm", ["sigma", "epsilon"], 'Did you mean "sigma"? Known here: epsilon, sigma.'),
        ("zzz", ["sigma", "epsilon"], "Known here: epsilon, sigma."),
        ("sigma", [], "None is known here."),
    ],
)
def test_the_nearest_known_name_is_proposed(name: str, known: list[str], said: str) -> None:
    assert nearest(name, known) == said
