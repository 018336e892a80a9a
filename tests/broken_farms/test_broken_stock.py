"""Opening stock broken in one place each.

Each row: a name, the text to replace (None: the whole file), what stands there instead (None: nothing is left; a
function makes something else), and the words that the message must hold.
"""

from __future__ import annotations

from pathlib import Path

import pytest


def _huge(path: Path) -> None:
    with path.open("wb") as file:
        file.seek(50_000_000)
        file.write(b"x")


ROWS = (
    ("stock-empty", None, "", ("stock.csv", "an empty file", "or no such file")),
    ("stock-folder", None, Path.mkdir, ("stock.csv", "a folder of that name")),
    ("stock-huge", None, _huge, ("stock.csv", "50.0 MB")),
    ("stock-column-missing", "stage,", "", ("row 1", "a column named stage")),
    ("lot-blank", "26W51-OYS-1", "", ("row 2, lot", "an empty cell")),
    ("lot-spaced", "26W51-OYS-1", "26W51 OYS 1", ("row 2, lot", "a lot code of 1-20 letters")),
    ("lot-twice", "26W50-OYS-1", "26W51-OYS-1", ("row 3, lot", "each lot once", "row 2 too")),
    ("lot-strain", "1,LIO,", "1,LION,", ("row 4, strain", "did you mean 'LIO'")),
    ("lot-stage", "colonising", "colonizing", ("row 2, stage", "did you mean 'colonising'")),
    ("lot-no-bags", ",60,", ",0,", ("row 2, bags", "at least 1")),
    ("lot-half-bag", ",60,", ",60.5,", ("row 2, bags", "a whole number", "60.5")),
    ("lot-bags-lost", ",60,", ",-6,", ("row 2, bags", "at least 1", "-6")),
    ("lot-nonsense-date", "2026-12-23", "2026-02-30", ("row 2, since", "a date such as", "2026-02-30")),
    ("lot-slashed-date", "2026-12-23", "11/12/2026", ("row 2, since", "two ways")),
    ("lot-ancient", "2026-12-23", "0206-12-23", ("row 2, since", "between 2000 and 2100")),
    ("lot-room", ",shelf,", ",shelv,", ("row 2, room", "did you mean 'shelf'")),
    ("lot-wrong-room", ",shelf,", ",wet,", ("row 2, room", "a fruiting room", "did you mean 'shelf'")),
    ("lot-flushes-early", ",shelf,", ",shelf,1", ("row 2, flushes_picked", "nothing, as the lot is colonising")),
    ("lot-spent", ",wet,1", ",wet,2", ("row 4, flushes_picked", "fewer than the 2 flushes")),
    ("lot-too-wide", ",shelf,", ",shelf,,,spare", ("row 2", "at most 7 cells")),
)  # fmt: skip


NAMES = [row[0] for row in ROWS]


@pytest.mark.parametrize(("name", "old", "new", "says"), ROWS, ids=NAMES)
def test_broken_stock_is_refused_in_words(refusal, name, old, new, says):
    message = refusal("stock.csv", old, new)
    for words in says:
        assert words in message, f"{name}: {message}"


def test_rows_have_names_of_their_own():
    assert len(set(NAMES)) == len(ROWS) >= 18
