"""Read the text of a document to plain data, with decimals kept exact and the line of every key."""

from __future__ import annotations

import hashlib
import json
import re
import tomllib
from dataclasses import dataclass
from decimal import Decimal
from pathlib import Path
from typing import Any

from ..problems import Problem, UnusableInput

LARGEST_FILE = 50_000_000
LARGEST_EXPONENT = 300


@dataclass(frozen=True, slots=True)
class Source:
    """A file read: its data with decimals as ``Decimal``, its text, and the line of each key path."""

    file: str
    text: str
    sha256: str
    data: dict[str, Any]
    lines: dict[str, int]

    def line(self, path: str) -> int | None:
        """Return the line of a key path, or that of the nearest key around it."""
        around = path
        while around and around not in self.lines:
            around = re.sub(r"(\.[^.\[]*|\[\d+\]|^[^.\[]*)$", "", around)
        return self.lines.get(around)


def read_source(path: str | Path) -> Source:
    """Read a TOML or JSON file.

    Raises
    ------
    UnusableInput
        If it can't be read, is not UTF-8, or is neither TOML nor JSON.
    """
    file = str(path)
    raw = _bytes(Path(path), file)
    return parse_source(_text(raw, file), file, hashlib.sha256(raw).hexdigest())


def parse_source(text: str, file: str, sha256: str) -> Source:
    """Return the source that a text is, such as one that a table stores.

    Raises
    ------
    UnusableInput
        If it is neither TOML nor JSON.
    """
    is_json = file.lower().endswith(".json") or text.lstrip()[:1] == "{"
    data = _json(text, file) if is_json else _toml(text, file)
    if not isinstance(data, dict):
        raise UnusableInput([Problem("", "The document is not a table of keys.", "Begin with schema = …")], file)
    if problems := _outsize_numbers(data, ""):
        raise UnusableInput(problems, file)
    return Source(file, text, sha256, data, {} if is_json else key_lines(text))


def _bytes(path: Path, file: str) -> bytes:
    try:
        if path.stat().st_size > LARGEST_FILE:
            raise UnusableInput([Problem("", "The file is larger than 50 MB.", "Is this a document?")], file)
        return path.read_bytes()
    except OSError as error:
        says = f"The file can't be read: {error.strerror or error}."
        raise UnusableInput([Problem("", says, "Check its name and permissions.")], file) from None


def _text(raw: bytes, file: str) -> str:
    try:
        return raw.decode("utf-8-sig").replace("\r\n", "\n")
    except UnicodeDecodeError as error:
        line = raw.count(b"\n", 0, error.start) + 1
        says = f"Byte {error.start} (0x{raw[error.start]:02x}) is not valid UTF-8."
        raise UnusableInput([Problem(f"line {line}", says, "Save the file as UTF-8.")], file) from None


def _decimal(literal: str) -> Decimal:
    return Decimal(literal.replace("_", ""))


def _toml(text: str, file: str) -> Any:
    try:
        return tomllib.loads(text, parse_float=_decimal)
    except tomllib.TOMLDecodeError as error:
        message = str(error)
        found = re.search(r" \(at (?:line (\d+), column (\d+)|end of document)\)", message)
        at = f"line {found[1]}, column {found[2]}" if found and found[1] else "end of the file"
        says = f"This is not valid TOML: {message[: found.start()] if found else message}."
        raise UnusableInput([Problem(at, says, "Mend the syntax there.", _line(text, found))], file) from None
    except (RecursionError, ValueError) as error:
        says = f"This is not valid TOML: {str(error)[:80] or 'it is nested too deeply'}."
        raise UnusableInput([Problem("", says, "Mend the syntax.")], file) from None


def _line(text: str, found: re.Match[str] | None) -> str:
    if not found or not found[1]:
        return ""
    lines = text.split("\n")
    number, column = int(found[1]), int(found[2])
    if number > len(lines) or len(lines[number - 1]) > 120:
        return ""
    return f"{lines[number - 1]}\n{' ' * (column - 1)}^"


def _refuse_constant(name: str) -> Any:
    raise ValueError(f"{name} is not a number of JSON")


def _once(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    """Return the table of key and value pairs, refusing a key that stands twice."""
    table: dict[str, Any] = {}
    for key, value in pairs:
        if key in table:
            raise ValueError(f"the key {key} stands twice in one table")
        table[key] = value
    return table


def _json(text: str, file: str) -> Any:
    try:
        return json.loads(text, parse_float=_decimal, parse_constant=_refuse_constant, object_pairs_hook=_once)
    except json.JSONDecodeError as error:
        at = f"line {error.lineno}, column {error.colno}"
        says = f"This is not valid JSON: {error.msg[0].lower()}{error.msg[1:]}."
        raise UnusableInput([Problem(at, says, "Mend the syntax there.")], file) from None
    except (RecursionError, ValueError) as error:
        says = f"This is not valid JSON: {str(error)[:80] or 'it is nested too deeply'}."
        raise UnusableInput([Problem("", says, "Mend the syntax.")], file) from None


def _outsize_numbers(value: Any, path: str) -> list[Problem]:
    """Find what no table could hold: infinities, numbers beyond the range of doubles, NUL characters."""
    if isinstance(value, dict):
        return [p for key, part in value.items() for p in _outsize_numbers(part, f"{path}.{key}" if path else key)]
    if isinstance(value, list):
        return [p for index, part in enumerate(value) for p in _outsize_numbers(part, f"{path}[{index}]")]
    if isinstance(value, str) and "\0" in value:
        return [Problem(path, "The text holds a NUL character, which no file format can store.", "Take it out.")]
    outsize = isinstance(value, Decimal) and (not value.is_finite() or abs(value.adjusted()) > LARGEST_EXPONENT)
    if outsize or (isinstance(value, int) and abs(value) > 10**LARGEST_EXPONENT):
        shown = str(value) if len(str(value)) < 30 else "This number"
        return [Problem(path, f"{shown} is not a finite number within ±1e300.", "Give a finite number.")]
    return []


HEADER = re.compile(r"\s*(\[\[?)\s*([^\[\]]+?)\s*\]\]?\s*(?:#.*)?$")
KEY = re.compile(r"""\s*("[^"]+"|'[^']+'|[A-Za-z0-9_-]+(?:\s*\.\s*[A-Za-z0-9_-]+)*)\s*=""")


def key_lines(text: str) -> dict[str, int]:
    """Return the line of every table header and key of a TOML text, by key path."""
    lines: dict[str, int] = {}
    counts: dict[str, int] = {}
    prefix = ""
    for number, line in enumerate(text.split("\n"), start=1):
        if header := HEADER.match(line):
            prefix = _header_path(header[2], header[1] == "[[", counts)
            lines.setdefault(prefix, number)
        elif key := KEY.match(line):
            name = re.sub(r"\s*\.\s*", ".", key[1]).strip("\"'")
            lines.setdefault(f"{prefix}.{name}" if prefix else name, number)
    return lines


def _header_path(name: str, is_array: bool, counts: dict[str, int]) -> str:
    path = ""
    parts = [part.strip().strip("\"'") for part in name.split(".")]
    for depth, part in enumerate(parts):
        path = f"{path}.{part}" if path else part
        if is_array and depth == len(parts) - 1:
            counts[path] = counts.get(path, -1) + 1
        if path in counts:
            path = f"{path}[{counts[path]}]"
    return path
