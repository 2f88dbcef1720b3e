"""Reports for people: one compact block an interaction, aligned, in colour on a terminal only."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from rich.console import Console
from rich.text import Text

from ..checks import Finding
from ..document.model import EVEN_IN
from ..problems import Problem
from ..units import UnitSystem, unit_system
from .origins import pair_lines
from .report import Report, Subject

VERDICTS = {"pass": ("passes", "green"), "warn": ("passes with warnings", "yellow"), "fail": ("fails", "red")}
LEVEL_STYLES = {"error": "bold red", "warning": "yellow", "note": "cyan"}
LABEL_WIDTH = 24


Curves = Mapping[tuple[str, str], Sequence[str]]
"""Lines that draw a curve, by file and interaction."""


def print_report(report: Report, console: Console, curves: Curves | None = None) -> None:
    """Print every subject of a report, with curves where there are any."""
    for index, subject in enumerate(report.subjects):
        if index:
            console.print()
        if subject.problems:
            print_problems(subject, console)
        else:
            print_subject(subject, console, curves)


def print_problems(subject: Subject, console: Console) -> None:
    """Print why a file can't be used."""
    count = len(subject.problems)
    head = Text(subject.file, style="bold")
    head.append(f"  can't be used: {count} problem{'s' if count > 1 else ''}", style="bold red")
    console.print(head)
    for problem in subject.problems:
        print_problem(problem, console)


def print_problem(problem: Problem, console: Console) -> None:
    """Print one problem: place, what is wrong, the faulty text, what to try."""
    line = f" (line {problem.line})" if problem.line else ""
    place = Text(f"{problem.at}{line}: " if problem.at else "", style="bold")
    print_indented(place + Text(problem.says), 2, console)
    if problem.excerpt:
        print_indented(Text(problem.excerpt, no_wrap=True, overflow="ellipsis"), 6, console)
    if problem.remedy:
        print_indented(Text(f"Try: {problem.remedy}", style="dim"), 4, console)


def print_subject(subject: Subject, console: Console, curves: Curves | None = None) -> None:
    """Print what was found in a file, with the curves of its interactions where there are any."""
    words, colour = VERDICTS[subject.verdict]
    head = Text(subject.file, style="bold")
    head.append(f"  {words}", style=f"bold {colour}")
    console.print(head)
    if subject.title:
        print_indented(Text(subject.title, style="dim"), 2, console)
    certificates = {record["interaction"]: record for record in subject.certificates if "file" not in record}
    texts = [record for record in subject.certificates if "file" in record]
    pairs = {record["interaction"]: pair_lines(record, _units(subject)) for record in subject.pairs}
    for record in subject.landmarks:
        print_landmarks(record, console)
        for label, value in pairs.get(record["interaction"], []):
            print_indented(Text(f"{label:<{LABEL_WIDTH}}{value}"), 4, console)
        printed = [text_line(text) for text in texts if text["interaction"] == record["interaction"]]
        for label, value in [*certificate_lines(certificates.get(record["interaction"], {})), *printed]:
            print_indented(Text(f"{label:<{LABEL_WIDTH}}{value}"), 4, console)
        for line in (curves or {}).get((subject.file, record["interaction"]), ()):
            print_indented(Text(line, no_wrap=True, overflow="crop"), 4, console)
        for finding in subject.findings:
            if finding.interaction == record["interaction"]:
                print_finding(finding, console)
    named = {record["interaction"] for record in subject.landmarks}
    for finding in subject.findings:
        if finding.interaction not in named:
            print_finding(finding, console)
    if subject.accepted:
        console.print(Text(f"  accepted: {', '.join(subject.accepted)}", style="yellow"))


def _units(subject: Subject) -> UnitSystem:
    units = subject.landmarks[0]["units"]
    return unit_system(units["energy"], units["length"])


def print_landmarks(record: dict[str, Any], console: Console) -> None:
    """Print the landmarks of one interaction."""
    console.print()
    print_indented(Text(record["interaction"], style="bold"), 2, console)
    for label, value in landmark_lines(record):
        print_indented(Text(f"{label:<{LABEL_WIDTH}}{value}"), 4, console)


def landmark_lines(record: dict[str, Any]) -> list[tuple[str, str]]:
    """Return the landmarks of one interaction as labels and values."""
    length, energy = record["units"]["length"], record["units"]["energy"]
    lines = []

    def add(label: str, value: float | None, unit: str) -> None:
        if value is not None:
            lines.append((label, f"{value:.6g} {unit}"))

    add("equilibrium separation", record["equilibrium_separation"], length)
    add("well depth", record["well_depth"], energy)
    add("stiffness", record["stiffness"], f"{energy}/{length}^2")
    add("zero crossing", record["zero_crossing"], length)
    pull = record["largest_attraction"]
    if pull:
        lines.append(
            (
                "largest attraction",
                f"{pull['force']:.6g} {energy}/{length} at {pull['separation']:.6g} {length}",
            )
        )
    add("harmonic wavenumber", record.get("harmonic_wavenumber"), "cm^-1")
    add("classical amplitude", record.get("classical_amplitude"), length)
    count = record["stationary_points"]
    if count is not None:
        certainty = "proved" if record["proved"] else "not proved"
        lines.append(("stationary points", f"{count} ({certainty})"))
    return lines


def certificate_lines(record: dict[str, Any]) -> list[tuple[str, str]]:
    """Return what is proved about the rows of one interaction as labels and values."""
    if "rows" not in record:
        return []
    length, energy = record["units"]["length"], record["units"]["energy"]
    lines = [
        (
            "table",
            f"{record['rows']} rows even in {EVEN_IN[record['spacing']]}, read by {record['interpolation']}",
        )
    ]
    if record["proved"]:
        lines.append(
            (
                "energy error at most",
                f"{record['energy_error_bound']:.3g} {energy} near {record['energy_error_at']:.4g} {length}",
            )
        )
        lines.append(
            (
                "force error at most",
                f"{record['force_error_bound']:.3g} {energy}/{length} near {record['force_error_at']:.4g} {length}",
            )
        )
    if "last_places_off" in record:
        lines.append(
            (
                "rows proved",
                f"{record['rows_proved']}, none more than {record['last_places_off']:g} last places off",
            )
        )
    return lines


def text_line(record: dict[str, Any]) -> tuple[str, str]:
    """Return what is proved about a text file, its printed digits included, as label and value."""
    length, energy = record["units"]["length"], record["units"]["energy"]
    if not record["proved"]:
        return f"in {record['file']}", "no bound could be proved"
    errors = f"{record['energy_error_bound']:.3g} {energy} and {record['force_error_bound']:.3g} {energy}/{length}"
    return f"in {record['file']}", f"{errors} with the digits it prints"


def print_finding(finding: Finding, console: Console) -> None:
    """Print one finding: level, check, what it says and what to try."""
    text = Text(f"{finding.level:<8}", style=LEVEL_STYLES[finding.level])
    text.append(finding.check, style="bold")
    if finding.mistake:
        text.append(f" [{finding.mistake}]", style="bold")
    print_indented(text, 4, console)
    print_indented(Text(finding.says), 12, console)
    print_indented(Text(f"Try: {finding.remedy}", style="dim"), 12, console)


def print_indented(text: Text, indent: int, console: Console) -> None:
    """Print a text, wrapped to the console, so many columns to the right; no line ends in blanks."""
    for line in text.wrap(console, max(console.width - indent, 20)):
        line.rstrip()
        console.print(Text(" " * indent) + line, soft_wrap=True)
