"""The growth table: what each strain does in each colonisation room, as the planner and `bagweek check` read it."""

from __future__ import annotations

from dataclasses import dataclass

from models.farm import Farm
from models.growth.colonisation import days_to_ready, suits
from models.growth.flush import flush_days, flush_kg, kg_per_bag


@dataclass(frozen=True, slots=True)
class GrowthRow:
    """One strain in one colonisation room.

    Attributes
    ----------
    strain, room : str
        Codes.
    ready_days : int
        From inoculation to the ready day [d].
    flush_days : tuple[int, ...]
        From opening until each flush is ripe [d].
    flush_kg : tuple[float, ...]
        Yield of each flush [kg/bag].
    kg_per_bag : float
        Yield over all flushes [kg/bag].
    shelf_life_days : int
        How long picked mushrooms can be sold [d].
    """

    strain: str
    room: str
    ready_days: int
    flush_days: tuple[int, ...]
    flush_kg: tuple[float, ...]
    kg_per_bag: float
    shelf_life_days: int


def growth_table(farm: Farm) -> tuple[GrowthRow, ...]:
    """One row for each strain and each colonisation room it grows in, in file order.

    Rooms at or beyond a strain's ``t_min_c`` or ``t_max_c`` are left out.
    """
    return tuple(
        GrowthRow(
            strain=strain.code,
            room=room.code,
            ready_days=days_to_ready(strain, room.temp_c),
            flush_days=flush_days(strain),
            flush_kg=flush_kg(strain, farm.recipe_of(strain), farm.bag_of(strain)),
            kg_per_bag=kg_per_bag(strain, farm.recipe_of(strain), farm.bag_of(strain)),
            shelf_life_days=strain.shelf_life_days,
        )
        for strain in farm.strain
        for room in farm.rooms_of("colonisation")
        if suits(strain, room.temp_c)
    )
