"""Reading pickings: as spreadsheets write them, and one sentence for each thing that is wrong."""

from __future__ import annotations

import math
from datetime import date
from pathlib import Path
from tempfile import TemporaryDirectory

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from scheduler.errors import InputError, UsageError
from scheduler.folder import read_farm_folder
from scheduler.learning.learned import learn
from scheduler.learning.picks import Picks, picked_since, read_picks

FARM = read_farm_folder(Path(__file__).parents[1] / "broken_farms" / "base").farm
GOOD = """lot,day,kg,bags,inoculated,bags_inoculated,ready,opened
27W01-OYS-1,2027-02-03,40,97,2027-01-08,100,2027-01-27,2027-01-27
27W01-OYS-1,2027-02-05,5,97,,,,
27W01-OYS-1,2027-02-16,22,96,,,,
27W01-OYS-1,2027-02-28,9,95,,,,
27W02-LIO-1,2027-02-20,30,50,,,,
"""


def read(folder: Path, text: str) -> Picks:
    (folder / "picks.csv").write_text(text, encoding="utf-8")
    return read_picks(folder / "picks.csv", FARM)


def test_rows_become_lots(tmp_path: Path) -> None:
    picks = read(tmp_path, GOOD)
    assert [(lot.code, lot.strain) for lot in picks.lots] == [("27W01-OYS-1", "OYS"), ("27W02-LIO-1", "LIO")]
    lot = picks.lots[0]
    assert [(one.number, one.bags, one.kg) for one in lot.flushes] == [(1, 97, 45), (2, 96, 22), (3, 95, 9)]
    assert (lot.inoculated, lot.ready, lot.opened) == (date(2027, 1, 8), date(2027, 1, 27), date(2027, 1, 27))
    assert lot.bags_inoculated == 100
    assert picks.warnings == ()


def test_a_table_from_a_spreadsheet_is_read(tmp_path: Path) -> None:
    picks = read(tmp_path, "\ufeffLot;Day;kg;Bags;Bags inoculated\n27W01-OYS-1;3.2.2027;40,5;97;100\n")
    assert (picks.lots[0].flushes[0].kg, picks.lots[0].bags_inoculated) == (40.5, 100)


def test_rows_may_stand_in_any_order_and_say_a_date_anywhere(tmp_path: Path) -> None:
    head, *rows = GOOD.splitlines()
    assert read(tmp_path, "\n".join([head, *reversed(rows)])).lots == read(tmp_path, GOOD).lots


def test_the_flush_column_goes_before_the_gaps(tmp_path: Path) -> None:
    days = ("02-03,20,97,1", "02-11,20,97,1", "02-14,9,90,2")
    text = "lot,day,kg,bags,flush\n" + "".join(f"27W01-OYS-1,2027-{one}\n" for one in days)
    flushes = read(tmp_path, text).lots[0].flushes
    assert [(one.number, one.kg, one.bags) for one in flushes] == [(1, 40, 97), (2, 9, 90)]


def test_a_day_without_mushrooms_is_no_flush(tmp_path: Path) -> None:
    head, lot = "lot,day,kg,bags\n", "27W01-OYS-1"
    picks = read(tmp_path, f"{head}{lot},2027-02-03,20,97\n{lot},2027-02-10,0,97\n{lot},2027-02-15,9,97\n")
    assert [one.first.day for one in picks.lots[0].flushes] == [3, 15]
    barren = read(tmp_path, f"{head}{lot},2027-02-03,0,97\n").lots[0]
    assert [(one.number, one.kg) for one in barren.flushes] == [(1, 0)]


@pytest.mark.parametrize(("day", "flushes"), [("2027-02-09", 1), ("2027-02-10", 2)])
def test_a_gap_of_more_than_half_the_rest_is_a_new_flush(tmp_path: Path, day: str, flushes: int) -> None:
    """rest_days is 12: six days later it is still the flush of 3 February."""
    text = f"lot,day,kg,bags\n27W01-OYS-1,2027-02-03,20,97\n27W01-OYS-1,{day},9,97\n"
    assert len(read(tmp_path, text).lots[0].flushes) == flushes


