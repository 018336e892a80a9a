"""What the rows of one lot must agree in: bags that never grow, days in order, kilograms that bags can give."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from itertools import pairwise

from scheduler.errors import Finding
from scheduler.folder.rows import place
from scheduler.learning.pick_row import NumberedRow

MOST_KG_PER_DRY_KG = 4.0
"""Fresh mushrooms over dry substrate that no pick exceeds [kg/kg]; as the bound of be_pct."""
LONGEST_DAYS = 400
"""Days between two dates of a lot above which one of them is taken for a slip [d]; as the bound of colonise_days."""


def faults_of_rows(name: str, rows: Sequence[NumberedRow], dry_kg: float) -> Iterator[Finding]:
    """Find what is wrong with the rows of a lot, which are in the order of their days.

    Parameters
    ----------
    name : str
        Name of the file.
    rows : sequence of (int, PickRow)
        Row number and row.
    dry_kg : float
        Dry substrate of a bag [kg].
    """
    for row, pick in rows:
        most = MOST_KG_PER_DRY_KG * dry_kg * pick.bags
        if pick.kg > most:
            why = f" ({MOST_KG_PER_DRY_KG * 100:g} % of the dry substrate)" if pick.bags else ""
            expected = f"at most {most:.4g} kg from {pick.bags} bags{why}"
            yield Finding(name, place(row, "kg"), f"{pick.kg:g}", expected)
    for (above, before), (row, pick) in pairwise(rows):
        if pick.day == before.day:
            expected = f"each lot once a day (add up what was picked); lot {pick.lot} has this day in row {above} too"
            yield Finding(name, place(row, "day"), f"{pick.day}", expected)
        elif (pick.day - before.day).days > LONGEST_DAYS:
            expected = f"picks of lot {pick.lot} at most {LONGEST_DAYS} days apart; row {above} has {before.day}"
            yield Finding(name, place(row, "day"), f"{pick.day}", expected)
        elif pick.bags > before.bags:
            expected = f"at most the {before.bags} bags of lot {pick.lot} that stood on {before.day} (row {above})"
            yield Finding(name, place(row, "bags"), f"{pick.bags}", expected)
    yield from _flush_numbers(name, [one for one in rows if one[1].bags])


def _flush_numbers(name: str, rows: Sequence[NumberedRow]) -> Iterator[Finding]:
    numbered = [one for one in rows if one[1].flush is not None]
    if not numbered:
        return
    for row, pick in rows:
        if pick.flush is None:
            expected = f"the number of the flush, as in row {numbered[0][0]}, or none for lot {pick.lot} at all"
            yield Finding(name, place(row, "flush"), "an empty cell", expected)
    for (above, before), (row, pick) in pairwise(numbered):
        if (pick.flush or 0) < (before.flush or 0):
            expected = (
                f"{before.flush} or more, as lot {pick.lot} was in flush {before.flush} on {before.day} (row {above})"
            )
            yield Finding(name, place(row, "flush"), f"{pick.flush}", expected)


def faults_of_dates(name: str, told: Mapping[str, NumberedRow], rows: Sequence[NumberedRow]) -> Iterator[Finding]:
    """Find dates of a lot that cannot follow each other, and more bags than were inoculated.

    Parameters
    ----------
    name : str
        Name of the file.
    told : mapping of str to (int, PickRow)
        By column of the lot, the row that says it.
    rows : sequence of (int, PickRow)
        The rows in the order of their days.
    """
    first_row, first = rows[0]
    dates = [
        (column, place(told[column][0], column), getattr(told[column][1], column))
        for column in ("inoculated", "ready", "opened")
        if column in told
    ]
    dates.append(("day", place(first_row, "day"), first.day))
    for (earlier, where, start), (later, _, end) in pairwise(dates):
        days = (end - start).days
        word = "first pick" if later == "day" else later
        same_day = later == "opened" and earlier == "ready"
        if days < 0 or (days == 0 and not same_day and first.bags):
            expected = f"a day {'not after' if same_day else 'before'} the {end} of its {word}"
            yield Finding(name, where, f"{start}", f"{expected} (lot {first.lot})")
        elif days > LONGEST_DAYS:
            expected = f"a day at most {LONGEST_DAYS} days before the {end} of its {word} (lot {first.lot})"
            yield Finding(name, where, f"{start}", expected)
    if "bags_inoculated" in told:
        row, pick = told["bags_inoculated"]
        if pick.bags_inoculated is not None and first.bags > pick.bags_inoculated:
            expected = f"at least the {first.bags} bags of lot {first.lot} that stood in row {first_row}"
            yield Finding(name, place(row, "bags_inoculated"), f"{pick.bags_inoculated}", expected)
