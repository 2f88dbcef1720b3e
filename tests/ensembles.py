"""Small ensembles for tests: one invented pair, and files of parameter sets for it."""

from __future__ import annotations

from pathlib import Path

from documents import text
from slopewell.document import parse_source
from slopewell.ensemble.columns import find_column
from slopewell.ensemble.job import Job, make_job
from slopewell.ensemble.sets import ParameterSet

GRID = "[grid]\nfrom = 2.5\nto = 9\nrows = 21\n"
OUTPUT = '[[output]]\nfile = "pair.h5"\nunits = { energy = "kJ/mol", length = "nm" }\n'
DOCUMENT = text(grid=GRID, outputs=OUTPUT)


def lay_out(folder: Path, sets: str, document: str = DOCUMENT) -> tuple[Path, Path]:
    """Write a document and a file of sets; return both paths."""
    folder.mkdir(parents=True, exist_ok=True)
    (folder / "pair.toml").write_text(document, encoding="utf-8")
    (folder / "sets.csv").write_text(sets, encoding="utf-8")
    return folder / "pair.toml", folder / "sets.csv"


def depths(count: int) -> str:
    """A file of so many sets, each with a depth of its own."""
    rows = [f"draw-{number},{0.01 + number / 100_000:.5f}" for number in range(count)]
    return "\n".join(["set,A-A.epsilon", *rows]) + "\n"


def job(title: str = "A-A.epsilon", document: str = DOCUMENT, *, one_table: bool = True) -> Job:
    """The job of a document whose sets have one column."""
    source = parse_source(document, "pair.toml", "")
    return make_job(source, (find_column(title, source.data),), (), one_table=one_table)


def chosen(*cells: str, name: str = "one", line: int = 2) -> ParameterSet:
    """A set with the given cells."""
    return ParameterSet(name, line, cells)


def files(folder: Path) -> dict[str, bytes]:
    """Every file below a folder, by its name from there."""
    found = (path for path in folder.rglob("*") if path.is_file())
    return {path.relative_to(folder).as_posix(): path.read_bytes() for path in found}
