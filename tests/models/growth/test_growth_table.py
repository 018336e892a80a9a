"""The growth table of a farm."""

from __future__ import annotations

from pathlib import Path

from models.growth import days_to_ready, growth_table
from scheduler.folder import read_farm_folder

BASE = Path(__file__).parents[2] / "broken_farms" / "base"


def test_a_row_for_each_strain_and_room():
    farm = read_farm_folder(BASE).farm
    rows = growth_table(farm)
    assert [(row.strain, row.room) for row in rows] == [("OYS", "shelf"), ("LIO", "shelf")]
    assert rows[0].ready_days == days_to_ready(farm.strain[0], 22.0) == 18
    assert rows[0].flush_days == (7, 19, 31)
    assert sum(rows[1].flush_kg) == rows[1].kg_per_bag
    assert rows[1].shelf_life_days == 8


def test_rooms_it_does_not_grow_in_are_left_out():
    farm = read_farm_folder(BASE).farm
    hot = farm.room[1].model_copy(update={"code": "hot", "temp_c": 35.5})
    rows = growth_table(farm.model_copy(update={"room": (*farm.room, hot)}))
    assert [(row.strain, row.room) for row in rows] == [("OYS", "shelf"), ("OYS", "hot"), ("LIO", "shelf")]
