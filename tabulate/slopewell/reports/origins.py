"""Where each pair of a document comes from, what was fitted, and what lies beyond its cutoff."""

from __future__ import annotations

from collections.abc import Mapping
from math import isinf
from typing import Any

from ..document import Document
from ..document.model import Interaction
from ..potential import Potential
from ..potential.fitting import Fit
from ..predictions.curve import from_potential
from ..predictions.fluid import tail
from ..units import UnitSystem

INTEGRABLE = 3.01
"""Inverse power from which on a tail counts as falling fast enough to have a finite integral."""


WEIGHTS = {
    "uniform": "all of one weight",
    "boltzmann": "with Boltzmann weights",
    "column": "weighted by its column",
}


def pair_records(document: Document) -> tuple[dict[str, Any], ...]:
    """Return one record a pair: stated or mixed, its fits, and its tail at the document's number density.

    There is none where all pairs are simply stated.
    """
    records = tuple(_pair(document, interaction) for interaction in document.interactions)
    return records if any(len(record) > 2 for record in records) else ()


def _pair(document: Document, interaction: Interaction) -> dict[str, Any]:
    origin, potential = interaction.origin, interaction.potential
    record: dict[str, Any] = {"interaction": potential.name, "origin": origin.kind}
    if origin.rule:
        record |= {"rule": origin.rule, "form": origin.form, "parameters": _plain(origin.parameters)}
    if potential.splines:
        record["points"] = [{"file": p.file, "sha256": p.sha256} for p, _ in potential.splines]
    if interaction.fits:
        record["fits"] = [fit_record(fit, document.units) for fit in interaction.fits]
    if document.number_density is not None and potential.between[0] == potential.between[1]:
        record["tail"] = _tail(potential, document.number_density, document.units)
    return record


def _plain(parameters: Mapping[str, Any]) -> dict[str, Any]:
    return {name: value if isinstance(value, str) else float(value) for name, value in parameters.items()}


def fit_record(fit: Fit, units: UnitSystem) -> dict[str, Any]:
    """Return a fit as JSON data: residuals in the given units, parameters in those of the document's text."""
    energy, length = float(units.energy.factor), float(units.length.factor)
    place, largest = fit.largest
    return {
        "to": fit.file,
        "sha256": fit.sha256,
        "points": fit.points,
        "weight": fit.weight,
        "temperature": fit.temperature,
        "parameters": {p.name: {"value": p.value, "standard_error": p.error, "unit": p.unit} for p in fit.parameters},
        "correlations": [list(row) for row in fit.correlations],
        "residual": {
            "root_mean_square": fit.root_mean_square / energy,
            "largest": largest / energy,
            "at": place / length,
        },
        "reduced_chi_squared": fit.reduced_chi_squared,
    }


def _tail(potential: Potential, density: float, units: UnitSystem) -> dict[str, Any] | None:
    """Return energy a particle and pressure of what lies beyond the cutoff; None where the sum has no end."""
    bare = from_potential(potential, bare=True)
    if bare.tail_power <= INTEGRABLE and not isinf(bare.tail_power):
        return None
    energy, pressure = tail(bare, float(potential.reach), density)
    factor = float(units.length.factor) ** 3
    return {
        "number_density": density * factor,
        "energy": energy / float(units.energy.factor),
        "pressure_MPa": pressure * 1e3,
    }


def pair_lines(record: dict[str, Any], units: UnitSystem) -> list[tuple[str, str]]:
    """Return what is said of a pair as labels and values; nothing of one that is simply stated.

    Parameters
    ----------
    record : dict
        One record of :func:`pair_records`.
    units : UnitSystem
        Of the document.
    """
    lines = []
    if record["origin"] == "mixed":
        values = ", ".join(f"{name} = {_shown(value)}" for name, value in record["parameters"].items())
        lines.append(("mixed", f"by {record['rule']}: {record['form']} with {values}"))
    for fit in record.get("fits", ()):
        lines += fit_lines(fit, units)
    if record.get("tail"):
        found = record["tail"]
        said = f"{found['energy']:.6g} {units.energy.text} a particle, {found['pressure_MPa']:.6g} MPa"
        lines.append(("beyond the cutoff", f"{said}, at {found['number_density']:.6g} {units.length.text}^-3"))
    return lines


def fit_lines(fit: dict[str, Any], units: UnitSystem) -> list[tuple[str, str]]:
    """Return what a fit found as labels and values."""
    weight = WEIGHTS[fit["weight"]] + (f" at {fit['temperature']:g} K" if fit["temperature"] else "")
    lines = [("fitted to", f"{fit['points']} points of {fit['to']}, {weight}")]
    for name, found in fit["parameters"].items():
        lines.append((f"  {name}", f"{found['value']:.8g} ± {found['standard_error']:.2g} {found['unit']}".rstrip()))
    names = list(fit["parameters"])
    pairs = [(abs(fit["correlations"][i][j]), i, j) for i in range(len(names)) for j in range(i)]
    if pairs:
        _, i, j = max(pairs)
        lines.append(
            (
                "  correlation",
                f"{fit['correlations'][i][j]:.3f} between {names[j]} and {names[i]}, the largest",
            )
        )
    residual = fit["residual"]
    largest = f"largest {residual['largest']:.3g} at {residual['at']:.4g} {units.length.text}"
    lines.append(("  residual", f"{residual['root_mean_square']:.3g} {units.energy.text} root mean square, {largest}"))
    return lines


def _shown(value: Any) -> str:
    return value if isinstance(value, str) else f"{value:.6g}"
