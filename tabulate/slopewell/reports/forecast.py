"""Predictions for people: one screen, curve and table side by side."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from typing import Any

Row = dict[str, Any]
PER_TEMPERATURE = (
    "second-virial",
    "second-virial-quantum",
    "collision-integral 1,1",
    "collision-integral 2,2",
    "viscosity",
    "diffusion-coefficient",
)
HEADS = ("second virial", "table − curve", "with quantum", "omega(1,1)", "omega(2,2)", "viscosity", "diffusion")
CRYSTAL = (
    ("lattice-constant", "constant"),
    ("cohesive-energy", "cohesion"),
    ("bulk-modulus", "bulk"),
    ("elastic-constant C11", "C11"),
    ("elastic-constant C12", "C12"),
    ("elastic-constant C44", "C44"),
    ("einstein-frequency", "Einstein"),
    ("zone-boundary-frequency", "zone edge"),
)
LABELS = {
    "boyle-temperature": "Boyle temperature",
    "zero-point-energy": "zero-point energy",
    "cutoff-cost": "energy lost to the cutoff",
}
"""Quantities that people call otherwise."""
FEW_LEVELS = 4
MOST_IN_FULL = 2
PAIR = (
    ("equilibrium-separation", "distance"),
    ("well-depth", "depth"),
    ("harmonic-wavenumber", "wavenumber"),
    ("dissociation-energy", "dissociation"),
    ("boyle-temperature", "Boyle"),
    ("collision-diameter", "diameter"),
)
MATRIX = {name.split()[0] for name in (*PER_TEMPERATURE, *(name for name, _ in CRYSTAL))}
HIDDEN = {"pressure", "nearest-distance", "smallest-stiffness"}


def forecast_lines(title: str, rows: Sequence[Row], notes: Iterable[str]) -> Iterator[str]:
    """Yield the lines of a forecast.

    Parameters
    ----------
    title : str
    rows : sequence of mapping
        As in its JSON.
    notes : iterable of str

    Notes
    -----
    More than two subjects get a line each; one alone is asked for by ``--subject``.
    """
    yield title
    subjects = list(dict.fromkeys(row["subject"] for row in rows))
    if len(subjects) > MOST_IN_FULL:
        yield from _overview(rows)
        yield from ("", *(f"  - {note}" for note in notes))
        return
    for subject in dict.fromkeys(row["subject"] for row in rows):
        own = [row for row in rows if row["subject"] == subject]
        yield f"\n  {subject}"
        yield from _singles([row for row in own if "structure" not in row])
        yield from _crystals([row for row in own if "structure" in row])
        yield from _gas([row for row in own if "temperature" in row])
    if notes:
        yield ""
        yield from (f"  - {note}" for note in notes)


def _overview(rows: Sequence[Row]) -> Iterator[str]:
    """Yield a line a pair, and the crystal of lowest energy of each subject that forms one."""
    pairs = dict.fromkeys(row["subject"] for row in rows if "structure" not in row)
    if any(row["curve"] is not None for row in rows):
        # What only the table shows, such as a well at a truncated end, is no property of the curve.
        rows = [row for row in rows if row["curve"] is not None]
    units = {row["quantity"]: _unit(row) for row in rows}
    by_subject = {
        name: [row for row in rows if row["subject"] == name]
        for name in dict.fromkeys([*pairs, *(row["subject"] for row in rows)])
    }
    yield ""
    yield f"  {'pair':<10}" + "".join(f"{head:>14}" for _, head in PAIR) + f"{'table − curve':>14}"
    yield f"  {'':<10}" + "".join(f"{units.get(name, ''):>14}" for name, _ in PAIR)
    for subject, own in by_subject.items():
        pair = [row for row in own if "structure" not in row]
        if subject in pairs:
            cells = [number(_either(pair, name)) for name, _ in PAIR]
            yield f"  {subject:<10}" + "".join(f"{cell:>14}" for cell in (*cells, _farthest(pair)))
    bound = {name: _deepest(own) for name, own in by_subject.items() if any("structure" in row for row in own)}
    if bound:
        yield ""
        yield f"  {'crystal':<28}" + "".join(f"{head:>11}" for _, head in CRYSTAL) + "  shear"
        yield f"  {'':<28}" + "".join(f"{units.get(name.split()[0], ''):>11}" for name, _ in CRYSTAL)
    for subject, own in bound.items():
        head = f"{subject} {own[0]['structure']}"
        cells = [number(_either(own, name)) for name, _ in CRYSTAL]
        stands = (_either(own, "smallest-stiffness") or 0) > 0
        yield (f"  {head:<28}" + "".join(f"{cell:>11}" for cell in cells) + f"  {'stands' if stands else 'gives way'}")
    yield ""
    crystals = ", and its crystal of lowest energy" if bound else ""
    yield f"  One line a pair{crystals}; --subject NAME or --json shows everything."


def _either(rows: Sequence[Row], name: str) -> float | None:
    curve = _value(rows, name, "curve")
    return _value(rows, name, "table") if curve is None else curve


def _farthest(rows: Sequence[Row]) -> str:
    """Return the largest relative difference between table and curve."""
    both = [(row["curve"], row["table"]) for row in rows if row["curve"] and row["table"] is not None]
    return f"{max(abs(table / curve - 1) for curve, table in both):.1e}" if both else "-"


def _deepest(rows: Sequence[Row]) -> list[Row]:
    """Return the rows of the crystal of lowest energy."""
    structures = {row["structure"] for row in rows if "structure" in row}
    by_name = {name: [row for row in rows if row.get("structure") == name] for name in sorted(structures)}
    return max(by_name.values(), key=lambda own: _either(own, "cohesive-energy") or 0.0)


def number(value: float | None, digits: int = 6) -> str:
    """Return a number for a column, a dash for none."""
    return "-" if value is None else f"{value:.{digits}g}"


def _singles(rows: Sequence[Row]) -> Iterator[str]:
    """Yield one line a quantity: curve, table, difference, what the source states."""
    levels = [row for row in rows if row["quantity"] == "vibrational-level"]
    shown = [row for row in rows if row["quantity"] not in MATRIX and row.get("level", 0) < FEW_LEVELS]
    if not shown:
        return
    yield f"    {'':<27}{'curve':>13}{'table':>13}{'difference':>13}{'expected':>11}  unit"
    for row in shown:
        curve, table = row["curve"], row["table"]
        difference = None if curve is None or table is None else table - curve
        yield (
            f"    {_label(row):<27}{number(curve):>13}{number(table):>13}{number(difference, 2):>13}"
            f"{number(row['expected']):>11}  {_unit(row)}"
        )
        if row is shown[-1]:
            continue
        if row.get("level") == FEW_LEVELS - 1 and len(levels) > FEW_LEVELS:
            yield f"    … {len(levels)} levels in all"


def _unit(row: Row) -> str:
    return str(row["unit"]).replace("uPa", "µPa")


def _label(row: Row) -> str:
    words = LABELS.get(row["quantity"], str(row["quantity"]).replace("-", " "))
    if "level" in row:
        words = f"level {row['level']}"
    return f"{words} {row.get('side', '')}".strip()


def _value(rows: Sequence[Row], name: str, column: str) -> float | None:
    quantity, _, key = name.partition(" ")
    for row in rows:
        if row["quantity"] == quantity and key in (row.get("component", ""), row.get("order", "")):
            found: float | None = row[column]
            return found
    return None


def _both(rows: Sequence[Row], names: Sequence[str]) -> Iterator[tuple[str, list[str]]]:
    """Yield the curve's values and what the table differs by; the table's own where there is no curve."""
    curves, tables = ([_value(rows, name, column) for name in names] for column in ("curve", "table"))
    if any(value is not None for value in curves):
        yield "curve", [number(value) for value in curves]
        differences = [None if a is None or b is None else b - a for a, b in zip(curves, tables, strict=True)]
        if any(value is not None for value in differences):
            yield "table − curve", [f"{value:+.1e}" if value is not None else "-" for value in differences]
    else:
        yield "table", [number(value) for value in tables]


def _crystals(rows: Sequence[Row]) -> Iterator[str]:
    if not rows:
        return
    units = {row["quantity"]: _unit(row) for row in rows}
    yield ""
    yield "    " + f"{'crystal':<18}" + "".join(f"{head:>11}" for _, head in CRYSTAL) + "  shear"
    yield "    " + f"{'':<18}" + "".join(f"{units.get(name.split()[0], ''):>11}" for name, _ in CRYSTAL)
    for structure in dict.fromkeys(row["structure"] for row in rows):
        own = [row for row in rows if row["structure"] == structure]
        for line, (kind, cells) in enumerate(_both(own, [name for name, _ in CRYSTAL])):
            weakest = _value(own, "smallest-stiffness", "curve") or _value(own, "smallest-stiffness", "table")
            verdict = ("stands" if weakest and weakest > 0 else "gives way") if line == 0 else ""
            head = structure if line == 0 else f"  {kind}"
            yield f"    {head:<18}" + "".join(f"{cell:>11}" for cell in cells) + f"  {verdict}".rstrip()


def _gas(rows: Sequence[Row]) -> Iterator[str]:
    if not rows:
        return
    units = {row["quantity"]: _unit(row).removeprefix("1") for row in rows}
    names = [units.get(name.split()[0], "") for name in PER_TEMPERATURE]
    yield ""
    yield f"    {'temperature':<12}" + "".join(f"{head:>14}" for head in HEADS)
    yield f"    {'K':<12}" + "".join(f"{name:>14}" for name in (names[0], *names))
    for temperature in dict.fromkeys(row["temperature"] for row in rows):
        own = [row for row in rows if row["temperature"] == temperature]
        (_, cells), *more = list(_both(own, PER_TEMPERATURE))
        difference = more[0][1][0] if more else "-"
        yield f"    {temperature:<12g}" + "".join(f"{cell:>14}" for cell in (cells[0], difference, *cells[1:]))


VERDICTS = {
    "pass": "holds its energy",
    "warn": "may lose track of its energy",
    "fail": "does not hold its energy",
}


def trial_lines(title: str, record: Row) -> Iterator[str]:
    """Yield the lines of a trial run, given its JSON."""
    run, drift, growth = record["conditions"], record["drift"], record["growth"]
    yield title
    yield ""
    yield (
        f"  {run['particles']} particles, {run['steps']} steps of {run['time_step']:.3g} fs, "
        f"{run['seeds']} run{'s' * (run['seeds'] != 1)}, {run['temperature']:.4g} K, "
        f"{run['number_density']:.4g} angstrom^-3"
    )
    unit = drift["unit"].replace("*", "·")
    yield f"  drift     {drift['value']:+.2e} ± {drift['error']:.1e} {unit} a particle"
    ripple = record["ripple"]
    power = f"falling as the step to the power {ripple['order']:.2f}"
    yield f"  ripple    the energy ripples by {ripple['value']:.1e} k_B·T a particle, {power}"
    yield ""
    yield f"    {'cause':<18}{'drift':>12}{'error':>12}{'size':>12}{'share':>8}"
    for cause in record["causes"]:
        yield (
            f"    {cause['cause']:<18}{cause['drift']:>12.1e}{cause['error']:>12.1e}{cause['size']:>12.1e}"
            f"{cause['share']:>8.0%}"
        )
    yield ""
    yield (
        f"  A run of {growth['length']:g} ns {VERDICTS[record['verdict']]} ({record['verdict']}): "
        f"{growth['value']:.2g} k_B·T a particle for certain, "
        f"up to {max(growth['value'], growth['possible']):.2g} by faults of the table."
    )
    if record["notes"]:
        yield ""
        yield from (f"  - {note}" for note in record["notes"])
