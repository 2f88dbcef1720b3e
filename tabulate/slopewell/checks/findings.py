"""Findings: what a check has to say, as data."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from typing import Any, Generic, TypeVar

ERROR, WARNING, NOTE = "error", "warning", "note"
LEVELS = (ERROR, WARNING, NOTE)
"""From the worst to the mildest."""


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing that a check found.

    Attributes
    ----------
    level : str
        ``error``, ``warning`` or ``note``.
    says, remedy : str
        What was found, and what to do about it, in plain words.
    check, interaction : str
        Filled in by the runner.
    start, end : float or None
        The separations between which it happens, in the subject's length unit.
    measured, limit : float or None
        What was measured and what is allowed, both in ``unit``.
    unit : str or None
        ``"1"`` for a pure number.
    mistake : str or None
        Name of the mistake that explains it.
    details : mapping
        Further keys of the finding, such as ``factor`` or ``rows``.
    """

    level: str
    says: str
    remedy: str
    check: str = ""
    interaction: str | None = None
    start: float | None = None
    end: float | None = None
    measured: float | None = None
    limit: float | None = None
    unit: str | None = None
    mistake: str | None = None
    details: dict[str, Any] = field(default_factory=dict)


Facts = TypeVar("Facts")


@dataclass(frozen=True, slots=True)
class Check(Generic[Facts]):
    """One question about a subject.

    Attributes
    ----------
    name : str
        What reports and ``--accept`` call it.
    title : str
        The question in one line, for lists of checks.
    look : callable
        From the facts of a subject to findings.
    requires : tuple of str
        Checks that must have found no error: one cause shall give one failure.
    """

    name: str
    title: str
    look: Callable[[Facts], Iterator[Finding]]
    requires: tuple[str, ...] = ()


def worst(findings: list[Finding]) -> str:
    """Return the verdict of findings: ``pass``, ``warn`` or ``fail``."""
    levels = {finding.level for finding in findings}
    return "fail" if ERROR in levels else "warn" if WARNING in levels else "pass"
