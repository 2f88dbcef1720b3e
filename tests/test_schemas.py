"""The published schemas: valid themselves, and every field of them explained."""

from __future__ import annotations

import pytest
from documentation import ROOT, fields
from jsonschema import Draft202012Validator
from slopewell.schemas import NAMES, schema

every_schema = pytest.mark.parametrize("name", NAMES)


@every_schema
def test_a_schema_is_a_valid_schema(name: str) -> None:
    Draft202012Validator.check_schema(schema(name))
    assert schema(name)["$id"] == f"slopewell/{name}/1"


@every_schema
def test_every_field_is_explained(name: str) -> None:
    listed = list(fields(name))
    assert listed
    assert [field.path for field in listed if not field.meaning] == []


@every_schema
def test_the_page_has_every_field(name: str) -> None:
    page = (ROOT / "schemas" / "README.md").read_text(encoding="utf-8")
    assert [field.path for field in fields(name) if f"| `{field.path}` |" not in page] == []


def test_fields_are_found_at_every_depth() -> None:
    # Counted by another walk: every key under "properties" anywhere in the schema.
    def keys(part: object) -> set[str]:
        if isinstance(part, list):
            return set().union(*map(keys, part))
        if not isinstance(part, dict):
            return set()
        own = part.get("properties")
        found = {key for key, value in own.items() if value is not False} if isinstance(own, dict) else set()
        return found.union(*map(keys, part.values()))

    for name in NAMES:
        assert keys(schema(name)) <= {part for f in fields(name) for part in f.path.replace("[]", "").split(".")}
