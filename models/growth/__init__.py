"""How strains grow: temperature, colonisation, flushes, yield, shelf life."""

from models.growth.colonisation import colonisation_days, days_to_ready, spawn_factor, suits
from models.growth.flush import (
    expected_flush_kg,
    flush_days,
    flush_kg,
    flush_survival,
    fruiting_factor,
    kg_per_bag,
    place_days,
)
from models.growth.heat import HeatingLot, core_excess, expected_self_heating, heat_curve, room_heat
from models.growth.response import temperature_response
from models.growth.shelf_life import keeping_days, selling_days
from models.growth.table import GrowthRow, first_pick_days, growth_table

__all__ = [
    "GrowthRow",
    "HeatingLot",
    "colonisation_days",
    "core_excess",
    "days_to_ready",
    "expected_flush_kg",
    "expected_self_heating",
    "first_pick_days",
    "flush_days",
    "flush_kg",
    "flush_survival",
    "fruiting_factor",
    "growth_table",
    "heat_curve",
    "keeping_days",
    "kg_per_bag",
    "place_days",
    "room_heat",
    "selling_days",
    "spawn_factor",
    "suits",
    "temperature_response",
]
