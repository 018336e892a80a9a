"""The growth table: what each strain does in each colonisation room, as the planner and `bagweek check` read it."""

from __future__ import annotations

from dataclasses import dataclass

from models.farm import Farm, Strain
from models.growth.colonisation import days_to_ready, suits
from models.growth.flush import expected_flush_kg, flush_days
from models.growth.shelf_life import selling_days


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
        From opening until each flush is ripe, as stated [d].
    flush_kg : tuple[float, ...]
        Yield to be expected of each flush, over the opened bags [kg/bag].
    kg_per_bag : float
        Yield over all flushes, likewise [kg/bag].
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


def first_pick_days(strain: Strain, colonise_c: float, fruit_c: float | None = None) -> int:
    """Days from inoculation to the first flush of a bag that is opened as soon as it is ready.

    Parameters
    ----------
    strain : Strain
        The strain.
    colonise_c : float
        Temperature of its colonisation room [°C].
    fruit_c : float, optional
        Temperature of its fruiting room [°C]; left out: the stated days.

    Returns
    -------
    int
        Days [d].

    Raises
    ------
    ValueError
        The strain does not grow in that colonisation room.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> first_pick_days(GREY_OYSTER, 22.0)  # 18 to ready, 7 to the first flush
    25
    """
    return days_to_ready(strain, colonise_c) + flush_days(strain, fruit_c)[0]


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
            flush_kg=(kg := expected_flush_kg(strain, farm.recipe_of(strain), farm.bag_of(strain))),
            kg_per_bag=sum(kg),
            shelf_life_days=selling_days(strain, farm.site.cold_store_c),
        )
        for strain in farm.strain
        for room in farm.rooms_of("colonisation")
        if suits(strain, room.temp_c)
    )
