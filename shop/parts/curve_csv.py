"""Curves in and out as CSV (RFC 4180): a shock's dyno sheet, an engine's torque, a spring's load.

The header names each column and may give its unit in brackets: `velocity (in/s)`. A curve per
click has two more columns, `side` (compression or rebound) and `click`.
"""

from __future__ import annotations

import csv
import io
import itertools
import math
import re
from typing import Any

from shop.parts.kinds import MOST_CURVES, MOST_POINTS, SIDES, CurveKind
from shop.refusals import Refused
from shop.units import ReadingError, default_unit, parse_reading, unit_of

Curve = dict[str, Any]
_HEADER = re.compile(r"^\s*(?P<name>[^(\[]+?)\s*(?:[(\[]\s*(?P<unit>[^)\]]+?)\s*[)\]])?\s*$")
_NAMES = {
    "velocity": "x", "speed": "x", "shaft speed": "x", "rpm": "x", "engine speed": "x", "compression": "x", "travel": "x",
    "force": "y", "load": "y", "torque": "y",
}


def _table(text: str) -> tuple[list[str], list[list[str]]]:
    text = text.lstrip("\ufeff")
    first = text.split("\n", 1)[0]
    # Sheets from countries that write 3,5 use semicolons between fields.
    separator = max(",;\t", key=first.count)
    rows = [row for row in csv.reader(io.StringIO(text), delimiter=separator) if any(cell.strip() for cell in row)]
    if len(rows) < 2:
        raise Refused({"curve": "the file has no rows under its header"})
    return rows[0], rows[1:]


def _columns(header: list[str], kind: CurveKind, system: str) -> dict[str, tuple[int, str]]:
    """Where each column stands, and its unit."""
    found: dict[str, tuple[int, str]] = {}
    for position, cell in enumerate(header):
        match = _HEADER.match(cell)
        name = match["name"].strip().lower() if match else ""
        # A spring's x is compression; on a dyno sheet `side` holds that word, not the header.
        role = "side" if name == "side" else "click" if name in ("click", "clicks") else _NAMES.get(name)
        if role is None:
            continue
        dimension = kind.x_dimension if role == "x" else kind.y_dimension
        unit = ""
        if role in ("x", "y"):
            try:
                unit = unit_of(dimension, (match["unit"] or default_unit(dimension, system)).strip()).symbol
            except ReadingError as error:
                raise Refused({"curve": f"column “{cell}”: {error}"}) from error
        found[role] = (position, unit)
    needed = {"x": kind.x_label, "y": kind.y_label} | ({"side": "side", "click": "click"} if kind.per_click else {})
    missing = [words for role, words in needed.items() if role not in found]
    if missing:
        raise Refused({"curve": f"the header lacks a column for {' and '.join(missing)}; it has {', '.join(header)}"})
    return found


def _number(cell: str, unit: str, dimension: str, line: int) -> float:
    try:
        return parse_reading(cell, unit, dimension).si
    except ReadingError as error:
        raise Refused({"curve": f"line {line}: {error}"}) from error


def read_curves(text: str, kind: CurveKind, system: str = "us") -> list[Curve]:
    """The curves of a file, points in rising order of x, SI. Refused names the line at fault."""
    header, rows = _table(text)
    where = _columns(header, kind, system)
    curves: dict[tuple[str, int], list[list[float]]] = {}
    for line, row in enumerate(rows, 2):
        if len(row) != len(header):
            raise Refused({"curve": f"line {line} has {len(row)} fields; the header has {len(header)}"})
        side, click = _setting(row, where, kind, line)
        x = _number(row[where["x"][0]], where["x"][1], kind.x_dimension, line)
        y = _number(row[where["y"][0]], where["y"][1], kind.y_dimension, line)
        curves.setdefault((side, click), []).append([x, y])
    if len(curves) > MOST_CURVES:
        raise Refused({"curve": f"{len(curves)} curves; at most {MOST_CURVES} fit one part"})
    read = []
    for (side, click), points in sorted(curves.items()):
        setting = {"side": side, "click": click} if kind.per_click else {}
        read.append({"setting": setting, "points": checked(sorted(points), kind, setting)})
    return read


def _setting(row: list[str], where: dict[str, tuple[int, str]], kind: CurveKind, line: int) -> tuple[str, int]:
    if not kind.per_click:
        return "", 0
    side = row[where["side"][0]].strip().lower()
    if side not in SIDES:
        raise Refused({"curve": f"line {line}: side is “{side}”; write compression or rebound"})
    click = row[where["click"][0]].strip()
    if not click.isdigit() or int(click) > 60:
        raise Refused({"curve": f"line {line}: click is “{click}”; write a whole number from 0 to 60"})
    return side, int(click)


def checked(points: list[list[float]], kind: CurveKind, setting: Curve | None = None) -> list[list[float]]:
    """The points, if they make a curve of this kind."""
    name = f"{setting['side']} click {setting['click']}" if setting else kind.label.lower()
    if not kind.least_points <= len(points) <= MOST_POINTS:
        raise Refused({"curve": f"{name}: {len(points)} points; {kind.least_points} to {MOST_POINTS} make a curve"})
    for before, after in itertools.pairwise(points):
        if math.isclose(before[0], after[0], rel_tol=1e-12, abs_tol=1e-12):
            raise Refused({"curve": f"{name}: two points at the same {kind.x_label}"})
        if kind.rising and after[1] < before[1]:
            raise Refused({"curve": f"{name}: the {kind.y_label} falls as the {kind.x_label} rises"})
    if points[0][0] < 0:
        raise Refused({"curve": f"{name}: {kind.x_label} below zero; write both sides as positive numbers"})
    return points


def write_curves(curves: list[Curve], kind: CurveKind, system: str) -> str:
    """The same curves as a file `read_curves` reads back, in the units of the system."""
    x_unit, y_unit = (default_unit(dimension, system) for dimension in (kind.x_dimension, kind.y_dimension))
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\r\n")
    names = {"shaft speed": "velocity", "engine speed": "rpm"}
    header = [f"{names.get(kind.x_label, kind.x_label)} ({x_unit})", f"{kind.y_label} ({y_unit})"]
    writer.writerow((["side", "click"] if kind.per_click else []) + header)
    x, y = unit_of(kind.x_dimension, x_unit), unit_of(kind.y_dimension, y_unit)
    for curve in curves:
        lead = [curve["setting"]["side"], curve["setting"]["click"]] if kind.per_click else []
        for point in curve["points"]:
            writer.writerow([*lead, f"{x.from_si(point[0]):.10g}", f"{y.from_si(point[1]):.10g}"])
    return out.getvalue()
