"""The command line: arguments in, exit status out; nothing is computed here."""

from __future__ import annotations

import argparse
import json
import os
import sys
from collections.abc import Callable, Iterable, Iterator, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

from .study_commands import predict_options, trial_options
from .table_commands import compare_options, convert_options, foreign_options, foreign_reading

if TYPE_CHECKING:
    from rich.console import Console

    from .problems import UnusableInput
    from .reports import Report
    from .tables import Reading

GOOD, FOUND, UNUSABLE = 0, 1, 2
"""Exit status: nothing worse than a warning; an error was found; the input can't be used."""


def run() -> None:
    """Run the command line and leave with its exit status."""
    sys.exit(main(sys.argv[1:]))


def main(arguments: Sequence[str]) -> int:
    """Run a command line and return its exit status."""
    from .problems import UnusableInput

    try:
        options = parser().parse_args(arguments)
    except SystemExit as stop:
        return int(stop.code or 0)
    try:
        status: int = options.command(options)
        sys.stdout.flush()
        return status
    except UnusableInput as error:
        return _refuse(error)
    except BrokenPipeError:
        # The reader went away, as "| head" does: nothing is wrong, and nobody is left to tell.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return GOOD
    except KeyboardInterrupt:
        print("stopped", file=sys.stderr)
        return 130


def parser() -> argparse.ArgumentParser:
    """Return the parser of the command line."""
    top = argparse.ArgumentParser(
        prog="slopewell",
        description="Check interatomic potentials, and write energy and force tables with proved error bounds.",
    )
    top.add_argument("--version", action="version", version=_version())
    commands = top.add_subparsers(title="commands", metavar="COMMAND", required=True)
    for name, line, build in COMMANDS:
        command = commands.add_parser(name, help=line, description=line[0].upper() + line[1:] + ".")
        build(command)
    return top


def _version() -> str:
    from . import __version__

    return f"slopewell {__version__}"


def _check_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("files", nargs="+", metavar="FILE", help="potential document or table")
    foreign_options(command)
    command.add_argument("--json", action="store_true", help="print only the report, as JSON")
    command.add_argument("--strict", action="store_true", help="let a warning count as an error")
    command.add_argument("--curve", action="store_true", help="draw each curve in the terminal")
    command.add_argument("--junit", metavar="FILE", help="write the report as JUnit XML too")
    command.add_argument("--every-row", action="store_true", help="prove every row, not only a few hundred")
    command.set_defaults(command=_check)


def _check(options: argparse.Namespace) -> int:
    from .workflow import check

    reading = foreign_reading(options)
    report = check(options.files, reading=reading, every_row=options.every_row, track=_track)
    if options.junit:
        from .files.atomic import write_text
        from .reports.junit import junit_text

        write_text(Path(options.junit), junit_text(report, strict=options.strict))
    _print_report(report, as_json=options.json, reading=reading if options.curve else None)
    return _status(report, strict=options.strict)


def _tabulate_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("document", metavar="DOCUMENT", help="potential document")
    command.add_argument("--into", metavar="DIR", help="folder of the files (default: beside the document)")
    command.add_argument(
        "--accept", metavar="CHECK", action="append", default=[], help="write although this check has an error"
    )
    command.add_argument("--strict", action="store_true", help="let a warning count as an error")
    command.add_argument("--parameters", metavar="SETS", help="CSV file: tabulate once for each row")
    command.add_argument("--workers", metavar="N", type=int, help="processes for them (default: all processors)")
    command.add_argument("--scheduler", metavar="ADDRESS", default="", help="Dask cluster for them instead")
    command.set_defaults(command=_tabulate)


def _tabulate(options: argparse.Namespace) -> int:
    if options.parameters:
        return _tabulate_sets(options)
    from .problems import Problem, UnusableInput
    from .tabulating import tabulate

    for name in ("workers", "scheduler"):
        if getattr(options, name):
            raise UnusableInput([Problem(f"--{name}", "This is for sets.", "Add --parameters SETS.")])
    done = tabulate(options.document, into=options.into, accept=options.accept, strict=options.strict, track=_track)
    _print_report(done.report, as_json=False)
    console = _console()
    console.print()
    if not done.written:
        options_of = " ".join(f"--accept {name}" for name in done.stopped_by)
        console.print(f"Nothing was written. Mend the errors, or accept them by {options_of}.", style="bold")
        return FOUND
    for path in done.written:
        console.print(f"wrote {path}", highlight=False, markup=False, soft_wrap=True)
    return GOOD


