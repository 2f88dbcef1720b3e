"""The verb tabulate with parameter sets: every set's tables, a summary, and a way to go on after a stop."""

from __future__ import annotations

import os
import shutil
from collections.abc import Generator, Iterable, Iterator
from contextlib import closing, nullcontext
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from ..document import Document, read_document, read_source
from ..outputs import targets
from ..problems import Problem, UnusableInput
from ..tabulating import known_checks
from ..workflow import Track, silently
from . import crews, summary
from .gather import Gathered, Named, Results, digest, gathered
from .gather import write as write_file
from .job import Job, Outcome, make_job
from .sets import ParameterSet, ParameterSets, check_names, read_sets
from .store import RECORD, Store

VERDICTS = ("pass", "warn", "accepted", "fail", "unusable")
HDF5_ENDINGS = (".h5", ".hdf5")


@dataclass(frozen=True, slots=True)
class Ensemble:
    """What was done.

    Attributes
    ----------
    tables : Path
        The folder of the sets' folders, or the HDF5 file that holds all of them.
    summary : Path
    verdicts : dict
        How many sets there are of each verdict; ``accepted`` are those that fail but were written.
    before : int
        How many were done by an earlier run.
    """

    tables: Path
    summary: Path
    verdicts: dict[str, int]
    before: int

    def lines(self) -> list[str]:
        """Return what to tell a person."""
        counted = ", ".join(f"{self.verdicts[key]} {key}" for key in VERDICTS if key in self.verdicts)
        lines = [f"{sum(self.verdicts.values())} sets: {counted or 'none'}"]
        if self.before:
            lines.append(f"{self.before} of them were done before")
        return [*lines, f"wrote {self.tables}", f"wrote {self.summary}"]


@dataclass(frozen=True, slots=True)
class Places:
    """Where an ensemble goes: one HDF5 file, or a folder with a folder a set."""

    one_file: Path | None
    sets: Path
    summary: Path

    @classmethod
    def of(cls, into: Path) -> Places:
        """Return the places for ``--into``: a file where the name ends in .h5 or .hdf5, else a folder."""
        if into.name.lower().endswith(HDF5_ENDINGS):
            return cls(into, into.with_name(f".{into.name}.sets"), into.with_name(f"{into.stem}-summary.csv"))
        return cls(None, into / "sets", into / "summary.csv")


@dataclass(frozen=True, slots=True)
class Streamed:
    """Items that come one by one, and how many there will be."""

    items: Iterable[Any]
    count: int

    def __iter__(self) -> Iterator[Any]:
        """Yield the items."""
        return iter(self.items)

    def __len__(self) -> int:
        """Return how many there will be."""
        return self.count


def tabulate_sets(
    path: str | Path,
    sets: str | Path,
    *,
    into: str | Path | None = None,
    accept: Iterable[str] = (),
    workers: int | None = None,
    scheduler: str = "",
    track: Track = silently,
) -> Ensemble:
    """Check and tabulate a document for every set of parameter values of a CSV file.

    Sets that an earlier run finished are not done again; a stop at any moment leaves whole sets only.

    Parameters
    ----------
    path : path
        The document.
    sets : path
        CSV file: one row a set, one column a value; the column ``set`` names the sets.
    into : path, optional
        Folder, beside the document by default; or the name of one HDF5 file for all sets.
    accept : iterable of str
        Checks whose errors do not stop the writing.
    workers : int, optional
        Processes of this machine; one for each processor by default.
    scheduler : str
        Address of a Dask scheduler whose workers are used instead.
    track : callable, optional
        Shows progress.

    Raises
    ------
    UnusableInput
        If the document or the header of the file can't be used, a set has no proper name, or a file can't be
        written. A single set that can't be used is reported in the summary.
    """
    if workers is not None and workers < 1:
        raise UnusableInput([Problem("--workers", f"{workers} workers do nothing.", "Give one or more.")])
    source, document = read_source(path), read_document(path)
    places = Places.of(Path(path).parent if into is None else Path(into))
    chosen = read_sets(Path(sets), source.data)
    _refuse_clashes(document, places, Path(sets))
    job = make_job(source, chosen.columns, known_checks(accept), one_table=places.one_file is not None)
    store = Store(places.sets)
    _sweep(places, store)

    def named() -> Iterator[Named]:
        return ((one.name, job.content(one)) for one in chosen)

    with gathered(places.one_file) if places.one_file else nullcontext(Gathered(None)) as old:
        results = Results(store, old)
        count, left = _counts(chosen, job, results)
        rest = (one for one in chosen if not results.finished(one.name, job.content(one)))
        with closing(_crew(job, rest, min(workers or os.cpu_count() or 1, left), scheduler)) as outcomes:
            for outcome in track(Streamed(outcomes, left), "tabulating sets"):
                store.put(outcome)
        if places.one_file and (left or old.content != digest(named())):
            write_file(places.one_file, document, named, results)
        records = (results.record(name, content) for name, content in named())
        verdicts = summary.write(places.summary, document, records)
    if places.one_file:
        shutil.rmtree(places.sets, ignore_errors=True)
    return Ensemble(places.one_file or places.sets, places.summary, verdicts, count - left)


def _refuse_clashes(document: Document, places: Places, sets: Path) -> None:
    """Refuse outputs that would overwrite what they are made from, or each other."""
    if places.summary.resolve() == sets.resolve():
        says = f"The summary would overwrite {sets}."
        raise UnusableInput([Problem("--into", says, "Choose another folder, or rename the sets.")], document.file)
    if places.one_file is None:
        for target in targets(document, Path()):
            if target.path.parts[0] == RECORD:
                raise UnusableInput([Problem("output", f'"{RECORD}" is taken.', "Choose another name.")], document.file)


def _sweep(places: Places, store: Store) -> None:
    """Remove what a killed run left half written."""
    store.sweep()
    for path in filter(None, (places.summary, places.one_file)):
        for left in path.parent.glob(f".{path.name}.*.part"):
            left.unlink(missing_ok=True)


def _counts(sets: ParameterSets, job: Job, results: Results) -> tuple[int, int]:
    """Return how many sets there are, and how many are left to do."""
    count = left = 0
    for one in check_names(sets):
        count += 1
        left += not results.finished(one.name, job.content(one))
    return count, left


def _crew(job: Job, rest: Iterator[ParameterSet], workers: int, scheduler: str) -> Generator[Outcome, None, None]:
    """Return the outcomes of sets, in the order in which they come."""
    if scheduler:
        return crews.on_cluster(job, rest, scheduler)
    return crews.here(job, rest) if workers < 2 else crews.on_processes(job, rest, workers)
