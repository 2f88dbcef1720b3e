"""Tables with known mistakes: clean curves × rows × digits × units × mistakes at several strengths.

Run ``python tests/checks/fault_matrix.py`` for the confusion table of a large sample (a number after it sets
how many cells a mistake has); the tests take a small one. Forces come from complex steps through the energies
(W. Squire and G. Trapp, SIAM Rev. 40, 110 (1998)), so that nothing here rests on the package under test.
"""

from __future__ import annotations

import random
import sys
from collections import Counter
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import NDArray
from slopewell.table import Rows, Table
from slopewell.tables import Loaded, check_loaded
from slopewell.units import unit_system

Array = NDArray[np.float64]
Complex = NDArray[np.complex128]
Energy = Callable[[Complex], Complex]
KE = 27.211386245981 * 0.529177210544
STEP = 1e-30


@dataclass(frozen=True)
class Clean:
    """A curve in eV and ångström on a range; beyond ``cutoff`` energy and force are zero."""

    name: str
    energy: Energy
    start: float
    end: float
    cutoff: float = np.inf


def lennard_jones(epsilon: float, sigma: float) -> Energy:
    return lambda r: 4 * epsilon * ((sigma / r) ** 12 - (sigma / r) ** 6)


def morse(depth: float, stiffness: float, place: float) -> Energy:
    return lambda r: depth * (np.exp(-2 * stiffness * (r - place)) - 2 * np.exp(-stiffness * (r - place)))


def exp6(epsilon: float, alpha: float, place: float) -> Energy:
    return lambda r: epsilon / (1 - 6 / alpha) * (6 / alpha * np.exp(alpha * (1 - r / place)) - (place / r) ** 6)


def zbl(first: int, second: int) -> Energy:
    # J. F. Ziegler, J. P. Biersack, U. Littmark, The Stopping and Range of Ions in Matter (1985)
    length = 0.8854 * 0.529177210544 / (first**0.23 + second**0.23)
    terms = ((0.18175, 3.19980), (0.50986, 0.94229), (0.28022, 0.40290), (0.02817, 0.20162))
    return lambda r: KE * first * second / r * sum(c * np.exp(-d * r / length) for c, d in terms)


def ionic(energy: float, length: float, attraction: float) -> Energy:
    # Sodium chloride in the form of F. G. Fumi and M. P. Tosi, J. Phys. Chem. Solids 25, 31 (1964); rounded
    return lambda r: energy * np.exp(-r / length) - KE / r - attraction / r**6


def switched(bare: Energy, start: float, end: float, continuity: int = 2) -> Energy:
    polynomial = {1: (3, -2), 2: (10, -15, 6), 3: (35, -84, 70, -20)}[continuity]

    def energy(r: Complex) -> Complex:
        y = (end - r) / (end - start)
        weight = y ** (continuity + 1) * sum(c * y**k for k, c in enumerate(polynomial))
        return np.where(r.real < start, bare(r), bare(r) * weight)

    return energy


def force_shifted(bare: Energy, end: float) -> Energy:
    level = bare(np.array([end + STEP * 1j]))[0]
    return lambda r: bare(r) - level.real - (r - end) * level.imag / STEP


def oscillating(r: Complex) -> Complex:
    # Friedel-like tail: repulsion plus a damped cosine; invented numbers
    return 3.0 * (2.2 / r) ** 10 + 0.4 * np.cos(2.6 * (r - 2.5)) / (r / 2.5) ** 3


def dzugutov(r: Complex) -> Complex:
    # M. Dzugutov, Phys. Rev. A 46, R2984 (1992), in units of 0.1 eV and 3 angstrom
    x = r / 3.0
    with np.errstate(all="ignore"):
        first = np.where(x.real < 1.87, 5.82 * (x**-16 - 1.28) * np.exp(1.1 / (x - 1.87)), 0)
        second = np.where(x.real < 1.94, 1.28 * np.exp(0.27 / (x - 1.94)), 0)
    return 0.1 * (first + second)


