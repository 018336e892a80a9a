"""Reading a logged run: as spreadsheets write it, and one sentence for each thing that is wrong."""

from __future__ import annotations

from pathlib import Path

import pytest

from scheduler.errors import InputError
from scheduler.heating.run_log import read_run_log

GOOD = "minutes,steam_c,core_c\n0,6,6\n30,60,8\n60,95,20\n"


def write(folder: Path, text: str) -> Path:
    (folder / "run.csv").write_text(text, encoding="utf-8")
    return folder / "run.csv"


def test_a_log_is_read(tmp_path: Path) -> None:
    log = read_run_log(write(tmp_path, GOOD))
    assert (log.minutes, log.steam_c, log.core_c, log.kw) == ((0, 30, 60), (6, 60, 95), (6, 8, 20), None)


def test_a_log_from_a_spreadsheet_is_read(tmp_path: Path) -> None:
    text = "\ufeffMinutes;steam c;core-c;kW\n0;6,5;6;0\n30;60;8,25;8,9\n"
    log = read_run_log(write(tmp_path, text))
    assert (log.steam_c, log.core_c, log.kw) == ((6.5, 60), (6, 8.25), (0, 8.9))


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("minutes,steam_c\n0,6\n", ["a column named core_c"]),
        (GOOD.replace("60,8", ",8"), ["row 3, steam_c", "an empty cell"]),
        (GOOD.replace("60,8", "hot,8"), ["row 3, steam_c", "a number", "'hot'"]),
        (GOOD.replace("\n60,", "\n20,"), ["row 4, minutes", "a time after the 30", "20"]),
        (GOOD.replace("\n60,", "\n30,"), ["row 4, minutes", "a time after the 30", "30"]),
        (GOOD.replace("\n60,", "\n260,"), ["row 4, minutes", "gap of 230 minutes", "at most 60 minutes apart"]),
        (GOOD.replace("95,20", "950,20"), ["row 4, steam_c", "between -40 and 160 °C"]),
        ("minutes,steam_c,core_c\n", ["no rows"]),
        ("", ["an empty file"]),
    ],
)
def test_what_is_wrong_is_one_sentence(tmp_path: Path, text: str, words: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        read_run_log(write(tmp_path, text))
    said = str(caught.value)
    assert said.startswith("run.csv")
    assert all(word in said for word in words), said
    assert len(said.splitlines()) == 1


def test_a_file_that_is_not_there(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"none\.csv.*no such file"):
        read_run_log(tmp_path / "none.csv")