def test_the_strain_column_goes_before_the_lot_code(tmp_path: Path) -> None:
    picks = read(tmp_path, "lot,day,kg,bags,strain\nA7,2027-02-03,20,97,LIO\nA7,2027-03-03,9,90,\n")
    assert (picks.lots[0].strain, len(picks.lots[0].flushes)) == ("LIO", 2)


def test_a_lot_that_was_lost_has_a_row_without_bags(tmp_path: Path) -> None:
    lot = read(tmp_path, "lot,day,kg,bags,bags_inoculated\n27W01-OYS-1,2027-02-03,0,0,100\n").lots[0]
    assert (lot.flushes, lot.gone, lot.first_day) == ((), date(2027, 2, 3), date(2027, 2, 3))


def test_a_column_that_is_not_read_is_a_warning(tmp_path: Path) -> None:
    picks = read(tmp_path, "lot,day,kg,bags,weather\n27W01-OYS-1,2027-02-03,20,97,fine\n")
    assert [one.severity for one in picks.warnings] == ["warning"]


@pytest.mark.parametrize(
    ("old", "new", "words"),
    [
        (None, "", ["an empty file", "lot,day,kg,bags"]),
        (None, "lot,day,kg,bags\n", ["no rows"]),
        (None, "lot,day,kg\n27W01-OYS-1,2027-02-03,4\n", ["row 1", "a column named bags"]),
        ("03,40,97", "03,forty,97", ["row 2, kg", "a number", "'forty'"]),
        ("03,40,97", "03,,97", ["row 2, kg", "an empty cell"]),
        ("03,40,97", "03,-4,97", ["row 2, kg", "at least 0"]),
        ("03,40,97", "03,40000,97", ["row 2, kg", "at most 339.1 kg from 97 bags (400 % of the dry substrate)"]),
        ("28,9,95", "28,9,0", ["row 5, kg", "at most 0 kg from 0 bags", "found 9"]),
        ("28,9,95", "28,9,98", ["row 5, bags", "at most the 96 bags", "2027-02-16 (row 4)", "found 98"]),
        ("28,9,95", "16,9,95", ["row 5, day", "each lot once a day", "row 4"]),
        ("02-28,9,95", "02-30,9,95", ["row 5, day", "a date such as 2027-01-31", "'2027-02-30'"]),
        ("2027-02-28,9", "2029-02-28,9", ["row 5, day", "at most 400 days apart", "row 4"]),
        ("95,,,,", "95,2027-01-09,,,", ["row 5, inoculated", "2027-01-08, as for lot 27W01-OYS-1 in row 2"]),
        ("95,,,,", "95,,101,,", ["row 5, bags_inoculated", "100, as for lot", "found 101"]),
        ("97,2027-01-08,100", "97,2027-01-08,90", ["row 2, bags_inoculated", "at least the 97 bags", "found 90"]),
        ("2027-01-08", "2027-01-29", ["row 2, inoculated", "before the 2027-01-27 of its ready", "2027-01-29"]),
        ("2027-01-08", "2025-01-08", ["row 2, inoculated", "at most 400 days before", "2025-01-08"]),
        ("27,2027-01-27", "27,2027-01-20", ["row 2, ready", "not after the 2027-01-20 of its opened"]),
        ("27,2027-01-27", "27,2027-02-03", ["row 2, opened", "before the 2027-02-03 of its first pick"]),
        ("27W02-LIO-1", "27W02-LIX-1", ["row 6, lot", "'LIX'", "did you mean 'LIO'?"]),
        ("27W02-LIO-1", "lot 7", ["row 6, lot", "a lot code of 1-20 letters"]),
        ("27W02-LIO-1", "lot7", ["row 6, lot", "a lot code such as 27W03-OYS-2", "'lot7'"]),
        (None, "lot,day,kg,bags,strain\nA,2027-02-03,4,9,OYX\n", ["row 2, strain", "'OYX'", "did you mean 'OYS'?"]),
        (None, "lot,day,kg,bags,strain\nA,2027-02-03,4,9,OYS\nA,2027-02-05,4,9,LIO\n", ["row 3, strain", "OYS, as"]),
        (None, "lot,day,kg,bags,flush\n27W01-OYS-1,2027-02-03,4,9,2\n27W01-OYS-1,2027-02-05,4,9,1\n",
         ["row 3, flush", "2 or more", "found 1"]),
        (None, "lot,day,kg,bags,flush\n27W01-OYS-1,2027-02-03,4,9,1\n27W01-OYS-1,2027-02-05,4,9,\n",
         ["row 3, flush", "the number of the flush, as in row 2", "an empty cell"]),
        (None, "lot,day,kg,bags,flush\n27W01-OYS-1,2027-02-03,4,9,9\n", ["row 2, flush", "at most 8"]),
    ],
)  # fmt: skip
def test_what_is_wrong_is_one_sentence(tmp_path: Path, old: str | None, new: str, words: list[str]) -> None:
    assert old is None or old in GOOD
    with pytest.raises(InputError) as caught:
        read(tmp_path, new if old is None else GOOD.replace(old, new, 1))
    said = str(caught.value)
    assert said.startswith("picks.csv")
    assert all(word in said for word in words), said
    assert len(said.splitlines()) == 1, said


