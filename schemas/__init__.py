"""The published JSON Schemas of documents, layouts, tables and reports."""

from __future__ import annotations

import json
from functools import cache
from importlib.resources import files
from typing import Any

NAMES = ("potential", "layout", "table", "report")


def text(name: str) -> str:
    """Return the text of a schema by its name."""
    return files(__package__).joinpath(f"{name}.schema.json").read_text(encoding="utf-8")


@cache
def schema(name: str) -> Any:
    """Return a schema by its name, parsed."""
    return json.loads(text(name))
