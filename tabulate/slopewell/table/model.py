"""A table: rows of numbers with their units, and where they come from."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

import numpy as np
from numpy.typing import NDArray

from ..showing import Shown
from ..units import UnitSystem

Array = NDArray[np.float64]
COLUMNS = ("separation", "energy", "force", "curvature")


@dataclass(frozen=True, slots=True, eq=False)
class Rows:
    """The rows of one interaction.

    Attributes
    ----------
    name : str
        Such as ``"W-P"``.
    separation : (n,) array
        Ascending, in the table's length unit.
    energy, force, curvature : (n,) array or None
        In energy, energy/length and energy/length². The force is −dU/dr: negative pulls together.
    spacing, interpolation, ends : str
        The rules of the grid; empty where they are not known.
    certificate : mapping
        What was proved about the rows, in the table's units.
    derived : tuple of str
        Columns that were computed from the others rather than read.
    """

    name: str
    separation: Array
    energy: Array | None
    force: Array | None
    curvature: Array | None = None
    spacing: str = ""
    interpolation: str = ""
    ends: str = ""
    certificate: dict[str, Any] = field(default_factory=dict)
    derived: tuple[str, ...] = ()

    def column(self, name: str) -> Array | None:
        """Return a column by its name."""
        found: Array | None = getattr(self, name)
        return found

    def columns(self) -> dict[str, Array]:
        """Return the columns that there are, by name."""
        return {name: column for name in COLUMNS if (column := self.column(name)) is not None}


@dataclass(frozen=True, slots=True, eq=False)
class Table(Shown):
    """Rows of one or more interactions, with units and provenance.

    Attributes
    ----------
    interactions : tuple of Rows
    units : UnitSystem
    title, source, purpose : str
    document : str
        Text of the document that the table was made from; empty if it was read from elsewhere.
    document_sha256 : str
    constants : str
        The set of physical constants, such as ``"CODATA 2022"``.
    writer : str
        Name and version of the program.
    history : tuple of str
        What was done to the table after it was read, one line each.
    report : mapping
        The report that was made when it was written.
    """

    interactions: tuple[Rows, ...]
    units: UnitSystem
    title: str = ""
    source: str = ""
    purpose: str = ""
    document: str = ""
    document_sha256: str = ""
    constants: str = ""
    writer: str = ""
    history: tuple[str, ...] = ()
    report: dict[str, Any] = field(default_factory=dict)
    coordinate: str = "separation"
