"""Read ``fit`` of a form or formula: take its parameters from points."""

from __future__ import annotations

import re
from collections.abc import Mapping
from decimal import Decimal
from fractions import Fraction
from typing import Any

import numpy as np
from numpy.typing import NDArray

from ..forms import Form, catalogue
from ..formula import bind
from ..formula.taylor import derivatives
from ..potential.fitting import Fit, FitError, FittedParameter, Solution, least_squares
from ..potential.splines import Points
from ..units.constants import BOLTZMANN
from ..units.system import QUANTITY, UnitSystem, quantity
from .energy import Formula, read_formula
from .points import read_points
from .setting import Setting
from .values import Notes, read_temperature, scale

Array = NDArray[np.float64]


def fitted(notes: Notes, path: str, entry: Mapping[str, Any], setting: Setting) -> tuple[Mapping[str, Any], Fit] | None:
    """Return the entry with fitted parameters, and the fit; None, and problems noted, if there is none."""
    given, names = entry["fit"], entry["fit"]["parameters"]
    filled = _with_starts(entry, names, setting.units)
    formula = read_formula(notes, path, filled, setting.units)
    points = read_points(notes, f"{path}.fit", "to", given, setting)
    if formula is None or points is None or not _names_known(notes, path, names, filled):
        return None
    if len(points.separation) <= len(names):
        says = f"{len(points.separation)} points can't determine {len(names)} parameters and their errors."
        notes.add(f"{path}.fit.to", says, "Add points, or fit fewer parameters.")
        return None
    kelvin = _temperature(notes, path, given, setting)
    weight = _weights(notes, path, given, points, kelvin)
    if weight is None:
        return None
    try:
        return _fit(filled, given, formula, points, weight, kelvin)
    except FitError as error:
        notes.add(
            f"{path}.fit",
            f"The fit fails: {error}.",
            "Fit fewer parameters, or give better starts under parameters.",
        )
        return None


def _with_starts(entry: Mapping[str, Any], names: list[str], units: UnitSystem) -> dict[str, Any]:
    """Return an entry in which each parameter to fit has a value: its own, or the catalogue's example."""
    form = catalogue().get(entry.get("form", ""))
    given = dict(entry.get("parameters", {}))
    for parameter in form.parameters if form else ():
        if parameter.name in names and parameter.name not in given:
            example = Fraction(parameter.example) if parameter.dimension == "1" else quantity(parameter.example).value
            given[parameter.name] = Decimal(repr(float(example / scale(parameter.dimension, units))))
    return {**{key: value for key, value in entry.items() if key != "fit"}, "parameters": given}


def _names_known(notes: Notes, path: str, names: list[str], filled: Mapping[str, Any]) -> bool:
    for index, name in enumerate(names):
        place = f"{path}.fit.parameters[{index}]"
        if names.index(name) < index:
            notes.add(place, f'"{name}" is listed twice.', "Take one out.")
            return False
        if name not in filled["parameters"]:
            remedy = "Give it a start under parameters; known here: " + ", ".join(filled["parameters"]) + "."
            notes.add(place, f'The parameter "{name}" has no value to start from.', remedy)
            return False
    return True


def _temperature(notes: Notes, path: str, given: Mapping[str, Any], setting: Setting) -> Fraction | None:
    if "temperature" in given:
        return read_temperature(notes, f"{path}.fit.temperature", given["temperature"])
    return setting.temperature


def _weights(
    notes: Notes, path: str, given: Mapping[str, Any], points: Points, kelvin: Fraction | None
) -> Array | None:
    """Return the square root of each point's weight."""
    kind, place = given.get("weight", "uniform"), f"{path}.fit.weight"
    if kind == "uniform":
        return np.ones(len(points.energy))
    if kind == "column":
        if points.error:
            return 1 / np.array(points.error, dtype=np.float64)
        if points.weight:
            return np.array(points.weight, dtype=np.float64) ** 0.5
        notes.add(place, "No column holds weights or standard errors.", 'Name a column "weight" or "error".')
        return None
    if kelvin is None:
        notes.add(place, "Boltzmann weights need a temperature.", 'Add temperature = "300 K" to fit.')
        return None
    _, energy = points.arrays()
    weight: Array = np.exp(-(energy - energy.min()) / float(2 * BOLTZMANN * kelvin))
    return weight


