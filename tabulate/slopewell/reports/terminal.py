"""Reports for people: one compact block an interaction, aligned, in colour on a terminal only."""

from __future__ import annotations

from typing import Any

from rich.console import Console
from rich.padding import Padding
from rich.text import Text

from ..checks import Finding
from ..problems import Problem
from .report import Report, Subject

VERDICTS = {"pass": ("passes", "green"), "warn": ("passes with warnings", "yellow"), "fail": ("fails", "red")}
LEVEL_STYLES = {"error": "bold red", "warning": "yellow", "note": "cyan"}
LABEL_WIDTH = 24


def print_report(report: Report, console: Console) -> None:
    """Print every subject of a report."""
    for index, subject in enumerate(report.subjects):
        if index:
            console.print()
        print_problems(subject, console) if subject.problems else print_subject(subject, console)


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
    console.print(Padding(place + Text(problem.says), (0, 0, 0, 2), expand=False))
    if problem.excerpt:
        console.print(Padding(Text(problem.excerpt, no_wrap=True, overflow="ellipsis"), (0, 0, 0, 6), expand=False))
    if problem.remedy:
        console.print(Padding(Text(f"Try: {problem.remedy}", style="dim"), (0, 0, 0, 4), expand=False))


def print_subject(subject: Subject, console: Console) -> None:
    """Print what was found in a file."""
    words, colour = VERDICTS[subject.verdict]
    head = Text(subject.file, style="bold")
    head.append(f"  {words}", style=f"bold {colour}")
    console.print(head)
    if subject.title:
        console.print(Padding(Text(subject.title, style="dim"), (0, 0, 0, 2), expand=False))
    for record in subject.landmarks:
        print_landmarks(record, console)
        for finding in subject.findings:
            if finding.interaction == record["interaction"]:
                print_finding(finding, console)
    named = {record["interaction"] for record in subject.landmarks}
    for finding in subject.findings:
        if finding.interaction not in named:
            print_finding(finding, console)
    if subject.accepted:
        console.print(Text(f"  accepted: {', '.join(subject.accepted)}", style="yellow"))


def print_landmarks(record: dict[str, Any], console: Console) -> None:
    """Print the landmarks of one interaction."""
    console.print(Padding(Text(record["interaction"], style="bold"), (1, 0, 0, 2), expand=False))
    for label, value in landmark_lines(record):
        console.print(Padding(Text(f"{label:<{LABEL_WIDTH}}{value}"), (0, 0, 0, 4), expand=False))


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
        lines.append(("largest attraction", f"{pull['force']:.6g} {energy}/{length} at {pull['separation']:.6g} {length}"))
    add("harmonic wavenumber", record.get("harmonic_wavenumber"), "cm^-1")
    add("classical amplitude", record.get("classical_amplitude"), length)
    count = record["stationary_points"]
    if count is not None:
        certainty = "proved" if record["proved"] else "not proved"
        lines.append(("stationary points", f"{count} ({certainty})"))
    return lines


def print_finding(finding: Finding, console: Console) -> None:
    """Print one finding: level, check, what it says and what to try."""
    text = Text(f"{finding.level:<8}", style=LEVEL_STYLES[finding.level])
    text.append(finding.check, style="bold")
    if finding.mistake:
        text.append(f" [{finding.mistake}]", style="bold")
    console.print(Padding(text, (0, 0, 0, 4), expand=False))
    console.print(Padding(Text(finding.says), (0, 0, 0, 12), expand=False))
    console.print(Padding(Text(f"Try: {finding.remedy}", style="dim"), (0, 0, 0, 12), expand=False))
