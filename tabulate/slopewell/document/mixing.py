"""Fill in the pairs that a document does not write, by its mixing rule."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from itertools import combinations_with_replacement
from typing import Any

from ..forms import catalogue
from ..potential.mixing import RULES, mixed
from .composition import Composition
from .interactions import read_interaction
from .model import Interaction, Origin
from .setting import Setting
from .values import Notes, scale

Pair = frozenset[str]
Stated = Mapping[Pair, Composition | None]
"""What each stated pair is made of; None where it could not be read."""


def mixed_interactions(
    notes: Notes, mixing: Mapping[str, Any], species: list[str], stated: Stated, setting: Setting
) -> Iterator[Interaction]:
    """Yield an interaction for each pair that is neither stated nor excluded, noting what can't be mixed."""
    excluded = _pairs(notes, "mixing.exclude", mixing.get("exclude", []), species)
    overrides = mixing.get("override", [])
    places = _pairs(notes, "mixing.override", [one["between"] for one in overrides], species)
    for pair in sorted(excluded & stated.keys(), key=sorted):
        notes.add("mixing.exclude", f"{_name(pair, species)} is excluded, but stated too.", "Take one of them out.")
    for pair in sorted(places & stated.keys(), key=sorted):
        notes.add(
            "mixing.override",
            f"{_name(pair, species)} is stated and not mixed.",
            "Change it where it is stated.",
        )
    for one, other in combinations_with_replacement(species, 2):
        pair = frozenset((one, other))
        if pair in stated or pair in excluded:
            continue
        index = next((k for k, override in enumerate(overrides) if frozenset(override["between"]) == pair), None)
        path = "mixing" if index is None else f"mixing.override[{index}]"
        override = {} if index is None else overrides[index]
        made = _entry(notes, path, (one, other), {**mixing, **override}, override, stated, setting)
        found = None if made is None else read_interaction(notes, path, made[0], setting, made[1])
        if found is not None:
            yield found[0]


def _pairs(notes: Notes, path: str, listed: list[list[str]], species: list[str]) -> set[Pair]:
    for index, between in enumerate(listed):
        for name in between:
            if name not in species:
                notes.add(f"{path}[{index}]", f'The species "{name}" is not declared.', f"Add [species.{name}].")
        if any(frozenset(between) == frozenset(earlier) for earlier in listed[:index]):
            notes.add(f"{path}[{index}]", f"{'-'.join(between)} is listed twice.", "Take one out.")
    return {frozenset(between) for between in listed}


def _name(pair: Pair, species: list[str]) -> str:
    names = [name for name in species if name in pair]
    return "-".join(names if len(names) == 2 else names * 2)


def _entry(
    notes: Notes,
    path: str,
    between: tuple[str, str],
    rule: Mapping[str, Any],
    override: Mapping[str, Any],
    stated: Stated,
    setting: Setting,
) -> tuple[dict[str, Any], Origin] | None:
    """Return a mixed pair as a document would state it, and where it comes from."""
    likes = _likes(notes, path, between, rule["rule"], stated)
    if likes is None:
        return None
    first, _second = likes
    form = catalogue()[first.form]
    try:
        values = mixed(rule["rule"], form.name, *({p.name: c.values[p.name] for p in form.parameters} for c in likes))
    except ValueError as error:
        notes.add(path, f"{'-'.join(between)}: {error}.", _WRITE.format(*between))
        return None
    units = setting.units
    parameters: dict[str, Any] = {p.name: values[p.name] / scale(p.dimension, units) for p in form.parameters}
    parameters |= override.get("parameters", {})
    entry = {
        "between": list(between),
        "form": form.name,
        "parameters": parameters,
        "charges": rule.get("charges", False),
    }
    entry |= {key: override[key] for key in ("cutoff", "grid") if key in override}
    shown = {name: float(value) if isinstance(value, Fraction) else value for name, value in parameters.items()}
    return entry, Origin("mixed", rule["rule"], form.name, shown)


_WRITE = 'Write [[interaction]] with between = ["{}", "{}"], or list the pair under mixing.exclude.'


def _likes(
    notes: Notes, path: str, between: tuple[str, str], rule: str, stated: Stated
) -> tuple[Composition, Composition] | None:
    """Return the like pairs that a pair is mixed from."""
    name = "-".join(between)
    missing = [one for one in dict.fromkeys(between) if frozenset((one,)) not in stated]
    if missing:
        lacking = " and ".join(f"{one}-{one}" for one in missing)
        says = f"There is no interaction {name}" + (
            "." if between[0] == between[1] else f", and it can't be mixed without {lacking}."
        )
        notes.add(path, says, _WRITE.format(*between))
        return None
    first, second = (stated[frozenset((one,))] for one in between)
    if first is None or second is None:
        return None
    known = ", ".join(RULES[rule].mixes)
    for like, composition in zip(between, (first, second), strict=True):
        if not composition.form:
            says = f"{name} can't be mixed: {like}-{like} is not a single form of the catalogue."
            notes.add(path, says, _WRITE.format(*between))
            return None
    if first.form != second.form:
        forms = " and ".join(f"{one}-{one} is {c.form}" for one, c in zip(between, (first, second), strict=True))
        says = f"{name} can't be mixed: {forms}."
        notes.add(path, says, _WRITE.format(*between))
        return None
    if first.form not in RULES[rule].mixes:
        says = f"{name} can't be mixed: {rule} was published for {known}, not for {first.form}."
        notes.add(path, says, _WRITE.format(*between))
        return None
    return first, second