def _fit(
    filled: dict[str, Any],
    given: Mapping[str, Any],
    formula: Formula,
    points: Points,
    weight: Array,
    kelvin: Fraction | None,
) -> tuple[Mapping[str, Any], Fit]:
    names = given["parameters"]
    r, energy = points.arrays()
    tree, fixed = formula.trees["energy"], formula.named.values

    def misfit(values: Array) -> Array:
        bound = bind(tree, {**fixed, **{n: Fraction(float(v)) for n, v in zip(names, values, strict=True)}})
        found: Array = energy - derivatives(bound, r, 0)[0]
        return found

    starts = [np.array([float(fixed[name]) for name in names])]
    guess = _guess(formula.form, names, starts[0], r, energy)
    low, high = _bounds(formula.form, names)
    solution = least_squares(lambda v: weight * misfit(v), [guess, *starts], low, high)
    known = bool(points.error) and given.get("weight") == "column"
    parameters = {**filled["parameters"]}
    for name, value in zip(names, solution.values, strict=True):
        parameters[name] = _written(parameters[name], float(value), float(fixed[name]))
    fit = Fit(
        file=points.file,
        sha256=points.sha256,
        points=r.size,
        weight=given.get("weight", "uniform"),
        temperature=float(kelvin) if kelvin is not None and given.get("weight") == "boltzmann" else None,
        parameters=_parameters(names, parameters, solution, r.size, known),
        correlations=_correlations(solution),
        residuals=tuple(zip(r.tolist(), misfit(solution.values).tolist(), strict=True)),
        reduced_chi_squared=solution.chi_squared / (r.size - len(names)) if known else None,
    )
    return {**filled, "parameters": parameters}, fit


def _guess(form: Form | None, names: list[str], start: Array, r: Array, energy: Array) -> Array:
    """Return a start from the deepest point: its depth for energies, its place for lengths of a form."""
    dimensions = {p.name: p.dimension for p in form.parameters} if form else {}
    deepest = int(np.argmin(energy))
    seen = {"energy": float(-energy[deepest]), "length": float(r[deepest])}
    guess = [seen.get(dimensions.get(name, ""), value) for name, value in zip(names, start.tolist(), strict=True)]
    return np.array([g if g > 0 else s for g, s in zip(guess, start.tolist(), strict=True)])


def _bounds(form: Form | None, names: list[str]) -> tuple[Array, Array]:
    low, high = np.full(len(names), -np.inf), np.full(len(names), np.inf)
    for parameter in form.parameters if form else ():
        if parameter.name in names:
            index = names.index(parameter.name)
            for kind, bound in parameter.bounds:
                side = low if kind in ("above", "at-least") else high
                side[index] = float(bound)
    return low, high


def _unit(value: Any) -> str:
    found = QUANTITY.fullmatch(value) if isinstance(value, str) else None
    return found.group(2) if found else ""


def _written(start: Any, value: float, started: float) -> Any:
    """Return a value in eV and ångström as the document writes the start of it."""
    found = QUANTITY.fullmatch(start) if isinstance(start, str) else None
    number = Fraction(found.group(1)) if found else Fraction(start)
    number = Fraction(value) * number / Fraction(started) if number else Fraction(value)
    text = re.sub(r"e\+?", "e", repr(float(number)))
    return f"{text} {found.group(2)}" if found else Decimal(text)


def _parameters(
    names: list[str], written: Mapping[str, Any], solution: Solution, count: int, known: bool
) -> tuple[FittedParameter, ...]:
    """Return parameters with errors: from those of the points, or else from how the points scatter."""
    variance = 1.0 if known else solution.chi_squared / (count - len(names))
    errors = np.sqrt(np.diag(solution.covariance) * variance)
    found = []
    for name, value, error in zip(names, solution.values, errors, strict=True):
        unit = _unit(written[name])
        number = float(str(written[name]).removesuffix(unit))
        size = abs(number / value) if value else 1.0
        found.append(FittedParameter(name, number, float(error) * size, unit))
    return tuple(found)


def _correlations(solution: Solution) -> tuple[tuple[float, ...], ...]:
    sizes = np.sqrt(np.diag(solution.covariance))
    return tuple(tuple(row) for row in (solution.covariance / np.outer(sizes, sizes)).tolist())
