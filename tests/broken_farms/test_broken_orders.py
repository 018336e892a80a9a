"""Order books broken in one place each.

Each row: a name, the text to replace (None: the whole file), what stands there instead (None: nothing is left; a
function makes something else), and the words that the message must hold.
"""

from __future__ import annotations

from pathlib import Path

import pytest

HEAD = "customer,strain,weekday,kg,price_per_kg,first_week,last_week,priority\n"
FIRST = f"{HEAD}Mill Café,OYS,tue,14,11.50,2027-W07,,1\n"
WIDE = f"{HEAD.strip()},accepts,part\nMill Café,OYS,tue,14,11.50,2027-W07,,1,"


def _huge(path: Path) -> None:
    with path.open("wb") as file:
        file.seek(50_000_000)
        file.write(b"x")


ROWS = (
    ("orders-missing", None, None, ("orders.csv", "no such file", "customer,strain,weekday")),
    ("orders-empty", None, "", ("orders.csv", "an empty file", "first row")),
    ("orders-folder", None, Path.mkdir, ("orders.csv", "a folder of that name")),
    ("orders-huge", None, _huge, ("orders.csv", "50.0 MB", "at most 5 MB")),
    ("orders-noise", None, bytes(range(256)) * 9, ("orders.csv", "not text")),
    ("orders-workbook", None, b"PK\x03\x04\x14\0\x06\0" + b"\0\x01\xff" * 99, ("orders.csv", "not text")),
    ("orders-utf16-unmarked", None, HEAD.encode("utf-16-le"), ("orders.csv", "binary data")),
    ("orders-commas-only", None, ",,,,,\n,,,\n", ("orders.csv", "no column names")),
    ("column-missing", "weekday,kg,", "weekday,", ("row 1", "a column named kg")),
    ("column-misspelt", "customer,", "costumer,", ("row 1", "a column named customer", "'costumer'")),
    ("column-twice", "last_week,priority", "priority,priority", ("row 1", "one column priority", "2 of them")),
    ("no-header", HEAD, "", ("row 1", "a first row with the columns customer, strain")),
    ("bars-for-commas", None, HEAD.replace(",", "|"), ("row 1", "a first row with the columns customer")),
    ("unknown-strain", "LIO,tue", "LOI,tue", ("row 4, strain", "'LOI'", "did you mean 'LIO'")),
    ("strain-lower-case", "OYS,tue", "oys,tue", ("row 2, strain", "did you mean 'OYS'")),
    ("weekday-nonsense", "OYS,tue", "OYS,Tewsday", ("row 2, weekday", "'Tewsday'", "did you mean 'tue'")),
    ("weekday-short", "OYS,tue", "OYS,t", ("row 2, weekday", "a weekday (mon, tue")),
    ("kg-in-words", ",14,", ",fourteen,", ("row 2, kg", "a number", "'fourteen'")),
    ("kg-with-unit", ",14,", ",14 kg,", ("row 2, kg", "a number", "'14 kg'")),
    ("kg-negative", ",14,", ",-14,", ("row 2, kg", "above 0", "-14")),
    ("kg-zero", ",14,", ",0,", ("row 2, kg", "above 0", "found 0")),
    ("kg-nan", ",14,", ",nan,", ("row 2, kg", "a number", "'nan'")),
    ("kg-blank", ",14,", ",,", ("row 2, kg", "an empty cell")),
    ("price-grouped", "11.50", '"1.000,5"', ("row 2, price_per_kg", "two ways", "such as 1000.5")),
    ("price-grouped-comma", "11.50", '"1,000"', ("row 2, price_per_kg", "two ways", "such as 1000")),
    ("price-with-sign", "11.50", "€11.50", ("row 2, price_per_kg", "a number")),
    ("bare-decimal-comma", "11.50", "11,50", ("row 2", "at most 8 cells", "decimal comma needs quotes")),
    ("customer-blank", "Lock Grocer,", ",", ("row 3, customer", "an empty cell")),
    ("customer-endless", "Lock Grocer,", "x" * 61 + ",", ("row 3, customer", "at most 60 characters")),
    ("week-53", "2027-W07", "2027-W53", ("row 2, first_week", "between W01 and W52", "W53")),
    ("week-as-month", "2027-W07", "2027-07", ("row 2, first_week", "an ISO week such as 2027-W03")),
    ("week-as-date", "2027-W07", "15/02/2027", ("row 2, first_week", "an ISO week")),
    ("weeks-crossed", "2027-W09,2027-W20", "2027-W20,2027-W09", ("row 4", "last_week not before first_week")),
    ("priority-zero", ",2\n", ",0\n", ("row 3, priority", "at least 1")),
    ("priority-in-words", ",2\n", ",high\n", ("row 3, priority", "a whole number", "'high'")),
    ("priority-half", ",2\n", ",1.5\n", ("row 3, priority", "a whole number", "'1.5'")),
    ("accepts-unknown", FIRST, f"{WIDE}LOI,\n", ("row 2, accepts", "'LOI'", "did you mean 'LIO'")),
    ("accepts-itself", FIRST, f"{WIDE}LIO OYS,\n", ("row 2", "other strains than OYS")),
    ("part-nonsense", FIRST, f"{WIDE},maybe\n", ("row 2, part", "yes or no", "'maybe'")),
    ("quote-left-open", "Lock Grocer", '"Lock Grocer', ("row 3", "quote that is not closed")),
    (
        "semicolons-wrong-numbers", None,
        "customer;strain;weekday;kg;price_per_kg\nMill;OYS;tue;14,5;1.250\nMill;OYS;fri;x;9,00\n",
        ("row 2, price_per_kg", "two ways", "row 3, kg", "'x'"),
    ),
    ("semicolons-bare", None, HEAD.replace(",", ";") + "Mill;OYS;tue;1,2,3;4;;;\n", ("row 2, kg", "'1,2,3'")),
)  # fmt: skip


NAMES = [row[0] for row in ROWS]


@pytest.mark.parametrize(("name", "old", "new", "says"), ROWS, ids=NAMES)
def test_broken_orders_is_refused_in_words(refusal, name, old, new, says):
    message = refusal("orders.csv", old, new)
    for words in says:
        assert words in message, f"{name}: {message}"


def test_rows_have_names_of_their_own():
    assert len(set(NAMES)) == len(ROWS) >= 35
