"""Verdicts for people: words, and a sign that needs no colour."""

from __future__ import annotations

from dataclasses import dataclass

from .markup import Markup, tag


@dataclass(frozen=True, slots=True)
class Verdict:
    """How a verdict is said and drawn."""

    words: str
    sign: str


VERDICTS = {
    "pass": Verdict("Passes", "✓"),
    "warn": Verdict("Passes with warnings", "▲"),
    "fail": Verdict("Fails", "✕"),
    "unusable": Verdict("Can't be used", "✕"),
    "unchecked": Verdict("Not checked", "?"),
}


def mark_of(verdict: str) -> Markup:
    """Return the sign of a verdict, hidden from screen readers, which get the words."""
    return tag("span", VERDICTS[verdict].sign, class_="sign", aria_hidden="true")


def plural(count: int, word: str) -> str:
    """Return a count with its word."""
    return f"{count:,} {word}" + ("" if count == 1 else "s")
