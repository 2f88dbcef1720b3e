"""The verb fit: take the parameters that a document wants fitted, and write it with their values."""

from __future__ import annotations

import copy
import os
from collections.abc import Iterator
from decimal import Decimal
from pathlib import Path
from typing import Any

from .document import Document, read_source, understand
from .document.writing import toml
from .files.atomic import write_text
from .potential.fitting import Fit
from .problems import Problem, UnusableInput
from .reports.origins import fit_record


def fit(path: str | Path, output: str | Path | None = None) -> tuple[Document, list[tuple[str, Fit]]]:
    """Fit a document's parameters, and write it with them.

    Parameters
    ----------
    path : path
        The document.
    output : path, optional
        The new document, in TOML, or in JSON by its ending. In it each ``fit`` has become ``fitted``, which
        says where the values come from.

    Returns
    -------
    (Document, list of (str, Fit))
        The document, and each fit with the name of its interaction.

    Raises
    ------
    UnusableInput
        If the document can't be used, has nothing to fit, or the new one can't be written.
    """
    source = read_source(path)
    document = understand(source)
    fits = [(one.potential.name, fit) for one in document.interactions for fit in one.fits]
    if not fits:
        remedy = 'Add fit = { parameters = […], to = "scan.csv" } to an interaction.'
        raise UnusableInput([Problem("interaction", "The document has nothing to fit.", remedy)], str(path))
    if output is not None:
        data = copy.deepcopy(source.data)
        places = [place for entry in data["interaction"] for place in _places(entry)]
        for place, (_, found) in zip([p for p in places if "fit" in p], fits, strict=True):
            _fill(place, found, document)
        _move(data, places, Path(path).parent, Path(output).parent)
        write_text(Path(output), _written(data, str(output)))
    return document, fits


def _places(entry: dict[str, Any]) -> Iterator[dict[str, Any]]:
    """Yield an interaction, its segments and its terms, in the order in which they are read."""
    yield entry
    for part in (*entry.get("segment", ()), *entry.get("term", ())):
        yield from _places(part)


def _fill(place: dict[str, Any], fit: Fit, document: Document) -> None:
    """Put fitted values into a part of a document, with their provenance in the place of what was asked."""
    parameters = place.setdefault("parameters", {})
    for one in fit.parameters:
        number = Decimal(repr(one.value))
        parameters[one.name] = f"{number} {one.unit}" if one.unit else number
    record = fit_record(fit, document.units)
    errors = {p.name: f"{p.error:.3g} {p.unit}" if p.unit else Decimal(f"{p.error:.3g}") for p in fit.parameters}
    del place["fit"]
    place["fitted"] = {
        "to": fit.file,
        "sha256": fit.sha256,
        "points": fit.points,
        "weight": fit.weight,
        **({} if fit.temperature is None else {"temperature": f"{fit.temperature:g} K"}),
        "standard-errors": errors,
        "correlations": [[Decimal(f"{value:.4f}") for value in row] for row in fit.correlations],
        "root-mean-square": f"{record['residual']['root_mean_square']:.4g} {document.units.energy.text}",
        "document": Path(document.file).name,
        "document-sha256": document.sha256,
    }


def _move(data: dict[str, Any], places: list[dict[str, Any]], old: Path, new: Path) -> None:
    """Let the files that a document names be found from the folder of the new one."""
    if old.resolve() == new.resolve():
        return
    for place in places:
        if "points" in place:
            place["points"] = Path(os.path.relpath(old / place["points"], new)).as_posix()
    for output in data.get("output", ()):
        if "layout" in output:
            output["layout"] = Path(os.path.relpath(old / output["layout"], new)).as_posix()


def _written(data: dict[str, Any], file: str) -> str:
    if not file.lower().endswith(".json"):
        return toml(data)
    import json

    return json.dumps(data, indent=1, ensure_ascii=False, default=float) + "\n"
