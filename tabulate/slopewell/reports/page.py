"""One page about a document or its tables: a single HTML file that asks nothing of any other place."""

from __future__ import annotations

import json
from base64 import b64encode
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from html import escape
from importlib.resources import files
from string import Template
from typing import Any

import numpy as np

from .. import __version__
from ..units import UnitSystem, ratio, unit_system
from .article import article
from .drawing import Drawing
from .markup import Markup, join, tag
from .matrix import matrix
from .report import Report
from .verdicts import VERDICTS, mark_of, plural
from .view import unit_text

COMMON_UNITS = (("eV", "angstrom"), ("kJ/mol", "nm"), ("kcal/mol", "angstrom"), ("hartree", "bohr"))
POWERS = ((1, 0), (0, 1), (1, -1), (1, -2))
"""Powers of energy and length of every quantity that the page shows in several units."""
CAUTION = (
    "A table that passes says that the numbers are what the document means. It says nothing about whether the "
    "potential suits your material, your temperature or your question: that stays with the source of the potential, "
    "with your own validation, and, where structures or safety depend on the result, with the codes that apply where "
    "you work and with licensed practice."
)


@dataclass(frozen=True, slots=True)
class Sheet:
    """What a page or a picture shows.

    Attributes
    ----------
    title, source : str
    drawings : tuple of Drawing
    record : mapping
        The subject's record in the report.
    facts : tuple of (str, str)
        Where it comes from: labels and values.
    document : str
        The document's text.
    note : str
        Which of two files the verdict is about.
    """

    title: str
    source: str
    drawings: tuple[Drawing, ...]
    record: Mapping[str, Any] = field(default_factory=dict)
    facts: tuple[tuple[str, str], ...] = ()
    document: str = ""
    note: str = ""


def page(sheet: Sheet) -> str:
    """Return a page as the text of one HTML file."""
    systems = unit_systems_of(sheet.drawings)
    return Template(_part("page_template.html")).substitute(
        title=escape(sheet.title),
        style=_part("page_template.css"),
        script=_part("page_template.js"),
        header=_header(sheet, systems),
        index=matrix(sheet.drawings) if len(sheet.drawings) > 1 else "",
        articles="\n".join(article(drawing, number, systems) for number, drawing in enumerate(sheet.drawings)),
        provenance=_provenance(sheet),
        caution=escape(CAUTION),
        writer=escape(f"slopewell {__version__}"),
        numbers=_numbers(sheet.drawings, systems),
    )


def _part(name: str) -> str:
    return files(__package__).joinpath(name).read_text(encoding="utf-8")


def unit_systems_of(drawings: Sequence[Drawing]) -> list[UnitSystem]:
    """Return the systems of units of a page: the drawings' own first, then the common ones."""
    common = [unit_system(energy, length) for energy, length in COMMON_UNITS]
    own = [drawings[0].units] if drawings else []
    return own + [system for system in common if system not in own]


def _header(sheet: Sheet, systems: Sequence[UnitSystem]) -> Markup:
    options = [
        tag("option", f"{unit_text(system.energy.text)} and {unit_text(system.length.text)}", value=index)
        for index, system in enumerate(systems)
    ]
    return join(
        [
            tag("h1", sheet.title),
            tag("p", "Source: ", sheet.source, class_="source") if sheet.source else Markup(""),
            _verdict(sheet.record, len(sheet.drawings), _worst_first(sheet), sheet.note),
            tag(
                "p",
                tag("label", "Units ", for_="units"),
                tag("select", *options, id_="units"),
                class_="choose",
            ),
        ]
    )


def _verdict(record: Mapping[str, Any], interactions: int, below: Markup, note: str = "") -> Markup:
    verdict = str(record.get("verdict", "unchecked"))
    levels = [finding["level"] for finding in record.get("findings", ())]
    counts = ", ".join(plural(levels.count(level), level) for level in ("error", "warning", "note"))
    checked = len(record.get("checked", ()))
    looked = f"{plural(checked, 'check')} over {plural(interactions, 'interaction')}: {counts}"
    return tag(
        "div",
        tag("p", mark_of(verdict), " ", VERDICTS[verdict].words, class_="words"),
        *(tag("p", text) for text in ((looked if checked else ""), note) if text),
        below,
        class_=f"verdict {verdict}",
    )


