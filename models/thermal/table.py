"""The cycle table: what the planner needs to know of every steriliser, programme, kind of bag, load and month."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from math import ceil

from models.farm import Bag, Farm, Programme, Recipe, Steriliser
from models.thermal.curve import CurveRow, steamed_rows
from models.thermal.cycle import Cycle, Surroundings, setting_of, steam_load
from models.thermal.load import LoadPart

QUARTER_MIN = 15


@dataclass(frozen=True, slots=True)
class CycleRow:
    """A cycle as the planner sees it.

    Attributes
    ----------
    bags : int
        Bags it was worked out for.
    heat_up_min, ready_to_unload_min : int
        From steam on, rounded up [min].
    cool_down_min : int
        From unloading to a core cool enough to inoculate, rounded up [min].
    kwh_by_quarter, kw_by_quarter : tuple of float
        Energy [kWh] and highest power [kW] in each quarter of an hour from steam on.
    """

    steriliser: str
    programme: str
    load: float
    bags: int
    month: int
    heat_up_min: int
    ready_to_unload_min: int
    cool_down_min: int
    kwh_by_quarter: tuple[float, ...]
    kw_by_quarter: tuple[float, ...]
    energy_kwh: float


def cycle_row(
    farm: Farm,
    steriliser: Steriliser,
    programme: Programme,
    families: Sequence[tuple[Recipe, Bag]],
    load: float,
    month: int,
) -> CycleRow:
    """The row for a load step in a month.

    With several kinds of bag in a run the row takes, of the rows of each kind alone, the longest times and the
    highest energy: the slowest core decides.

    Raises
    ------
    ThermalError
        No such cycle exists; see `models.thermal.cycle.steam_cycle`.
    """
    around = Surroundings.of(farm)
    # Months as warm as an earlier one have its cycle.
    alike = next(m for m in range(1, 13) if farm.site.ambient_in(m) == farm.site.ambient_in(month))
    rows = [
        replace(_row(around, steriliser, programme, recipe, bag, load, alike), month=month) for recipe, bag in families
    ]
    if len(rows) == 1:
        return rows[0]
    hungriest = max(rows, key=lambda row: row.energy_kwh)
    return CycleRow(
        steriliser=steriliser.code,
        programme=programme.code,
        load=load,
        bags=rows[0].bags,
        month=month,
        heat_up_min=max(row.heat_up_min for row in rows),
        ready_to_unload_min=max(row.ready_to_unload_min for row in rows),
        cool_down_min=max(row.cool_down_min for row in rows),
        kwh_by_quarter=hungriest.kwh_by_quarter,
        kw_by_quarter=hungriest.kw_by_quarter,
        energy_kwh=hungriest.energy_kwh,
    )


@lru_cache(maxsize=4096)
def _row(
    around: Surroundings,
    steriliser: Steriliser,
    programme: Programme,
    recipe: Recipe,
    bag: Bag,
    load: float,
    month: int,
) -> CycleRow:
    bags = steriliser.bags_at(load)
    setting = setting_of(around, steriliser, programme, month=month)
    steamed = steam_load(setting, steriliser, programme, (LoadPart(recipe, bag, bags),))
    rows = steamed_rows(setting.boil_up_min, setting.vessel.element_kw, setting.start_c, steamed.trace)
    kwh, kw = _by_quarter(rows, steamed.end_min, steamed.energy_kwh)
    ready_h = steamed.end_min / 60 + steriliser.vent_min / 60 + steamed.finish.in_place_h
    return CycleRow(
        steriliser=steriliser.code,
        programme=programme.code,
        load=load,
        bags=bags,
        month=month,
        heat_up_min=ceil(60 * steamed.heat_up_h - 1e-6),
        ready_to_unload_min=ceil(60 * ready_h - 1e-6),
        cool_down_min=ceil(60 * steamed.finish.in_room_h - 1e-6),
        kwh_by_quarter=kwh,
        kw_by_quarter=kw,
        energy_kwh=sum(kwh),
    )


def power_by_quarter(cycle: Cycle) -> tuple[tuple[float, ...], tuple[float, ...]]:
    """Energy [kWh] and highest element power [kW] in each quarter of an hour from steam on to the end of the hold.

    The energy is scaled to the cycle's, whose last minute counts in part.
    """
    return _by_quarter(cycle.curve, 60 * (cycle.heat_up_h + cycle.hold_h), cycle.energy_kwh)


def _by_quarter(
    rows: Sequence[CurveRow], end_min: float, energy_kwh: float
) -> tuple[tuple[float, ...], tuple[float, ...]]:
    count = ceil(end_min / QUARTER_MIN - 1e-9)
    kwh, kw = [0.0] * count, [0.0] * count
    for row in rows:
        quarter = int(max(0.0, row.minutes - 0.5) // QUARTER_MIN)
        if quarter < count:
            kwh[quarter] += row.element_kw / 60
            kw[quarter] = max(kw[quarter], row.element_kw)
    scale = energy_kwh / sum(kwh) if sum(kwh) > 0 else 0.0
    return tuple(scale * value for value in kwh), tuple(kw)
