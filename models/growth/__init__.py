"""How strains grow: temperature, colonisation, flushes, yield, shelf life."""

from models.growth.colonisation import colonisation_days, days_to_ready, spawn_factor, suits
from models.growth.flush import flush_days, flush_kg, kg_per_bag, place_days
from models.growth.response import temperature_response
from models.growth.shelf_life import keeping_days
from models.growth.table import GrowthRow, growth_table

__all__ = [
    "GrowthRow",
    "colonisation_days",
    "days_to_ready",
    "flush_days",
    "flush_kg",
    "growth_table",
    "keeping_days",
    "kg_per_bag",
    "place_days",
    "spawn_factor",
    "suits",
    "temperature_response",
]
