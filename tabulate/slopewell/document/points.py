"""Read the points of an energy curve from a text file of columns beside the document."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Mapping
from dataclasses import replace
from fractions import Fraction
from typing import Any

from ..potential.splines import SPLINES, Points
from ..problems import nearest
from ..units import UnitSystem
from .setting import Setting
from .values import Notes, read_units

COLUMNS = ("separation", "energy", "slope", "force", "error", "weight", "skip")
"""What a column of points may hold: ``error`` is the standard error of the energy."""
COMMENTS = ("#", "!", ";", "//", "@")
SPLIT = re.compile(r"\s*[,;]\s*|\s+")
NUMBER = re.compile(r"[-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d{1,3})?")
MOST_POINTS = 10_000


def read_points(notes: Notes, path: str, key: str, given: Mapping[str, Any], setting: Setting) -> Points | None:
    """Return the points that a file holds, ascending; None, and problems noted, if it can't be used.

    Parameters
    ----------
    notes : Notes
    path, key : str
        Key path of the table that names the file, and the key in it.
    given : mapping
        That table: the file, ``columns``, ``units``, and ``spline`` where one is wanted.
    setting : Setting
    """
    place = f"{path}.{key}"
    units = read_units(notes, f"{path}.units", given["units"]) if "units" in given else setting.units
    names = given.get("columns", ["separation", "energy"])
    if units is None or not _check_names(notes, f"{path}.columns", names):
        return None
    rows = _rows(notes, place, given[key], setting, names)
    if rows is None:
        return None
    rows.sort(key=lambda row: row[names.index("separation")])
    columns = {name: [row[index] for row in rows] for index, name in enumerate(names)}
    points = replace(_points(columns, units), file=given[key], sha256=_checksum(setting, given[key]))
    says = _fault(points, given.get("spline", "cubic") if key == "points" else "")
    if says:
        notes.add(place, f"{given[key]}: {says[0]}", says[1])
        return None
    return points


def _checksum(setting: Setting, file: str) -> str:
    """Return the SHA-256 of a file beside the document."""
    return hashlib.sha256((setting.folder / file).read_bytes()).hexdigest()


def _check_names(notes: Notes, path: str, names: list[str]) -> bool:
    for index, name in enumerate(names):
        if name not in COLUMNS:
            notes.add(f"{path}[{index}]", f'"{name}" is no column of points.', nearest(name, COLUMNS))
            return False
        if name != "skip" and names.count(name) > 1:
            notes.add(f"{path}[{index}]", f'"{name}" stands twice.', "Call one of them skip.")
            return False
    for name in ("separation", "energy"):
        if name not in names:
            notes.add(path, f"No column holds the {name}.", f'Name one column "{name}".')
            return False
    return True


def _rows(notes: Notes, place: str, file: str, setting: Setting, names: list[str]) -> list[list[Fraction]] | None:
    try:
        text = (setting.folder / file).read_text(encoding="utf-8-sig")
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or "it is not UTF-8"
        notes.add(
            place,
            f'The file "{file}" can\'t be read: {reason}.',
            "Its place counts from the document's folder.",
        )
        return None
    rows: list[list[Fraction]] = []
    for number, line in enumerate(text.splitlines(), start=1):
        stripped = line.strip()
        if not stripped or stripped.startswith(COMMENTS):
            continue
        tokens = [token for token in SPLIT.split(stripped) if token]
        if not rows and not NUMBER.fullmatch(tokens[0]):
            continue
        if len(tokens) != len(names):
            says = f"{file}, line {number}: {len(tokens)} columns; {len(names)} are named ({', '.join(names)})."
            notes.add(place, says, "Name every column under columns; call those without meaning skip.", line[:100])
            return None
        faulty = next(
            (t for t, name in zip(tokens, names, strict=True) if name != "skip" and not NUMBER.fullmatch(t)),
            None,
        )
        if faulty is not None:
            notes.add(place, f'{file}, line {number}: "{faulty[:30]}" is no number.', "Mend that row.", line[:100])
            return None
        rows.append([Fraction(t) if NUMBER.fullmatch(t) else Fraction(0) for t in tokens])
        if len(rows) > MOST_POINTS:
            notes.add(place, f"{file} holds more than {MOST_POINTS:,} points.", "Thin them out.")
            return None
    return rows


def _points(columns: dict[str, list[Fraction]], units: UnitSystem) -> Points:
    energy, force = units.energy.factor, units.force.factor
    slopes = columns.get("slope") or [-value for value in columns.get("force", [])]
    return Points(
        separation=tuple(value * units.length.factor for value in columns["separation"]),
        energy=tuple(value * energy for value in columns["energy"]),
        slope=tuple(value * force for value in slopes),
        error=tuple(float(value * energy) for value in columns.get("error", [])),
        weight=tuple(float(value) for value in columns.get("weight", [])),
    )


def _fault(points: Points, spline: str) -> tuple[str, str] | None:
    """Return what is wrong with points, and how to mend it."""
    count, needed = len(points.separation), SPLINES.get(spline, 2)
    if count < needed:
        return f"{count} points are too few; {needed} are needed.", "Add points, or choose another spline."
    if points.separation[0] <= 0:
        return "A separation is not positive.", "Take that point out."
    if any(a == b for a, b in zip(points.separation, points.separation[1:], strict=False)):
        return "Two points have one separation.", "Keep one of them, or their mean."
    if any(error <= 0 for error in points.error):
        return "A standard error is not positive.", "Give its size."
    if spline == "smoothing" and not points.error:
        return "A smoothing spline needs the standard errors of the energies.", 'Name a column "error".'
    if spline in ("monotone", "smoothing") and points.slope:
        return (
            f"A {spline} spline chooses its own slopes.",
            'Call the column "skip", or choose another spline.',
        )
    if any(weight < 0 for weight in points.weight) or (points.weight and not any(points.weight)):
        return "Weights must not be negative, nor all zero.", "Give their sizes."
    return None
