"""The verbs: what the commands do, as plain functions."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

from .checks import ERROR, POTENTIAL_CHECKS, Finding, potential_facts, run_checks
from .document import Document, read_document
from .outputs import targets, unit_systems, write_target
from .problems import Problem, UnusableInput, nearest
from .reports import Report, Subject, potential_landmarks, unusable
from .table import tabulate_rows

Track = Callable[[Iterable[Any], str], Iterator[Any]]
"""Something that passes items through and may show how far it is."""


def silently(items: Iterable[Any], label: str) -> Iterator[Any]:
    """Pass items through."""
    return iter(items)


def check(paths: Iterable[str | Path], *, track: Track = silently) -> Report:
    """Check potential documents.

    Parameters
    ----------
    paths : iterable of path
    track : callable, optional
        Shows progress.

    Returns
    -------
    Report
        One subject a file, in order; a file that can't be used has problems instead of findings.
    """
    return Report(tuple(_check_file(str(path), track) for path in paths))


def _check_file(file: str, track: Track) -> Subject:
    try:
        return check_document(read_document(file), track=track)
    except UnusableInput as error:
        return unusable(error, file)


def check_document(document: Document, *, track: Track = silently) -> Subject:
    """Run every check of a potential over every interaction of a document."""
    findings: list[Finding] = []
    landmarks: list[dict[str, Any]] = []
    ran: dict[str, None] = {}
    for interaction in track(document.interactions, "checking"):
        facts = potential_facts(document, interaction)
        found, names = run_checks(POTENTIAL_CHECKS, facts, interaction.potential.name)
        findings += found
        ran |= dict.fromkeys(names)
        landmarks.append(potential_landmarks(facts))
    return Subject(
        file=document.file,
        sha256=document.sha256,
        findings=tuple(findings),
        landmarks=tuple(landmarks),
        checked=tuple(ran),
        title=document.title,
    )


@dataclass(frozen=True, slots=True)
class Tabulated:
    """What ``tabulate`` did: what it found, and the files it wrote (none where an error stands)."""

    report: Report
    written: tuple[Path, ...]


def tabulate(
    path: str | Path,
    *,
    into: str | Path | None = None,
    accept: Iterable[str] = (),
    track: Track = silently,
) -> Tabulated:
    """Check a document, then write every output that it names.

    Parameters
    ----------
    path : path
        The document.
    into : path, optional
        Folder of the files; beside the document by default.
    accept : iterable of str
        Checks whose errors do not stop the writing; the acceptance is recorded in the files.
    track : callable, optional
        Shows progress.

    Raises
    ------
    UnusableInput
        If the document can't be used or a file can't be written.
    """
    accepted = _known_checks(accept)
    document = read_document(path)
    found = targets(document, Path(path).parent if into is None else Path(into))
    subject = check_document(document, track=track)
    errors = {finding.check for finding in subject.findings if finding.level == ERROR}
    subject = replace(subject, accepted=tuple(name for name in accepted if name in errors))
    if errors - set(accepted):
        return Tabulated(Report((subject,)), ())
    # A stored report names the file without its folder, so that the same document gives the same bytes anywhere.
    stored = Report((replace(subject, file=Path(document.file).name),)).record()
    for units in unit_systems(found):
        rows = {
            interaction.potential.name: tabulate_rows(
                interaction.potential, interaction.grid, interaction.grid.rows or 2, units
            )
            for interaction in track(document.interactions, f"tabulating in {units.energy.text}")
        }
        for target in track([t for t in found if t.units == units], "writing"):
            write_target(target, document, rows, stored)
    return Tabulated(Report((subject,)), tuple(target.path for target in found))


def _known_checks(names: Iterable[str]) -> tuple[str, ...]:
    known = [check.name for check in POTENTIAL_CHECKS]
    chosen = tuple(dict.fromkeys(names))
    for name in chosen:
        if name not in known:
            raise UnusableInput([Problem("--accept", f'There is no check "{name}".', nearest(name, known))])
    return chosen
