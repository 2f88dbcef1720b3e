"""Write the data of a document as TOML, every number with all its digits."""

from __future__ import annotations

import json
import re
from collections.abc import Iterator, Mapping
from decimal import Decimal
from typing import Any

BARE = re.compile(r"[A-Za-z0-9_-]+")
INLINE = ("parameters", "cutoff", "grid", "join", "units", "expect", "standard-errors")
"""Tables that are written on one line where they stand in a list of tables."""


def toml(data: Mapping[str, Any]) -> str:
    """Return data as TOML that reads back as the same data.

    Parameters
    ----------
    data : mapping
        Of texts, numbers, truth values, lists and mappings, as a document is read.
    """
    return "\n".join(_table(data, "")).strip() + "\n"


def _table(table: Mapping[str, Any], path: str, inside: bool = False) -> Iterator[str]:
    """Yield the lines of a table: its own keys first, then tables and lists of tables."""
    later = {key: value for key, value in table.items() if _apart(key, value, inside)}
    for key, value in table.items():
        if key not in later:
            yield f"{_key(key)} = {_value(value)}"
    for key, value in later.items():
        place = f"{path}.{_key(key)}" if path else _key(key)
        if isinstance(value, Mapping):
            yield from ("", f"[{place}]", *_table(value, place, inside))
        else:
            for entry in value:
                yield from ("", f"[[{place}]]", *_table(entry, place, inside=True))


def _apart(key: str, value: Any, inside: bool) -> bool:
    if isinstance(value, Mapping):
        return not (inside and key in INLINE)
    return isinstance(value, list) and bool(value) and all(isinstance(entry, Mapping) for entry in value)


def _key(key: str) -> str:
    return key if BARE.fullmatch(key) else _text(key)


def _text(value: str) -> str:
    # A basic string of TOML is one of JSON, except that TOML wants delete escaped.
    return json.dumps(value, ensure_ascii=False).replace("\x7f", "\\u007f")


def _value(value: Any) -> str:
    match value:
        case bool():
            return "true" if value else "false"
        case str():
            return _text(value)
        case Decimal():
            text = str(value).replace("E+", "e").replace("E", "e")
            return text if any(mark in text for mark in ".e") else f"{text}.0"
        case Mapping():
            return "{ " + ", ".join(f"{_key(k)} = {_value(v)}" for k, v in value.items()) + " }" if value else "{}"
        case list() | tuple():
            return "[" + ", ".join(_value(entry) for entry in value) + "]"
        case _:
            return repr(value)
