"""The generated parts of README.md, DEVELOPERS.md and schemas/README.md.

``python tests/documentation.py`` writes them anew; tests hold the files against these functions.
"""

from __future__ import annotations

import contextlib
import io
import json
import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import partial
from importlib import import_module
from importlib.util import find_spec
from pathlib import Path
from typing import Any

from layers import LAYERS
from slopewell.checks import Check, register
from slopewell.cli import main
from slopewell.potential.mixing import RULES
from slopewell.schemas import NAMES, schema

ROOT = Path(__file__).parent.parent
KINDS = {
    "object": "table",
    "array": "list",
    "string": "text",
    "integer": "whole number",
    "boolean": "true or false",
}


@dataclass(frozen=True)
class Field:
    """A field of a schema: where it stands, what it takes, whether it must be there, what it means."""

    path: str
    takes: str
    needed: str
    meaning: str


def registers() -> dict[str, tuple[Check[Any], ...]]:
    """Every register of checks, by what it looks at."""
    return {
        name.removesuffix("_CHECKS").lower(): value
        for name, value in vars(register).items()
        if name.endswith("_CHECKS")
    }


def checks() -> str:
    """The list of checks, by what they look at."""
    parts = []
    for subject, listed in registers().items():
        rows = [f"| `{check.name}` | {check.title}. |" for check in listed]
        parts.append("\n".join([f"| check of a {subject} | what holds where it finds nothing |", "|---|---|", *rows]))
    return "\n\n".join(parts)


def mixing() -> str:
    """The mixing rules, the forms that each holds for, and where it was published."""
    rows = [
        f"| `{rule.name}` | {', '.join(f'`{form}`' for form in rule.mixes)} | {rule.source} |"
        for rule in RULES.values()
    ]
    return "\n".join(["| mixing rule | holds for | source |", "|---|---|---|", *rows])


def layers() -> str:
    """The floors of the package, from the ground up."""
    rows = [f"| `{name}` | {_first_line(name)} |" for name in present()]
    return "\n".join(["| floor | what it holds |", "|---|---|", *rows])


def _first_line(name: str) -> str:
    return (import_module(f"slopewell.{name}").__doc__ or "").partition("\n")[0]


def present() -> list[str]:
    """The floors that there are."""
    return [name for name in LAYERS if (spec := find_spec(f"slopewell.{name}")) and spec.origin]


def fields(name: str) -> Iterator[Field]:
    """Every field of a schema, in its order."""
    root = schema(name)
    yield from _fields(root, "", root)


def _fields(part: dict[str, Any], path: str, root: dict[str, Any]) -> Iterator[Field]:
    needed = set(part.get("required", ())) | _one_of(part)
    for key, given in part.get("properties", {}).items():
        if given is not False:
            inner = _resolved(given, root)
            yield from _field(inner, f"{path}.{key}" if path else key, key in needed and _word(key, part), root)
    if isinstance(part.get("additionalProperties"), dict):
        inner = _resolved(part["additionalProperties"], root)
        yield from _field(inner, f"{path}.NAME" if path else "NAME", "", root)


def _field(part: dict[str, Any], path: str, needed: str | bool, root: dict[str, Any]) -> Iterator[Field]:
    default = f"default {_shown(part['default'])}" if "default" in part else ""
    yield Field(path, _takes(part), needed or default, part.get("description", ""))
    yield from _fields(part, path, root)
    if part.get("type") == "array":
        yield from _fields(_resolved(part.get("items", {}), root), f"{path}[]", root)


def _one_of(part: dict[str, Any]) -> set[str]:
    return {key for rule in ("oneOf", "anyOf") for choice in part.get(rule, ()) for key in choice.get("required", ())}


def _word(key: str, part: dict[str, Any]) -> str:
    if key in part.get("required", ()):
        return "needed"
    others = " or ".join(f"`{name}`" for name in sorted(_one_of(part) - {key}))
    return f"needed, or {others}"


def _resolved(part: dict[str, Any], root: dict[str, Any]) -> dict[str, Any]:
    if "$ref" not in part:
        return part
    target = root["$defs"][part["$ref"].rsplit("/", 1)[-1]]
    return {**target, **{key: value for key, value in part.items() if key != "$ref"}}


def _takes(part: dict[str, Any]) -> str:
    if "const" in part:
        return f"`{part['const']}`"
    if "enum" in part:
        return ", ".join(_shown(value) for value in part["enum"])
    kinds = part.get("type", "anything")
    return " or ".join(KINDS.get(kind, kind) for kind in ([kinds] if isinstance(kinds, str) else kinds))


def _shown(value: Any) -> str:
    return "empty" if value in ("", []) else f"`{value if isinstance(value, str) else json.dumps(value)}`"


def schema_tables() -> str:
    """A table of every field of every schema."""
    parts = []
    for name in NAMES:
        known = schema(name)
        rows = [f"| `{f.path}` | {f.takes} | {f.needed} | {f.meaning.replace('|', '/')} |" for f in fields(name)]
        head = [f"## {known['title']}", "", f"`slopewell schema {name}`: {known['description']}", ""]
        parts.append("\n".join([*head, "| field | takes | needed | meaning |", "|---|---|---|---|", *rows]))
    return "\n\n".join(parts)


def shown(command: str) -> str:
    """What the terminal shows of a command on a sample."""
    printed = io.StringIO()
    with contextlib.chdir(ROOT), contextlib.redirect_stdout(printed):
        main(command.split())
    return f"```text\n{printed.getvalue()}```"


SHOWN = (
    "check samples/faulty/first-row-energy.toml",
    "check samples/faulty/energy-plus-length.toml",
    "plan samples/faulty/table-error.toml",
)
GENERATED: dict[str, dict[str, Callable[[], str]]] = {
    "README.md": {"checks": checks, "mixing": mixing} | {command: partial(shown, command) for command in SHOWN},
    "DEVELOPERS.md": {"layers": layers},
    "schemas/README.md": {"fields": schema_tables},
}
"""File, name of the generated part, and what generates it."""


def generated(text: str, file: str) -> str:
    """Return the text of a file with its generated parts made anew."""
    for name, make in GENERATED[file].items():
        begin, end = f"<!-- generated: {name} -->\n", "\n<!-- end -->"
        pattern = re.compile(f"{re.escape(begin)}.*?{re.escape(end)}", re.DOTALL)
        assert pattern.search(text), f"{file} has no part {name}"
        block = f"{begin}\n{make()}\n{end}"
        text = pattern.sub(lambda _: block, text)  # noqa: B023 (used at once)
    return text


if __name__ == "__main__":
    for file in GENERATED:
        path = ROOT / file
        path.write_text(generated(path.read_text(encoding="utf-8"), file), encoding="utf-8")
