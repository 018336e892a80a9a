"""Read ``picks.csv``: rows become lots, and whatever does not fit becomes a finding with its place."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from pathlib import Path

from models.farm import Farm, Strain
from scheduler.errors import Finding, InputError, UsageError
from scheduler.folder.cells import CellError, day
from scheduler.folder.rows import place, read_rows, unknown_code
from scheduler.folder.table_file import read_table
from scheduler.learning.checks import faults_of_dates, faults_of_rows
from scheduler.learning.lots import DayPick, PickedLot, flushes_of
from scheduler.learning.pick_row import COLUMNS, MISSING, OF_LOT, NumberedRow, PickRow

LOT_CODE = re.compile(r"^\d{2}W\d{2}-(?P<strain>[A-Za-z0-9]{1,6})-[A-Za-z0-9-]+$")


@dataclass(frozen=True, slots=True)
class Picks:
    """The lots of a file of pickings, and warnings about it."""

    name: str
    lots: tuple[PickedLot, ...]
    warnings: tuple[Finding, ...] = ()


def read_picks(path: Path, farm: Farm) -> Picks:
    """Read a file of pickings.

    Parameters
    ----------
    path : Path
        The table; its columns are those of `scheduler.learning.pick_row`.
    farm : Farm
        Gives the strains.

    Returns
    -------
    Picks
        Its lots by the day of their first pick.

    Raises
    ------
    InputError
        The file, a row or a cell is not as expected, or rows of a lot contradict each other; it carries the findings.
    """
    findings: list[Finding] = []
    table = read_table(path, COLUMNS, MISSING, findings)
    lots: list[PickedLot] = []
    if table is not None:
        by_lot: dict[str, list[NumberedRow]] = {}
        for row, pick in read_rows(table, COLUMNS, PickRow, {}, findings):
            by_lot.setdefault(pick.lot, []).append((row, pick))
        if not table.rows:
            findings.append(Finding(table.name, "", "no rows", "a row for each day a lot was picked"))
        for rows in by_lot.values():
            lot = _lot(table.name, rows, farm, findings)
            if lot is not None:
                lots.append(lot)
    errors = [finding for finding in findings if finding.severity == "error"]
    if errors:
        raise InputError(_first(path.name, errors))
    return Picks(path.name, tuple(sorted(lots, key=lambda lot: (lot.first_day, lot.code))), tuple(findings))


def picked_since(picks: Picks, text: str) -> Picks:
    """Leave out lots that were first picked before a day.

    Raises
    ------
    UsageError
        The text is no date, or no lot is left.
    """
    try:
        since = day(text)
    except CellError as error:
        raise UsageError(f"--since: expected {error.expected}, found {error.found}.") from error
    lots = tuple(lot for lot in picks.lots if lot.first_day >= since)
    if not lots:
        last = max(lot.first_day for lot in picks.lots)
        raise UsageError(
            f"--since: expected a day by which lots were still to be picked, found {since}; the last: {last}."
        )
    return replace(picks, lots=lots)


def _first(name: str, errors: Sequence[Finding]) -> tuple[Finding, ...]:
    """The errors, or the first of very many and how many more there are."""
    if len(errors) <= InputError.SHOWN:
        return tuple(errors)
    shown = tuple(errors[: InputError.SHOWN - 1])
    rest = f"{len(errors) - len(shown)} more faults"
    return (*shown, Finding(name, "", rest, "that these are put right first"))


def _lot(name: str, rows: Sequence[NumberedRow], farm: Farm, findings: list[Finding]) -> PickedLot | None:
    """Make a lot of its rows; none, and findings, when they do not fit together."""
    faults: list[Finding] = []
    told = {column: _told(name, rows, column, faults) for column in OF_LOT}
    strain = _strain(name, rows[0], told["strain"], farm, faults)
    days = sorted(rows, key=lambda one: (one[1].day, one[0]))
    if strain is not None:
        dry_kg = farm.bag_of(strain).wet_kg * (1 - farm.recipe_of(strain).water_pct / 100)
        faults += faults_of_rows(name, days, dry_kg)
    faults += faults_of_dates(name, {column: one for column, one in told.items() if one is not None}, days)
    findings += faults
    if faults or strain is None:
        return None
    standing = [DayPick(one.day, one.bags, one.kg, one.flush) for _, one in days if one.bags]
    # A day without mushrooms is no pick, unless it is told to be one of a flush, or the lot never gave any.
    picks = [one for one in standing if one.kg > 0 or one.flush is not None] or standing
    known = {column: None if one is None else getattr(one[1], column) for column, one in told.items()}
    return PickedLot(
        code=rows[0][1].lot,
        strain=strain.code,
        flushes=flushes_of(picks, strain.rest_days),
        inoculated=known["inoculated"],
        ready=known["ready"],
        opened=known["opened"],
        bags_inoculated=known["bags_inoculated"],
        gone=next((one.day for _, one in days if not one.bags), None),
    )


def _told(name: str, rows: Sequence[NumberedRow], column: str, faults: list[Finding]) -> NumberedRow | None:
    """The first row of a lot that says something in a column; a row that says something else is a fault."""
    first = next((one for one in rows if getattr(one[1], column) is not None), None)
    if first is None:
        return None
    value = getattr(first[1], column)
    for row, pick in rows:
        other = getattr(pick, column)
        if other is not None and other != value:
            expected = f"{value}, as for lot {pick.lot} in row {first[0]}, or nothing"
            faults.append(Finding(name, place(row, column), f"{other}", expected))
    return first


def _strain(
    name: str, first: NumberedRow, told: NumberedRow | None, farm: Farm, faults: list[Finding]
) -> Strain | None:
    known = tuple(one.code for one in farm.strain)
    if told is not None:
        where, code = place(told[0], "strain"), told[1].strain or ""
    else:
        match = LOT_CODE.match(first[1].lot)
        if match is None:
            expected = "a lot code such as 27W03-OYS-2, which names its strain, or a column strain"
            faults.append(Finding(name, place(first[0], "lot"), f"'{first[1].lot}'", expected))
            return None
        where, code = place(first[0], "lot"), match["strain"]
    if code not in known:
        faults.append(unknown_code(name, where, "strain", code, known))
        return None
    return farm.strain_called(code)