def stillinger_weber(r: Complex) -> Complex:
    # F. H. Stillinger and T. A. Weber, Phys. Rev. B 31, 5262 (1985), two-body part for silicon
    x = r / 2.0951
    with np.errstate(all="ignore"):
        pair = 7.049556277 * (0.6022245584 * x**-4 - 1) * np.exp(1 / (x - 1.8))
    return 2.16826 * np.where(x.real < 1.8, pair, 0)


ARGON = lennard_jones(0.01032, 3.405)
CURVES = (
    Clean("lennard-jones", ARGON, 2.6, 12.0),
    Clean("lennard-jones-wall", ARGON, 0.5, 9.0),
    Clean("truncated", ARGON, 2.8, 12.0, 8.5),
    Clean("morse", morse(4.7446, 1.9426, 0.7414), 0.3, 6.0),
    Clean("exp-6", exp6(0.01057, 14.0, 3.85), 1.6, 10.0),
    Clean("zbl", zbl(14, 14), 0.02, 4.0),
    Clean("ionic", ionic(1256.0, 0.317, 7.0), 1.2, 12.0),
    Clean("switched", switched(ARGON, 7.0, 10.0), 2.7, 10.0),
    Clean("switched-inside", switched(ARGON, 6.0, 9.0, 3), 2.7, 12.0, 9.0),
    Clean("force-shifted", force_shifted(ARGON, 8.5), 2.6, 8.5),
    Clean("oscillating", oscillating, 1.8, 10.0),
    Clean("yukawa", lambda r: 2.0 * np.exp(-r / 2.5) / r, 0.4, 20.0),
    Clean("soft-repulsion", lambda r: 0.05 * (3.0 / r) ** 12, 2.0, 9.0),
    Clean("dzugutov", dzugutov, 2.4, 6.6),
    Clean("stillinger-weber", stillinger_weber, 1.5, 4.0),
)
ROWS = (100, 300, 1001, 5000, 20000)
DIGITS = (6, 8, 10, 17)
UNITS = {
    "eV,angstrom": (1.0, 1.0),
    "kJ/mol,nm": (96.48533212331, 0.1),
    "kcal/mol,angstrom": (23.060547830619, 1.0),
    "hartree,bohr": (1 / 27.211386245981, 1 / 0.529177210544),
}


@dataclass(frozen=True)
class Sample:
    """Columns as a script would print them."""

    separation: Array
    energy: Array
    force: Array


@cache
def clean(curve: Clean, rows: int, units: str, spacing: str = "separation") -> Sample:
    """Return the rows of a curve in some units, unrounded."""
    energy_factor, length_factor = UNITS[units]
    r = grid(curve.start, curve.end, rows, spacing)
    inside = r <= curve.cutoff
    value = curve.energy(r + STEP * 1j)
    energy = np.where(inside, value.real, 0.0) * energy_factor
    force = np.where(inside, -value.imag / STEP, 0.0) * energy_factor / length_factor
    return Sample(r * length_factor, energy, force)


def grid(start: float, end: float, rows: int, spacing: str) -> Array:
    into = {
        "separation": lambda x: x,
        "separation-squared": np.square,
        "inverse": np.reciprocal,
        "logarithmic": np.log,
    }
    back = {
        "separation": lambda x: x,
        "separation-squared": np.sqrt,
        "inverse": np.reciprocal,
        "logarithmic": np.exp,
    }
    return np.asarray(back[spacing](np.linspace(into[spacing](start), into[spacing](end), rows)))


def rounded(column: Array, digits: int) -> Array:
    """Return numbers as a text of so many significant digits holds them."""
    if digits >= 17:
        return column
    return np.array([float(f"{number:.{digits - 1}e}") for number in column.tolist()])


