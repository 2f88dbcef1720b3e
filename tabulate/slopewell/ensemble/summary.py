"""One line a set: its verdict, its worst finding, and the landmarks of every interaction."""

from __future__ import annotations

import csv
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import Any

from ..checks.findings import LEVELS
from ..document import Document
from ..files.atomic import whole_file

LANDMARKS = (
    ("equilibrium_separation", "{length}"),
    ("well_depth", "{energy}"),
    ("stiffness", "{energy}/{length}^2"),
    ("zero_crossing", "{length}"),
    ("largest_attraction.separation", "{length}"),
    ("largest_attraction.force", "{energy}/{length}"),
    ("stationary_points", ""),
)
"""The landmarks of a line, by their keys in the report, and their units."""


def header(document: Document) -> list[str]:
    """Return the titles of the columns; a landmark has its unit in brackets."""
    units = {"energy": document.units.energy.text, "length": document.units.length.text}
    titles = ["set", "verdict", "worst finding"]
    for interaction in document.interactions:
        for key, unit in LANDMARKS:
            bracket = f" [{unit.format(**units)}]" if unit else ""
            titles.append(f"{interaction.potential.name}.{key}{bracket}")
    return titles


def line(record: dict[str, Any], names: Iterable[str]) -> list[Any]:
    """Return the cells of one set, from its record and the names of the interactions."""
    (subject,) = record["report"]["subjects"]
    found = {landmarks["interaction"]: landmarks for landmarks in subject.get("landmarks", ())}
    cells = [record["set"], subject["verdict"], worst_finding(subject)]
    return cells + [_value(found.get(name, {}), key) for name in names for key, _ in LANDMARKS]


def worst_finding(subject: dict[str, Any]) -> str:
    """Return the first of the worst findings, or the first problem; empty where there is none."""
    for problem in subject.get("problems", ()):
        return f"{problem['at']}: {problem['says']}" if problem["at"] else str(problem["says"])
    findings = sorted(subject.get("findings", ()), key=lambda finding: LEVELS.index(finding["level"]))
    for finding in findings:
        where = f" ({finding['interaction']})" if finding["interaction"] else ""
        return f"{finding['level']} {finding['check']}{where}: {finding['says']}"
    return ""


def _value(landmarks: dict[str, Any], key: str) -> Any:
    value: Any = landmarks
    for part in key.split("."):
        value = (value or {}).get(part)
    return value


def write(path: Path, document: Document, records: Iterable[dict[str, Any]]) -> dict[str, int]:
    """Write the summary of sets in their order, and return how many there are of each verdict.

    Those that fail and were written all the same count as ``accepted``.
    """
    names = [interaction.potential.name for interaction in document.interactions]
    counts: dict[str, int] = {}
    with whole_file(path) as temporary, temporary.open("w", encoding="utf-8", newline="") as file:
        writer = csv.writer(file)
        writer.writerow(header(document))
        for record in _counted(records, counts):
            writer.writerow(line(record, names))
    return counts


def _counted(records: Iterable[dict[str, Any]], counts: dict[str, int]) -> Iterator[dict[str, Any]]:
    for record in records:
        verdict = record["report"]["subjects"][0]["verdict"]
        verdict = "accepted" if verdict == "fail" and record["files"] else verdict
        counts[verdict] = counts.get(verdict, 0) + 1
        yield record
