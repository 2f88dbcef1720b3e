"""A report: what was found in each file, as values and as the JSON of ``schemas/report.schema.json``."""

from __future__ import annotations

from dataclasses import dataclass, field
from math import isfinite
from typing import Any

from ..checks import Finding, PotentialFacts, worst
from ..potential import Landmarks
from ..potential.landmarks import classical_amplitude, harmonic_wavenumber
from ..problems import Problem, UnusableInput
from ..showing import Shown
from ..units import UnitSystem

SCHEMA = "slopewell/report/1"


@dataclass(frozen=True, slots=True)
class Subject:
    """What was found in one file.

    Attributes
    ----------
    file, sha256, kind : str
        ``kind`` is ``potential`` or ``table``.
    findings : tuple of Finding
    landmarks : tuple of dict
        One record an interaction, in the subject's own units.
    checked : tuple of str
        The checks that ran.
    accepted : tuple of str
        The checks whose errors were accepted.
    certificates : tuple of dict
        What was proved about the rows of each interaction.
    pairs : tuple of dict
        Where each pair of a document comes from.
    problems : tuple of Problem
        Why the file can't be used; then there is nothing else.
    title : str
    """

    file: str
    sha256: str = ""
    kind: str = "potential"
    findings: tuple[Finding, ...] = ()
    landmarks: tuple[dict[str, Any], ...] = ()
    checked: tuple[str, ...] = ()
    accepted: tuple[str, ...] = ()
    certificates: tuple[dict[str, Any], ...] = ()
    pairs: tuple[dict[str, Any], ...] = ()
    problems: tuple[Problem, ...] = ()
    title: str = ""

    @property
    def verdict(self) -> str:
        """``pass``, ``warn``, ``fail`` or ``unusable``."""
        return "unusable" if self.problems else worst(list(self.findings))

    def record(self) -> dict[str, Any]:
        """Return the subject as JSON data."""
        if self.problems:
            problems = [problem_record(problem) for problem in self.problems]
            return {"file": self.file, "verdict": "unusable", "problems": problems}
        record: dict[str, Any] = {
            "file": self.file,
            "sha256": self.sha256,
            "kind": self.kind,
            "verdict": self.verdict,
            "checked": list(self.checked),
            "findings": [finding_record(finding) for finding in self.findings],
            "landmarks": list(self.landmarks),
        }
        if self.accepted:
            record["accepted"] = list(self.accepted)
        if self.pairs:
            record["pairs"] = list(self.pairs)
        if self.certificates:
            record["certificates"] = list(self.certificates)
        return record


@dataclass(frozen=True, slots=True)
class Report(Shown):
    """The subjects of one call, in the order of the command line."""

    subjects: tuple[Subject, ...] = field(default=())

    def record(self) -> dict[str, Any]:
        """Return the report as JSON data."""
        return {"schema": SCHEMA, "subjects": [subject.record() for subject in self.subjects]}


def unusable(error: UnusableInput, file: str) -> Subject:
    """Return the subject of a file that can't be used."""
    return Subject(file=file, problems=error.problems)


def problem_record(problem: Problem) -> dict[str, Any]:
    """Return a problem as JSON data."""
    record: dict[str, Any] = {"at": problem.at, "says": problem.says, "try": problem.remedy}
    if problem.line is not None:
        record["line"] = problem.line
    if problem.excerpt:
        record["excerpt"] = problem.excerpt
    return record


def finding_record(finding: Finding) -> dict[str, Any]:
    """Return a finding as JSON data."""
    return {
        "check": finding.check,
        "level": finding.level,
        "interaction": finding.interaction,
        "mistake": finding.mistake,
        "from": finding.start,
        "to": finding.end,
        "measured": _finite(finding.measured),
        "limit": _finite(finding.limit),
        "unit": finding.unit,
        **finding.details,
        "says": finding.says,
        "try": finding.remedy,
    }


def _finite(value: float | None) -> float | None:
    return value if value is not None and isfinite(value) else None


def _clean(value: float | None, unit: float) -> float | None:
    """Return a value in a unit, without the last digit that conversion spoils; None if it is not finite."""
    return None if value is None or not isfinite(value / unit) else float(f"{value / unit:.15g}")


def landmark_record(name: str, units: UnitSystem, landmarks: Landmarks) -> dict[str, Any]:
    """Return landmarks as JSON data in the given units."""

    def length(value: float | None) -> float | None:
        return _clean(value, float(units.length.factor))

    def energy(value: float | None, power: int = 0) -> float | None:
        return _clean(value, float(units.per_length(power).factor))

    pull = landmarks.largest_attraction
    return {
        "interaction": name,
        "units": {"energy": units.energy.text, "length": units.length.text},
        "equilibrium_separation": length(landmarks.equilibrium_separation),
        "well_depth": energy(landmarks.well_depth),
        "stiffness": energy(landmarks.stiffness, 2),
        "zero_crossing": length(landmarks.zero_crossing),
        "largest_attraction": None if pull is None else {"separation": length(pull[0]), "force": energy(pull[1], 1)},
        "stationary_points": landmarks.stationary_points,
        "proved": landmarks.proved,
    }


def potential_landmarks(facts: PotentialFacts) -> dict[str, Any]:
    """Return the landmarks of an interaction: of the treated curve, and of the bare one beside it."""
    name, units = facts.potential.name, facts.units
    record = landmark_record(name, units, facts.treated)
    stiffness, mass = facts.treated.stiffness, facts.potential.reduced_mass
    bound = stiffness is not None and stiffness > 0
    record["harmonic_wavenumber"] = harmonic_wavenumber(stiffness, float(mass)) if bound and mass else None  # type: ignore[arg-type]
    temperature = facts.potential.temperature
    amplitude = classical_amplitude(stiffness, float(temperature)) if bound and temperature else None  # type: ignore[arg-type]
    record["classical_amplitude"] = None if amplitude is None else facts.length(amplitude)
    bare = landmark_record(name, units, facts.bare)
    record["bare"] = {key: value for key, value in bare.items() if key not in ("interaction", "units")}
    return record


def certificate_record(facts: PotentialFacts, certificate: dict[str, Any]) -> dict[str, Any]:
    """Return a certificate as JSON data, with the interaction and the units it is in."""
    units = {"energy": facts.units.energy.text, "length": facts.units.length.text}
    return {"interaction": facts.potential.name, "units": units, **certificate}