def _tabulate_sets(options: argparse.Namespace) -> int:
    from .ensemble import tabulate_sets

    try:
        done = tabulate_sets(
            options.document,
            options.parameters,
            into=options.into,
            accept=options.accept,
            workers=options.workers,
            scheduler=options.scheduler,
            track=_track,
        )
    except KeyboardInterrupt:
        print("Sets that are finished are kept; the same command goes on from there.", file=sys.stderr)
        raise
    for line in done.lines():
        print(line)
    if done.verdicts.get("unusable"):
        return UNUSABLE
    failing = {"fail", "accepted", "warn"} if options.strict else {"fail"}
    return FOUND if failing & set(done.verdicts) else GOOD


def _plan_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("document", metavar="DOCUMENT", help="potential document")
    command.add_argument("--tolerance", metavar="ENERGY", help='such as "1e-6 kJ/mol" (default: that of each grid)')
    command.add_argument("--json", action="store_true", help="print only the plans, as JSON")
    command.set_defaults(command=_plan)


def _plan(options: argparse.Namespace) -> int:
    from .planning import plan

    document, plans = plan(options.document, options.tolerance, track=_track)
    if options.json:
        _print_json({"plans": [one.record() for one in plans]})
        return GOOD
    from .reports.plans import plan_lines

    for line in plan_lines(plans, document.units):
        print(line)
    return GOOD


def _fit_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("document", metavar="DOCUMENT", help="potential document with something to fit")
    command.add_argument("-o", "--output", metavar="NEW", help="write the document with its values, .toml or .json")
    command.add_argument("--json", action="store_true", help="print only the fits, as JSON")
    command.set_defaults(command=_fit)


def _fit(options: argparse.Namespace) -> int:
    from .fitting import fit
    from .reports.origins import fit_lines, fit_record

    document, fits = fit(options.document, options.output)
    records = [{"interaction": name, **fit_record(one, document.units)} for name, one in fits]
    if options.json:
        _print_json({"fits": records})
        return GOOD
    for record in records:
        print(record["interaction"])
        for label, value in fit_lines(record, document.units):
            print(f"  {label:<24}{value}")
    if options.output:
        print(f"wrote {options.output}")
    return GOOD


def _forms_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("name", nargs="?", metavar="NAME", help="show one form, with a block to paste")
    command.set_defaults(command=_forms)


def _forms(options: argparse.Namespace) -> int:
    from .reports.catalogue import form_lines, list_lines

    for line in form_lines(options.name) if options.name else list_lines():
        print(line)
    return GOOD


def _units_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("quantity", metavar="QUANTITY", help='such as "1 eV/angstrom"')
    command.add_argument("unit", metavar="UNIT", help='such as "kJ/mol/nm"')
    command.set_defaults(command=_units)


def _units(options: argparse.Namespace) -> int:
    from .units import convert_text

    print(convert_text(options.quantity, options.unit))
    return GOOD


def _sheet_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("files", nargs="+", metavar="FILE", help="document or table; a second is laid over it")
    command.add_argument(
        "-o", "--output", metavar="OUT", help=".html, .png, .svg or .pdf (default: a page beside the first file)"
    )
    command.add_argument(
        "--interaction", metavar="NAME", action="append", default=[], help="show only this one, such as W-P"
    )
    foreign_options(command)
    command.add_argument("--strict", action="store_true", help="let a warning count as an error")
    command.set_defaults(command=_sheet)


def _sheet(options: argparse.Namespace) -> int:
    from .sheets import sheet

    path, shown = sheet(
        options.files, options.output, only=options.interaction, reading=foreign_reading(options), track=_track
    )
    print(f"wrote {path}")
    failing = {"fail", "warn"} if options.strict else {"fail"}
    return FOUND if shown.record.get("verdict") in failing else GOOD


