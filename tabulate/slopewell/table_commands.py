"""The commands of tables: how to read them, convert and compare; nothing is computed here."""

from __future__ import annotations

import argparse
import json
import sys
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from .comparison import Comparison
    from .tables import Reading

GOOD, FOUND = 0, 1


def foreign_options(command: argparse.ArgumentParser) -> None:
    """Add what describes a table that slopewell did not write."""
    command.add_argument("--columns", metavar="NAMES", default="", help="such as separation,energy,force")
    command.add_argument("--units", metavar="ENERGY,LENGTH", default="", help="units of the table's columns")
    command.add_argument("--layout", metavar="FILE", default="", help="layout of the table, instead of columns")
    command.add_argument("--block", metavar="N", type=int, help="which block of rows to read, from 1")
    command.add_argument(
        "--purpose",
        choices=("sampling", "dynamics", "lattice-dynamics"),
        default="",
        help="what the table is for",
    )


def foreign_reading(options: argparse.Namespace) -> Reading:
    """Return how tables are to be read."""
    from .tables import Reading

    names = tuple(name.strip() for name in options.columns.split(",") if name.strip())
    return Reading(names, options.units, options.layout, options.block, options.purpose)


def convert_options(command: argparse.ArgumentParser) -> None:
    """Add the options of ``convert``."""
    command.add_argument("table", metavar="TABLE", help="the table to read")
    command.add_argument("new", metavar="NEW", help="the file to write: .h5, .csv, .json, or text by --new-layout")
    foreign_options(command)
    command.add_argument("--new-units", metavar="ENERGY,LENGTH", default="", help="units of the new table")
    command.add_argument("--new-layout", metavar="FILE", default="", help="layout of the new table")
    many = command.add_mutually_exclusive_group()
    many.add_argument("--rows", metavar="N", type=int, help="number of new rows")
    many.add_argument("--tolerance", metavar="ENERGY", default="", help='largest error of new rows: "1e-6 kJ/mol"')
    command.add_argument("--spacing", metavar="NAME", default="", help="what the new rows are even in")
    command.add_argument("--complete", action="store_true", help="add the column that is missing")
    command.add_argument("--mend", metavar="MISTAKE", default="", help="undo a mistake that check names")
    command.add_argument(
        "--accept",
        metavar="CHECK",
        action="append",
        default=[],
        help="write although this check has an error",
    )
    command.set_defaults(command=_convert)


def _convert(options: argparse.Namespace) -> int:
    from .conversion import Changes, convert
    from .reports.terminal import print_report
    from .showing_tables import console

    changes = Changes(
        units=options.new_units,
        layout=options.new_layout,
        rows=options.rows,
        tolerance=options.tolerance,
        spacing=options.spacing,
        complete=options.complete,
        mend=options.mend,
        accept=tuple(options.accept),
    )
    done = convert(options.table, options.new, changes, reading=foreign_reading(options))
    out = console()
    if not done.written:
        print_report(done.report, out)
        out.print()
        errors = dict.fromkeys(f.check for s in done.report.subjects for f in s.findings if f.level == "error")
        accepting = " ".join(f"--accept {name}" for name in errors if name not in options.accept)
        out.print(f"Nothing was written. Mend the errors (--mend MISTAKE), or accept them by {accepting}.")
        return FOUND
    for line in done.table.history:
        out.print(line, soft_wrap=True)
    units = done.table.units
    for name, (energy, force) in done.added.items():
        out.print(f"{name}: new rows add at most {energy:.3g} {units.energy.text} and {force:.3g} {units.force.text}")
    for path in done.written:
        out.print(f"wrote {path}", soft_wrap=True)
    return GOOD


def compare_options(command: argparse.ArgumentParser) -> None:
    """Add the options of ``compare``."""
    command.add_argument("first", metavar="TABLE", help="table or document")
    command.add_argument("second", metavar="TABLE", help="table or document")
    foreign_options(command)
    command.add_argument(
        "--tolerance",
        metavar="T",
        type=float,
        default=1e-6,
        help="largest difference over the energy scale (1e-6)",
    )
    command.add_argument("--json", action="store_true", help="print only the result, as JSON")
    command.set_defaults(command=_compare)


def _compare(options: argparse.Namespace) -> int:
    from .comparison import compare

    found = compare(options.first, options.second, tolerance=options.tolerance, reading=foreign_reading(options))
    if options.json:
        json.dump(found.record(), sys.stdout, indent=1, ensure_ascii=False, allow_nan=False)
        print()
    else:
        _print(found)
    return GOOD if found.within else FOUND


def _print(found: Comparison) -> None:
    from .showing_tables import comparison_lines, console

    out = console()
    for line in comparison_lines(found):
        out.print(line, soft_wrap=True)
