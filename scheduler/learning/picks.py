"""Read ``picks.csv``: which lot gave how much on which day, and what else was noted of it."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, field
from datetime import date
from itertools import pairwise
from pathlib import Path
from typing import Any

from models.farm import Farm
from models.farm.references import choices_in_words, nearest_choice
from scheduler.errors import Finding, InputError
from scheduler.folder.cells import CellError, day, number, whole_number
from scheduler.folder.plain_words import shown
from scheduler.folder.rows import place
from scheduler.folder.table_file import Columns, Table, read_table

FILE = "picks.csv"
COLUMNS = Columns(("lot", "day", "kg", "bags"), ("flush", "strain", "inoculated", "bags_inoculated", "ready", "opened"))
LOT_CODE = re.compile(r"^\d\dW\d\d-([A-Za-z0-9]{1,6})-\d+$")
NOTED: dict[str, Callable[[str], Any]] = {
    "inoculated": day, "bags_inoculated": whole_number, "ready": day, "opened": day,
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Pick:
    """What a lot gave on a day [kg], how many bags stood then, and its flush where it was noted."""

    day: date
    kg: float
    bags: int
    flush: int | None


@dataclass
class PickedLot:
    """A lot as far as it was written down: picks in order of day, and days and bags that were noted."""

    code: str
    strain: str
    picks: list[Pick] = field(default_factory=list)
    noted: dict[str, Any] = field(default_factory=dict)


def read_picks(path: Path, farm: Farm) -> tuple[PickedLot, ...]:
    """Read pickings, lot by lot in order of their first pick.

    Raises
    ------
    InputError
        The file, a row or a cell is not as expected, or rows of a lot contradict each other.
    """
    findings: list[Finding] = []
    table = read_table(path, COLUMNS, f"a table of pickings with the columns {', '.join(COLUMNS.required)}", findings)
    lots: dict[str, PickedLot] = {}
    if table is not None:
        codes = tuple(strain.code for strain in farm.strain)
        comma = any("," in cells.get("kg", "") for _, cells in table.rows)
        for row, cells in table.rows:
            _row(_Row(table, row, cells, findings), lots, codes, comma=comma)
        if not table.rows:
            findings.append(Finding(table.name, "", "no rows", "a row for each lot and day it was picked"))
        for lot in lots.values():
            lot.picks.sort(key=lambda pick: pick.day)
            findings += _order(table.name, lot)
    if any(finding.severity == "error" for finding in findings):
        raise InputError(tuple(findings))
    picked = [lot for lot in lots.values() if lot.picks]
    return tuple(sorted(picked, key=lambda lot: (lot.picks[0].day, lot.code)))


@dataclass
class _Row:
    """A row on its way to a pick: reads cells, and keeps what is wrong with them."""

    table: Table
    number: int
    cells: dict[str, str]
    findings: list[Finding]

    def fault(self, column: str, found: str, expected: str, near: str = "") -> None:
        self.findings.append(Finding(self.table.name, place(self.number, column), found, expected, near))

    def read(self, column: str, reader: Callable[[str], Any], low: float | None = None) -> Any:
        """A cell, or None where it is empty or wrong."""
        text = self.cells.get(column, "")
        if not text:
            if column in COLUMNS.required:
                self.fault(column, "an empty cell", "a value")
            return None
        try:
            value = reader(text)
        except CellError as error:
            self.fault(column, error.found, error.expected, error.nearest)
            return None
        if low is not None and value < low:
            self.fault(column, shown(value), f"a number of at least {low:g}")
            return None
        return value

    def strain(self, codes: tuple[str, ...]) -> str | None:
        """The strain of the lot: as noted, else from the lot code."""
        code, noted = self.cells.get("lot", ""), self.cells.get("strain", "")
        if not code:
            self.fault("lot", "an empty cell", "a lot code")
            return None
        match = LOT_CODE.match(code)
        strain = noted or (match[1] if match else "")
        if strain in codes:
            return strain
        what = "the code of a strain in farm.toml" if strain else "a lot code such as 27W03-OYS-2"
        near = nearest_choice(strain or code, codes)
        self.fault("strain" if noted else "lot", f"'{strain or code}'", choices_in_words(what, codes), near)
        return None


def _row(row: _Row, lots: dict[str, PickedLot], codes: tuple[str, ...], *, comma: bool) -> None:
    strain = row.strain(codes)
    if strain is None:
        return
    code = row.cells["lot"]
    lot = lots.setdefault(code, PickedLot(code, strain))
    if lot.strain != strain:
        row.fault("strain", f"'{strain}'", f"the strain of the other rows of this lot, {lot.strain}")
    when, kg = row.read("day", day), row.read("kg", lambda text: number(text, decimal_comma=comma), 0.0)
    bags, flush = row.read("bags", whole_number, 1), row.read("flush", whole_number, 1)
    for column, reader in NOTED.items():
        value = row.read(column, reader, 1 if column == "bags_inoculated" else None)
        if value is not None and lot.noted.setdefault(column, value) != value:
            row.fault(column, shown(str(value)), f"what another row of this lot says, {lot.noted[column]}")
    if when is not None and kg is not None and bags is not None:
        lot.picks.append(Pick(when, kg, bags, flush))


def _order(name: str, lot: PickedLot) -> list[Finding]:
    """Days of a lot follow each other, and bags never grow."""
    days: list[tuple[str, date]] = [
        (key, lot.noted[key]) for key in ("inoculated", "ready", "opened") if key in lot.noted
    ]
    days += [("day", lot.picks[0].day)] if lot.picks else []
    found = [
        Finding(name, f"lot {lot.code}, {after}", str(late), f"a day not before {before} on {early}")
        for (before, early), (after, late) in pairwise(days)
        if late < early
    ]
    bags = [lot.noted["bags_inoculated"]] if "bags_inoculated" in lot.noted else []
    bags += [pick.bags for pick in lot.picks]
    if any(later > sooner for sooner, later in pairwise(bags)):
        found.append(Finding(name, f"lot {lot.code}, bags", shown(bags), "numbers of bags that never rise"))
    return found
