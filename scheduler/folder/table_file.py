"""Read a table as RFC 4180 writes it, or as spreadsheet programs do."""

from __future__ import annotations

import csv
import io
import re
from dataclasses import dataclass
from pathlib import Path

from models.farm.references import nearest_choice
from scheduler.errors import Finding
from scheduler.folder.plain_words import shown
from scheduler.folder.text_file import MEGABYTE, read_text

LIMIT = 5 * MEGABYTE
DELIMITERS = {",": "commas", ";": "semicolons", "\t": "tabs"}


@dataclass(frozen=True, slots=True)
class Columns:
    """The columns a table must and may have."""

    required: tuple[str, ...]
    optional: tuple[str, ...]

    @property
    def names(self) -> tuple[str, ...]:
        """All columns, in the usual order."""
        return self.required + self.optional


@dataclass(frozen=True, slots=True)
class Table:
    """The rows of a table: number as a spreadsheet counts, and text by column, stripped."""

    name: str
    delimiter: str
    rows: tuple[tuple[int, dict[str, str]], ...]


def read_table(path: Path, columns: Columns, missing: str, findings: list[Finding]) -> Table | None:
    """Read a table file; findings are added to the list.

    Returns
    -------
    Table or None
        None when the file cannot be read as a table with the required columns.
    """
    text = read_text(path, LIMIT, missing, findings)
    if text is None:
        return None
    delimiter, text = _delimiter(text, columns)
    records = _records(path.name, text, delimiter, findings)
    if records is None:
        return None
    head = next((index for index, (_, cells) in enumerate(records) if any(cells)), None)
    if head is None:
        findings.append(Finding(path.name, "", "no column names", missing))
        return None
    number, header = records[head]
    places = _places(path.name, number, header, columns, findings)
    if places is None:
        return None
    rows = []
    for row, cells in records[head + 1 :]:
        if not any(cells):
            continue
        if len(cells) > len(header) and any(cells[len(header) :]):
            findings.append(_too_wide(path.name, row, cells, header, delimiter))
            continue
        rows.append((row, {name: cells[at] if at < len(cells) else "" for name, at in places.items()}))
    return Table(path.name, delimiter, tuple(rows))


def _delimiter(text: str, columns: Columns) -> tuple[str, str]:
    """Find the delimiter that splits the first line into the most known columns; some programs name it first."""
    stated = re.match(r"^\s*\"?sep=(?P<mark>[,;\t])\"?[^\S\n]*\r?(?:\n|$)", text, re.IGNORECASE)
    if stated:
        return stated["mark"], "\n" + text[stated.end() :]
    first = next((line for line in text.splitlines() if line.strip(" \t,;")), "")

    def known(mark: str) -> int:
        return len({_column(cell.strip('"')) for cell in first.split(mark)} & set(columns.names))

    return max(DELIMITERS, key=known), text


def _records(name: str, text: str, delimiter: str, findings: list[Finding]) -> list[tuple[int, list[str]]] | None:
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=delimiter, strict=True)
    records: list[tuple[int, list[str]]] = []
    try:
        for number, cells in enumerate(reader, start=1):
            records.append((number, [cell.strip() for cell in cells]))
    except csv.Error:
        found = "a cell with a quote that is not closed, or text after a closing quote"
        findings.append(Finding(name, f"row {len(records) + 1}", found, 'cells quoted as in "a ""b"" c", or unquoted'))
        return None
    return records


def _column(title: str) -> str:
    return re.sub(r"[\s\-]+", "_", title.strip().lower())


def _places(name: str, row: int, header: list[str], columns: Columns, findings: list[Finding]) -> dict[str, int] | None:
    titles = [_column(title) for title in header]
    missing = [column for column in columns.required if column not in titles]
    extra = [title for title in titles if title and title not in columns.names]
    if not set(titles) & set(columns.names):
        expected = f"a first row with the columns {', '.join(columns.names)}"
        findings.append(Finding(name, f"row {row}", shown(header), expected))
        return None
    for column in missing:
        near = nearest_choice(column, extra)
        found = f"'{near}'" if near else f"only {shown(header)}"
        findings.append(Finding(name, f"row {row}", found, f"a column named {column}"))
    for title in dict.fromkeys(extra):
        near = nearest_choice(title, [one for one in columns.names if one not in titles])
        if near not in missing or not near:
            found = f"the column {shown(title)}, which is not read"
            expected = f"columns {', '.join(columns.names)}"
            findings.append(Finding(name, f"row {row}", found, expected, near, severity="warning"))
    for column in columns.names:
        if titles.count(column) > 1:
            findings.append(Finding(name, f"row {row}", f"{titles.count(column)} of them", f"one column {column}"))
            return None
    return None if missing else {column: titles.index(column) for column in columns.names if column in titles}


def _too_wide(name: str, row: int, cells: list[str], header: list[str], delimiter: str) -> Finding:
    hint = ""
    if delimiter == ",":
        hint = ' (a decimal comma needs quotes, as in "11,50", or semicolons between the columns)'
    return Finding(name, f"row {row}", f"{len(cells)}{hint}", f"at most {len(header)} cells, as in the first row")
