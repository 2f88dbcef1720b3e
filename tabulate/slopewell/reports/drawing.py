"""Drawings: curves with their landmarks, limits and findings, ready for a page, a picture or a terminal."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from ..document import Document
from ..potential import Potential
from ..table import Rows, Table
from ..table.interpolation import interpolant
from ..units import UnitSystem, ratio
from .along import ErrorAlong
from .annotation import Flag, Mark, certificate_in, flags_in, landmarks_in, marks_of
from .stated import Stated, mixed, stated_interactions
from .view import View, round_step, thin, view_of

Array = NDArray[np.float64]
Columns = tuple[Array | None, Array | None]
Reader = Callable[[Array], Columns]

FINE = 500
"""Strips that the separation axis of a formula's curve is cut into."""
BESIDE = 1e-9
"""Relative distance at which both sides of an edge are drawn."""


@dataclass(frozen=True, slots=True, eq=False)
class Drawing:
    """One interaction as it is drawn, in the units of its document or table.

    Attributes
    ----------
    name : str
    between : (str, str)
        The species; the second is empty where the name does not tell them apart.
    units : UnitSystem
    separation : (n,) array
        The rows that are drawn, a little beyond the view's ends.
    energy, force : (n,) array or None
    view : View
    marks, flags : tuple
    landmarks : mapping
        Their record in the report, in the drawing's units; empty where there is none.
    verdict : str
    cutoff, switch_start : float or None
    bridges : tuple of (float, float)
        Where one segment of the curve goes over into the next.
    points : tuple of (float, float)
        Separations and energies that the curve was put through.
    stated : Stated or None
        What the document says of it.
    certificate : mapping
        What was proved about its rows, in the drawing's units.
    error : ErrorAlong or None
        The proved error of reading between rows, along them.
    rows : int or None
        Rows of the table; None for a formula.
    read : callable
        From separations to energy and force, for comparisons.
    other : Overlay or None
    """

    name: str
    between: tuple[str, str]
    units: UnitSystem
    separation: Array
    energy: Array | None
    force: Array | None
    view: View
    read: Reader
    marks: tuple[Mark, ...] = ()
    flags: tuple[Flag, ...] = ()
    landmarks: Mapping[str, Any] = field(default_factory=dict)
    verdict: str = "pass"
    cutoff: float | None = None
    switch_start: float | None = None
    bridges: tuple[tuple[float, float], ...] = ()
    points: tuple[tuple[float, float], ...] = ()
    stated: Stated | None = None
    certificate: Mapping[str, Any] = field(default_factory=dict)
    error: ErrorAlong | None = None
    rows: int | None = None
    other: Overlay | None = None


@dataclass(frozen=True, slots=True, eq=False)
class Overlay:
    """A second curve over a drawing, at the same separations and in the same units; what each is called."""

    first_label: str
    label: str
    energy: Array | None
    force: Array | None


def document_drawings(document: Document, record: Mapping[str, Any]) -> tuple[Drawing, ...]:
    """Return the drawings of a document, given its subject in the report."""
    stated = stated_interactions(document.text)
    drawings = []
    for interaction in document.interactions:
        potential = interaction.potential
        said = stated.get(potential.name) or mixed(interaction, document.units)
        said = replace(said, formula=said.formula or potential.formula)
        drawings.append(potential_drawing(potential, document.units, record, said))
    return tuple(drawings)


def potential_drawing(
    potential: Potential, units: UnitSystem, record: Mapping[str, Any], stated: Stated | None = None
) -> Drawing:
    """Return the drawing of a potential as the simulation sees it."""
    size = float(units.length.factor)
    energy_size, force_size = float(units.energy.factor), float(units.force.factor)

    def read(r: Array) -> Columns:
        with np.errstate(all="ignore"):
            energy, slope = potential.treated.derivatives(r * size, 1)
        return energy / energy_size, 0.0 - slope / force_size

    cutoff = potential.cutoff
    places = [None if place is None else float(place) / size for place in (cutoff.at, cutoff.start)] if cutoff else []
    at, switch_start = places or (None, None)
    landmarks = landmarks_in(record, potential.name, units)
    coarse = np.linspace(float(potential.start) / size, float(potential.end) / size, 2001)
    view = view_of(coarse, *read(coarse), landmarks.get("equilibrium_separation"), at)
    edges = [float(edge) / size for edge in potential.treated.edges()]
    r = _separations(view, coarse, edges, landmarks)
    energy, force = read(r)
    drawing = Drawing(
        name=potential.name,
        between=potential.between,
        units=units,
        separation=r,
        energy=energy,
        force=force,
        view=view,
        read=read,
        landmarks=landmarks,
        cutoff=at,
        switch_start=switch_start,
        stated=stated,
        certificate=certificate_in(record, potential.name),
        bridges=tuple((float(b.join.start) / size, float(b.join.end) / size) for b in potential.bridges),
        points=tuple(
            (r / size, energy / energy_size)
            for points, _ in potential.splines
            for r, energy in zip(*(column.tolist() for column in points.arrays()), strict=True)
        ),
    )
    return _annotated(drawing, record)


