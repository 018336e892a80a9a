"""The farm file as frozen, validated types: one noun a file."""

from models.farm.crew import SKILLS, WEEKDAYS, Crew, Rates, Skill, Weekday
from models.farm.farm import Farm
from models.farm.order import Order, StockLot, StockStage
from models.farm.room import Room, RoomKind
from models.farm.site import Site
from models.farm.spread import Spread
from models.farm.steriliser import Steriliser
from models.farm.strain import Strain
from models.farm.substrate import Bag, Ingredient, Programme, Recipe
from models.farm.trade import Limits, Market, Tariff, TariffPeriod
from models.farm.units import clock_minutes, span_minutes

__all__ = [
    "SKILLS",
    "WEEKDAYS",
    "Bag",
    "Crew",
    "Farm",
    "Ingredient",
    "Limits",
    "Market",
    "Order",
    "Programme",
    "Rates",
    "Recipe",
    "Room",
    "RoomKind",
    "Site",
    "Skill",
    "Spread",
    "Steriliser",
    "StockLot",
    "StockStage",
    "Strain",
    "Tariff",
    "TariffPeriod",
    "Weekday",
    "clock_minutes",
    "span_minutes",
]