def report_page(report: Report) -> str:
    """Return a report alone as a page: verdicts, findings and landmarks, without curves."""
    parts = [_subject(subject.record()) for subject in report.subjects]
    return Template(_part("page_template.html")).substitute(
        title="Report",
        style=_part("page_template.css"),
        script="",
        header=join(parts),
        index="",
        articles="",
        provenance="",
        caution=escape(CAUTION),
        writer=escape(f"slopewell {__version__}"),
        numbers="{}",
    )


def _subject(record: Mapping[str, Any]) -> Markup:
    problems = [
        tag("li", tag("b", each["at"]), f" {each['says']} {each['try']}") for each in record.get("problems", ())
    ]
    findings = [
        tag(
            "li",
            tag("b", f"{each['level']} {each['interaction'] or ''}"),
            f" {each['check']}: {each['says']}",
        )
        for each in record.get("findings", ())
    ]
    listed = [*problems, *findings]
    below = tag("ul", *listed) if listed else Markup("")
    return join([tag("h1", record["file"]), _verdict(record, len(record.get("landmarks", ())), below)])


MOST_LISTED = 8


def _worst_first(sheet: Sheet) -> Markup:
    """Return the errors and warnings as links to where they are explained."""
    listed = [
        (
            str(flag.finding["level"]),
            f"{drawing.name}: {flag.finding['check']}",
            f"#pair-{place}-finding-{number}",
        )
        for place, drawing in enumerate(sheet.drawings)
        for number, flag in enumerate(drawing.flags, 1)
        if flag.finding["level"] != "note"
    ]
    listed = list({entry[:2]: entry for entry in reversed(listed)}.values())[::-1]
    listed.sort(key=lambda entry: entry[0] != "error")
    items = [
        tag("li", tag("a", tag("b", level), f" {words}", href=target)) for level, words, target in listed[:MOST_LISTED]
    ]
    if len(listed) > MOST_LISTED:
        items.append(tag("li", f"and {len(listed) - MOST_LISTED} more below"))
    return tag("ul", *items) if items else Markup("")


def _provenance(sheet: Sheet) -> Markup:
    facts = [join([tag("dt", label), tag("dd", value)]) for label, value in sheet.facts if value]
    if not facts:
        return Markup("")
    parts = [tag("h2", "Where this comes from", id_="provenance"), tag("dl", *facts)]
    if sheet.document:
        text = tag("pre", tag("code", sheet.document), tabindex=0, role="group", aria_label="its text")
        parts.append(tag("details", tag("summary", "The document"), text))
    return tag("section", *parts, class_="provenance", aria_labelledby="provenance")


def _numbers(drawings: Sequence[Drawing], systems: Sequence[UnitSystem]) -> str:
    """Return what the script needs: factors of the units, and the rows that can be read out."""
    own = systems[0] if systems else None
    data = {
        "systems": [_system(system, own) for system in systems if own is not None],
        "drawings": [_rows(drawing) for drawing in drawings],
    }
    return json.dumps(data, ensure_ascii=False, separators=(",", ":"), allow_nan=False).replace("<", "\\u003c")


def _system(system: UnitSystem, own: UnitSystem) -> dict[str, Any]:
    factors, units = {}, {}
    for energy, length in POWERS:
        key = f"{energy},{length}"
        ours, theirs = ((each.per_length(-length) if energy else each.length) for each in (own, system))
        factors[key] = float(ratio(ours, theirs))
        units[key] = unit_text(theirs.text)
    return {"factors": factors, "units": units}


def _rows(drawing: Drawing) -> dict[str, Any]:
    low, high = drawing.view.separation
    inside = (drawing.separation >= low) & (drawing.separation <= high)
    columns = {"separation": drawing.separation, "energy": drawing.energy, "force": drawing.force}
    if drawing.other is not None:
        columns |= {"otherEnergy": drawing.other.energy, "otherForce": drawing.other.force}
    packed = {name: _packed(column[inside]) for name, column in columns.items() if column is not None}
    return {
        "name": drawing.name,
        "limits": [low, high],
        "other": drawing.other and drawing.other.label,
        **packed,
    }


def _packed(column: Any) -> str:
    return b64encode(np.ascontiguousarray(column, dtype="<f8").tobytes()).decode("ascii")
