"""Comparisons of tables, for people."""

from __future__ import annotations

import sys
from collections.abc import Iterator
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from rich.console import Console

    from .comparison import Comparison

LABEL_WIDTH = 24


def console() -> Console:
    """Return a console that wraps at the terminal's width, or at 100 columns elsewhere."""
    from rich.console import Console

    width = None if sys.stdout.isatty() else 100
    return Console(file=sys.stdout, width=width, highlight=False, markup=False, emoji=False)


def comparison_lines(found: Comparison) -> Iterator[str]:
    """Yield the lines that show a comparison."""
    energy, length, force = found.units.energy.text, found.units.length.text, found.units.force.text
    units = dict.fromkeys(("equilibrium_separation", "zero_crossing"), length)
    units |= {"well_depth": energy, "stiffness": found.units.per_length(2).text}
    for difference in found.differences:
        yield difference.interaction
        yield _line("compared", f"from {difference.start:.6g} to {difference.end:.6g} {length}")
        size, place = difference.energy
        yield _line("largest difference", f"{size:.3g} {energy} at {place:.6g} {length}" if size else "none")
        if difference.force is not None:
            size, place = difference.force
            if size:
                yield _line("", f"{size:.3g} {force} at {place:.6g} {length}")
        for label, part in (("energy", difference.relative), ("force", difference.force_relative)):
            if label == "energy" or part > found.tolerance:
                verdict = "within" if part <= found.tolerance else "beyond"
                yield _line(f"over the {label} scale", f"{part:.3g} ({verdict} {found.tolerance:.3g})")
        for name, (first, second) in difference.landmarks.items():
            if first is not None or second is not None:
                unit = units[name]
                yield _line(name.replace("_", " "), f"{_number(first)} and {_number(second)} {unit}")
        if difference.explained_by is not None:
            yield _line("explained by", difference.explained_by.says)
        yield ""
    for names, which in ((found.only_first, "first"), (found.only_second, "second")):
        if names:
            yield f"only in the {which}: {', '.join(names)}"


def _line(label: str, text: str) -> str:
    return f"  {label:<{LABEL_WIDTH}}{text}"


def _number(value: float | None) -> str:
    return "none" if value is None else f"{value:.8g}"
