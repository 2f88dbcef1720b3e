"""A report as JUnit XML, so that a build server shows each check of each interaction as a test."""

from __future__ import annotations

import re
from collections.abc import Iterator
from xml.etree.ElementTree import Element, SubElement, indent, tostring

from ..checks import ERROR, WARNING, Finding
from .report import Report, Subject

UNFIT = re.compile("[^\t\n\r\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")
"""Characters that XML 1.0 can't hold."""


def junit_text(report: Report, *, strict: bool = False) -> str:
    """Return a report as JUnit XML.

    Parameters
    ----------
    report : Report
    strict : bool
        Count a warning as a failure.
    """
    root = Element("testsuites", name="slopewell")
    for subject in report.subjects:
        _suite(root, subject, strict)
    for count in ("tests", "failures", "errors"):
        root.set(count, str(sum(int(suite.get(count, "0")) for suite in root)))
    indent(root)
    return '<?xml version="1.0" encoding="UTF-8"?>\n' + tostring(root, encoding="unicode") + "\n"


def _suite(root: Element, subject: Subject, strict: bool) -> None:
    suite = SubElement(root, "testsuite", name=_fit(subject.file))
    for problem in subject.problems:
        case = _case(suite, subject, "can be used", "")
        error = SubElement(case, "error", message=_fit(f"{problem.at}: {problem.says}" if problem.at else problem.says))
        error.text = _fit("\n".join(part for part in (problem.excerpt, f"Try: {problem.remedy}") if part))
    for interaction, check, found in _cases(subject):
        case = _case(suite, subject, check, interaction)
        failing = [finding for finding in found if finding.level == ERROR or (strict and finding.level == WARNING)]
        for finding in failing[:1]:
            failure = SubElement(case, "failure", type=finding.mistake or check, message=_fit(finding.says))
            failure.text = _fit("\n".join(_said(each) for each in failing))
        said = [_said(finding) for finding in found if finding not in failing]
        if said:
            SubElement(case, "system-out").text = _fit("\n".join(said))
    suite.set("tests", str(len(suite)))
    suite.set("failures", str(len(suite.findall("testcase/failure"))))
    suite.set("errors", str(len(suite.findall("testcase/error"))))


def _cases(subject: Subject) -> Iterator[tuple[str, str, list[Finding]]]:
    """Yield interaction, check and findings, in the order of the report."""
    named = [str(record["interaction"]) for record in subject.landmarks]
    for interaction in named:
        for check in subject.checked:
            yield interaction, check, _found(subject, interaction, check)
    for check in dict.fromkeys(f.check for f in subject.findings if f.interaction not in named):
        yield "", check, [f for f in subject.findings if f.check == check and f.interaction not in named]


def _found(subject: Subject, interaction: str, check: str) -> list[Finding]:
    return [f for f in subject.findings if f.interaction == interaction and f.check == check]


def _case(suite: Element, subject: Subject, name: str, interaction: str) -> Element:
    place = f"{subject.file}.{interaction}" if interaction else subject.file
    return SubElement(suite, "testcase", classname=_fit(place), name=_fit(name))


def _said(finding: Finding) -> str:
    return f"{finding.level}: {finding.says} Try: {finding.remedy}"


def _fit(text: str) -> str:
    return UNFIT.sub("�", text)
