"""What has to be done for every set, and the pure function that does it for one."""

from __future__ import annotations

import hashlib
import json
import tempfile
import threading
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path, PurePath
from typing import Any

from .. import __version__
from ..document import Source, parse_source
from ..problems import Problem, UnusableInput
from ..reports import Report, unusable
from ..tabulating import tabulate
from ..units.constants import CODATA
from .changes import applied, exact_json
from .columns import Column
from .sets import ParameterSet

FILE_KEYS = ("layout", "points", "to")
"""Keys of a document whose value may name a file beside it."""
ONE_TABLE = "tables.h5"
TURN = threading.Lock()
"""A cluster may run several threads in a process, and the precision of balls is one for the process."""


@dataclass(frozen=True, slots=True)
class Job:
    """What all sets have in common; it holds everything that a process elsewhere needs.

    Attributes
    ----------
    file, text : str
        Name and text of the document.
    companions : tuple of (str, bytes)
        The files that the document names beside it, by the name it has for them.
    accept : tuple of str
        Checks whose errors do not stop the writing.
    columns : tuple of Column
    one_table : bool
        Write one HDF5 table a set instead of the outputs that the document names.
    """

    file: str
    text: str
    companions: tuple[tuple[str, bytes], ...]
    accept: tuple[str, ...]
    columns: tuple[Column, ...]
    one_table: bool

    def content(self, chosen: ParameterSet) -> str:
        """Return the SHA-256 of everything that the result of a set depends on."""
        parts = [__version__, CODATA, self.file, self.text, list(self.accept), self.one_table]
        parts += [[name, hashlib.sha256(held).hexdigest()] for name, held in self.companions]
        parts += [[column.title, list(column.path), column.unit] for column in self.columns]
        return hashlib.sha256(json.dumps([parts, chosen.name, chosen.cells]).encode()).hexdigest()


@dataclass(frozen=True, slots=True)
class Outcome:
    """What came of one set: its record, and its files by name.

    ``settled`` is false where the fault may lie with the machine, or where the row can't be read: then the
    next run tries again.
    """

    name: str
    record: dict[str, Any]
    files: dict[str, bytes]
    settled: bool = True


def make_job(source: Source, columns: tuple[Column, ...], accept: tuple[str, ...], *, one_table: bool) -> Job:
    """Return the job of a document."""
    path = Path(source.file)
    named = dict.fromkeys(name for name in _named_files(source.data) if (path.parent / name).is_file())
    companions = tuple((name, (path.parent / name).read_bytes()) for name in named)
    return Job(path.name, source.text, companions, accept, columns, one_table)


def _named_files(part: Any) -> Iterator[str]:
    if isinstance(part, dict):
        for key, inner in part.items():
            if key in FILE_KEYS and isinstance(inner, str) and len(inner) < 200:
                yield inner
            yield from _named_files(inner)
    elif isinstance(part, list):
        for inner in part:
            yield from _named_files(inner)


def run_set(job: Job, chosen: ParameterSet) -> Outcome:
    """Tabulate the document of one set.

    Parameters
    ----------
    job : Job
    chosen : ParameterSet

    Returns
    -------
    Outcome
        Whatever happens: a set that can't be used has the verdict ``unusable`` and no files.
    """
    name = f"{chosen.name}.json"
    try:
        data = applied(parse_source(job.text, job.file, "").data, job.columns, chosen)
    except UnusableInput as error:
        # Such a row costs nothing, and is read anew every time: its line may have changed.
        return outcome(job, chosen, Report((unusable(error, name),)).record(), {}, settled=False)
    try:
        with TURN, tempfile.TemporaryDirectory(prefix="slopewell-") as folder:
            report, files = _tabulated(job, data, _lay_out(job, Path(folder)) / name)
    except UnusableInput as error:
        return outcome(job, chosen, Report((unusable(error, name),)).record(), {})
    except Exception as error:
        # One set never stops the others, not even by a fault of this program.
        return failed(job, chosen, f"{type(error).__name__}: {error}")
    report["subjects"][0]["file"] = name
    return outcome(job, chosen, report, files)


def _lay_out(job: Job, folder: Path) -> Path:
    """Write the companions; return the folder that the document belongs in, as deep as their names need."""
    names = [PurePath(name) for name, _ in job.companions]
    deep = max((name.parts.count("..") for name in names), default=0)
    home = folder.joinpath(*["home"] * (deep + 1))
    for name, (_, held) in zip(names, job.companions, strict=True):
        if not name.is_absolute():
            (home / name).parent.mkdir(parents=True, exist_ok=True)
            (home / name).write_bytes(held)
    home.mkdir(parents=True, exist_ok=True)
    return home


def _tabulated(job: Job, data: dict[str, Any], document: Path) -> tuple[dict[str, Any], dict[str, bytes]]:
    """Return the report on the document of a set, and the files that it asks for."""
    if job.one_table:
        data["output"] = [{"file": ONE_TABLE, **_units(data)}]
    text = exact_json(data) + "\n"
    document.write_text(text, encoding="utf-8", newline="\n")
    into = document.parent / "tables"
    done = tabulate(document, into=into, accept=job.accept)
    written = sorted(path for path in into.rglob("*") if path.is_file())
    return done.report.record(), {path.relative_to(into).as_posix(): path.read_bytes() for path in written}


def _units(data: dict[str, Any]) -> dict[str, Any]:
    """Return the units of the document's first output that has some."""
    return next(({"units": output["units"]} for output in data.get("output", ()) if "units" in output), {})


def failed(job: Job, chosen: ParameterSet, says: str) -> Outcome:
    """Return the outcome of a set whose work came to nothing for a reason that is not its own."""
    problem = Problem("", f"The set can't be computed: {says}.", "Run the same command again: it tries this set anew.")
    record = Report((unusable(UnusableInput([problem]), f"{chosen.name}.json"),)).record()
    return outcome(job, chosen, record, {}, settled=False)


def outcome(
    job: Job, chosen: ParameterSet, report: dict[str, Any], files: dict[str, bytes], *, settled: bool = True
) -> Outcome:
    """Return an outcome with its record: values, content hash, files and report."""
    record = {
        "set": chosen.name,
        "content": job.content(chosen) if settled else "",
        "values": {column.title: cell.strip() for column, cell in zip(job.columns, chosen.cells, strict=False)},
        "files": sorted(files),
        "report": report,
    }
    return Outcome(chosen.name, record, files, settled)
