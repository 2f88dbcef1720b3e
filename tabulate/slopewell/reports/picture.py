"""Pictures of drawings by matplotlib, in the look of the page, for a paper or a README."""

from __future__ import annotations

from collections.abc import Sequence
from math import ceil, sqrt
from pathlib import Path
from typing import TYPE_CHECKING, Any

from ..problems import Problem, UnusableInput
from .annotation import Mark
from .drawing import Drawing
from .panels import Panel, panels_of, senses
from .verdicts import VERDICTS
from .view import number_text, unit_text

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure, SubFigure

INK, SOFT, GRID, WINDOW, BRIDGE = "#1d2227", "#565e66", "#ebe9e3", "#7a6bb0", "#2f8f7a"
COLOURS = {"energy": "#00639c", "force": "#a8470b", "other": "#3d434a"}
LINES: dict[str, Any] = {
    "energy": "-",
    "force": (0, (5, 1.5)),
    "other": (0, (1, 2)),
}
LEVELS = {"error": "#a3123f", "warning": "#805500", "note": "#4a5560"}
STYLE: Any = {
    "font.family": "DejaVu Sans",
    "font.size": 9,
    "axes.unicode_minus": True,
    "svg.hashsalt": "slopewell",
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.edgecolor": SOFT,
    "axes.labelcolor": INK,
    "xtick.color": SOFT,
    "xtick.labelsize": "small",
    "ytick.labelsize": "small",
    "ytick.color": SOFT,
    "text.color": INK,
}
WIDTH, HEIGHT = 4.6, 4.4
"""Inches that one interaction takes."""
FEW = 6
"""Up to so many interactions each has its labels; more are drawn as an overview."""
MOST = 400
"""Interactions that fit a picture."""


def figure_of(title: str, drawings: Sequence[Drawing]) -> Figure:
    """Return a figure: for each interaction energy above force over one separation axis.

    Parameters
    ----------
    title : str
    drawings : sequence of Drawing
        At least one.
    """
    import matplotlib as mpl
    from matplotlib.figure import Figure

    drawings = drawings[:MOST]
    few = len(drawings) <= FEW
    across = min(len(drawings), 3) if few else ceil(sqrt(len(drawings)))
    down = ceil(len(drawings) / across)
    size = 1.0 if few else 0.55
    with mpl.rc_context({**STYLE, "font.size": 9 if few else 6}):
        figure = Figure(figsize=(WIDTH * across * size, HEIGHT * down * size + 0.4), layout="constrained")
        figure.suptitle(title, fontsize=11, fontweight="bold", x=0.01, ha="left")
        parts = figure.subfigures(down, across, squeeze=False).ravel()
        for part, drawing in zip(parts, drawings, strict=False):
            _draw(part, drawing, labelled=few)
    return figure


def write_picture(title: str, drawings: Sequence[Drawing], path: Path) -> None:
    """Write a picture in the format that its ending names; the same drawings give the same bytes.

    Raises
    ------
    UnusableInput
        If it can't be written.
    """
    import matplotlib as mpl

    figure = figure_of(title, drawings)
    no_clock = {".svg": {"Date": None}, ".pdf": {"CreationDate": None}}.get(path.suffix.lower(), {})
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        with mpl.rc_context(STYLE):
            figure.savefig(path, dpi=160, metadata=no_clock)
    except OSError as error:
        says = f"The picture can't be written: {error.strerror or error}."
        raise UnusableInput([Problem("--output", says, "Check the folder.")], str(path)) from None


def _draw(part: SubFigure, drawing: Drawing, *, labelled: bool) -> None:
    panels = panels_of(drawing)
    heights = [1.15 if panel.kind == "energy" else 1.0 if panel.high else 0.5 for panel in panels]
    axes = part.subplots(len(panels), 1, sharex=True, squeeze=False, height_ratios=heights)[:, 0]
    words = VERDICTS[drawing.verdict]
    axes[0].set_title(
        f"{drawing.name}   {words.sign} {words.words.lower()}",
        loc="left",
        fontweight="bold",
        fontsize="medium",
    )
    for ax, panel in zip(axes, panels, strict=True):
        _panel(ax, panel, drawing, labelled=labelled)
    axes[-1].set_xlim(*drawing.view.separation)
    axes[-1].set_xlabel(f"separation, {unit_text(drawing.units.length.text)}")
    part.align_ylabels(list(axes))


