"""From lots to keys: what speaks to which key, what is left out and why, and what drifts."""

from __future__ import annotations

from datetime import date, timedelta
from pathlib import Path

import pytest

from models.farm import Farm
from models.growth import colonisation_days
from scheduler.folder import read_farm_folder
from scheduler.learning.learned import KEYS, StrainLearned, learn
from scheduler.learning.lots import DayPick, Flush, PickedLot, flushes_of
from scheduler.learning.picks import Picks

FARM = read_farm_folder(Path(__file__).parents[1] / "broken_farms" / "base").farm
OYS = FARM.strain_called("OYS")
DRY_KG = 2.3 * 0.38
START = date(2027, 1, 4)


def lot(
    number: int, be: float = 85.0, *, flushes: int = 3, bags: int = 100, start: int = 120, pins: int = 7,
    rest: int = 12, days: int = 18, late: int = 0,
) -> PickedLot:  # fmt: skip
    inoculated = START + timedelta(days=7 * number)
    ready = inoculated + timedelta(days=days)
    days_of = [ready + timedelta(days=pins + rest * place) for place in range(flushes)]
    made = tuple(
        Flush(place + 1, day, day, bags - late * place, be / 100 * share * DRY_KG * (bags - late * place))
        for place, (day, share) in enumerate(zip(days_of, OYS.flush_share, strict=False))
    )
    return PickedLot(f"27W{number:02d}-OYS-1", "OYS", made, inoculated, ready, ready, start)


def learned(lots: list[PickedLot], farm: Farm = FARM) -> StrainLearned:
    return learn(farm, Picks("picks.csv", tuple(lots))).strains[0]


def after(found: StrainLearned) -> dict[str, object]:
    return {one.key: one.after for one in found.keys}


def test_each_key_by_hand() -> None:
    found = learned([lot(number, 95.0, late=5) for number in range(1, 4)])
    assert [one.key for one in found.keys] == list(KEYS)
    values = after(found)
    assert values["be_pct"] == 91.0  # (2 × 85 + 3 × 95) / 5
    assert values["flush_share"] == OYS.flush_share
    base = 17.5 / colonisation_days(OYS, 22.0) * 16  # 18 days on the calendar, at 22 °C and 4 % spawn
    assert values["colonise_days"] == round(16 * (base / 16) ** 0.6, 1)
    assert (values["pin_days"], values["rest_days"]) == (7, 12)
    weight = 120 / (1 + 119 * 0.05)
    assert values["loss_pct"] == round(100 * (1.6 + 3 * weight * 20 / 120) / (40 + 3 * weight), 1)
    weight = 195 / (1 + 194 * 0.05)  # 100 and 95 bags stood before a flush that 95 and 90 came to
    assert values["flush_loss_pct"] == round(100 * (0.2 + 3 * weight * 10 / 195) / (40 + 3 * weight), 1)


def test_lots_without_all_flushes_count_for_shares_only() -> None:
    found = learned([lot(1), lot(2), lot(3), lot(4, 20.0, flushes=1)])
    keys = {one.key: one for one in found.keys}
    assert (keys["be_pct"].lots, keys["be_pct"].after) == (3, 85.0)
    assert keys["flush_share"].after[0] < OYS.flush_share[0]
    assert found.seen.notes == ["1 of 4 lots without all 3 flushes picked: not counted for be_pct."]


def test_a_farm_that_yields_less_in_all_flushes_keeps_its_shares() -> None:
    keys = {one.key: one for one in learned([lot(number, 40.0) for number in range(1, 4)]).keys}
    assert keys["be_pct"].after < 60
    assert keys["flush_share"].after == OYS.flush_share
    assert not keys["flush_share"].proposed


def test_what_no_lot_speaks_to_is_said() -> None:
    day = date(2027, 3, 1)
    bare = PickedLot("27W01-OYS-1", "OYS", (Flush(1, day, day, 100, 40.0),))
    found = learned([bare])
    assert [one.key for one in found.keys] == []
    assert found.seen.unlearned == {
        "be_pct": "no lot has all 3 flushes of the card picked",
        "flush_share": "no lot has flush 2 picked",
        "colonise_days": "no lot has both inoculated and ready",
        "pin_days": "no lot has both opened and a first flush",
        "rest_days": "no lot has two flushes, one after the other",
        "loss_pct": "no lot has bags_inoculated",
        "flush_loss_pct": "no lot has two flushes, one after the other",
    }


