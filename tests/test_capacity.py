"""Capacity of each stage, recomputed by hand for the sound farm of the tests."""

from __future__ import annotations

from pathlib import Path

import pytest

from models.growth import days_to_ready
from models.thermal.errors import ThermalError
from scheduler import capacity
from scheduler.capacity import capacities, idle_findings
from scheduler.folder import read_farm_folder

BASE = Path(__file__).parent / "broken_farms" / "base"


class Row:
    """A cycle of 17 h 20 min, and 11 h 40 min until the bags are cool."""

    ready_to_unload_min = 1040
    cool_down_min = 700


@pytest.fixture(scope="module")
def farm():
    return read_farm_folder(BASE).farm


@pytest.fixture
def known_cycle(monkeypatch):
    asked = []

    def row(*arguments):
        _, steriliser, programme, families, load, month = arguments
        asked.append((steriliser.code, programme.code, [(r.code, b.code) for r, b in families], load, month))
        return Row()

    monkeypatch.setattr(capacity, "cycle_row", row)
    return asked


def stage(found, name, what=""):
    return next(one for one in found if one.stage == name and one.what.startswith(what))


def test_stages_by_hand(farm, known_cycle):
    found = capacities(farm)
    assert known_cycle == [
        ("drum", "overnight", [("oak62", "2k3"), ("oak62", "block")], 1.0, month) for month in (1, 7)
    ]
    assert idle_findings(farm, found) == ()
    assert stage(found, "mix").bags_week == 95 * 30
    # loaded on Mon to Sat at 09:20 or as early as can be, out the next morning: six runs of 110
    assert stage(found, "sterilise").bags_week == 660
    assert stage(found, "cool").bags_week == 220 * 7 / 2
    assert stage(found, "inoculate").bags_week == (5 * 8.5 + 3 + 2) * 40
    assert stage(found, "colonise", "OYS").bags_week == pytest.approx(1400 * 7 / 18)
    assert stage(found, "colonise", "OYS").kg_week == pytest.approx(1400 * 7 / 18 * 0.96 * 2.3 * 0.38 * 0.85)
    assert stage(found, "open").bags_week == pytest.approx(95 / (1 / 120 + 1 / 150))
    assert stage(found, "fruit", "OYS, 1 flush").bags_week == pytest.approx(600 * 7 / 8)
    assert stage(found, "fruit", "OYS, 3 flushes").bags_week == pytest.approx(600 * 7 / 32)
    assert stage(found, "fruit", "LIO, 2 flushes").kg_week == pytest.approx(600 * 7 / 29 * 3.0 * 0.38 * 0.72)
    assert stage(found, "pick", "OYS").kg_week == 95 * 12
    assert stage(found, "pick", "OYS").bags_week == pytest.approx(95 * 12 / (2.3 * 0.38 * 0.85))


def test_stages_come_in_the_order_of_a_bag(farm, known_cycle):
    stages = list(dict.fromkeys(one.stage for one in capacities(farm, (3,))))
    assert stages == ["mix", "sterilise", "cool", "inoculate", "colonise", "open", "fruit", "pick"]
    assert {month for *_, month in known_cycle} == {3}


@pytest.mark.usefixtures("known_cycle")
def test_how_holds_the_numbers(farm):
    found = capacities(farm)
    assert "95 h a week of 2 people x 30 bags an hour" in stage(found, "mix").how
    how = stage(found, "sterilise").how
    assert "6 runs a week x 110 bags" in how
    assert "17 h 20 min after steam on" in how
    assert "47.5 h a week at 1 bench (of 95 h that people have)" in stage(found, "inoculate").how
    assert "1400 places in shelf / 18 days; 4 % are lost" in stage(found, "colonise").how


@pytest.mark.usefixtures("known_cycle")
def test_several_sterilisers_count_together_and_the_supply_is_named(farm):
    drum = farm.steriliser[0].model_copy(update={"count": 3})
    row = stage(capacities(farm.model_copy(update={"steriliser": (drum,)})), "sterilise")
    assert row.bags_week == 3 * 660
    assert "the supply carries 2 at full power at once" in row.how


def test_a_programme_that_cannot_be_reached_is_nothing_with_the_reason(farm, monkeypatch):
    def refuse(*_):
        raise ThermalError("too hot")

    monkeypatch.setattr(capacity, "cycle_row", refuse)
    found = capacities(farm)
    row = stage(found, "sterilise")
    assert (row.bags_week, row.how) == (0.0, "too hot")
    assert not any(one.stage == "cool" for one in found)
    (finding,) = idle_findings(farm, found)
    assert (finding.key, finding.severity) == ("programme.overnight", "warning")
    assert "too hot" in finding.sentence()


@pytest.mark.usefixtures("known_cycle")
def test_a_load_that_nobody_can_mix_is_nothing(farm):
    rates = farm.rates.model_copy(update={"mix_bags_h": 2.0})
    row = stage(capacities(farm.model_copy(update={"rates": rates})), "sterilise")
    assert row.bags_week == 0
    assert "no full load of 110 bags" in row.how


@pytest.mark.usefixtures("known_cycle")
def test_without_a_cooling_room_cooling_is_not_limited(farm):
    rooms = tuple(room for room in farm.room if room.kind != "cooling")
    row = stage(capacities(farm.model_copy(update={"room": rooms})), "cool")
    assert row.bags_week is None
    assert "no cooling room" in row.how


@pytest.mark.usefixtures("known_cycle")
def test_rooms_add_up_each_at_its_own_pace(farm):
    warm = farm.room[1].model_copy(update={"code": "warm", "temp_c": 26.0, "places": 100})
    strain = farm.strain[0]
    row = stage(capacities(farm.model_copy(update={"room": (*farm.room, warm)})), "colonise", "OYS")
    assert days_to_ready(strain, 26.0) < 18
    assert row.bags_week == pytest.approx(7 * (1400 / 18 + 100 / days_to_ready(strain, 26.0)))


@pytest.mark.usefixtures("known_cycle")
def test_a_programme_no_strain_uses_has_no_row(farm):
    spare = farm.programme[0].model_copy(update={"code": "spare"})
    found = capacities(farm.model_copy(update={"programme": (*farm.programme, spare)}))
    assert {one.what for one in found if one.stage == "sterilise"} == {"drum, overnight"}
