"""Values go into their places with every digit, and the changed data make a document of their own."""

from __future__ import annotations

import json
from decimal import Decimal
from typing import Any

import pytest
from ensembles import DOCUMENT, chosen
from hypothesis import given
from hypothesis import strategies as st
from slopewell.document import parse_source
from slopewell.ensemble.changes import applied, exact_json
from slopewell.ensemble.columns import find_column
from slopewell.problems import UnusableInput

DATA = parse_source(DOCUMENT, "pair.toml", "").data
COLUMNS = tuple(find_column(title, DATA) for title in ("A-A.epsilon", "A-A.sigma", "temperature"))
LEAVES = st.text() | st.booleans() | st.integers() | st.decimals(allow_nan=False, allow_infinity=False)
VALUES = st.recursive(LEAVES, lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(), inner, max_size=3))


def test_values_take_the_unit_of_their_column_and_leave_the_document_alone() -> None:
    before = exact_json(DATA)
    changed = applied(DATA, COLUMNS, chosen("0.0100", " 3.41 ", "310"))
    assert changed["interaction"][0]["parameters"] == {"epsilon": Decimal("0.0100"), "sigma": Decimal("3.41")}
    assert changed["temperature"] == "310 K"
    assert exact_json(DATA) == before


@pytest.mark.parametrize(
    ("cells", "at"),
    [
        (("1", "x", ""), ["line 2, column A-A.sigma", "line 2, column temperature"]),
        (("nan", "1_0", "310"), ["line 2, column A-A.epsilon", "line 2, column A-A.sigma"]),
        (("1", "2"), ["line 2"]),
    ],
)
def test_a_cell_that_holds_no_number_is_named(cells: tuple[str, ...], at: list[str]) -> None:
    with pytest.raises(UnusableInput) as error:
        applied(DATA, COLUMNS, chosen(*cells))
    assert [problem.at for problem in error.value.problems] == at


@given(VALUES)
def test_json_keeps_every_digit(value: Any) -> None:
    assert json.loads(exact_json(value), parse_float=Decimal) == value
