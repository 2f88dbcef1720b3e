"""What the terminal shows, exactly, with an injected console."""

from __future__ import annotations

import io
from typing import Any

from rich.console import Console
from slopewell.checks import Finding
from slopewell.problems import Problem
from slopewell.reports import Report, Subject
from slopewell.reports.terminal import print_report

UNITS = {"energy": "eV", "length": "angstrom"}
LANDMARKS: dict[str, Any] = {
    "interaction": "A-A",
    "units": UNITS,
    "equilibrium_separation": 3.8163709,
    "well_depth": 0.01,
    "stiffness": None,
    "zero_crossing": 3.4,
    "largest_attraction": {"separation": 4.2311472, "force": -0.0070495},
    "stationary_points": 1,
    "proved": True,
    "harmonic_wavenumber": None,
}
FINDING = Finding(
    "error", "The stated force is the slope.", "Put a minus sign there.", check="force-matches-slope",
    interaction="A-A", mistake="force-sign-flipped",
)  # fmt: skip


def shown(*subjects: Subject, width: int = 80, **how: Any) -> str:
    stream = io.StringIO()
    print_report(Report(subjects), Console(file=stream, width=width, highlight=False, **how))
    return stream.getvalue()


def test_a_subject_is_shown_interaction_by_interaction() -> None:
    subject = Subject("pair.toml", findings=(FINDING,), landmarks=(LANDMARKS,), title="Pair", accepted=("finite",))
    assert shown(subject) == (
        "pair.toml  fails\n"
        "  Pair\n"
        "\n"
        "  A-A\n"
        "    equilibrium separation  3.81637 angstrom\n"
        "    well depth              0.01 eV\n"
        "    zero crossing           3.4 angstrom\n"
        "    largest attraction      -0.0070495 eV/angstrom at 4.23115 angstrom\n"
        "    stationary points       1 (proved)\n"
        "    error   force-matches-slope [force-sign-flipped]\n"
        "            The stated force is the slope.\n"
        "            Try: Put a minus sign there.\n"
        "  accepted: finite\n"
    )


def test_several_subjects_are_parted_by_an_empty_line() -> None:
    assert shown(Subject("a.toml"), Subject("b.toml")) == "a.toml  passes\n\nb.toml  passes\n"


def test_a_problem_is_shown_with_its_place_and_its_text() -> None:
    problem = Problem("grid.from", "It is zero.", "Enlarge it.", "from = 0\n       ^", 7)
    assert shown(Subject("a.toml", problems=(problem, Problem("", "No units.")))) == (
        "a.toml  can't be used: 2 problems\n"
        "  grid.from (line 7): It is zero.\n"
        "      from = 0\n"
        "             ^\n"
        "    Try: Enlarge it.\n"
        "  No units.\n"
    )


def test_long_lines_are_wrapped_under_their_beginning() -> None:
    lines = shown(Subject("a.toml", findings=(FINDING,)), width=40).splitlines()
    assert lines[-3:] == [
        "            The stated force is the",
        "            slope.",
        "            Try: Put a minus sign there.",
    ]


def test_brackets_of_a_document_are_not_taken_for_markup() -> None:
    assert "[bold]x" in shown(Subject("a.toml", title="[bold]x"))


def test_colour_comes_on_a_terminal_only() -> None:
    subject = Subject("a.toml", findings=(FINDING,), landmarks=(LANDMARKS,))
    assert "\x1b[" not in shown(subject)
    coloured = shown(subject, force_terminal=True, color_system="standard")
    assert "\x1b[1;31m" in coloured
