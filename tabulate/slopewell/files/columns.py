"""Read any text that is rows of columns, once the columns are named.

Blanks, tabs, commas and semicolons, Fortran exponents, comment and header lines, either line end, a byte
order mark and several blocks in one file are taken; what can't be read is shown with its line and column.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from ..problems import Problem, UnusableInput, nearest
from .quantities import QUANTITIES

Array = NDArray[np.float64]

COMMENTS = ("#", "!", ";", "//", "@")
PLAIN = b"0123456789+-.eE \t\r\n"
MARKS = (b"\xef\xbb\xbf", b"\xff\xfe", b"\xfe\xff")
"""Byte order marks."""
NUMBER = re.compile(r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[eEdD][+-]?\d+|[+-]\d+)?|[+-]?(?:nan|inf|infinity)", re.IGNORECASE)
SPLIT = re.compile(r"\s*[,;]\s*|\s+")
INLINE_COMMENT = re.compile(r"\s*(?:#|!|//).*$")
FORTRAN = re.compile(r"(?<=[\d.])(?:[dD]|(?=[+-]))(?=[+-]?\d)")
MOST_HEAD_ROWS = 3
"""Rows of numbers that may stand as a head before the columns begin."""


@dataclass(frozen=True, slots=True)
class Block:
    """A stretch of rows in a file: its first and last line, counted from 1, and the text before it."""

    first: int
    last: int
    head: str = ""


def check_names(names: Sequence[str]) -> None:
    """Refuse column names that are unknown, doubled, or too few to make a table.

    Raises
    ------
    UnusableInput
        With every problem.
    """
    problems = [
        Problem("--columns", f'"{name}" is no column.', nearest(name, QUANTITIES))
        for name in names
        if name not in QUANTITIES
    ]
    doubled = sorted({name for name in names if name != "skip" and names.count(name) > 1})
    problems += [Problem("--columns", f'"{name}" stands twice.', "Call one of them skip.") for name in doubled]
    if not {"separation", "separation-squared"} & set(names):
        problems.append(Problem("--columns", "No column holds the separation.", "Name one separation."))
    if not {"energy", "force", "slope", "force-over-separation"} & set(names):
        problems.append(Problem("--columns", "No column holds energy or force.", "Name one energy or force."))
    if problems:
        raise UnusableInput(problems)


def read_columns(path: Path, names: Sequence[str], block: int | None = None) -> dict[str, Array]:
    """Read the named columns of a text file.

    Parameters
    ----------
    path : Path
    names : sequence of str
        What each column holds, from left to right, by the names of ``QUANTITIES``.
    block : int, optional
        Which block of rows to read, from 1; needed where the file holds several.

    Returns
    -------
    dict of str to (n,) array
        Without those called ``skip`` and ``row``.

    Raises
    ------
    UnusableInput
        If the file can't be read, a row is no row of numbers, or there are several blocks and none is chosen.
    """
    check_names(names)
    raw = _bytes(path)
    numbers = None if block else _plain(path, raw, len(names))
    if numbers is None:
        lines = _text(raw).split("\n")
        place = next(index for index, name in enumerate(names) if name.startswith("separation"))
        chosen = _choose(blocks(lines, len(names), place), block, path)
        numbers = _numbers(lines, chosen, names, path)
    kept = {name: index for index, name in enumerate(names) if name not in ("skip", "row")}
    return {name: np.ascontiguousarray(numbers[:, index]) for name, index in kept.items()}


def _bytes(path: Path) -> bytes:
    try:
        return path.read_bytes()
    except OSError as error:
        says = f"The file can't be read: {error.strerror or error}."
        raise UnusableInput([Problem("", says, "Check its name and permissions.")], str(path)) from None


def _text(raw: bytes) -> str:
    wide = raw.startswith(MARKS[1:])
    text = raw.decode("utf-16", "replace") if wide else raw.removeprefix(MARKS[0]).decode("latin-1")
    return text.replace("\r\n", "\n").replace("\r", "\n") if "\r" in text else text


def _plain(path: Path, raw: bytes, count: int) -> Array | None:
    """Read a file of one block without anything unusual in it at full speed; None if it is not one."""
    if raw.startswith(MARKS):
        return None
    start = 0
    while (end := raw.find(b"\n", start)) >= 0 and not _is_row(line := raw[start:end].decode("latin-1"), count):
        if _is_like_row(line) and len(_tokens(line)) == count:
            return None
        start = end + 1
    body = raw[start:]
    separator = next((mark for mark in ",;" if mark.encode() in body[:2000]), None)
    if not body or body.translate(None, PLAIN + (separator or "").encode()):
        return None
    try:
        head = raw.count(b"\n", 0, start)
        # From a file by its name is the fastest way to read that NumPy has.
        numbers = np.loadtxt(path, skiprows=head, delimiter=separator, comments=None, ndmin=2, encoding="latin-1")
    except ValueError:
        return None
    # An empty line gives no row: then the rows may be several blocks.
    whole = numbers.shape == (body.rstrip().count(b"\n") + 1, count)
    return np.asarray(numbers, dtype=np.float64) if whole else None


def _tokens(line: str) -> list[str]:
    return [token for token in SPLIT.split(INLINE_COMMENT.sub("", line).strip().rstrip(",;")) if token]


def _is_row(line: str, count: int) -> bool:
    tokens = _tokens(line)
    return len(tokens) == count and all(NUMBER.fullmatch(token) for token in tokens)


def _is_like_row(line: str) -> bool:
    """Whether a line begins with a number: meant as a row, whatever else stands in it."""
    stripped = line.strip()
    return not stripped.startswith(COMMENTS) and bool(NUMBER.fullmatch(SPLIT.split(stripped, maxsplit=1)[0]))


def blocks(lines: Sequence[str], count: int, place: int) -> list[Block]:
    """Find the stretches of rows: a blank line or a head parts them, a comment alone does not.

    Parameters
    ----------
    lines : sequence of str
    count : int
        Number of columns: rows of numbers with another number of them are a head where rows begin.
    place : int
        The column of the separation: where it starts again after a comment, another block begins.
    """
    runs: list[Block] = []
    head = ""
    parted = True
    begun: int | None = None
    for number, line in enumerate([*lines, ""], start=1):
        if _is_like_row(line):
            begun = number if begun is None else begun
            continue
        if begun is not None:
            if parted or not runs or _restarts(lines[runs[-1].last - 1], lines[begun - 1], place):
                runs.append(Block(begun, number - 1, head))
            else:
                runs[-1] = Block(runs[-1].first, number - 1, runs[-1].head)
            begun, head, parted = None, "", False
        stripped = line.strip()
        if not stripped.startswith(COMMENTS):
            parted = True
        head = stripped or head
    # A blank line after every row parts nothing.
    if len(runs) > 2 and all(run.first == run.last for run in runs):
        runs = [Block(runs[0].first, runs[-1].last, runs[0].head)]
    return [_without_head(run, lines, count) for run in runs]


def _restarts(before: str, after: str, place: int) -> bool:
    first, second = (_tokens(line)[place : place + 1] for line in (before, after))
    try:
        return float(FORTRAN.sub("e", second[0])) <= float(FORTRAN.sub("e", first[0]))
    except (IndexError, ValueError):
        return False


def _without_head(run: Block, lines: Sequence[str], count: int) -> Block:
    first, head = run.first, run.head
    while first - run.first < MOST_HEAD_ROWS and first < run.last and not _is_row(lines[first - 1], count):
        if len(_tokens(lines[first - 1])) == count:
            break
        head = lines[first - 1].strip()
        first += 1
    return Block(first, run.last, head) if _is_row(lines[first - 1], count) else run


def _choose(found: list[Block], block: int | None, path: Path) -> Block:
    if not found:
        says = "It holds no rows of numbers."
        raise UnusableInput([Problem("", says, "Is it a table? A document ends in .toml or .json.")], str(path))
    if block is not None and not 1 <= block <= len(found):
        says = f"There is no block {block}; the file holds {len(found)}."
        raise UnusableInput([Problem("--block", says, _listing(found))], str(path))
    if block is None and len(found) > 1:
        says = f"The file holds {len(found)} blocks of rows."
        raise UnusableInput([Problem("--block", says, _listing(found))], str(path))
    return found[(block or 1) - 1]


def _listing(found: list[Block]) -> str:
    shown = [
        f"{number}: lines {block.first} to {block.last}" + (f' after "{block.head[:40]}"' if block.head else "")
        for number, block in enumerate(found[:12], start=1)
    ]
    more = f"; and {len(found) - 12} more" if len(found) > 12 else ""
    return f"Choose one by --block: {'; '.join(shown)}{more}."


def _numbers(lines: Sequence[str], block: Block, names: Sequence[str], path: Path) -> Array:
    rows = []
    for number in range(block.first, block.last + 1):
        line = lines[number - 1]
        if not line.strip() or line.strip().startswith(COMMENTS):
            continue
        tokens = _tokens(line)
        if len(tokens) != len(names):
            says = f"This row has {len(tokens)} columns; {len(names)} are named ({','.join(names)})."
            remedy = "Name every column; call those without meaning skip."
            raise UnusableInput([_problem(number, 1, says, remedy, line)], str(path))
        rows.append([_number(token, number, line, path) for token in tokens])
    return np.array(rows, dtype=np.float64)


def _number(token: str, number: int, line: str, path: Path) -> float:
    try:
        return float(token)
    except ValueError:
        if NUMBER.fullmatch(token):
            return float(FORTRAN.sub("e", token))
        at = line.find(token) + 1
        problem = _problem(number, at, f'"{token[:40]}" is no number.', "Mend that row, or take it out.", line)
        raise UnusableInput([problem], str(path)) from None


def _problem(number: int, column: int, says: str, remedy: str, line: str) -> Problem:
    excerpt = f"{line}\n{' ' * (column - 1)}^" if len(line) < 120 else ""
    return Problem(f"line {number}, column {column}", says, remedy, excerpt, number)
