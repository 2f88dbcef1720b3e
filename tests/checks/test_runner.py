"""Running checks: all findings in order, and one cause gives one failure."""

from __future__ import annotations

from collections.abc import Iterator

from documentation import registers
from slopewell.checks import ERROR, NOTE, WARNING, Check, Finding, run_checks, worst


def finds(*levels: str) -> Check[str]:
    def look(facts: str) -> Iterator[Finding]:
        return (Finding(level, f"{level} in {facts}", "mend it") for level in levels)

    return Check("-".join(levels) or "nothing", "", look)


def requiring(name: str, *required: str) -> Check[str]:
    return Check(name, "", lambda facts: iter([Finding(NOTE, facts, "")]), requires=required)


def test_findings_carry_their_check_and_interaction_in_order() -> None:
    findings, ran = run_checks((finds(WARNING, NOTE), finds()), "rows", "W-P")
    assert [(f.check, f.interaction, f.level) for f in findings] == [
        ("warning-note", "W-P", WARNING),
        ("warning-note", "W-P", NOTE),
    ]
    assert ran == ["warning-note", "nothing"]


def test_a_check_whose_requirement_failed_is_skipped_and_so_is_what_requires_it() -> None:
    checks = (finds(ERROR), requiring("second", "error"), requiring("third", "second"), requiring("fourth"))
    findings, ran = run_checks(checks, "rows", "W-P")
    assert ran == ["error", "fourth"]
    assert [f.check for f in findings] == ["error", "fourth"]


def test_a_warning_stops_nothing() -> None:
    assert run_checks((finds(WARNING), requiring("second", "warning")), "rows", "")[1] == [
        "warning",
        "second",
    ]


def test_the_verdict_is_that_of_the_worst_finding() -> None:
    def verdict(*levels: str) -> str:
        return worst([Finding(level, "", "") for level in levels])

    assert [verdict(), verdict(NOTE), verdict(NOTE, WARNING), verdict(WARNING, ERROR)] == [
        *("pass", "pass", "warn", "fail")
    ]


def test_names_are_unique_and_requirements_come_before_what_requires_them() -> None:
    for checks in registers().values():
        names = [check.name for check in checks]
        assert len(set(names)) == len(names)
        for position, check in enumerate(checks):
            assert set(check.requires) <= set(names[:position])
