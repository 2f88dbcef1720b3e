from __future__ import annotations

import json
import tomllib

import pytest
from slopewell.document import Document
from slopewell.reports.stated import StatedParameter, stated_interactions


def test_parameters_carry_their_units_and_meaning(document: Document) -> None:
    stated = stated_interactions(document.text)
    assert stated["A-A"].parameters == (
        StatedParameter("epsilon", "5.0 kJ/mol", "well depth"),
        StatedParameter("sigma", "0.47 nm", "separation where the potential is zero"),
    )
    assert stated["A-B"].parameters[2] == StatedParameter("C", "0.03 kJ/mol nm⁶")


def test_the_cutoff_in_words_and_in_angstrom(document: Document) -> None:
    stated = stated_interactions(document.text)["A-A"]
    assert stated.treatment == "switched off between 0.9 nm and 1.2 nm, with 2 continuous derivatives"
    assert (stated.cutoff, stated.switch_start) == pytest.approx((12.0, 9.0))


def test_the_grid_in_words(document: Document) -> None:
    grid = stated_interactions(document.text)["A-B"].grid
    assert grid == "401 rows from 0.25 nm to 1.2 nm, even in separation, read as cubic-hermite"


def test_json_says_the_same(document: Document) -> None:
    as_json = json.dumps(tomllib.loads(document.text))
    assert stated_interactions(as_json)["A-B"] == stated_interactions(document.text)["A-B"]


@pytest.mark.parametrize("text", ["", "no document", "{", '[units]\nenergy = "nm"\nlength = "nm"', "interaction = 1"])
def test_a_text_that_is_no_document_states_nothing(text: str) -> None:
    assert stated_interactions(text) == {}
