"""The commands ``predict`` and ``trial``: arguments in, exit status out."""

from __future__ import annotations

import argparse
import json
import sys
from collections.abc import Iterable, Iterator
from typing import Any

from .table_commands import FOUND, GOOD, foreign_options, foreign_reading


def _study_options(command: argparse.ArgumentParser) -> None:
    """Add what predict and trial have in common."""
    command.add_argument("file", metavar="FILE", help="potential document or table")
    foreign_options(command)
    command.add_argument("--document", metavar="FILE", help="document behind a table that does not store it")
    command.add_argument("--mass", metavar="NAME=MASS", action="append", default=[], help='"Ar=39.95 dalton"')
    command.add_argument("--density", metavar="DENSITY", help='number density, "0.021 angstrom^-3"')
    command.add_argument("--json", action="store_true", help="print only the result, as JSON")


def predict_options(command: argparse.ArgumentParser) -> None:
    """Add the options of ``predict``."""
    _study_options(command)
    command.add_argument("--temperatures", metavar="LIST", help="in kelvin: 150:700:50 or 100,300")
    command.add_argument("--subject", metavar="NAME", default="", help="show only this pair or crystal, such as W-P")
    command.add_argument("--structure", metavar="NAME", action="append", default=[], help="only this crystal")
    command.set_defaults(command=_predict)


def _predict(options: argparse.Namespace) -> int:
    from .forecasting import predict, read_density, read_masses, read_temperatures

    forecast = predict(
        options.file,
        temperatures=read_temperatures(options.temperatures) if options.temperatures else None,
        number_density=read_density(options.density) if options.density else None,
        structures=options.structure,
        reading=foreign_reading(options),
        document=options.document,
        masses=read_masses(options.mass),
    )
    record = forecast.record()
    if options.json:
        _print_json(record)
        return GOOD
    from .reports.forecast import forecast_lines

    rows = [row for row in record["predictions"] if options.subject in ("", row["subject"])]
    for line in forecast_lines(forecast.studied.title or options.file, rows, forecast.notes):
        print(line)
    return GOOD


def trial_options(command: argparse.ArgumentParser) -> None:
    """Add the options of ``trial``."""
    _study_options(command)
    command.add_argument("--length", metavar="TIME", default="1 ns", help="of the run to judge (default: 1 ns)")
    command.add_argument("--temperature", metavar="T", help='such as "300 K" (default: from the document)')
    command.add_argument("--time-step", metavar="TIME", help='"2 fs" (default: from the stiffest pair)')
    command.add_argument("--interpolation", metavar="RULE", default="", help="how the code reads between rows")
    command.add_argument(
        "--particles",
        metavar="N",
        type=int,
        help="how many (default: 256, more for a long cutoff)",
    )
    command.add_argument("--steps", metavar="N", type=int, help="of each run (default: 200 to 1500)")
    command.add_argument("--seeds", metavar="N", type=int, default=2, help="how many runs (default: 2)")
    command.set_defaults(command=_trial)


def _trial(options: argparse.Namespace) -> int:
    from .forecasting import read_density, read_masses
    from .trials import read_time, trial
    from .units import temperature

    done = trial(
        options.file,
        reading=foreign_reading(options),
        document=options.document,
        masses=read_masses(options.mass),
        rule=options.interpolation,
        temperature=float(temperature(options.temperature)) if options.temperature else None,
        number_density=read_density(options.density) if options.density else None,
        step=read_time(options.time_step, "--time-step") if options.time_step else None,
        particles=options.particles,
        steps=options.steps,
        seeds=options.seeds,
        length=read_time(options.length, "--length") / 1e6,
        track=_track,
    )
    if options.json:
        _print_json(done.record())
    else:
        from .reports.forecast import trial_lines

        for line in trial_lines(done.studied.title or options.file, done.record()):
            print(line)
    return FOUND if done.verdict == "fail" else GOOD


def _track(items: Iterable[Any], label: str) -> Iterator[Any]:
    from .reports.progress import track

    return track(items, label, sys.stderr)


def _print_json(data: Any) -> None:
    json.dump(data, sys.stdout, indent=1, ensure_ascii=False, allow_nan=False)
    print()
