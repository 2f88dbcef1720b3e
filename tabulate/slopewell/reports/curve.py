"""A curve in the terminal: the energy against separation, with its landmarks, as wide as the terminal."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from .drawing import Drawing
from .view import Limits, number_text, ticks, unit_text

HEIGHT = 11
WIDEST, NARROWEST = 90, 24
DOTS = np.array([[0x01, 0x08], [0x02, 0x10], [0x04, 0x20], [0x40, 0x80]])
"""Bits of the eight dots of a braille character, by row and column."""
SIGNS = {True: (" ", "─", "┆", "│", "┼", "└", "┬"), False: (" ", "-", ":", "|", "+", "+", "+")}
"""Blank, zero line, cutoff, axis, axis at zero, corner and tick, in Unicode and in plain ASCII."""


def curve_lines(drawing: Drawing, width: int, *, plain: bool) -> list[str]:
    """Return the energy of an interaction as lines of text.

    Parameters
    ----------
    drawing : Drawing
    width : int
        Columns that there are.
    plain : bool
        Use ASCII only, as for a pipe.

    Returns
    -------
    list of str
        Empty where there is no energy, or no room to draw it.
    """
    if drawing.energy is None or drawing.view.energy is None:
        return []
    marks = ticks(drawing.view.energy, 5)
    margin = max(len(text) for _, text in marks) + 1
    unit = drawing.units.length.text
    columns = min(width - margin - len(unit) - 3, WIDEST)
    if columns < NARROWEST:
        return []
    canvas = _canvas(drawing, columns, plain=plain)
    _, _, _, axis, crossing, _, _ = SIGNS[not plain]
    labels = {_line(value, drawing.view.energy): text for value, text in marks}
    zero = _line(0.0, drawing.view.energy)
    lines = [f"{'':<{margin}}{unit_text(drawing.units.energy.text)}"]
    for number, row in enumerate(canvas):
        edge = crossing if number == zero else axis
        lines.append(f"{labels.get(number, ''):>{margin - 1}} {edge}{''.join(row)}".rstrip())
    lines += _separation_axis(drawing, margin, columns, plain=plain)
    lines += _wrapped(_notes(drawing), " " * (margin + 1), width)
    return [_ascii(line) for line in lines] if plain else lines


def _wrapped(notes: list[str], margin: str, width: int) -> list[str]:
    """Return notes side by side, as many on a line as fit."""
    lines: list[str] = []
    for note in notes:
        if lines and len(lines[-1]) + len(note) + 3 <= width:
            lines[-1] += f";  {note}"
        else:
            lines.append(margin + note)
    return lines


def _ascii(line: str) -> str:
    plain = line.replace("−", "-").replace("Å", "angstrom").replace(SIGNS[True][2], SIGNS[False][2])
    return plain.encode("ascii", "replace").decode("ascii")


def _line(value: float, limits: Limits) -> int:
    return round((limits[1] - value) / (limits[1] - limits[0]) * (HEIGHT - 1))


def _column(r: float, drawing: Drawing, columns: int) -> int:
    low, high = drawing.view.separation
    return min(max(round((r - low) / (high - low) * (columns - 1)), 0), columns - 1)


def _canvas(drawing: Drawing, columns: int, *, plain: bool) -> list[list[str]]:
    assert drawing.view.energy is not None
    blank, zero_sign, cutoff_sign, *_ = SIGNS[not plain]
    inked = _inked(drawing, columns, (1, 1) if plain else (4, 2))
    canvas = [[blank] * columns for _ in range(HEIGHT)]
    canvas[_line(0.0, drawing.view.energy)] = [zero_sign] * columns
    if drawing.cutoff is not None:
        for row in canvas:
            row[_column(drawing.cutoff, drawing, columns)] = cutoff_sign
    for number, row in enumerate(canvas):
        for column in range(columns):
            cell = inked[number, :, column, :]
            if cell.any():
                row[column] = "*" if plain else chr(0x2800 + int((cell * DOTS).sum()))
    for number, mark in enumerate(drawing.marks, 1):
        if mark.panel == "energy":
            canvas[_line(mark.value, drawing.view.energy)][_column(mark.separation, drawing, columns)] = str(number)
    return canvas


def _inked(drawing: Drawing, columns: int, dots: tuple[int, int]) -> NDArray[np.bool_]:
    """Return which dots the curve covers, as an array of rows, dots down, columns, dots across."""
    assert drawing.energy is not None
    assert drawing.view.energy is not None
    down, across = dots
    low, high = drawing.view.separation
    finite = np.isfinite(drawing.energy)
    width, height = columns * across, HEIGHT * down
    places = np.linspace(low, high, width)
    values = np.interp(places, drawing.separation[finite], drawing.energy[finite])
    bottom, top = drawing.view.energy
    lines = np.clip((top - values) / (top - bottom) * (height - 1), -1, height).round().astype(int)
    grid = np.zeros((height, width), dtype=bool)
    for column, line in enumerate(lines.tolist()):
        # A steep stretch is drawn through, halfway to its neighbours on both sides.
        near = [(line + int(lines[other])) // 2 for other in (column - 1, column + 1) if 0 <= other < width]
        first, last = max(min(line, *near), 0), min(max(line, *near), height - 1)
        grid[first : last + 1, column] = True
    return grid.reshape(HEIGHT, down, columns, across)


def _separation_axis(drawing: Drawing, margin: int, columns: int, *, plain: bool) -> list[str]:
    *_, corner, tick = SIGNS[not plain]
    line, text = [SIGNS[not plain][1]] * columns, [" "] * columns
    for value, label in ticks(drawing.view.separation, max(columns // 14, 2)):
        column = _column(value, drawing, columns)
        line[column] = tick
        start = min(max(column - len(label) // 2, 0), columns - len(label))
        text[start : start + len(label)] = label
    unit = unit_text(drawing.units.length.text)
    return [" " * margin + corner + "".join(line), f"{' ' * (margin + 1)}{''.join(text).rstrip()} {unit}"]


def _notes(drawing: Drawing) -> list[str]:
    energy, length = unit_text(drawing.units.energy.text), unit_text(drawing.units.length.text)
    notes = []
    for number, mark in enumerate(drawing.marks, 1):
        at = f"{number_text(mark.separation, 4)} {length}"
        if mark.kind == "zero-crossing":
            notes.append(f"{number} zero crossing {at}")
        elif mark.kind == "equilibrium":
            notes.append(f"{number} depth {number_text(-mark.value, 4)} {energy} at {at}")
    if drawing.cutoff is not None:
        notes.append(f"{SIGNS[True][2]} cutoff {number_text(drawing.cutoff, 4)} {length}")
    return notes