def _panel(ax: Axes, panel: Panel, drawing: Drawing, *, labelled: bool) -> None:
    column = panel.kind.partition("-")[0]
    ax.grid(axis="y", color=GRID, linewidth=0.6)
    ax.set_axisbelow(True)
    if drawing.switch_start is not None and drawing.cutoff is not None:
        ax.axvspan(drawing.switch_start, drawing.cutoff, color=WINDOW, alpha=0.12, linewidth=0)
    for start, end in drawing.bridges:
        ax.axvspan(start, end, color=BRIDGE, alpha=0.15, linewidth=0)
    if drawing.cutoff is not None:
        ax.axvline(drawing.cutoff, color=SOFT, linewidth=0.9, linestyle=(0, (5, 4)))
    _flags(ax, drawing)
    ax.axhline(0.0, color=SOFT, linewidth=0.8)
    for name, values in panel.curves:
        label = _curve_label(name, drawing)
        ax.plot(drawing.separation, values, color=COLOURS[name], linestyle=LINES[name], linewidth=1.7, label=label)
    ax.set_ylim(*panel.limits)
    unit = unit_text(drawing.units.per_length(panel.per_length).text)
    ax.set_ylabel(f"{panel.title.lower()}, {unit}", color=COLOURS[column])
    if not labelled:
        return
    for mark in drawing.marks:
        if mark.panel == panel.kind and panel.limits[0] <= mark.value <= panel.limits[1]:
            _mark(ax, mark, drawing)
    if panel.kind == "energy":
        _ends(ax, drawing)
        if drawing.points:
            ax.plot(
                *zip(*drawing.points, strict=True),
                "o",
                markersize=3,
                color=COLOURS["energy"],
                label="_points",
            )
    for words, side in senses(panel):
        height, anchor = (0.97, "top") if side == "above" else (0.14, "bottom")
        place = {"transform": ax.transAxes, "ha": "right", "va": anchor}
        ax.text(0.985, height, words, fontdict=place, color=COLOURS[column], fontsize="small")
    if drawing.other is not None and panel.high:
        ax.legend(loc="center right", frameon=False, fontsize="small")


def _curve_label(name: str, drawing: Drawing) -> str:
    if drawing.other is None:
        return name
    return drawing.other.label if name == "other" else drawing.other.first_label


def _flags(ax: Axes, drawing: Drawing) -> None:
    low, high = drawing.view.separation
    for flag in drawing.flags:
        if flag.start is None or flag.end is None:
            continue
        start, end = (min(max(place, low), high) for place in (flag.start, flag.end))
        colour = LEVELS[str(flag.finding["level"])]
        if end - start < 2e-3 * (high - low):
            ax.axvline(start, color=colour, linewidth=1.4)
        else:
            ax.axvspan(start, end, color=colour, alpha=0.1, linewidth=0)


def _mark(ax: Axes, mark: Mark, drawing: Drawing) -> None:
    units = drawing.units
    energy, length = unit_text(units.energy.text), unit_text(units.length.text)
    at = f"{number_text(mark.separation, 4)} {length}"
    words = {
        "zero-crossing": f"zero crossing {at}",
        "equilibrium": f"depth {number_text(-mark.value, 4)} {energy} at {at}",
        "largest-attraction": f"largest attraction {number_text(mark.value, 4)} {energy}/{length}",
    }[mark.kind]
    low, high = drawing.view.separation
    right = mark.separation < low + 0.6 * (high - low)
    above = mark.kind == "zero-crossing"
    ax.plot(
        [mark.separation],
        [mark.value],
        "o",
        markersize=5,
        markerfacecolor="white",
        markeredgecolor=INK,
        label="_" + mark.kind,
    )
    ax.annotate(
        words,
        (mark.separation, mark.value),
        xytext=(7 if right else -7, 5 if above else -5),
        textcoords="offset points",
        ha="left" if right else "right",
        va="bottom" if above else "top",
        fontsize="small",
    )


def _ends(ax: Axes, drawing: Drawing) -> None:
    if drawing.cutoff is None:
        return
    length = unit_text(drawing.units.length.text)
    words = f"cutoff {number_text(drawing.cutoff, 4)} {length}"
    if drawing.switch_start is not None:
        words += f"\nswitch from {number_text(drawing.switch_start, 4)} {length}"
    ax.annotate(
        words,
        (drawing.cutoff, 1.0),
        xycoords=("data", "axes fraction"),
        xytext=(-5, -3),
        textcoords="offset points",
        ha="right",
        va="top",
        fontsize="small",
        color=SOFT,
    )
