"""The verb tabulate: check a document, then write every output that it names, with its certificate."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

from .checks import ERROR, POTENTIAL_CHECKS, WARNING, Finding, PotentialFacts
from .checks.printed_digits import look as printed_digits
from .document import read_document
from .outputs import Target, certified_rows, printed, rounding, targets, unit_systems, write_target
from .problems import Problem, UnusableInput, nearest
from .reports import Report, certificate_record
from .table import Rows
from .units import UnitSystem
from .workflow import Track, check_document, silently


@dataclass(frozen=True, slots=True)
class Tabulated:
    """What ``tabulate`` did: what it found, the files it wrote, and the checks that kept it from writing."""

    report: Report
    written: tuple[Path, ...]
    stopped_by: tuple[str, ...] = ()


def tabulate(
    path: str | Path,
    *,
    into: str | Path | None = None,
    accept: Iterable[str] = (),
    strict: bool = False,
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
    strict : bool
        Let a warning stop the writing as an error does.
    track : callable, optional
        Shows progress.

    Raises
    ------
    UnusableInput
        If the document can't be used or a file can't be written.
    """
    accepted = known_checks(accept)
    document = read_document(path)
    found = targets(document, Path(path).parent if into is None else Path(into))
    subject, facts = check_document(document, track=track)
    stopping = {ERROR, WARNING} if strict else {ERROR}
    errors = dict.fromkeys(finding.check for finding in subject.findings if finding.level in stopping)
    subject = replace(subject, accepted=tuple(name for name in accepted if name in errors))
    if stopped := tuple(name for name in errors if name not in accepted):
        return Tabulated(Report((subject,)), (), stopped)
    tables = {units: _rows(facts, units, track) for units in unit_systems(found)}
    digits = tuple(finding for target in found for finding in _digits(target, facts, tables[target.units]))
    prints = tuple(record for target in found for record in _printed(target, facts))
    subject = replace(subject, findings=subject.findings + digits, certificates=subject.certificates + prints)
    # A stored report names the file without its folder: the same document gives the same bytes anywhere.
    stored = Report((replace(subject, file=Path(document.file).name),)).record()
    for target in track(found, "writing"):
        write_target(target, document, tables[target.units], stored)
    return Tabulated(Report((subject,)), tuple(target.path for target in found))


def _rows(facts: list[PotentialFacts], units: UnitSystem, track: Track) -> dict[str, Rows]:
    """Return the certified rows of every interaction in one system of units."""
    label = f"tabulating in {units.energy.text} and {units.length.text}"
    return {one.potential.name: certified_rows(one, units) for one in track(facts, label)}


def _digits(target: Target, facts: list[PotentialFacts], rows: dict[str, Rows]) -> list[Finding]:
    """Return the warnings that a text layout earns by printing too few digits."""
    if target.layout is None:
        return []
    number_format = next((c.format for c in target.layout.columns if c.quantity == "energy"), "")
    relative, absolute = rounding(number_format)
    energy, length = float(target.units.energy.factor), float(target.units.length.factor)
    findings: list[Finding] = []
    for one in facts:
        if one.potential.name in target.names:
            written = rows[one.potential.name]
            assert written.energy is not None
            findings += printed_digits(
                one,
                written.separation * length,
                written.energy * energy,
                (relative, absolute * energy),
                target.path.name,
            )
    return findings


def _printed(target: Target, facts: list[PotentialFacts]) -> list[dict[str, Any]]:
    """Return the certificates of a text file, in which the digits that it prints count too."""
    if target.layout is None:
        return []
    digits = printed(target.layout, target.units)
    records = []
    for one in facts:
        if one.potential.name in target.names:
            rule = target.layout.interpolation or one.grid.interpolation
            bound = one.bounds.bound(one.rows, one.grid.spacing, rule, one.grid.ends, digits)
            certificate = replace(one.certificate, interpolation=rule, bound=bound).record(one.units)
            records.append(certificate_record(one, {"file": target.path.name, **certificate}))
    return records


def known_checks(names: Iterable[str]) -> tuple[str, ...]:
    """Return names of checks, each once, refusing one that is none."""
    known = [check.name for check in POTENTIAL_CHECKS]
    chosen = tuple(dict.fromkeys(names))
    for name in chosen:
        if name not in known:
            raise UnusableInput([Problem("--accept", f'There is no check "{name}".', nearest(name, known))])
    return chosen


__all__ = ["Tabulated", "known_checks", "tabulate"]
