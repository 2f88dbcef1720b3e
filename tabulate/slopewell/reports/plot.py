"""The panels of the page: curves as SVG that stretches, words and numbers as HTML that does not."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from math import log10

import numpy as np
from numpy.typing import NDArray

from ..units import UnitSystem, ratio
from .annotation import Mark
from .drawing import Drawing
from .markup import Markup, join, quantity, tag
from .panels import Panel, senses, share
from .view import decades, ticks, unit_text

Array = NDArray[np.float64]

SIZE = 1000
"""Width and height of a panel in its own coordinates."""
LEVEL_SIGNS = {"error": "✕", "warning": "▲", "note": "●"}
LABEL_DIGITS = 4
CROWDED = 0.07
"""Part of the width within which two flags would cover each other."""


def panel_markup(panel: Panel, drawing: Drawing, systems: Sequence[UnitSystem]) -> Markup:
    """Return one panel with its axis, curves, zero line and marks."""
    unit = drawing.units.per_length(panel.per_length).text
    powers = f"1,{-panel.per_length}"
    heading = tag(
        "p",
        tag("span", class_=f"sample {panel.kind}", aria_hidden="true"),
        tag("strong", panel.title),
        ", ",
        tag("span", unit_text(unit), class_="unit", data_powers=powers),
        class_="panel-title",
    )
    words = [tag("span", text, class_=f"sense {side}") for text, side in senses(panel)]
    plot = tag(
        "div",
        _svg(panel, drawing),
        _vertical_ticks(panel, drawing, systems),
        *words,
        join([_mark(mark, number, panel, drawing) for number, mark in enumerate(drawing.marks, 1)]),
        join([_ends(drawing), *_points(drawing, panel)] if panel.kind == "energy" else []),
        tag("i", class_="dot", hidden=True),
        class_="plot",
        data_panel=panel.kind,
        data_limits=f"{panel.limits[0]!r},{panel.limits[1]!r}",
    )
    return tag("div", heading, plot, class_=f"panel {panel.kind}" + ("" if panel.high else " low"))


def _along(r: float, drawing: Drawing) -> float:
    low, high = drawing.view.separation
    return 100 * (r - low) / (high - low)


def _svg(panel: Panel, drawing: Drawing) -> Markup:
    low, high = drawing.view.separation
    x = (drawing.separation - low) / (high - low) * SIZE
    zero = share(0.0, panel.limits) / 100 * SIZE
    parts = []
    if drawing.switch_start is not None and drawing.cutoff is not None:
        start, end = (max(0.0, _along(place, drawing)) / 100 * SIZE for place in (drawing.switch_start, drawing.cutoff))
        width = f"{end - start:.1f}"
        parts.append(tag("rect", class_="window", x=f"{start:.1f}", y=0, width=width, height=SIZE))
    for bridge in drawing.bridges:
        start, end = (min(max(_along(place, drawing), 0.0), 100.0) / 100 * SIZE for place in bridge)
        width = f"{max(end - start, 2):.1f}"
        parts.append(tag("rect", class_="bridge", x=f"{start:.1f}", y=0, width=width, height=SIZE))
    parts += [_flag_area(flag.start, flag.end, str(flag.finding["level"]), drawing) for flag in drawing.flags]
    if not panel.logarithmic:
        parts.append(tag("path", class_="zero", d=f"M0 {zero:.1f}H{SIZE}"))
    if drawing.cutoff is not None:
        parts.append(tag("path", class_="cutoff", d=f"M{_along(drawing.cutoff, drawing) * SIZE / 100:.1f} 0V{SIZE}"))
    for name, values in panel.curves:
        y = (panel.limits[1] - values) / (panel.limits[1] - panel.limits[0]) * SIZE
        parts.append(tag("path", class_=f"curve {name}", d=_path(x, y)))
    return tag(
        "svg",
        *parts,
        viewBox=f"0 0 {SIZE} {SIZE}",
        preserveAspectRatio="none",
        aria_hidden="true",
        focusable="false",
    )


def _flag_area(start: float | None, end: float | None, level: str, drawing: Drawing) -> Markup:
    if start is None or end is None:
        return Markup("")
    low, high = (min(max(_along(place, drawing), 0.0), 100.0) * SIZE / 100 for place in (start, end))
    if high - low < 1:
        return tag("path", class_=f"place {level}", d=f"M{low:.1f} 0V{SIZE}")
    return tag("rect", class_=f"place {level}", x=f"{low:.1f}", y=0, width=f"{high - low:.1f}", height=SIZE)


def _path(x: Array, y: Array) -> str:
    """Return a polyline, broken where a value is missing, without the points far outside the panel."""
    seen = np.isfinite(y)
    near = (y > -0.2 * SIZE) & (y < 1.2 * SIZE)
    wanted = seen & (near | np.roll(near, 1) | np.roll(near, -1))
    clipped = np.clip(y, -2 * SIZE, 3 * SIZE)
    pieces: list[str] = []
    joined = False
    for at, across, down in zip(wanted.tolist(), x.tolist(), clipped.tolist(), strict=True):
        if at:
            pieces.append(f"{'L' if joined else 'M'}{across:.1f} {down:.1f}")
        joined = at
    return "".join(pieces)


def _vertical_ticks(panel: Panel, drawing: Drawing, systems: Sequence[UnitSystem]) -> Markup:
    own = drawing.units.per_length(panel.per_length)
    parts = []
    for index, system in enumerate(systems):
        factor = float(ratio(own, system.per_length(panel.per_length)))
        if panel.logarithmic:
            limits = (panel.limits[0] + log10(factor), panel.limits[1] + log10(factor))
            found = decades(limits)
        else:
            limits = (panel.limits[0] * factor, panel.limits[1] * factor)
            found = ticks(limits, 6 if panel.high else 3)
        parts += [
            tag("span", tag("i", text), class_=f"tick u{index}", style=f"top:{share(value, limits):.2f}%")
            for value, text in found
        ]
    return tag("div", *parts, class_="ticks", aria_hidden="true")


def separation_axis(drawing: Drawing, systems: Sequence[UnitSystem]) -> Markup:
    """Return the axis that all panels of a drawing share."""
    parts = []
    for index, system in enumerate(systems):
        factor = float(ratio(drawing.units.length, system.length))
        low, high = (end * factor for end in drawing.view.separation)
        parts += [
            tag(
                "span",
                tag("i", text),
                class_=f"tick u{index}",
                style=f"left:{100 * (value - low) / (high - low):.2f}%",
            )
            for value, text in ticks((low, high), 7)
        ]
    unit = tag("span", unit_text(drawing.units.length.text), class_="unit", data_powers="0,1")
    title = tag("p", tag("strong", "Separation"), ", ", unit, class_="axis-title")
    return tag("div", tag("div", *parts, class_="ticks", aria_hidden="true"), title, class_="axis")


def _mark(mark: Mark, number: int, panel: Panel, drawing: Drawing) -> Markup:
    across, down = _along(mark.separation, drawing), share(mark.value, panel.limits)
    if mark.panel != panel.kind or not (0 <= across <= 100 and 0 <= down <= 100):
        return Markup("")
    side = "left" if across > 60 else "right"
    label = tag(
        "span",
        tag("b", str(number)),
        tag("span", " ", *_mark_words(mark, drawing), class_="long"),
        class_="label",
    )
    return tag("span", label, class_=f"mark {mark.kind} {side}", style=f"left:{across:.2f}%;top:{down:.2f}%")


def _mark_words(mark: Mark, drawing: Drawing) -> list[Markup]:
    at = quantity(mark.separation, drawing.units.length.text, 0, 1, LABEL_DIGITS)
    match mark.kind:
        case "zero-crossing":
            return [join(["zero crossing ", at])]
        case "equilibrium":
            return [
                join(
                    [
                        "depth ",
                        quantity(-mark.value, drawing.units.energy.text, 1, 0, LABEL_DIGITS),
                        " at ",
                        at,
                    ]
                )
            ]
        case _:
            return [
                join(
                    [
                        "largest attraction ",
                        quantity(mark.value, drawing.units.force.text, 1, -1, LABEL_DIGITS),
                    ]
                )
            ]


def _points(drawing: Drawing, panel: Panel) -> Iterator[Markup]:
    """Yield the points that the curve was put through, and the names of bridges."""
    for r, energy in drawing.points:
        across, down = _along(r, drawing), share(energy, panel.limits)
        if 0 <= across <= 100 and 0 <= down <= 100:
            yield tag("i", class_="point", style=f"left:{across:.2f}%;top:{down:.2f}%")
    for start, end in drawing.bridges:
        middle = (_along(start, drawing) + _along(end, drawing)) / 2
        if 0 <= middle <= 100:
            yield tag("span", "bridge" if end > start else "join", class_="joined", style=f"left:{middle:.2f}%")


def _ends(drawing: Drawing) -> Markup:
    """Return the names of the cutoff and of the switching window, at the top of a panel."""
    if drawing.cutoff is None:
        return Markup("")
    unit = drawing.units.length.text
    lines: list[str] = ["cutoff ", quantity(drawing.cutoff, unit, 0, 1)]
    if drawing.switch_start is not None:
        lines += [tag("br"), "switch from ", quantity(drawing.switch_start, unit, 0, 1)]
    return tag("span", *lines, class_="end", style=f"right:{100 - _along(drawing.cutoff, drawing):.2f}%")


def flag_track(drawing: Drawing, prefix: str) -> Markup:
    """Return a strip with a link for each finding, above the place where it happens."""
    rows: list[float] = []
    parts = []
    for number, flag in enumerate(drawing.flags, 1):
        if flag.start is None or flag.end is None:
            continue
        place = min(max(_along((flag.start + flag.end) / 2, drawing), 0.0), 100.0)
        row = next((index for index, last in enumerate(rows) if abs(place - last) > 100 * CROWDED), len(rows))
        rows[row : row + 1] = [place]
        level = str(flag.finding["level"])
        name = f"{level}: {flag.finding['check']}"
        parts.append(
            tag(
                "a",
                tag("span", LEVEL_SIGNS[level], aria_hidden="true"),
                f" {letter(number)}",
                href=f"#{prefix}-finding-{number}",
                class_=f"flag {level}",
                title=name,
                aria_label=f"{letter(number)}, {name}",
                style=f"--place:{place:.2f}%;--row:{row}",
            )
        )
    return tag("div", *parts, class_="track", style=f"--rows:{len(rows)}") if parts else Markup("")


def letter(number: int) -> str:
    """Return the letter of a finding: A, B … Z, AA …"""
    return letter((number - 1) // 26) + chr(ord("A") + (number - 1) % 26) if number else ""