def test_without_a_room_that_suits_colonisation_is_not_learned() -> None:
    rooms = tuple(
        room.model_copy(update={"temp_c": 36.0}) if room.kind == "colonisation" else room for room in FARM.room
    )
    found = learned([lot(number) for number in range(1, 5)], FARM.model_copy(update={"room": rooms}))
    assert "colonise_days" not in after(found)
    assert "no colonisation room" in found.seen.unlearned["colonise_days"]


def test_browning_is_not_colonisation() -> None:
    strain = OYS.model_copy(update={"mature_days": 10})
    farm = FARM.model_copy(update={"strain": (strain,)})
    plain = after(learned([lot(number) for number in range(1, 4)]))["colonise_days"]
    assert after(learned([lot(number, days=28) for number in range(1, 4)], farm))["colonise_days"] == plain
    found = learned([lot(number, days=10) for number in range(1, 4)], farm)
    assert "colonise_days" not in after(found)
    assert any("mature_days" in note for note in found.seen.notes)


def test_a_lot_that_was_lost_counts_as_lost() -> None:
    gone = PickedLot("27W09-OYS-1", "OYS", (), bags_inoculated=100, gone=date(2027, 4, 1))
    lots = [lot(number, start=100) for number in range(1, 4)]
    assert after(learned([*lots, gone]))["loss_pct"] > after(learned(lots))["loss_pct"]


def test_a_key_needs_three_lots_and_a_change_that_shows() -> None:
    two, three = learned([lot(1, 60.0), lot(2, 60.0)]), learned([lot(number, 60.0) for number in range(1, 4)])
    assert [one.key for one in two.keys if one.proposed] == []
    proposed = {one.key for one in three.keys if one.proposed}
    assert "be_pct" in proposed
    assert proposed.isdisjoint({"pin_days", "rest_days", "flush_share"})


@pytest.mark.parametrize(
    ("changed", "key"),
    [({"be": 30.0}, "be_pct"), ({"days": 29}, "colonise_days"), ({"pins": 12}, "pin_days"), ({"rest": 20}, "rest_days"),
     ({"bags": 40}, "loss_pct"), ({"late": 25}, "flush_loss_pct")],
)  # fmt: skip
def test_the_last_three_lots_may_drift(changed: dict[str, float], key: str) -> None:
    steady = [lot(number, 85.0 + number % 3) for number in range(1, 9)]
    assert learned(steady).drift == ()
    drift = learned([*steady, *(lot(number, **changed) for number in range(9, 12))]).drift
    assert [sentence.partition(":")[0] for sentence in drift] == [key]
    assert "27W09-OYS-1, 27W10-OYS-1, 27W11-OYS-1" in drift[0]
    assert "8 lots before" in drift[0]


def test_a_card_without_losses_keeps_them_at_none_where_none_were_seen() -> None:
    found = learned([lot(number) for number in range(1, 5)])
    key = next(one for one in found.keys if one.key == "flush_loss_pct")
    assert (key.before, key.after, key.proposed) == (0.0, 0.0, False)
    assert key.high > 0


def test_fewer_losses_are_no_drift() -> None:
    lots = [lot(number, start=110) for number in range(1, 12)] + [lot(number, start=100) for number in range(12, 15)]
    assert learned(lots).drift == ()


def test_flushes_are_told_apart_by_gaps() -> None:
    days = [DayPick(START + timedelta(days=after), 90 - after, 1.0, None) for after in (0, 2, 4, 14, 15, 27)]
    found = flushes_of(days, rest_days=12)
    assert [(one.number, (one.first - START).days, (one.last - START).days, one.bags, one.kg) for one in found] == [
        (1, 0, 4, 90, 3.0), (2, 14, 15, 76, 2.0), (3, 27, 27, 63, 1.0),
    ]  # fmt: skip
    assert flushes_of([], 12) == ()