@dataclass(frozen=True)
class Fault:
    """A mistake of some strength: what it makes of clean columns, and what it should be called."""

    name: str
    strength: str
    apply: Callable[[Sample, Clean, str], Sample | None]
    rows: tuple[int, ...] | float | None = None
    factor: float | None = None


def _force(change: Callable[[Sample], Array]) -> Callable[[Sample, Clean, str], Sample]:
    return lambda s, curve, units: Sample(s.separation, s.energy, change(s))


def _scaled(factor: float) -> Callable[[Sample, Clean, str], Sample]:
    return _force(lambda s: factor * s.force)


def _shifted(n: int) -> Callable[[Sample, Clean, str], Sample]:
    def shift(s: Sample, curve: Clean, units: str) -> Sample:
        keep = slice(max(0, -n), s.force.size - max(0, n))
        return Sample(s.separation[keep], s.energy[keep], s.force[keep.start + n : keep.stop + n])

    return shift


def _rolled(n: int) -> Callable[[Sample, Clean, str], Sample]:
    return _force(lambda s: np.roll(s.force, -n))


def _half(direction: int) -> Callable[[Sample, Clean, str], Sample]:
    def shift(s: Sample, curve: Clean, units: str) -> Sample:
        energy, length = UNITS[units]
        r = s.separation / length
        step = np.diff(r)
        middle = r[:-1] + step / 2 if direction > 0 else r[1:] - step / 2
        value = curve.energy(middle + STEP * 1j)
        force = np.where(middle <= curve.cutoff, -value.imag / STEP, 0.0) * energy / length
        keep = slice(0, -1) if direction > 0 else slice(1, None)
        return Sample(s.separation[keep], s.energy[keep], force)

    return shift


def _late_switch(share: float, continuity: int, stage: str) -> Callable[[Sample, Clean, str], Sample]:
    def switch(s: Sample, curve: Clean, units: str) -> Sample:
        r = s.separation
        end = min(float(r[-1]), curve.cutoff * UNITS[units][1])
        start = end - share * (end - float(r[0]))
        y = np.clip((end - r) / (end - start), 0.0, 1.0)
        polynomial = {1: (3, -2), 2: (10, -15, 6), 3: (35, -84, 70, -20)}[continuity]
        weight = np.where(r < start, 1.0, y ** (continuity + 1) * sum(c * y**k for k, c in enumerate(polynomial)))
        return Sample(r, s.energy * weight, s.force * weight if stage == "slope" else s.force)

    return switch


