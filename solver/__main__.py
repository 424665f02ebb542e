"""``python -m solver statics|modes|launch|sweep|weights|loads FILE``: answers from a car file alone."""

from __future__ import annotations

import argparse
import csv
import json
import sys
from collections.abc import Callable, Mapping
from dataclasses import asdict
from pathlib import Path
from typing import TYPE_CHECKING

from solver.faults import CarError, LaunchFailed
from solver.printing import launch_table, modes_table, statics_table, sweep_table

if TYPE_CHECKING:
    from solver.car import Car

BAD_FILE, FAILED = 2, 3


def main(arguments: list[str] | None = None) -> int:
    """Run one command; returns the exit status: 0, 2 for a bad file, 3 for a failed launch."""
    options = _parser().parse_args(arguments)
    try:
        return options.command(options)
    except CarError as error:
        for fault in error.faults:
            print(f"{options.file}: {fault}", file=sys.stderr)
        return BAD_FILE
    except LaunchFailed as error:
        print(f"{options.file}: the launch failed {error}", file=sys.stderr)
        return FAILED
    except OSError as error:
        print(f"{error.filename}: cannot be written: {error.strerror}", file=sys.stderr)
        return BAD_FILE


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(prog="python -m solver", description=__doc__)
    commands = parser.add_subparsers(required=True, metavar="command")
    for name, command, what in (
        ("statics", _statics, "ride height: loads, preloads, instant centre, anti-squat"),
        ("modes", _modes, "natural frequencies and damping ratios"),
        ("launch", _launch, "the whole launch"),
        ("sweep", _sweep, "the launch over a grid of choices"),
        ("weights", _weights, "scales, CG, sprung mass, CG height, spring-seat turns"),
        ("loads", _loads, "bars against the launch, rear tyres left and right"),
    ):
        part = commands.add_parser(name, help=what)
        part.add_argument("file", metavar="FILE", help="a car file")
        part.add_argument("--json", metavar="OUT", type=Path, help="write the result as JSON")
        if name in ("launch", "sweep"):
            part.add_argument("--csv", metavar="OUT", type=Path, help="write the table as CSV")
        if name == "sweep":
            part.add_argument("--vary", action="append", metavar="PATH=LOW:HIGH:COUNT", default=[])
        part.set_defaults(command=command)
    return parser


def _car(options: argparse.Namespace) -> Car:
    from solver.carfile import load_car

    return load_car(options.file)


def _statics(options: argparse.Namespace) -> int:
    from solver.launching import plain
    from solver.statics import statics

    result = statics(_car(options))
    _answer(options, {"statics": plain(asdict(result))}, lambda: statics_table(result))
    return 0


def _modes(options: argparse.Namespace) -> int:
    from solver.launching import plain
    from solver.modes import modes

    result = modes(_car(options))
    data = {"modes": [plain(asdict(mode)) for mode in result]}
    _answer(options, data, lambda: modes_table(result))
    return 0


def _launch(options: argparse.Namespace) -> int:
    from solver.launching import launch

    result = launch(_car(options))
    if options.csv:
        _write_csv(options.csv, result.histories)
    _answer(options, result.to_dict(), lambda: launch_table(result), quiet=bool(options.csv))
    return 0


def _weights(options: argparse.Namespace) -> int:
    from solver.cli_weights import weights_answer

    result = weights_answer(_car(options))
    _answer(options, result.data, lambda: result.text)
    return 0


def _loads(options: argparse.Namespace) -> int:
    from solver.cli_loads import loads_answer

    result = loads_answer(_car(options))
    _answer(options, result.data, lambda: result.text)
    return 0


def _sweep(options: argparse.Namespace) -> int:
    from solver.grids import grid, usual_grid
    from solver.sweeping import sweep

    car = _car(options)
    changes = grid(options.vary) if options.vary else usual_grid(car)
    result = sweep(car, changes)
    columns = {**changes, **result.statics, **result.figures}
    if options.csv:
        _write_csv(options.csv, columns)
    varied = {path: values.tolist() for path, values in changes.items()}
    data = {"varied": varied, **result.to_dict()}
    _answer(options, data, lambda: sweep_table(changes, result), quiet=bool(options.csv))
    return 0


def _answer(options: argparse.Namespace, data: dict, table: Callable, quiet: bool = False) -> None:
    """Write JSON where asked, else print the table."""
    if options.json:
        options.json.write_text(json.dumps(data, allow_nan=False), encoding="utf-8")
    elif not quiet:
        print(table())


def _write_csv(path: Path, histories: Mapping) -> None:
    with open(path, "w", encoding="utf-8", newline="") as file:
        writer = csv.writer(file)
        writer.writerow(histories)
        writer.writerows(zip(*(values.tolist() for values in histories.values()), strict=True))


if __name__ == "__main__":
    sys.exit(main())
