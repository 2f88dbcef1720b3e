"""What predictions and trial runs look at: the curves and tables of a file, with masses and charges."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path

from .document import Document, Expectation, Interaction, parse_source, read_document, understand
from .predictions.curve import EnergyCurve, from_potential, from_rows
from .predictions.figures import System
from .problems import Problem, UnusableInput, nearest
from .table import Rows, tabulate_rows
from .table.bounds import error_bounds
from .table.rowcount import row_count
from .tables import Loaded, Reading, is_own, is_table, load
from .units import UnitSystem

Pair = tuple[str, str]


@dataclass(frozen=True)
class Studied:
    """A file with the curves and tables that it gives.

    Attributes
    ----------
    file, title : str
    units : UnitSystem
    table : System
        As a simulation code reads it.
    curve : System or None
        The formulas behind it, where there is a document.
    temperature : float or None
        In kelvin, where the document gives one.
    expectations : mapping
        What the source states of each pair.
    cut : mapping
        Where a cutoff was applied, the pair's cutoff in ångström.
    screened : bool
        Whether formulas hold their own charges.
    rows : mapping
        The rows of each pair, in the file's units.
    interactions : mapping
        What the document says of each pair.
    number_density : float or None
        In Å⁻³, where the document gives one.
    """

    file: str
    title: str
    units: UnitSystem
    table: System
    curve: System | None = None
    temperature: float | None = None
    expectations: Mapping[str, tuple[Expectation, ...]] = field(default_factory=dict)
    cut: Mapping[Pair, float] = field(default_factory=dict)
    screened: bool = False
    rows: Mapping[Pair, Rows] = field(default_factory=dict)
    interactions: Mapping[Pair, Interaction] = field(default_factory=dict)
    number_density: float | None = None


def study(
    path: str | Path,
    *,
    reading: Reading | None = None,
    document: str | Path | None = None,
    masses: Mapping[str, float] | None = None,
) -> Studied:
    """Read a document or a table for predictions and trial runs.

    Parameters
    ----------
    path : path
    reading : Reading, optional
        How a table that slopewell did not write is read.
    document : path, optional
        The document behind a table that does not store it.
    masses : mapping, optional
        In dalton, instead of or beside those of a document.

    Raises
    ------
    UnusableInput
        If it can't be used.
    """
    studied = _studied(path, reading or Reading(), document, masses or {})
    species = studied.table.species
    for name in masses or {}:
        if name not in species:
            raise UnusableInput(
                [Problem("--mass", f'There is no species "{name}".', nearest(name, species))], str(path)
            )
    return studied


def _studied(path: str | Path, how: Reading, document: str | Path | None, masses: Mapping[str, float]) -> Studied:
    if not is_table(path, how):
        source = read_document(path)
        rows = {one.potential.name: _rows(one, source.units) for one in source.interactions}
        return _with_document(source, rows, source.units, masses)
    loaded = load(path, how)
    table = loaded.table
    for one in table.interactions:
        if one.energy is None:
            says = f"The rows of {one.name} have no energy."
            raise UnusableInput([Problem("", says, "Give a table with energy and force.")], str(path))
    found = read_document(document) if document else _stored_document(loaded, str(path))
    rows = {one.name: one for one in table.interactions}
    if found is not None:
        names = [one.potential.name for one in found.interactions]
        if len(rows) == len(names) == 1:
            rows = {names[0]: replace(next(iter(rows.values())), name=names[0])}
        if set(rows) <= set(names):
            return replace(_with_document(found, rows, table.units, masses), file=str(path))
    text = not is_own(Path(path), how)
    pairs = {_pair(name, text=text): one for name, one in rows.items()}
    species = tuple(dict.fromkeys(name for pair in pairs for name in pair))
    curves = {pair: from_rows(one, table.units) for pair, one in pairs.items()}
    return Studied(str(path), table.title, table.units, System(species, curves, masses), rows=pairs)


def _rows(one: Interaction, units: UnitSystem) -> Rows:
    bounds = None if one.grid.rows else error_bounds(one.potential, one.grid)
    count = one.grid.rows or row_count(bounds, one.grid, one.potential.name)  # type: ignore[arg-type]
    return tabulate_rows(one.potential, one.grid, count, units)


def _stored_document(loaded: Loaded, file: str) -> Document | None:
    """Return the document that a table stores, None if there is none that can be understood."""
    text = loaded.table.document
    try:
        return understand(parse_source(text, file if text.lstrip()[:1] == "{" else "", "")) if text else None
    except UnusableInput:
        return None


def _with_document(
    document: Document, rows: Mapping[str, Rows], units: UnitSystem, masses: Mapping[str, float]
) -> Studied:
    ones = [one for one in document.interactions if one.potential.name in rows]
    potentials = [one.potential for one in ones]
    species = tuple(dict.fromkeys(name for one in potentials for name in one.between))
    weights = {name: float(mass) for name, mass in document.masses.items()} | dict(masses)
    screened = any("ke" in one.formula.replace("(", " ").replace("*", " ").split() for one in potentials)
    charges: Mapping[str, float] = {} if screened else document.charges
    untreated = {one.between: from_potential(one, bare=True) for one in potentials}
    curves = {one.between: from_potential(one) for one in potentials}
    tables: dict[Pair, EnergyCurve] = {one.between: from_rows(rows[one.name], units) for one in potentials}
    temperature = potentials[0].temperature if potentials else None
    return Studied(
        document.file,
        document.title,
        units,
        System(species, tables, weights, charges, untreated),
        System(species, curves, weights, charges, untreated),
        None if temperature is None else float(temperature),
        {one.potential.name: one.expectations for one in ones},
        {one.between: float(one.cutoff.at) for one in potentials if one.cutoff},
        screened,
        {one.between: rows[one.name] for one in potentials},
        {one.potential.between: one for one in ones},
        document.number_density,
    )


def _pair(name: str, *, text: bool) -> Pair:
    """Return the two species of an interaction's name: its halves, or the whole name twice.

    A text is named like its file, where a hyphen tells two species only if it repeats one.
    """
    first, hyphen, second = name.partition("-")
    apart = hyphen and first and second and (first == second or not text)
    return (first, second) if apart else (name, name)