def _separations(view: View, coarse: Array, edges: Iterable[float], landmarks: Mapping[str, Any]) -> Array:
    """Return round separations over the view, both sides of every edge, and the landmarks."""
    low, high = view.separation
    step = round_step(high - low, FINE)
    rounded = np.arange(np.floor(low / step), np.ceil(high / step) + 1) * step
    # Whole multiples of a decimal step are told apart from the decimals they stand for only by rounding.
    rounded = np.round(rounded, max(0, 2 - int(np.floor(np.log10(step)))))
    beside = [edge * factor for edge in edges for factor in (1 - BESIDE, 1.0, 1 + BESIDE)]
    pull = landmarks.get("largest_attraction")
    known = [
        landmarks.get("equilibrium_separation"),
        landmarks.get("zero_crossing"),
        pull and pull["separation"],
    ]
    extra = [place for place in [*beside, *known, coarse[0], coarse[-1]] if place is not None]
    everything = np.unique(np.concatenate([rounded, extra]))
    kept: Array = everything[(everything >= coarse[0]) & (everything <= coarse[-1])]
    return kept[(kept >= low - step) & (kept <= high + step)]


def table_drawings(table: Table, record: Mapping[str, Any]) -> tuple[Drawing, ...]:
    """Return the drawings of a table, given its subject in the report."""
    stated = stated_interactions(table.document)
    order = {name: place for place, name in enumerate(stated)}
    known = sorted(table.interactions, key=lambda rows: order.get(rows.name, len(order)))
    return tuple(rows_drawing(rows, table.units, record, stated.get(rows.name)) for rows in known)


def rows_drawing(rows: Rows, units: UnitSystem, record: Mapping[str, Any], stated: Stated | None = None) -> Drawing:
    """Return the drawing of the rows of one interaction."""
    rows = _in_order(rows)
    size = float(units.length.factor)
    landmarks = landmarks_in(record, rows.name, units)
    cutoff = None if stated is None or stated.cutoff is None else stated.cutoff / size
    switch_start = None if stated is None or stated.switch_start is None else stated.switch_start / size
    bottom = landmarks.get("equilibrium_separation")
    view = view_of(rows.separation, rows.energy, rows.force, bottom, cutoff)
    kept = thin(
        rows.separation,
        [column for column in (rows.energy, rows.force) if column is not None],
        view.separation,
    )
    first, _, second = rows.name.partition("-")
    drawing = Drawing(
        name=rows.name,
        between=(first, second) if second and "-" not in second else (rows.name, ""),
        units=units,
        separation=rows.separation[kept],
        energy=None if rows.energy is None else rows.energy[kept],
        force=None if rows.force is None else rows.force[kept],
        view=view,
        read=_reader(rows),
        landmarks=landmarks,
        cutoff=cutoff,
        switch_start=switch_start,
        stated=stated,
        certificate=rows.certificate,
        rows=rows.separation.size,
    )
    return _annotated(drawing, record)


def _in_order(rows: Rows) -> Rows:
    """Return rows by ascending separation, each once: what is wrong with others is for the checks to say."""
    kept = np.unique(np.where(np.isfinite(rows.separation), rows.separation, np.inf), return_index=True)[1]
    kept = kept[np.isfinite(rows.separation[kept])]
    if np.array_equal(kept, np.arange(rows.separation.size)):
        return rows
    columns: dict[str, Any] = {name: column[kept] for name, column in rows.columns().items()}
    return replace(rows, **columns)


def _reader(rows: Rows) -> Reader:
    def read(r: Array) -> Columns:
        if np.isin(r, rows.separation).all():
            at = np.searchsorted(rows.separation, r)
            return (
                None if rows.energy is None else rows.energy[at],
                None if rows.force is None else rows.force[at],
            )
        if rows.energy is None:
            return None, None if rows.force is None else np.interp(r, rows.separation, rows.force)
        between = interpolant(rows)
        inside = (r >= between.start) & (r <= between.end)
        return np.where(inside, between.energy(r), np.nan), np.where(inside, between.force(r), np.nan)

    return read


def overlaid(drawing: Drawing, other: Drawing, labels: tuple[str, str]) -> Drawing:
    """Return a drawing with another one over it, converted to its units and read at its separations."""
    length = float(ratio(drawing.units.length, other.units.length))
    energy, force = other.read(drawing.separation * length)
    to_energy, to_force = (
        float(ratio(theirs, ours))
        for theirs, ours in (
            (other.units.energy, drawing.units.energy),
            (other.units.force, drawing.units.force),
        )
    )
    overlay = Overlay(
        *labels,
        energy=None if energy is None else energy * to_energy,
        force=None if force is None else force * to_force,
    )
    return replace(drawing, other=overlay)


def _annotated(drawing: Drawing, record: Mapping[str, Any]) -> Drawing:
    flags = flags_in(record, drawing.name, drawing.units)
    levels = {flag.finding["level"] for flag in flags}
    worst = "fail" if "error" in levels else "warn" if "warning" in levels else "pass"
    verdict = worst if "verdict" in record else "unchecked"
    columns = {"energy": drawing.energy, "force": drawing.force}
    present = {name for name, column in columns.items() if column is not None}
    marks = tuple(mark for mark in marks_of(drawing.landmarks) if mark.panel in present)
    return replace(drawing, marks=marks, flags=flags, verdict=verdict)
