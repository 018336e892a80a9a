"""Read a logged run: minutes, steam_c, core_c and, where it was measured, kw."""

from __future__ import annotations

from pathlib import Path

from models.thermal.fit import RunLog
from scheduler.errors import Finding, InputError
from scheduler.folder.cells import CellError, number
from scheduler.folder.plain_words import shown
from scheduler.folder.rows import place
from scheduler.folder.table_file import Columns, Table, read_table

COLUMNS = Columns(("minutes", "steam_c", "core_c"), ("kw",))
LONGEST_GAP_MIN = 60.0
BOUNDS = {"minutes": (0.0, 20_160.0), "steam_c": (-40.0, 160.0), "core_c": (-40.0, 160.0), "kw": (0.0, 1000.0)}
UNITS = {"minutes": "minutes", "steam_c": "°C", "core_c": "°C", "kw": "kW"}


def read_run_log(path: Path) -> RunLog:
    """Read a logged run.

    Parameters
    ----------
    path : Path
        A table with the columns minutes (since steam on), steam_c, core_c and, if measured, kw (mean since the row
        before).

    Raises
    ------
    InputError
        The file, a row or a cell is not as expected; it carries every finding.
    """
    findings: list[Finding] = []
    table = read_table(path, COLUMNS, f"a table with the columns {', '.join(COLUMNS.names)}", findings)
    log = None if table is None else _log(table, findings)
    if log is None or any(finding.severity == "error" for finding in findings):
        raise InputError(tuple(findings))
    return log


def _log(table: Table, findings: list[Finding]) -> RunLog | None:
    with_kw = any(cells.get("kw") for _, cells in table.rows)
    names = COLUMNS.names if with_kw else COLUMNS.required
    columns: dict[str, list[float]] = {name: [] for name in names}
    comma = any("," in text for _, cells in table.rows for text in cells.values())
    before: float | None = None
    for row, cells in table.rows:
        values = {name: _cell(table.name, row, name, cells.get(name, ""), findings, comma=comma) for name in names}
        for name, value in values.items():
            columns[name].append(float("nan") if value is None else value)
        minutes = values["minutes"]
        if minutes is not None:
            findings += _order(table.name, row, before, minutes)
            before = minutes
    if not table.rows:
        findings.append(Finding(table.name, "", "no rows", "a row for each time the run was read"))
        return None
    kw = tuple(columns["kw"]) if with_kw else None
    return RunLog(tuple(columns["minutes"]), tuple(columns["steam_c"]), tuple(columns["core_c"]), kw)


def _cell(name: str, row: int, column: str, text: str, findings: list[Finding], *, comma: bool) -> float | None:
    if not text:
        findings.append(Finding(name, place(row, column), "an empty cell", f"a value in {UNITS[column]}"))
        return None
    try:
        value = number(text, decimal_comma=comma)
    except CellError as error:
        findings.append(Finding(name, place(row, column), error.found, error.expected, error.nearest))
        return None
    low, high = BOUNDS[column]
    if not low <= value <= high:
        expected = f"a value between {low:g} and {high:g} {UNITS[column]}"
        findings.append(Finding(name, place(row, column), shown(value), expected))
        return None
    return value


def _order(name: str, row: int, before: float | None, minutes: float) -> list[Finding]:
    if before is None:
        return []
    if minutes <= before:
        return [Finding(name, place(row, "minutes"), f"{minutes:g}", f"a time after the {before:g} of the row above")]
    if minutes - before > LONGEST_GAP_MIN:
        found = f"a gap of {minutes - before:g} minutes before it"
        return [Finding(name, place(row, "minutes"), found, f"rows at most {LONGEST_GAP_MIN:g} minutes apart")]
    return []
