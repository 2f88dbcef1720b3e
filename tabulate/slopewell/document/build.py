"""Understand a document: from plain data that fits the schema to potentials, grids and outputs."""

from __future__ import annotations

import re
from fractions import Fraction
from pathlib import Path
from typing import Any

from ..problems import UnusableInput
from ..units import UnitSystem
from .composition import Composition
from .interactions import read_interaction
from .mixing import mixed_interactions
from .model import Document, Interaction, Output
from .setting import Setting
from .source import Source, read_source
from .validate import schema_problems
from .values import Notes, read_quantity, read_temperature, read_units


def read_document(path: str | Path) -> Document:
    """Read and understand a potential document.

    Raises
    ------
    UnusableInput
        With every problem that was found in it.
    """
    return understand(read_source(path))


def understand(source: Source) -> Document:
    """Return the document that a source means."""
    problems = schema_problems(source.data, "potential", source.line)
    if problems:
        raise UnusableInput(problems, source.file)
    notes = Notes(source)
    document = _Builder(notes).document()
    if notes.problems or document is None:
        raise UnusableInput(sorted(notes.problems, key=lambda problem: problem.line or 0), source.file)
    return document


class _Builder:
    """Reads each part of one document, noting problems as it goes."""

    def __init__(self, notes: Notes) -> None:
        self.notes = notes
        self.data = notes.source.data

    def document(self) -> Document | None:
        units = read_units(self.notes, "units", self.data["units"])
        if units is None:
            return None
        setting = self.setting(units)
        density = self.positive("number-density", "length^-3", units, "A number density")
        interactions = self.interactions(setting)
        outputs = tuple(
            self.output(f"output[{i}]", entry, len(interactions)) for i, entry in enumerate(self.data.get("output", []))
        )
        source = self.notes.source
        return Document(
            file=source.file,
            text=source.text,
            sha256=source.sha256,
            title=self.data["title"],
            source=self.data.get("source", ""),
            purpose=setting.purpose,
            units=units,
            interactions=interactions,
            outputs=outputs,
            masses=setting.masses,
            charges={name: float(charge) for name, charge in setting.charges.items()},
            number_density=None if density is None else float(density),
        )

    def setting(self, units: UnitSystem) -> Setting:
        return Setting(
            units=units,
            folder=Path(self.notes.source.file).parent,
            purpose=self.data.get("purpose", "dynamics"),
            temperature=self.optional("temperature", read_temperature),
            energy_scale=self.positive("energy-scale", "energy", units, "An energy scale"),
            masses=self.masses(units),
            charges={name: Fraction(it["charge"]) for name, it in self.data["species"].items() if "charge" in it},
            grid=self.data.get("grid"),
            cutoff=self.data.get("cutoff"),
        )

    def interactions(self, setting: Setting) -> tuple[Interaction, ...]:
        """Read the stated interactions, then those that mixing fills in."""
        self.check_pairs()
        found: list[Interaction] = []
        stated: dict[frozenset[str], Composition | None] = {}
        for index, entry in enumerate(self.data["interaction"]):
            read = read_interaction(self.notes, f"interaction[{index}]", entry, setting)
            stated[frozenset(entry["between"])] = read[1] if read else None
            found += [read[0]] if read else []
        if "mixing" in self.data:
            found += mixed_interactions(self.notes, self.data["mixing"], list(self.data["species"]), stated, setting)
        return tuple(found)

    def optional(self, key: str, read: Any) -> Any:
        return read(self.notes, key, self.data[key]) if key in self.data else None

    def positive(self, key: str, powers: str, units: UnitSystem, what: str) -> Fraction | None:
        if key not in self.data:
            return None
        found = read_quantity(self.notes, key, self.data[key], powers, units)
        if found is not None and found <= 0:
            self.notes.add(key, f"{what} must be positive.", "Give its size.")
        return found

    def masses(self, units: UnitSystem) -> dict[str, Fraction]:
        masses: dict[str, Fraction] = {}
        for name, species in self.data["species"].items():
            if "mass" in species:
                path = f"species.{name}.mass"
                mass = read_quantity(self.notes, path, species["mass"], "mass", units)
                if mass is not None and mass <= 0:
                    self.notes.add(path, "A mass must be positive.", "Give its size, or leave it out.")
                elif mass is not None:
                    masses[name] = mass
        return masses

    def check_pairs(self) -> None:
        seen: dict[frozenset[str], int] = {}
        called_so: dict[str, int] = {}
        for index, entry in enumerate(self.data["interaction"]):
            path = f"interaction[{index}].between"
            for name in entry["between"]:
                if name not in self.data["species"]:
                    self.notes.add(path, f'The species "{name}" is not declared.', f"Add [species.{name}].")
            pair = frozenset(entry["between"])
            if pair in seen:
                says = f"{'-'.join(entry['between'])} is given twice: interaction[{seen[pair]}] has it already."
                self.notes.add(path, says, "Keep one of the two.")
            elif (called := "-".join(entry["between"])) in called_so:
                says = f"interaction[{called_so[called]}] is called {called} too."
                self.notes.add(path, says, "Leave hyphens out of the names of species.")
            seen.setdefault(pair, index)
            called_so.setdefault("-".join(entry["between"]), index)

    def output(self, path: str, given: dict[str, Any], count: int) -> Output:
        units = read_units(self.notes, f"{path}.units", given["units"]) if "units" in given else None
        output = Output(given["file"], given.get("layout", ""), units)
        several = count > 1
        if re.search("[{}]", re.sub(r"\{[ab]\}", "", output.file)):
            says = f'"{output.file}" has a brace that is neither {{a}} nor {{b}}.'
            self.notes.add(f"{path}.file", says, "Only the species {a} and {b} are filled in.")
        holds_all = not output.layout and output.file.lower().endswith((".h5", ".hdf5", ".json"))
        if not output.layout and not output.file.lower().endswith((".h5", ".hdf5", ".json", ".csv")):
            says = f'The ending of "{output.file}" names no format.'
            self.notes.add(f"{path}.file", says, "End it in .h5, .csv or .json, or give a layout.")
        elif several and not holds_all and not all(part in output.file for part in ("{a}", "{b}")):
            says = f'"{output.file}" would hold only one of {count} interactions.'
            self.notes.add(f"{path}.file", says, 'Put the species into the name, as in "{a}-{b}.csv".')
        return output
