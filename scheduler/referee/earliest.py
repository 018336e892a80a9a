"""The earliest days on which a bag that is not yet made could be inoculated, and picked."""

from __future__ import annotations

from datetime import date, timedelta
from math import ceil

from models.farm import Farm, Programme, Steriliser, Strain
from models.growth.colonisation import days_to_ready
from models.thermal.errors import ThermalError
from models.thermal.table import cycle_row
from scheduler.referee.case import Case

LOOK_DAYS = 28


def earliest_inoculation(case: Case, strain: Strain) -> date | None:
    """A day no run can beat: mixing at the start of the first shift, each step as soon as it can be.

    Returns
    -------
    date or None
        The day; None where no run is possible within four weeks.
    """
    programme = next(p for p in case.farm.programme if p.code == strain.programme)
    days = [
        day
        for steriliser in case.farm.steriliser
        for load in steriliser.loads
        if (day := _earliest(case, strain, programme, steriliser, load)) is not None
    ]
    return min(days, default=None)


def _earliest(case: Case, strain: Strain, programme: Programme, steriliser: Steriliser, load: float) -> date | None:
    farm: Farm = case.farm
    family = [(farm.recipe_of(strain), farm.bag_of(strain))]
    bags, rates = max(1, round(load * steriliser.places)), farm.rates
    for offset in range(LOOK_DAYS):
        day = case.first + timedelta(days=offset)
        mixers, loaders = case.shifts(day, "mix"), case.shifts(day, "steam")
        if not mixers or not loaders or day in steriliser.closed:
            continue
        try:
            row = cycle_row(farm, steriliser, programme, family, load, day.month)
        except ThermalError:
            return None
        mixed = min(start + ceil(60 * bags / (rates.mix_bags_h * c.people) - 1e-9) for c, start, _ in mixers)
        starts = [
            (max(mixed, start) + ceil(60 * bags / (rates.load_bags_h * c.people) - 1e-9), end)
            for c, start, end in loaders
        ]
        on = min((steam for steam, end in starts if steam <= end), default=None)
        if on is None:
            continue
        cooled = _unloaded(case, on + row.ready_to_unload_min, bags) + row.cool_down_min
        return case.next_working(case.local(cooled).date(), "inoculate")
    return None


def _unloaded(case: Case, ready: int, bags: int) -> int:
    day = case.local(ready).date()
    for offset in range(LOOK_DAYS):
        ends = []
        for crew, start, end in case.shifts(day + timedelta(days=offset), "steam"):
            done = max(ready, start) + ceil(60 * bags / (case.farm.rates.unload_bags_h * crew.people) - 1e-9)
            if done <= end:
                ends.append(done)
        if ends:
            return min(ends)
    return ready


def first_ripe(case: Case, strain: Strain) -> date:
    """A day before which no new bag can be ripe: the earliest run there can be, in the quickest room."""
    rooms = [r for r in case.farm.rooms_of("colonisation") if strain.grows_in(r.temp_c)]
    inoculated = earliest_inoculation(case, strain)
    if not rooms or inoculated is None:
        return case.last + timedelta(days=1)
    quickest = min(days_to_ready(strain, room.temp_c) for room in rooms)
    opened = case.next_working(inoculated + timedelta(days=quickest), "open")
    return case.next_working(opened + quickest_flushes(case, strain)[0], "pick")


def quickest_flushes(case: Case, strain: Strain) -> list[timedelta]:
    """Least time from opening to each flush in any fruiting room that suits a strain."""
    return [
        min(days) for days in zip(*(case.after_opening(strain, r) for r in case.fruiting_rooms(strain)), strict=True)
    ]
