"""Plans for people: one small table an interaction, spacing by interpolation rule."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import groupby
from typing import Any

from ..document.model import EVEN_IN
from ..units import UnitSystem

HEAD = ("rows even in", "read by", "rows", "bytes", "force error", "drift")


def plan_lines(plans: Iterable[Any], units: UnitSystem) -> list[str]:
    """Return the plans as lines of text, errors of the force in the document's unit."""
    lines: list[str] = []
    for name, group in groupby(plans, key=lambda plan: plan.interaction):
        cells = [HEAD, *(_cells(plan) for plan in group)]
        lines += ["", f"{name}  (force error and drift at most, in {units.force.text})"]
        lines += _aligned(cells)
    return lines[1:]


def _cells(plan: Any) -> tuple[str, ...]:
    if plan.rows is None:
        return (EVEN_IN[plan.spacing], plan.interpolation, "more than 10⁷", "", "", "")
    drift = f"{plan.drift_bound:.2g}" if plan.drift_bound else "none"
    return (
        EVEN_IN[plan.spacing],
        plan.interpolation,
        f"{plan.rows:,}",
        _bytes(plan.size),
        f"{plan.force_error_bound:.2g}",
        drift,
    )


def _bytes(size: int) -> str:
    for unit in ("B", "kB", "MB"):
        if size < 1000:
            return f"{size:.3g} {unit}"
        size = size / 1000  # type: ignore[assignment]
    return f"{size:.3g} GB"


def _aligned(cells: Sequence[Sequence[str]]) -> list[str]:
    """Align columns: the first two to the left, numbers to the right."""
    widths = [max(len(row[column]) for row in cells) for column in range(len(HEAD))]
    return [
        "  "
        + "  ".join(
            cell.ljust(width) if column < 2 else cell.rjust(width)
            for column, (cell, width) in enumerate(zip(row, widths, strict=True))
        ).rstrip()
        for row in cells
    ]
