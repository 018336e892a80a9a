"""Colonisation, yield, flushes and storage against figures of published trials.

Sources
-------
Spawn rate: D. J. Royse, Pleurotus cornucopiae on cottonseed hull and straw,
    https://www.scilit.net/publications/5d07a5fef0037a688ed078ef35acaba8: 3.75 % of spawn saves 9.2 days on average
    over 1.25 %.
Schedule: Royse and Sánchez, shiitake on ground wheat straw: spawn run 21 days, browning 28 days, three breaks in
    38 days, 87 days in all.
Core: factory trial of Flammulina filiformis in bottles of 1.2 l, search.napstic.cn, periodical 010syjxb202406003:
    22 days of culture, six at 16 °C and the rest at 14 °C, with cores up to 4 °C above the room.
Block: a grower's figure for Pleurotus eryngii, shroomery.org/9407: about 1 lb from a block of 5 lb.
Efficiency: Cayetano-Catarino et al., Pleurotus ostreatus on rice straw: efficiency and production rate of four
    strains, whose crops took 41 to 59 days.
Split: Pleurotus fossulatus on rice straw at 22 °C: 30.8 % and 14.6 % in two flushes that began on days 21 and 38.
Storage: Minamide, Habu and Ogata (1980), Nippon Shokuhin Kogyo Gakkaishi 27:281-287: five species keep 14-20 days
    at 1 °C, about 10 days at 6 °C, 2-3 days at 20 °C.
"""

from __future__ import annotations

import pytest

from models.growth import (
    days_to_ready,
    expected_flush_kg,
    first_pick_days,
    flush_days,
    flush_kg,
    heat_curve,
    keeping_days,
    kg_per_bag,
    place_days,
    selling_days,
    spawn_factor,
)
from models.growth.examples import BAG, GREY_OYSTER, OAK
from scheduler.folder.presets import presets


def test_three_times_the_spawn_saves_nine_days():
    factor = spawn_factor(1.25, 3.75)
    assert factor == pytest.approx(1.442, abs=5e-4)
    fast = 9.2 / (factor - 1)
    assert fast == pytest.approx(20.8, abs=0.05)
    assert fast * factor == pytest.approx(30.0, abs=0.05)


def test_shiitake_schedule_of_87_days():
    shiitake = GREY_OYSTER.model_copy(
        update={
            "spawn_rate_pct": 5.0, "colonise_days": 21.0, "mature_days": 28, "pin_days": 10, "rest_days": 14,
            "flush_share": (0.5, 0.3, 0.2),
        }
    )  # fmt: skip
    assert days_to_ready(shiitake, shiitake.colonise_at_c) == 21 + 28
    assert days_to_ready(shiitake, shiitake.colonise_at_c) + place_days(shiitake, 3) == 87


def test_the_shiitake_preset_keeps_that_schedule():
    shiitake = presets()["shiitake"].strain()
    ready = days_to_ready(shiitake, shiitake.colonise_at_c)
    assert (ready, place_days(shiitake, 3), ready + place_days(shiitake, 3)) == (21 + 28, 38, 87)
    assert 9 <= first_pick_days(shiitake, shiitake.colonise_at_c) - ready <= 15  # Pettipher (1988): 9-15 days


def test_the_enoki_preset_takes_22_days_at_the_mean_of_the_trial():
    enoki = presets()["enoki"].strain()
    assert enoki.colonise_at_c == pytest.approx((6 * 16 + 16 * 14) / 22, abs=0.05)
    assert days_to_ready(enoki, enoki.colonise_at_c) == 22
    curve = heat_curve(enoki, 22.0)
    assert enoki.self_heating_k == pytest.approx(4.0 * sum(curve) / 22 / enoki.heat_w_per_kg, abs=0.05)


def test_a_king_oyster_block_of_five_pounds_gives_one():
    block = BAG.model_copy(update={"wet_kg": 5 * 0.4536})
    assert kg_per_bag(presets()["king-oyster"].strain(), OAK, block) == pytest.approx(0.4536, rel=0.01)


@pytest.mark.parametrize(
    ("efficiency", "rate", "by_hand"), [(261.1, 5.2, 50.2), (240.6, 5.8, 41.5), (213.3, 3.8, 56.1), (170.9, 4.2, 40.7)]
)
def test_production_rate_times_crop_days_is_the_efficiency(efficiency, rate, by_hand):
    strain = GREY_OYSTER.model_copy(update={"be_pct": efficiency})
    dry_kg = BAG.wet_kg * (1 - OAK.water_pct / 100)
    days = 100 * kg_per_bag(strain, OAK, BAG) / (dry_kg * rate)
    assert days == pytest.approx(by_hand, abs=0.05)
    assert 41 <= round(days) <= 59


def test_flush_split_and_interval():
    strain = GREY_OYSTER.model_copy(
        update={"be_pct": 30.8 + 14.6, "flush_share": (0.68, 0.32), "pin_days": 21, "rest_days": 17}
    )
    dry_kg = BAG.wet_kg * (1 - OAK.water_pct / 100)
    assert [100 * kg / dry_kg for kg in flush_kg(strain, OAK, BAG)] == pytest.approx([30.8, 14.6], abs=0.15)
    assert flush_days(strain) == (21, 38)
    assert expected_flush_kg(strain, OAK, BAG) == flush_kg(strain, OAK, BAG)  # a measured split has its losses in it


def test_picking_early_keeps_the_split():
    """The same trial, picked early: 25.9 % and 12.5 %, which is 67 to 33."""
    strain = GREY_OYSTER.model_copy(update={"be_pct": 25.9 + 12.5, "flush_share": (0.68, 0.32)})
    dry_kg = BAG.wet_kg * (1 - OAK.water_pct / 100)
    assert [100 * kg / dry_kg for kg in flush_kg(strain, OAK, BAG)] == pytest.approx([25.9, 12.5], abs=0.25)


@pytest.mark.parametrize(("temp_c", "low", "high"), [(1.0, 14, 20), (6.0, 9.5, 10.5), (20.0, 2, 3)])
def test_storage(temp_c, low, high):
    assert low <= keeping_days(17.0, 1.0, temp_c) <= high


@pytest.mark.parametrize(("temp_c", "days"), [(1.0, 17), (6.0, 10), (20.0, 2)])
def test_storage_of_a_strain_in_the_farms_store(temp_c, days):
    strain = GREY_OYSTER.model_copy(update={"shelf_life_days": 17, "shelf_life_at_c": 1.0})
    assert selling_days(strain, temp_c) == days
