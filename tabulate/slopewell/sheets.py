"""The verb ``sheet``: a page or a picture of a document, a table, or two of them over each other."""

from __future__ import annotations

from collections.abc import Collection, Mapping, Sequence
from dataclasses import replace
from pathlib import Path
from typing import Any

from .document import Document, read_document
from .files.atomic import write_text
from .problems import Problem, UnusableInput, nearest
from .reports.along import error_along
from .reports.drawing import Drawing, document_drawings, overlaid, table_drawings
from .reports.page import Sheet, page
from .table import Table
from .tables import Reading, check_loaded, is_table, load
from .workflow import Track, check_document, silently

PICTURES = (".png", ".svg", ".pdf")
ENDINGS = (".html", *PICTURES)
FEW = 12
"""Interactions up to which the proved error is drawn along the rows of each, which takes its time."""
OWN = Reading()
"""Reads what slopewell wrote."""


def sheet(
    paths: Sequence[str | Path],
    out: str | Path | None = None,
    *,
    only: Collection[str] = (),
    reading: Reading = OWN,
    track: Track = silently,
) -> tuple[Path, Sheet]:
    """Write a page or a picture of one file, or of two over each other.

    Parameters
    ----------
    paths : sequence of path
        One or two documents or tables; of two the second is laid over the first.
    out : path, optional
        Ends in .html, .png, .svg or .pdf; by default a page beside the first file.
    only : collection of str
        Interactions to show; all of them by default.
    reading : Reading, optional
        Describes a table that slopewell did not write.
    track : callable, optional
        Shows progress.

    Returns
    -------
    (Path, Sheet)
        The file that was written, and what it shows.

    Raises
    ------
    UnusableInput
        If a file can't be used, two files share no interaction, or the page can't be written.
    """
    files = [Path(path) for path in paths]
    if len(files) > 2:
        raise UnusableInput(
            [Problem("", "A sheet shows one file, or two of them over each other.", "Name at most two.")]
        )
    target = Path(out) if out is not None else _beside(files)
    if target.suffix.lower() not in ENDINGS:
        says = f'The ending of "{target.name}" names neither a page nor a picture.'
        raise UnusableInput([Problem("--output", says, f"End it in {', '.join(ENDINGS)}.")], str(target))
    sheets = [sheet_of(path, reading, track=track) for path in files]
    shown = sheets[0] if len(sheets) == 1 else compared(sheets[0], sheets[1])
    shown = _restricted(shown, only) if only else shown
    if target.suffix.lower() == ".html":
        write_text(target, page(shown))
    else:
        from .reports.picture import write_picture

        write_picture(shown.title, shown.drawings, target)
    return target, shown


def _restricted(shown: Sheet, only: Collection[str]) -> Sheet:
    known = [drawing.name for drawing in shown.drawings]
    for name in only:
        if name not in known:
            says = f'There is no interaction "{name}".'
            raise UnusableInput([Problem("--interaction", says, nearest(name, known))])
    return replace(shown, drawings=tuple(drawing for drawing in shown.drawings if drawing.name in only))


def _beside(files: list[Path]) -> Path:
    name = files[0].stem if len(files) == 1 else f"{files[0].stem}-and-{files[1].stem}"
    return files[0].parent / f"{name}.html"


def sheet_of(path: Path, reading: Reading = OWN, *, track: Track = silently) -> Sheet:
    """Return what there is to show of a document or a table."""
    if not is_table(path, reading):
        return document_sheet(read_document(path), track=track)
    loaded = load(path, reading)
    return table_sheet(loaded.table, path.name, check_loaded(loaded, str(path)).record())


def drawings_of(path: Path, record: Mapping[str, Any], reading: Reading = OWN) -> tuple[Drawing, ...]:
    """Return the drawings of a document or a table that was checked already, given its subject's record."""
    if is_table(path, reading):
        return table_drawings(load(path, reading).table, record)
    return document_drawings(read_document(path), record)


def document_sheet(document: Document, *, track: Track = silently) -> Sheet:
    """Return what there is to show of a document."""
    subject, every = check_document(document, track=track)
    record = subject.record()
    certified = {entry["interaction"] for entry in subject.certificates} if len(every) <= FEW else set()
    drawings = tuple(
        replace(drawing, error=error_along(known, drawing.view.separation[0])) if drawing.name in certified else drawing
        for drawing, known in zip(document_drawings(document, record), every, strict=True)
    )
    facts = (
        ("File", Path(document.file).name),
        ("SHA-256 of the file", document.sha256),
        ("Purpose", document.purpose.replace("-", " ")),
        ("Physical constants", "CODATA 2022"),
        ("Checks that ran", ", ".join(subject.checked)),
    )
    return Sheet(document.title, document.source, drawings, record, facts, document.text)


def table_sheet(table: Table, file: str, record: Mapping[str, Any]) -> Sheet:
    """Return what there is to show of a table, given its subject's record; empty if not checked."""
    facts = (
        ("File", file),
        ("SHA-256 of the file", str(record.get("sha256", ""))),
        ("SHA-256 of its document", table.document_sha256),
        ("Purpose", table.purpose.replace("-", " ")),
        ("Physical constants", table.constants),
        ("Table written by", table.writer),
        ("Changed since", "; ".join(table.history)),
        ("Checks that ran", ", ".join(record.get("checked", ()))),
    )
    drawings = table_drawings(table, record)
    return Sheet(table.title or file, table.source, drawings, record, facts, table.document)


def compared(first: Sheet, second: Sheet) -> Sheet:
    """Return the first sheet with the second one's curves over it, for the interactions of both."""
    others = {drawing.name: drawing for drawing in second.drawings}
    others |= {"-".join(reversed(drawing.between)): drawing for drawing in second.drawings if drawing.between[1]}
    pairs = [(drawing, others[drawing.name]) for drawing in first.drawings if drawing.name in others]
    if not pairs and len(first.drawings) == len(second.drawings) == 1:
        pairs = [(first.drawings[0], second.drawings[0])]
    if not pairs:
        says = "The two files have no interaction in common."
        raise UnusableInput([Problem("", says, "Compare files about the same species.")])
    files = dict(first.facts)["File"], dict(second.facts)["File"]
    labels = files if first.title == second.title else (first.title, second.title)
    return replace(
        first,
        title=f"{first.title}, compared with {labels[1]}",
        drawings=tuple(overlaid(drawing, other, labels) for drawing, other in pairs),
        facts=(
            *first.facts,
            ("Compared with", files[1] if second.title == files[1] else f"{files[1]} ({second.title})"),
        ),
        note=f"This is about {files[0]}; {files[1]} is only drawn over it.",
    )
