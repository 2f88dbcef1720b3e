"""What every format stores about a table beside its numbers, in one place."""

from __future__ import annotations

import json
from typing import Any

from ..table import Rows, Table
from ..units import UnitSystem

SCHEMA = "slopewell/table/1"
FORCE_MEANING = "The force is -dU/dr: negative pulls together, positive pushes apart."
TEXTS = ("title", "source", "purpose", "document", "document_sha256", "constants", "writer")


def provenance(table: Table) -> dict[str, Any]:
    """Return what is stored about a table, by key, in a fixed order."""
    return {
        "schema": SCHEMA,
        **{key: getattr(table, key) for key in TEXTS},
        "coordinate": table.coordinate,
        "force": FORCE_MEANING,
        "history": list(table.history),
        "report": table.report,
    }


def table_from(stored: dict[str, Any], rows: tuple[Rows, ...], units: UnitSystem) -> Table:
    """Return the table of what was stored; what is missing is left empty."""
    history = stored.get("history", [])
    return Table(
        interactions=rows,
        units=units,
        history=tuple(json.loads(history) if isinstance(history, str) else history),
        report=stored.get("report") or {},
        coordinate=stored.get("coordinate", "separation"),
        **{key: str(stored.get(key, "")) for key in TEXTS},
    )