def _completion_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("shell", metavar="SHELL", help="bash, fish or zsh")
    command.set_defaults(command=_completion)


def _completion(options: argparse.Namespace) -> int:
    from .forms import catalogue
    from .reports.completion import SHELLS, commands_of, completion
    from .schemas import NAMES

    words = {"completion": tuple(SHELLS), "forms": tuple(catalogue()), "schema": NAMES, "units": ()}
    print(completion(options.shell, commands_of(parser(), words)), end="")
    return GOOD


def _schema_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("name", metavar="NAME", help="potential, layout, table or report")
    command.set_defaults(command=_schema)


def _schema(options: argparse.Namespace) -> int:
    from .problems import Problem, UnusableInput, nearest
    from .schemas import NAMES, text

    if options.name not in NAMES:
        raise UnusableInput([Problem("", f'There is no schema "{options.name}".', nearest(options.name, NAMES))])
    print(text(options.name), end="")
    return GOOD


COMMANDS: tuple[tuple[str, str, Callable[[argparse.ArgumentParser], None]], ...] = (
    ("check", "check potential documents and tables: findings and landmarks", _check_options),
    ("tabulate", "check a document, then write every output that it names", _tabulate_options),
    ("convert", "carry a table over to other units, rows, formats and layouts, or mend it", convert_options),
    ("compare", "how far two tables, or a table and a document, lie apart", compare_options),
    ("fit", "fit parameters to points, and write a document with their values", _fit_options),
    ("plan", "how many rows each grid and interpolation rule needs", _plan_options),
    ("sheet", "write a page or a picture of curves, landmarks and findings", _sheet_options),
    ("predict", "crystals, gas, vibrations: what the curve and the table give", predict_options),
    ("trial", "a short simulation on the table: how far its energy drifts", trial_options),
    ("forms", "list the catalogue of published forms, or show one", _forms_options),
    ("units", "convert a quantity to another unit", _units_options),
    ("schema", "print a published schema", _schema_options),
    ("completion", "print a script that makes a shell complete commands", _completion_options),
)
"""Every command: its name, its line of help, and what adds its options."""


def _console(*, to_error: bool = False) -> Console:
    from rich.console import Console

    stream = sys.stderr if to_error else sys.stdout
    width = None if stream.isatty() else 100
    return Console(file=stream, width=width, highlight=False, markup=False, emoji=False)


def _print_json(data: Any) -> None:
    json.dump(data, sys.stdout, indent=1, ensure_ascii=False, allow_nan=False)
    print()


def _print_report(report: Report, *, as_json: bool, reading: Reading | None = None) -> None:
    if as_json:
        _print_json(report.record())
        return
    from .reports.terminal import print_report

    console = _console()
    print_report(report, console, _curves(report, console, reading) if reading is not None else None)


def _curves(report: Report, console: Console, reading: Reading) -> dict[tuple[str, str], list[str]]:
    """Return the curves to print, by file and interaction: plain where no person is looking."""
    from .reports.curve import curve_lines
    from .sheets import drawings_of

    plain = not console.is_terminal or console.encoding.lower() not in ("utf-8", "utf8")
    usable = [subject for subject in report.subjects if not subject.problems]
    return {
        (subject.file, drawing.name): curve_lines(drawing, console.width - 4, plain=plain)
        for subject in usable
        for drawing in drawings_of(Path(subject.file), subject.record(), reading)
    }


def _status(report: Report, *, strict: bool) -> int:
    verdicts = {subject.verdict for subject in report.subjects}
    if "unusable" in verdicts:
        return UNUSABLE
    if "fail" in verdicts or (strict and "warn" in verdicts):
        return FOUND
    return GOOD


def _refuse(error: UnusableInput) -> int:
    from .reports.report import unusable
    from .reports.terminal import print_problem, print_problems

    console = _console(to_error=True)
    if error.file:
        print_problems(unusable(error, error.file), console)
    else:
        for problem in error.problems:
            print_problem(problem, console)
    return UNUSABLE


def _track(items: Iterable[Any], label: str) -> Iterator[Any]:
    """Show a progress bar on a terminal when work lasts more than a second."""
    from .reports.progress import track

    return track(items, label, sys.stderr)
