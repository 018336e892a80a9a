"""Reading pickings: as spreadsheets write them, flush by flush, and one sentence for each thing that is wrong."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from models.growth.colonisation import colonisation_days
from scheduler.errors import InputError
from scheduler.folder import read_farm_folder, scenario_folder
from scheduler.learning.learn import learn
from scheduler.learning.lots import facts_of
from scheduler.learning.picks import read_picks

FARM = read_farm_folder(scenario_folder("one-drum")).farm
HEAD = "lot,day,kg,bags,inoculated,bags_inoculated,ready,opened\n"
GOOD = HEAD + (
    "26W40-OYS-1,2026-10-30,18,96,2026-09-30,100,2026-10-18,2026-10-20\n"
    "26W40-OYS-1,2026-10-31,2,96,,,,\n"
    "26W40-OYS-1,2026-11-12,10,94,,,,\n"
    "26W40-OYS-1,2026-11-25,5,94,,,,\n"
)


def read(folder: Path, text: str) -> tuple:
    (folder / "picks.csv").write_text(text, encoding="utf-8")
    return read_picks(folder / "picks.csv", FARM)


def test_a_lot_by_hand(tmp_path: Path) -> None:
    """Two picks of the first flush, one each of the others; dry matter 96 x 2.1 x 0.37 = 74.6 kg."""
    (lot,) = read(tmp_path, GOOD)
    facts = facts_of(FARM, lot)
    assert facts.flush_kg == (20, 10, 5)
    assert facts.efficiency == pytest.approx([kg / (96 * 2.1 * 0.37) for kg in (20, 10, 5)])
    assert facts.complete
    assert (facts.pins, facts.rests) == (10, (13, 13))
    assert facts.lost == (100, 4)
    assert facts.lost_between == ((96, 2), (94, 0))
    assert facts.colonised == pytest.approx(18 / colonisation_days(FARM.strain[0], 22.0))


def test_a_spreadsheet_and_a_strain_column(tmp_path: Path) -> None:
    text = "\ufeffLot;Day;Kg;Bags;Strain;Flush\nshelf 3;30.10.2026;18,5;96;OYS;1\nshelf 3;31.10.2026;2;96;OYS;2\n"
    (lot,) = read(tmp_path, text)
    assert (lot.strain, lot.picks[0].day, lot.picks[0].kg) == ("OYS", date(2026, 10, 30), 18.5)
    assert facts_of(FARM, lot).flush_kg == (18.5, 2)


def test_few_lots_are_shown_and_not_proposed(tmp_path: Path) -> None:
    (found,) = learn(FARM, read(tmp_path, GOOD))
    assert {key.key for key in found.keys} >= {"be_pct", "flush_share", "colonise_days", "pin_days", "loss_pct"}
    assert not any(key.proposed for key in found.keys)


def test_what_was_not_noted_is_not_learned(tmp_path: Path) -> None:
    (found,) = learn(FARM, read(tmp_path, "lot,day,kg,bags\n26W40-OYS-1,2026-10-30,18,96\n"))
    assert found.keys == ()
    assert any("needs the column opened" in words for words in found.missing)


def test_a_drift_is_said(tmp_path: Path) -> None:
    """Eight lots like the card, then three of a third of it."""
    rows = [HEAD]
    for number in range(11):
        week, kg = 20 + number, 62 if number < 8 else 20
        for days, share in ((0, 0.55), (12, 0.3), (24, 0.15)):
            day = date.fromisocalendar(2026, week, 1).toordinal() + days
            rows.append(f"26W{week}-OYS-1,{date.fromordinal(day)},{kg * share:.1f},96,,,,\n")
    (found,) = learn(FARM, read(tmp_path, "".join(rows)))
    assert len(found.drift) == 1
    assert found.drift[0].startswith("yield drifts: the last 3 lots gave 26.8 % BE")


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("lot,day,kg\n", ["a column named bags"]),
        (GOOD.replace("18,96", ",96"), ["row 2, kg", "an empty cell"]),
        (GOOD.replace("18,96", "-1,96"), ["row 2, kg", "a number"]),
        (GOOD.replace("18,96", "18,0"), ["row 2, bags", "at least 1"]),
        (
            GOOD.replace("26W40-OYS-1,2026-10-30", "26W40-OYX-1,2026-10-30"),
            ["row 2, lot", "'OYX'", "did you mean 'OYS'"],
        ),
        (GOOD.replace("26W40-OYS-1,2026-10-30", "lot 7,2026-10-30"), ["row 2, lot", "such as 27W03-OYS-2"]),
        (GOOD.replace("2026-10-31,2,96,,", "2026-10-31,2,96,2026-09-29,"), ["row 3, inoculated", "2026-09-30"]),
        (GOOD.replace("2026-10-18,2026-10-20", "2026-10-22,2026-10-20"), ["opened", "not before ready"]),
        (GOOD.replace("2026-11-12,10,94", "2026-11-12,10,99"), ["bags", "never rise"]),
        (HEAD, ["no rows"]),
    ],
)
def test_what_is_wrong_is_one_sentence(tmp_path: Path, text: str, words: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        read(tmp_path, text)
    said = str(caught.value)
    assert said.startswith("picks.csv")
    assert all(word in said for word in words), said
    assert len(said.splitlines()) == 1
