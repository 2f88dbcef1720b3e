"""Read what an energy is made of: a form, a formula, points, a sum of terms, or segments."""

from __future__ import annotations

import itertools
from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import Any

from ..formula import Tree
from ..formula.branches import Piece, TooManyBranches, resolve
from ..formula.tree import Apply, R, multiply, number
from ..potential import Curve
from ..potential.fitting import Fit
from ..potential.joins import Bridge, Join, JoinError, join_segments
from ..potential.splines import Points, SplineError, extended, spline
from ..potential.sums import add_curves
from ..units.constants import COULOMB
from .energy import read_formula
from .fits import fitted
from .points import read_points
from .setting import Setting
from .values import Notes, read_quantity

Range = tuple[Fraction, Fraction]
"""First and last separation in ångström."""


@dataclass(frozen=True, slots=True)
class Composition:
    """An energy curve and what it is made of.

    Attributes
    ----------
    curve : Curve
    text : str
        The formula, or what stands for it.
    form : str
        Name of the form where there is one form and nothing else.
    values : mapping
        Values of its parameters in eV and ångström.
    force : Tree or None
        The force that the source states.
    bridges : tuple of Bridge
    splines : tuple of (Points, Curve)
    fits : tuple of Fit
    """

    curve: Curve
    text: str
    form: str = ""
    values: Mapping[str, Fraction] = field(default_factory=dict)
    force: Tree | None = None
    bridges: tuple[Bridge, ...] = ()
    splines: tuple[tuple[Points, Curve], ...] = ()
    fits: tuple[Fit, ...] = ()


def read_composition(
    notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting, within: Range
) -> Composition | None:
    """Return the energy that an interaction, a segment or a term states on a range.

    Returns None, and notes the problems, if anything is wrong with it.
    """
    if not _keys_fit(notes, path, entry):
        return None
    if "segment" in entry:
        return _segments(notes, f"{path}.segment", entry["segment"], setting, within)
    if "term" in entry:
        places = [f"{path}.term[{index}]" for index in range(len(entry["term"]))]
        parts = [
            read_composition(notes, place, term, setting, within)
            for place, term in zip(places, entry["term"], strict=True)
        ]
        kept = [part for part in parts if part is not None]
        return _gathered(add_curves([p.curve for p in kept]), kept, " + ") if len(kept) == len(parts) else None
    if "points" in entry:
        return _spline(notes, path, entry, setting, within)
    return _formula(notes, path, entry, setting, within)


def _keys_fit(notes: Notes, path: str, entry: Mapping[str, Any]) -> bool:
    """Refuse keys of a form or formula beside what is none."""
    kind = next((kind for kind in ("segment", "term", "points") if kind in entry), None)
    without = [key for key in ("parameters", "fit", "force") if kind and key in entry]
    for key in without:
        notes.add(
            f"{path}.{key}",
            f'"{key}" has no meaning beside "{kind}".',
            "It belongs to a form or formula; take it out.",
        )
    return not without


def _gathered(curve: Curve, parts: list[Composition], sign: str) -> Composition:
    return Composition(
        curve=curve,
        text=sign.join(f"({part.text})" for part in parts) if len(parts) > 1 else parts[0].text,
        bridges=tuple(bridge for part in parts for bridge in part.bridges),
        splines=tuple(one for part in parts for one in part.splines),
        fits=tuple(fit for part in parts for fit in part.fits),
    )


def _formula(notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting, within: Range) -> Composition | None:
    found: tuple[Fit, ...] = ()
    if "fit" in entry:
        done = fitted(notes, path, entry, setting)
        if done is None:
            return None
        entry, fit = done
        found = (fit,)
    formula = read_formula(notes, path, entry, setting.units)
    if formula is None:
        return None
    curve = read_curve(notes, f"{path}.{'form' if formula.form else 'energy'}", formula.bound("energy"), within)
    if curve is None:
        return None
    return Composition(
        curve=curve,
        text=formula.texts["energy"],
        form=formula.form.name if formula.form else "",
        values=formula.named.values,
        force=formula.bound("force") if "force" in formula.trees else None,
        fits=found,
    )


