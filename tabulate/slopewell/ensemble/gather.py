"""One HDF5 file of all sets: a group a set under ``/sets``, and an index of them."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from itertools import islice
from pathlib import Path
from typing import Any

from .. import __version__
from ..document import Document
from ..files import hdf5
from ..files.atomic import whole_file
from ..units.constants import CODATA
from . import summary
from .job import ONE_TABLE
from .store import Store

Named = tuple[str, str]
"""Name and content hash of a set."""
SCHEMA = "slopewell/ensemble/1"
BLOCK = 256
"""Lines of the index that are written at a time."""
TEXTS = 3
"""Columns of a summary that are text; those behind them are numbers."""


@dataclass(frozen=True, slots=True)
class Gathered:
    """An HDF5 file of sets that an earlier run left; ``file`` is None where there is none."""

    file: Any

    @property
    def content(self) -> str:
        """Digest of all its sets."""
        return "" if self.file is None else str(self.file.attrs["content"])

    def record(self, name: str) -> dict[str, Any] | None:
        """Return the record of a set; None where there is none."""
        if self.file is None or name not in self.file["sets"]:
            return None
        group = self.file["sets"][name]
        record: dict[str, Any] = json.loads(group.attrs["record"])
        return record | {"report": json.loads(group["report"].asstr()[()])}

    def finished(self, name: str, content: str) -> bool:
        """Whether the file holds a set of this content."""
        found = self.record(name)
        return found is not None and found["content"] == content


@contextmanager
def gathered(path: Path) -> Iterator[Gathered]:
    """Open the file of an earlier run; anything else at that place counts as nothing."""
    import h5py

    file = None
    try:
        file = h5py.File(path, "r")
        ours = file.attrs.get("schema") == SCHEMA and "sets" in file
    except OSError:
        ours = False
    try:
        yield Gathered(file if ours else None)
    finally:
        if file is not None:
            file.close()


def digest(sets: Iterator[Named]) -> str:
    """Return the SHA-256 of the names and contents of sets in their order."""
    total = hashlib.sha256()
    for name, content in sets:
        total.update(f"{name} {content}\n".encode())
    return total.hexdigest()


@dataclass(frozen=True, slots=True)
class Results:
    """The results of this run and of an earlier one."""

    store: Store
    old: Gathered

    def finished(self, name: str, content: str) -> bool:
        """Whether there is a set of this content."""
        return self.store.finished(name, content) or self.old.finished(name, content)

    def is_old(self, name: str, content: str) -> bool:
        """Whether only the file of an earlier run has a set of this content."""
        return not self.store.finished(name, content) and self.old.finished(name, content)

    def record(self, name: str, content: str) -> dict[str, Any]:
        """Return the record of a set."""
        found = (self.old if self.is_old(name, content) else self.store).record(name)
        assert found is not None
        return found

    @contextmanager
    def table(self, name: str, content: str) -> Iterator[Any]:
        """Open the table of a set that has one."""
        import h5py

        if self.is_old(name, content):
            yield self.old.file["sets"][name]
        else:
            with h5py.File(self.store.folder / name / ONE_TABLE, "r") as file:
                yield file


def write(path: Path, document: Document, sets: Callable[[], Iterator[Named]], results: Results) -> None:
    """Write all sets into one file, in their order, from their folders or from the file of an earlier run.

    Parameters
    ----------
    path : Path
    document : Document
        The document without the values of a set.
    sets : callable
        Gives the names and contents of the sets in their order.
    results : Results
    """
    import h5py

    with whole_file(path) as temporary, h5py.File(temporary, "w", libver=("earliest", "v110")) as file:
        described = {
            "schema": SCHEMA,
            "title": document.title,
            "source": document.source,
            "document": document.text,
            "document_sha256": document.sha256,
            "constants": CODATA,
            "writer": f"slopewell {__version__}",
            "content": digest(sets()),
        }
        for key, value in described.items():
            file.attrs[key] = value
        groups = file.create_group("sets", track_order=True)
        _write_index(file.create_group("index"), document, _copied(groups, sets(), results))


def _copied(groups: Any, sets: Iterator[Named], results: Results) -> Iterator[dict[str, Any]]:
    """Write a group a set, yielding the record of each."""
    for name, content in sets:
        group = groups.create_group(name)
        record = results.record(name, content)
        if record["files"]:
            with results.table(name, content) as table:
                hdf5.copy_group(table, group)
        else:
            group["report"] = json.dumps(record["report"], indent=1, ensure_ascii=False)
        kept = {key: value for key, value in record.items() if key != "report"}
        group.attrs["record"] = json.dumps(kept, ensure_ascii=False)
        yield record


def _write_index(group: Any, document: Document, records: Iterator[dict[str, Any]]) -> None:
    """Write the columns of the summary as datasets with one entry a set."""
    import h5py
    import numpy as np

    titles = summary.header(document)
    names = [interaction.potential.name for interaction in document.interactions]
    columns = []
    for place, title in enumerate(titles):
        name, _, unit = title.partition(" [")
        kind = h5py.string_dtype() if place < TEXTS else np.float64
        columns.append(group.create_dataset(name, (0,), kind, maxshape=(None,), chunks=(BLOCK,), track_times=False))
        if unit:
            columns[-1].attrs["units"] = unit.removesuffix("]")
    lines = (summary.line(record, names) for record in records)
    while block := list(islice(lines, BLOCK)):
        for place, column in enumerate(columns):
            cells = [cells[place] for cells in block]
            before = len(column)
            column.resize(before + len(block), axis=0)
            column[before:] = cells if place < TEXTS else [np.nan if cell is None else cell for cell in cells]
