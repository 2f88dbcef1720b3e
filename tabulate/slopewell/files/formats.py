"""The register of file formats."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

from ..problems import Problem, UnusableInput
from ..table import Table
from . import csvfile, hdf5, jsonfile


@dataclass(frozen=True, slots=True)
class Format:
    """A file format: what its files end in, and whether one holds all interactions."""

    name: str
    endings: tuple[str, ...]
    holds_all: bool
    write: Callable[[Table, Path], None]
    read: Callable[[Path], Table]


FORMATS = (
    Format("HDF5", (".h5", ".hdf5"), True, hdf5.write, hdf5.read),
    Format("CSV", (".csv",), False, csvfile.write, csvfile.read),
    Format("JSON", (".json",), True, jsonfile.write, jsonfile.read),
)


def format_of(path: Path) -> Format:
    """Return the format that the ending of a file names.

    Raises
    ------
    UnusableInput
        If it names none.
    """
    for known in FORMATS:
        if path.name.lower().endswith(known.endings):
            return known
    endings = ", ".join(ending for known in FORMATS for ending in known.endings)
    says = f'The ending of "{path.name}" names no format.'
    raise UnusableInput([Problem("", says, f"End it in {endings}, or describe it by a layout.")], str(path))
