"""The verbs: what the commands do, as plain functions."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import replace
from pathlib import Path
from typing import Any

from .checks import POTENTIAL_CHECKS, Finding, PotentialFacts, potential_facts, run_checks
from .document import Document, read_document
from .outputs import certified_rows, targets
from .problems import UnusableInput
from .reports import Report, Subject, certificate_record, potential_landmarks, unusable
from .reports.origins import pair_records
from .tables import Reading, check_loaded, is_table, load

Track = Callable[[Iterable[Any], str], Iterator[Any]]
"""Something that passes items through and may show how far it is."""


def silently(items: Iterable[Any], label: str) -> Iterator[Any]:
    """Pass items through."""
    return iter(items)


def check(
    paths: Iterable[str | Path],
    *,
    reading: Reading | None = None,
    every_row: bool = False,
    track: Track = silently,
) -> Report:
    """Check potential documents and tables.

    Parameters
    ----------
    paths : iterable of path
    reading : Reading, optional
        How tables that slopewell did not write are to be read.
    every_row : bool
        Prove each row of the tables that the documents ask for to be right to its last places.
    track : callable, optional
        Shows progress.

    Returns
    -------
    Report
        One subject a file, in order; a file that can't be used has problems instead of findings.
    """
    chosen = reading or Reading()
    return Report(tuple(_check_file(str(path), chosen, every_row, track) for path in paths))


def _check_file(file: str, reading: Reading, every_row: bool, track: Track) -> Subject:
    try:
        if is_table(file, reading):
            return check_loaded(load(file, reading), file)
        document = read_document(file)
        if document.outputs:
            targets(document, Path(file).parent)
        subject, facts = check_document(document, track=track)
        return _prove(subject, facts, track) if every_row else subject
    except UnusableInput as error:
        return unusable(error, file)


def check_document(document: Document, *, track: Track = silently) -> tuple[Subject, list[PotentialFacts]]:
    """Run every check of a potential over every interaction of a document.

    Returns
    -------
    (Subject, list of PotentialFacts)
        What was found, and the facts of each interaction it was found from.
    """
    findings: list[Finding] = []
    ran: dict[str, None] = {}
    every = [potential_facts(document, interaction) for interaction in document.interactions]
    records: list[tuple[dict[str, Any], dict[str, Any]]] = []
    for facts in track(every, "checking"):
        found, names = run_checks(POTENTIAL_CHECKS, facts, facts.potential.name)
        findings += found
        ran |= dict.fromkeys(names)
        certified = facts.certificate.record(document.units) if "table-error" in names else {}
        records.append((potential_landmarks(facts), certificate_record(facts, certified)))
    subject = Subject(
        file=document.file,
        sha256=document.sha256,
        findings=tuple(findings),
        landmarks=tuple(landmarks for landmarks, _ in records),
        certificates=tuple(certificate for _, certificate in records if len(certificate) > 2),
        pairs=pair_records(document),
        checked=tuple(ran),
        title=document.title,
    )
    return subject, every


def _prove(subject: Subject, every: list[PotentialFacts], track: Track) -> Subject:
    """Prove every row of the tables that a document asks for, in its own units."""
    certificates = []
    for facts in track(every, "proving every row"):
        rows = certified_rows(facts, facts.units, every_row=True)
        certificates.append(certificate_record(facts, rows.certificate))
    return replace(subject, certificates=tuple(certificates))