def read_curve(notes: Notes, path: str, tree: Tree, within: Range) -> Curve | None:
    """Return the curve of a tree, its branches resolved; None, and a problem noted, if they can't be."""
    try:
        return Curve(resolve(tree, *within))
    except TooManyBranches as error:
        notes.add(path, f"where, abs, min or max can't be resolved: {error}.", "Write a simpler condition.")
        return None


def _spline(notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting, within: Range) -> Composition | None:
    kind = entry.get("spline", "cubic")
    points = read_points(notes, path, "points", entry, setting)
    if points is None:
        return None
    try:
        inner = spline(points, kind)
        curve = extended(inner, *within, entry.get("beyond", "inverse-power"))
    except SplineError as error:
        notes.add(f"{path}.points", f"{entry['points']}: {error}.", error.remedy)
        return None
    return Composition(curve, f"{kind} spline through {entry['points']}", splines=((points, inner),))


def _segments(
    notes: Notes, path: str, segments: list[Mapping[str, Any]], setting: Setting, within: Range
) -> Composition | None:
    before = len(notes.problems)
    joins = [_join(notes, f"{path}[{index}]", segment, setting) for index, segment in enumerate(segments) if index]
    if "join" in segments[0]:
        notes.add(f"{path}[0].join", "The first segment has none before it to join.", "Take out join.")
    kept = [join for join in joins if join is not None]
    if len(notes.problems) > before:
        return None
    edges = [within[0], *(edge for join in kept for edge in (join.start, join.end)), within[1]]
    if edges != sorted(edges) or any(a >= b for a, b in zip(edges[::2], edges[1::2], strict=True)):
        says = "The joins must ascend from segment to segment inside the grid's range."
        notes.add(path, says, "Order the segments by range, and keep the joins apart.")
        return None
    starts, ends = [within[0], *(join.start for join in kept)], [*(join.end for join in kept), within[1]]
    parts = [
        read_composition(notes, f"{path}[{index}]", segment, setting, (starts[index], ends[index]))
        for index, segment in enumerate(segments)
    ]
    whole = [part for part in parts if part is not None]
    if len(whole) < len(parts):
        return None
    curves = [part.curve for part in whole]
    try:
        curve = join_segments(curves, kept)
    except JoinError as error:
        notes.add(path, f"The bridge can't be built: {error}.", "Move its ends, or choose another method.")
        return None
    built = tuple(
        Bridge(join, *pair)
        for join, pair in zip(kept, itertools.pairwise(curves), strict=True)
        if join.start < join.end
    )
    gathered = _gathered(curve, whole, ", then ")
    return replace(gathered, bridges=gathered.bridges + built)


def _join(notes: Notes, path: str, segment: Mapping[str, Any], setting: Setting) -> Join | None:
    if "join" not in segment:
        notes.add(path, "This segment does not say how it joins the one before it.", JOIN)
        return None
    given, place = segment["join"], f"{path}.join"
    keys = ("at",) if given["method"] == "meet" else ("from", "to")
    for key in ("at", "from", "to"):
        if (key in given) != (key in keys):
            word = "missing" if key in keys else "without meaning"
            notes.add(f"{place}.{key}", f'With method = "{given["method"]}" the key "{key}" is {word}.', JOIN)
            return None
    edges = [read_quantity(notes, f"{place}.{key}", given[key], "length", setting.units) for key in keys]
    if any(edge is None for edge in edges):
        return None
    start, end = edges[0], edges[-1]
    assert start is not None
    assert end is not None
    if len(edges) > 1 and start >= end:
        notes.add(f"{place}.to", "The bridge ends before it starts.", "Let to be larger than from.")
        return None
    return Join(given["method"], start, end, given.get("degree", 5), given.get("continuity", 2))


JOIN = 'Write join = { method = "exp-polynomial", from = …, to = … }, or { method = "meet", at = … }.'


def with_charges(composition: Composition, first: Fraction, second: Fraction) -> Composition:
    """Return a composition with the Coulomb energy of two charges added."""
    pieces = composition.curve.pieces
    energy = multiply(number(COULOMB * first * second), Apply("^", (R, number(-1))))
    coulomb = Curve((Piece(pieces[0].start, pieces[-1].end, energy),), composition.curve.coordinate)
    curve = add_curves([composition.curve, coulomb]) if first * second else composition.curve
    return replace(
        composition,
        curve=curve,
        text=f"({composition.text}) + ke*({float(first):g})*({float(second):g})/r",
        form="",
    )
