"""Understand a document: from plain data that fits the schema to potentials, grids and outputs."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path
from typing import Any

from ..formula import Tree
from ..formula.branches import TooManyBranches, resolve
from ..potential import Curve, Cutoff, Potential, treat
from ..problems import UnusableInput
from ..units import UnitSystem
from .energy import Stated, read_energy
from .model import Document, Expectation, Grid, Interaction, Output
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
        raise UnusableInput(notes.problems, source.file)
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
        purpose = self.data.get("purpose", "dynamics")
        temperature = self.optional("temperature", read_temperature)
        scale = self.energy_scale(units)
        masses = self.masses(units)
        interactions = [
            self.interaction(f"interaction[{index}]", entry, units, masses, (temperature, scale, purpose))
            for index, entry in enumerate(self.data["interaction"])
        ]
        self.check_pairs()
        outputs = tuple(self.output(f"output[{i}]", entry) for i, entry in enumerate(self.data.get("output", [])))
        source = self.notes.source
        return Document(
            file=source.file,
            text=source.text,
            sha256=source.sha256,
            title=self.data["title"],
            source=self.data.get("source", ""),
            purpose=purpose,
            units=units,
            interactions=tuple(interaction for interaction in interactions if interaction is not None),
            outputs=outputs,
            masses=masses,
            charges={name: float(it["charge"]) for name, it in self.data["species"].items() if "charge" in it},
        )

    def optional(self, key: str, read: Any) -> Any:
        return read(self.notes, key, self.data[key]) if key in self.data else None

    def energy_scale(self, units: UnitSystem) -> Fraction | None:
        if "energy-scale" not in self.data:
            return None
        scale = read_quantity(self.notes, "energy-scale", self.data["energy-scale"], "energy", units)
        if scale is not None and scale <= 0:
            self.notes.add("energy-scale", "An energy scale must be positive.", "Give its size.")
        return scale

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
        for index, entry in enumerate(self.data["interaction"]):
            path = f"interaction[{index}].between"
            for name in entry["between"]:
                if name not in self.data["species"]:
                    self.notes.add(path, f'The species "{name}" is not declared.', f"Add [species.{name}].")
            pair = frozenset(entry["between"])
            if pair in seen:
                says = f"{'-'.join(entry['between'])} is given twice: interaction[{seen[pair]}] has it already."
                self.notes.add(path, says, "Keep one of the two.")
            seen.setdefault(pair, index)

    def interaction(
        self,
        path: str,
        entry: dict[str, Any],
        units: UnitSystem,
        masses: dict[str, Fraction],
        setting: tuple[Fraction | None, Fraction | None, str],
    ) -> Interaction | None:
        stated = read_energy(self.notes, path, entry, units)
        grid = self.grid(path, entry, units)
        cutoff = self.cutoff(f"{path}.cutoff", entry["cutoff"], units, grid) if "cutoff" in entry else None
        if stated is None or grid is None or ("cutoff" in entry and cutoff is None):
            return None
        bare = self.curve(f"{path}.{'form' if stated.form else 'energy'}", stated.energy, grid)
        if bare is None:
            return None
        first, second = entry["between"]
        temperature, scale, purpose = setting
        potential = Potential(
            name=f"{first}-{second}",
            between=(first, second),
            bare=bare,
            treated=treat(bare, cutoff, grid.end) if cutoff else bare,
            start=grid.start,
            end=grid.end,
            cutoff=cutoff,
            formula=stated.text,
            form=stated.form,
            stated_force=self.force(path, stated, grid),
            reduced_mass=_reduced(masses.get(first), masses.get(second)),
            temperature=temperature,
            energy_scale=scale,
            purpose=purpose,
        )
        return Interaction(potential, grid, self.expectations(f"{path}.expect", entry.get("expect", {}), potential))

    def curve(self, path: str, tree: Tree, grid: Grid) -> Curve | None:
        try:
            return Curve(resolve(tree, grid.start, grid.end))
        except TooManyBranches as error:
            self.notes.add(path, f"where, abs, min or max can't be resolved: {error}.", "Write a simpler condition.")
            return None

    def force(self, path: str, stated: Stated, grid: Grid) -> Curve | None:
        return None if stated.force is None else self.curve(f"{path}.force", stated.force, grid)

    def grid(self, path: str, entry: dict[str, Any], units: UnitSystem) -> Grid | None:
        own = "grid" in entry
        place = f"{path}.grid" if own else "grid"
        given = entry["grid"] if own else self.data.get("grid")
        if given is None:
            self.notes.add(path, "This interaction has no grid.", "Add [grid] to the document, or a grid of its own.")
            return None
        start, end = (read_quantity(self.notes, f"{place}.{key}", given[key], "length", units) for key in ("from", "to"))
        if start is None or end is None:
            return None
        if start <= 0:
            self.notes.add(f"{place}.from", "The grid must start above zero separation.", "Give a positive start.")
            return None
        if end <= start:
            self.notes.add(f"{place}.to", "The grid ends before it starts.", "Let to be larger than from.")
            return None
        tolerances = [self.tolerance(f"{place}.{key}", given.get(key), powers, units) for key, powers in TOLERANCES]
        return Grid(
            start=start,
            end=end,
            rows=given.get("rows"),
            spacing=given.get("spacing", "separation"),
            interpolation=given.get("interpolation", "cubic-hermite"),
            ends=given.get("ends", "clamped"),
            tolerance=tolerances[0],
            force_tolerance=tolerances[1],
        )

    def tolerance(self, path: str, value: Any, powers: str, units: UnitSystem) -> Fraction | None:
        if value is None:
            return None
        found = read_quantity(self.notes, path, value, powers, units)
        if found is not None and found <= 0:
            self.notes.add(path, "A tolerance must be positive.", "Give its size.")
            return None
        return found

    def cutoff(self, path: str, given: dict[str, Any], units: UnitSystem, grid: Grid | None) -> Cutoff | None:
        at = read_quantity(self.notes, f"{path}.at", given["at"], "length", units)
        start = read_quantity(self.notes, f"{path}.from", given["from"], "length", units) if "from" in given else None
        if at is None or grid is None or ("from" in given and start is None):
            return None
        if at > grid.end:
            self.notes.add(f"{path}.at", "The cutoff lies beyond the end of the grid.", "Let the grid reach the cutoff.")
            return None
        if at <= grid.start:
            self.notes.add(f"{path}.at", "The cutoff lies before the start of the grid.", "Start the grid closer in.")
            return None
        if start is not None and not 0 < start < at:
            says = "The switch must start above zero and before the cutoff."
            self.notes.add(f"{path}.from", says, "Let from be smaller than at.")
            return None
        return Cutoff(at, given["treatment"], start, given.get("continuity", 2))

    def expectations(self, path: str, given: dict[str, Any], potential: Potential) -> tuple[Expectation, ...]:
        if "harmonic-wavenumber" in given and potential.reduced_mass is None:
            says = "A wavenumber needs the masses of both species."
            self.notes.add(f"{path}.harmonic-wavenumber", says, "Give them under species.")
        return tuple(
            Expectation(name, float(stated["value"]), float(stated["within"]), stated.get("of") == "treated")
            for name, stated in given.items()
        )

    def output(self, path: str, given: dict[str, Any]) -> Output:
        units = read_units(self.notes, f"{path}.units", given["units"]) if "units" in given else None
        output = Output(given["file"], given.get("layout", ""), units)
        several = len(self.data["interaction"]) > 1
        holds_all = not output.layout and output.file.lower().endswith((".h5", ".hdf5", ".json"))
        if not output.layout and not output.file.lower().endswith((".h5", ".hdf5", ".json", ".csv")):
            says = f'The ending of "{output.file}" names no format.'
            self.notes.add(f"{path}.file", says, "End it in .h5, .csv or .json, or give a layout.")
        elif several and not holds_all and not all(part in output.file for part in ("{a}", "{b}")):
            says = f'"{output.file}" would hold only one of {len(self.data["interaction"])} interactions.'
            self.notes.add(f"{path}.file", says, 'Put the species into the name, as in "{a}-{b}.csv".')
        return output


TOLERANCES = (("tolerance", "energy"), ("force-tolerance", "energy length^-1"))


def _reduced(first: Fraction | None, second: Fraction | None) -> Fraction | None:
    return None if first is None or second is None else first * second / (first + second)