def _offset(part: float, column: str) -> Callable[[Sample, Clean, str], Sample]:
    def shift(s: Sample, curve: Clean, units: str) -> Sample:
        live = s.energy != 0
        scale = np.abs(s.force[s.force < 0]).max(initial=0.0) or np.abs(s.force[s.force.size // 2 :]).max()
        if column == "force":
            return Sample(s.separation, s.energy, s.force + np.where(live, part * scale, 0.0))
        end = s.separation[live][-1]
        return Sample(s.separation, s.energy + np.where(live, part * scale * (s.separation - end), 0.0), s.force)

    return shift


def _corrupt(places: tuple[float, ...], change: float, column: str) -> Callable[[Sample, Clean, str], Sample]:
    def corrupt(s: Sample, curve: Clean, units: str) -> Sample:
        rows = corrupt_rows(places, s.force.size)
        force, energy = s.force.copy(), s.energy.copy()
        target = force if column == "force" else energy
        target[rows] *= 1 + change
        return Sample(s.separation, energy, force)

    return corrupt


def corrupt_rows(places: tuple[float, ...], size: int) -> NDArray[np.intp]:
    return np.array(sorted({int(place * size) for place in places}))


HARTREE, CALORIE, MOLE = 27.211386245981, 4.184, 96.48533212331
FACTORS = {
    "sign and eV-kJ/mol": -MOLE,
    "eV-kJ/mol": MOLE,
    "kJ/mol-eV": 1 / MOLE,
    "eV-kcal/mol": 23.060547830619,
    "kcal-kJ": CALORIE,
    "kJ-kcal": 1 / CALORIE,
    "hartree-eV": HARTREE,
    "hartree-kcal/mol": 627.5094740631,
    "eV-K": 11604.518121,
    "nm-angstrom": 10.0,
    "angstrom-nm": 0.1,
    "angstrom-bohr": 1 / 0.529177210544,
    "bohr-angstrom": 0.529177210544,
    "eV/A-kJ/mol/nm": MOLE * 10,
    "eV/A-hartree/bohr": 0.529177210544 / HARTREE,
    "sign and kcal-kJ": -CALORIE,
    "sign and nm": -10.0,
}
FAULTS: tuple[Fault, ...] = (
    Fault("force-sign-flipped", "", _scaled(-1)),
    *(Fault("counted-twice", f"{f:g}", _scaled(f)) for f in (2.0, 0.5)),
    *(Fault("force-in-other-units", name, _scaled(f), factor=f) for name, f in FACTORS.items()),
    Fault("force-divided-by-separation", "", _force(lambda s: s.force / s.separation)),
    Fault("slope-per-squared-separation", "+", _force(lambda s: s.force / s.separation / 2)),
    Fault("slope-per-squared-separation", "-", _force(lambda s: -s.force / s.separation / 2)),
    Fault("virial-instead-of-force", "", _force(lambda s: s.force * s.separation)),
    Fault("columns-exchanged", "", lambda s, c, u: Sample(s.separation, s.force, s.energy)),
    *(Fault("rows-offset", f"{n}", _shifted(n), rows=float(n)) for n in (1, -1, 2, -3, 5)),
    Fault("rows-offset", "rolled 1", _rolled(1), rows=1.0),
    Fault("rows-offset", "half down", _half(1), rows=0.5),
    Fault("rows-offset", "half up", _half(-1), rows=-0.5),
    *(
        Fault("switch-slope-missing", f"{w} {c} slope", _late_switch(w, c, "slope"))
        for w in (0.1, 0.3, 0.5)
        for c in (1, 2)
    ),
    *(Fault("switch-slope-missing", f"{w} all", _late_switch(w, 2, "all")) for w in (0.15, 0.4)),
    *(
        Fault("constant-force-offset", f"{p:g} {c}", _offset(p, c))
        for p in (0.3, 0.03, -0.003)
        for c in ("force", "energy")
    ),
    *(
        Fault("rows-corrupted", f"{c} {x:g} {len(p)}", _corrupt(p, x, c), rows=p)  # type: ignore[arg-type]
        for p in ((0.47,), (0.31, 0.52, 0.83))
        for c in ("force", "energy")
        for x in (-2.0, 0.3, 0.02)
    ),
)


NOTICED = 1e-5
"""Change of a column, relative to its scale in the well, below which a mistake counts as none."""
SPACINGS = ("separation", "separation", "separation-squared", "inverse", "logarithmic")


@dataclass(frozen=True)
class Cell:
    """One table of the matrix; without a fault it is clean."""

    curve: Clean
    rows: int
    digits: int
    units: str
    spacing: str
    fault: Fault | None = None

    def sample(self) -> Sample | None:
        """Return its columns, rounded; None where the fault changes nothing that is to be seen."""
        plain = clean(self.curve, self.rows, self.units, self.spacing)
        made = plain if self.fault is None else self.fault.apply(plain, self.curve, self.units)
        if made is None or (self.fault is not None and not _noticeable(plain, made)):
            return None
        # Separations carry two digits more where the rows are dense: else they could not be told apart.
        separation = rounded(made.separation, max(self.digits, 8))
        return Sample(separation, rounded(made.energy, self.digits), rounded(made.force, self.digits))

    def expected_rows(self) -> float | list[int] | None:
        """Return the rows that the finding should name."""
        if self.fault is None or not isinstance(self.fault.rows, tuple):
            return None if self.fault is None else self.fault.rows
        plain = clean(self.curve, self.rows, self.units, self.spacing)
        column = plain.energy if "energy" in self.fault.strength else plain.force
        return [
            int(row) + 1
            for row in corrupt_rows(self.fault.rows, self.rows)
            if abs(column[row]) > NOTICED * scale(column)
        ]


def scale(column: Array) -> float:
    return float(np.abs(column[column < 0]).max(initial=0.0)) or float(np.median(np.abs(column)))


def _noticeable(plain: Sample, made: Sample) -> bool:
    if made.force.size != plain.force.size:
        return True
    changes = ((plain.force, made.force), (plain.energy, made.energy))
    return any(float(np.abs(a - b).max()) > NOTICED * scale(a) for a, b in changes)


def cells(count: int, seed: int, faults: tuple[Fault, ...] = FAULTS) -> Iterator[Cell]:
    """Yield so many cells of every fault, at random but always the same."""
    for fault in faults:
        chosen = random.Random(f"{seed} {fault.name} {fault.strength}")
        for _ in range(count):
            yield Cell(
                chosen.choice(CURVES),
                chosen.choice(ROWS),
                chosen.choice(DIGITS),
                chosen.choice(tuple(UNITS)),
                chosen.choice(SPACINGS),
                fault,
            )


def clean_cells(count: int, seed: int) -> Iterator[Cell]:
    chosen = random.Random(seed)
    for curve in CURVES:
        for rows in ROWS:
            for _ in range(count):
                digits, units, spacing = (chosen.choice(part) for part in (DIGITS, tuple(UNITS), SPACINGS))
                yield Cell(curve, rows, digits, units, spacing)


def named(sample: Sample, units: str) -> tuple[str, dict[str, object]]:
    """Return what the check of force against slope calls the mistake of a table, and its whole finding."""
    rows = Rows("A-B", sample.separation, sample.energy, sample.force)
    energy, length = units.split(",")
    subject = check_loaded(Loaded(Table((rows,), unit_system(energy, length)), ""), "table")
    for finding in subject.findings:
        if finding.check == "force-matches-slope" and finding.level == "error":
            return finding.mistake or "unexplained", dict(finding.details)
    return next((f"error of {f.check}" for f in subject.findings if f.level == "error"), "none"), {}


def verdict(cell: Cell) -> str | None:
    """Return the name that a cell gets, with what is wrong in its details; None for nothing to see."""
    sample = cell.sample()
    if sample is None or bool(np.any(np.diff(sample.separation) <= 0)):
        return None
    name, details = named(sample, cell.units)
    if cell.fault is None or name != cell.fault.name:
        return name
    if cell.fault.factor and abs(float(str(details["factor"])) / cell.fault.factor - 1) > 2e-3:
        return f"{name} with factor {details['factor']}"
    if cell.fault.rows is not None and details["rows"] != cell.expected_rows():
        return f"{name} with rows {details['rows']}"
    return name


def main(count: int) -> None:
    """Print the confusion table."""
    alarms: Counter[str] = Counter()
    total = 0
    for cell in clean_cells(max(1, count // 4), 1):
        found = verdict(cell)
        if found is not None:
            total += 1
            if found != "none":
                alarms[f"{found}: {cell}"] += 1
    print(f"clean tables: {total}, alarms: {sum(alarms.values())}")
    for line in alarms:
        print("   ", line)
    right = seen = 0
    for fault in FAULTS:
        names: Counter[str] = Counter()
        for cell in cells(count, 1, (fault,)):
            found = verdict(cell)
            if found is not None:
                names[found] += 1
        good = sum(
            number for name, number in names.items() if name == fault.name or name.startswith(f"{fault.name} with")
        )
        right, seen = right + good, seen + sum(names.values())
        print(
            f"{fault.name:30}{fault.strength:22}{good:5} of {sum(names.values()):<5}",
            dict(names) if len(names) > 1 else "",
        )
    print(f"named first: {right} of {seen}, {right / seen:.2%}")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 12)