def test_very_many_faults_are_cut(tmp_path: Path) -> None:
    with pytest.raises(InputError) as caught:
        read(tmp_path, "lot,day,kg,bags\n" + "27W01-OYS-1,soon,4,9\n" * 50)
    lines = str(caught.value).splitlines()
    assert len(lines) == 20
    assert "31 more faults" in lines[-1]


@settings(max_examples=150, deadline=None)
@given(
    st.lists(
        st.tuples(
            st.sampled_from(["27W01-OYS-1", "27W02-LIO-1", "x", ""]),
            st.sampled_from(["2027-02-03", "2027-02-20", "2027-03-09", "1.3.2027", "never"]),
            st.sampled_from(["0", "4", "7,5", "1e9", "-1"]),
            st.sampled_from(["0", "1", "90", "100", "1.5"]),
            st.sampled_from(["", "1", "2", "3", "8"]),
            st.sampled_from(["", "2027-01-08", "2027-02-03"]),
            st.sampled_from(["", "100", "0"]),
            st.sampled_from(["", "2027-01-08", "2027-01-27"]),
        ),
        max_size=8,
    )
)
def test_any_rows_are_read_and_learned_from_or_refused(rows: list[tuple[str, ...]]) -> None:
    head = "lot;day;kg;bags;flush;inoculated;bags_inoculated;ready\n"
    with TemporaryDirectory() as folder:
        try:
            found = learn(FARM, read(Path(folder), head + "".join(";".join(row) + "\n" for row in rows)))
        except InputError:
            return
    for key in (key for one in found.strains for key in one.keys):
        values = zip(*(v if isinstance(v, tuple) else (v,) for v in (key.low, key.after, key.high)), strict=True)
        assert all(math.isfinite(low) and low <= high for low, _, high in values), key


def test_a_file_that_is_not_there(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"picks\.csv.*no such file"):
        read_picks(tmp_path / "picks.csv", FARM)


def test_lots_since_a_day(tmp_path: Path) -> None:
    picks = read(tmp_path, GOOD)
    assert [lot.strain for lot in picked_since(picks, "2027-02-04").lots] == ["LIO"]
    with pytest.raises(UsageError, match=r"--since: expected a date such as 2027-01-31, found 'spring'\."):
        picked_since(picks, "spring")
    with pytest.raises(UsageError, match=r"--since: .*2027-02-20\."):
        picked_since(picks, "2027-06-01")
