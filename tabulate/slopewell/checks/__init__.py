"""Checks: one question a file, answered by findings."""

from .findings import ERROR, LEVELS, NOTE, WARNING, Check, Finding, worst
from .potential_facts import PotentialFacts, potential_facts
from .register import POTENTIAL_CHECKS, TABLE_CHECKS
from .runner import run_checks
from .table_facts import TableFacts

__all__ = [
    "ERROR",
    "LEVELS",
    "NOTE",
    "POTENTIAL_CHECKS",
    "TABLE_CHECKS",
    "WARNING",
    "Check",
    "Finding",
    "PotentialFacts",
    "TableFacts",
    "potential_facts",
    "run_checks",
    "worst",
]
