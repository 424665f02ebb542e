"""Reading a CSV file (RFC 4180) as it really comes: a mark at its start, semicolons, quotes, a bad row among good ones.

A row that cannot be used is kept beside the others with its reason; only a file that is no
table at all is refused whole.
"""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from shop.refusals import Refused
from shop.units import parse_reading

MOST_BYTES = 1024 * 1024
MOST_ROWS = 2000
SEPARATORS = {",": "commas", ";": "semicolons", "\t": "tabs"}
_HEADER = re.compile(r"^\s*(?P<name>[^(\[]*?)\s*(?:[(\[]\s*(?P<unit>[^)\]]*?)\s*[)\]])?\s*$")
_DECIMAL_COMMA = re.compile(r"^\s*[-+−]?\d*,\d+\s*$")


@dataclass(frozen=True)
class Row:
    """One record by column name; `line` is where it starts in the file. `fault` says why it cannot be read."""

    line: int
    cells: Mapping[str, str]
    fault: str = ""
    raw: tuple[str, ...] = ()


@dataclass
class Table:
    """The records of a file, the unit each column's header names, and what was noticed while reading."""

    rows: list[Row]
    units: dict[str, str]
    header: list[str] = field(default_factory=list)
    columns: frozenset[str] = frozenset()
    notes: list[str] = field(default_factory=list)


def refuse_too_large(size: int) -> None:
    if size > MOST_BYTES:
        most = MOST_BYTES // (1024 * 1024)
        raise Refused({"file": f"the file has {size / 1e6:.1f} MB; at most {most} MB are read at once"})


def decoded(data: bytes) -> tuple[str, list[str]]:
    """The text of an uploaded file, and what had to be assumed about it."""
    refuse_too_large(len(data))
    if data[:2] in (b"\xff\xfe", b"\xfe\xff"):
        try:
            return data.decode("utf-16"), []
        except UnicodeDecodeError as error:
            raise Refused({"file": "this is not a text file; save the sheet as CSV"}) from error
    if b"\x00" in data:
        raise Refused({"file": "this is not a text file; save the sheet as CSV"})
    try:
        return data.decode("utf-8-sig"), []
    except UnicodeDecodeError:
        return data.decode("cp1252", errors="replace"), [
            "The file is not in UTF-8; it was read as Windows-1252. Check letters with accents."
        ]


def read_table(text: str, names: Mapping[str, str]) -> Table:
    """Records under the headers that `names` (spelling -> column) knows. Refused when there are none."""
    text = text.lstrip("\ufeff")
    if not text.strip():
        raise Refused({"file": "the file is empty"})
    separator = _separator(text, names)
    records = _records(text, separator)
    line, header = next(records)
    if not isinstance(header, list):
        raise Refused({"file": f"line {line}: {header}"})
    columns, units, notes = _columns(header, names)
    if not columns:
        raise Refused({"file": f"no header is known here; the first line says “{text.splitlines()[0][:120]}”"})
    rows: list[Row] = []
    for line, record in records:
        if isinstance(record, list) and not any(cell.strip() for cell in record):
            continue
        if len(rows) == MOST_ROWS:
            raise Refused({"file": f"more than {MOST_ROWS} rows; split the file"})
        rows.append(_row(line, record, header, columns, separator))
    if not rows:
        raise Refused({"file": "there are no rows under the header"})
    if separator == ";" and any(_DECIMAL_COMMA.match(cell) for row in rows for cell in row.raw):
        notes.append("Numbers such as 1,312 are read with a decimal comma, as files with semicolons write them.")
    return Table(rows, units, header, frozenset(columns.values()), notes)


def _separator(text: str, names: Mapping[str, str]) -> str:
    """The one under which most headers are known."""
    first = text.splitlines()[0]

    def known(separator: str) -> tuple[int, int]:
        cells = next(csv.reader([first], delimiter=separator), [])
        return sum(_split(cell)[0] in names for cell in cells), first.count(separator)

    return max(SEPARATORS, key=known)


def _records(text: str, separator: str) -> Iterator[tuple[int, list[str] | str]]:
    """Line number and record; a string instead of a record says what is wrong, and ends the file."""
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=separator, strict=True)
    while True:
        start = reader.line_num + 1
        try:
            yield start, next(reader)
        except StopIteration:
            return
        except csv.Error as error:
            yield start, f"a quote is opened and not closed, or stands inside a field ({error}); nothing after it was read"
            return


def _split(cell: str) -> tuple[str, str]:
    """Header name in plain small letters, and the unit in brackets behind it."""
    match = _HEADER.match(cell)
    if not match:
        return cell.strip().lower(), ""
    return re.sub(r"[\s_]+", " ", match["name"]).strip().lower(), (match["unit"] or "").strip()


def unit_symbol(unit: str, dimension: str) -> str:
    """The symbol of a unit as a header spells it; ReadingError names what the dimension allows."""
    return parse_reading(f"1 {unit}", "", dimension).unit


def _columns(header: list[str], names: Mapping[str, str]) -> tuple[dict[int, str], dict[str, str], list[str]]:
    columns: dict[int, str] = {}
    units: dict[str, str] = {}
    unknown = []
    for place, cell in enumerate(header):
        name, unit = _split(cell)
        column = names.get(name)
        if column is None:
            if cell.strip():
                unknown.append(cell.strip())
            continue
        if column in columns.values():
            raise Refused({"file": f"two columns hold the same thing: “{cell.strip()}” comes twice"})
        columns[place] = column
        if unit:
            units[column] = unit
    notes = [f"Not read, as no such column is known: {', '.join(unknown)}."] if unknown else []
    return columns, units, notes


def _row(line: int, record: list[str] | str, header: list[str], columns: Mapping[int, str], separator: str) -> Row:
    if isinstance(record, str):
        return Row(line, {}, record)
    raw = tuple(record)
    if len(record) != len(header):
        return Row(line, {}, _count_fault(record, header, separator), raw)
    cells = {column: record[place].strip() for place, column in columns.items()}
    if separator == ";":
        cells = {column: cell.replace(",", ".") if _DECIMAL_COMMA.match(cell) else cell for column, cell in cells.items()}
    return Row(line, {column: _unguarded(cell) for column, cell in cells.items()}, raw=raw)


def _count_fault(record: list[str], header: list[str], separator: str) -> str:
    for other, words in SEPARATORS.items():
        if other != separator and len(separator.join(record).split(other)) == len(header):
            return f"this line is separated by {words}, the header by {SEPARATORS[separator]}"
    return f"{len(record)} field{'' if len(record) == 1 else 's'} where the header has {len(header)}"


# A spreadsheet takes text that begins with one of these for a formula.
_FORMULA = ("=", "+", "-", "@", "\t", "\r")


def guarded(text: str) -> str:
    """Free text as it goes into a file, so that no spreadsheet runs it."""
    return f"'{text}" if text.startswith(_FORMULA) else text


def _unguarded(cell: str) -> str:
    return cell[1:] if cell.startswith("'") and cell[1:].startswith(_FORMULA) else cell


def written(header: list[str], rows: list[list[str]]) -> str:
    out = io.StringIO(newline="")
    writer = csv.writer(out, lineterminator="\r\n")
    writer.writerow(header)
    writer.writerows(rows)
    return out.getvalue()
