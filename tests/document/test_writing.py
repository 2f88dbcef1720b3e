"""Documents as TOML text: what is written reads back as it was."""

from __future__ import annotations

import tomllib
from decimal import Decimal
from typing import Any

import pytest
from documentation import ROOT
from hypothesis import given
from hypothesis import strategies as st
from slopewell.document.writing import toml

values = st.recursive(
    st.text(st.characters(exclude_categories=["Cs"]), max_size=8)
    | st.integers(-(2**60), 2**60)
    | st.booleans()
    | st.decimals(allow_nan=False, allow_infinity=False, places=6, min_value=-(10**9), max_value=10**9)
    | st.sampled_from([Decimal("1E-30"), Decimal("2.5E+40"), Decimal(7)]),
    lambda inner: (
        st.lists(inner, max_size=3)
        | st.dictionaries(st.text(st.characters(exclude_categories=["Cs"]), max_size=6), inner, max_size=3)
    ),
    max_leaves=12,
)


def same(one: Any, other: Any) -> bool:
    if isinstance(one, dict):
        return isinstance(other, dict) and one.keys() == other.keys() and all(same(one[k], other[k]) for k in one)
    if isinstance(one, list):
        return isinstance(other, list) and len(one) == len(other) and all(map(same, one, other))
    return bool(one == other) and type(one) is type(other)


@given(st.dictionaries(st.text(st.characters(exclude_categories=["Cs"]), max_size=6), values, max_size=5))
def test_what_is_written_reads_back(data: dict[str, Any]) -> None:
    assert same(data, tomllib.loads(toml(data), parse_float=Decimal))


@pytest.mark.parametrize("path", sorted(ROOT.glob("samples/**/*.toml")), ids=lambda path: path.name)
def test_every_sample_reads_back(path: Any) -> None:
    data = tomllib.loads(path.read_text(encoding="utf-8"), parse_float=Decimal)
    assert same(data, tomllib.loads(toml(data), parse_float=Decimal))
