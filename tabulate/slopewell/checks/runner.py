"""Run checks over the facts of one interaction."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from .findings import ERROR, Check, Facts, Finding


def run_checks(checks: Iterable[Check[Facts]], facts: Facts, interaction: str) -> tuple[list[Finding], list[str]]:
    """Return all findings, in the order of the checks, and the names of the checks that ran.

    A check whose required check found an error, or did not run, is skipped.
    """
    findings: list[Finding] = []
    ran: list[str] = []
    failed: set[str] = set()
    for check in checks:
        if failed.intersection(check.requires):
            failed.add(check.name)
            continue
        found = [replace(f, check=check.name, interaction=interaction) for f in check.look(facts)]
        ran.append(check.name)
        findings += found
        if any(finding.level == ERROR for finding in found):
            failed.add(check.name)
    return findings, ran
