"""What every test may use: published values, each with its source."""

from __future__ import annotations

import json
import re
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache
from pathlib import Path

import pytest
from hypothesis import settings

# A slow machine is no failure.
settings.register_profile("slopewell", deadline=None)
settings.load_profile("slopewell")

REFERENCES = Path(__file__).parent / "references"


@dataclass(frozen=True)
class Published:
    """A published value with its source; what a value rests on stands in ``provenance``."""

    id: str
    quantity: str
    value: str
    unit: str
    tolerance: str
    source: str
    provenance: str
    conditions: str = ""

    @property
    def number(self) -> float:
        """The value of an entry that holds one number."""
        return float(self.value)

    def part(self, name: str) -> float:
        """One number of an entry that holds several, such as ``U=4.5 eV; F=12.2 eV/A``."""
        found = re.search(rf"(?:^|; ){re.escape(name)}=([-+.0-9eE]+)", self.value)
        assert found, f"{self.id} has no {name}: {self.value}"
        return float(found[1])


@cache
def _entries() -> dict[str, Published]:
    files = sorted(REFERENCES.glob("*.json"))
    entries = [Published(**entry) for file in files for entry in json.loads(file.read_text(encoding="utf-8"))]
    return {entry.id: entry for entry in entries}


@pytest.fixture(scope="session")
def published() -> Callable[[str], Published]:
    """Return the published entry of an id such as ``T01-027``."""
    return _entries().__getitem__
