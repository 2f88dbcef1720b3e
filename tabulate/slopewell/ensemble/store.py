"""A folder with a folder for every finished set, each of which appears whole or not at all."""

from __future__ import annotations

import json
import os
import shutil
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from ..problems import Problem, UnusableInput
from .job import Outcome

RECORD = "set.json"
"""The file in every set's folder that says what the set is and what came of it."""
PART = ".part"


@dataclass(frozen=True, slots=True)
class Store:
    """The sets that are finished, one folder each."""

    folder: Path

    def sweep(self) -> None:
        """Remove what a killed run left unfinished."""
        for left in self.folder.glob(f".*{PART}"):
            shutil.rmtree(left, ignore_errors=True)

    def record(self, name: str) -> dict[str, Any] | None:
        """Return the record of a set; None where there is none."""
        try:
            found = json.loads((self.folder / name / RECORD).read_text(encoding="utf-8"))
        except (OSError, ValueError):
            return None
        return found if isinstance(found, dict) else None

    def finished(self, name: str, content: str) -> bool:
        """Whether a set of this content is there with all its files."""
        found = self.record(name)
        return (
            found is not None
            and found.get("content") == content
            and all((self.folder / name / file).is_file() for file in found.get("files", ()))
        )

    def put(self, outcome: Outcome) -> None:
        """Store a set whole, in place of an older one of its name.

        Raises
        ------
        UnusableInput
            If it can't be written.
        """
        final, part, old = (self.folder / f"{lead}{outcome.name}{end}" for lead, end in NAMES)
        try:
            for file, held in outcome.files.items():
                _write(part / file, held)
            _write(part / RECORD, record_text(outcome.record).encode())
            if final.exists():
                os.replace(final, old)
            os.replace(part, final)
        except OSError as error:
            says = f"{final} can't be written: {error.strerror or error}."
            remedy = "Check the folder and the space left; sets that are done stay done."
            raise UnusableInput([Problem("", says, remedy)], str(final)) from None
        finally:
            shutil.rmtree(part, ignore_errors=True)
            shutil.rmtree(old, ignore_errors=True)


NAMES = (("", ""), (".new-", PART), (".old-", PART))
"""What a set's folder is called when it is finished, while it is written, and while it is replaced."""


def record_text(record: dict[str, Any]) -> str:
    """Return a record as it is stored."""
    return json.dumps(record, indent=1, ensure_ascii=False, allow_nan=False) + "\n"


def _write(path: Path, held: bytes) -> None:
    path.parent.mkdir(parents=True, exist_ok=True)
    with path.open("wb") as file:
        file.write(held)
        file.flush()
        os.fsync(file.fileno())
