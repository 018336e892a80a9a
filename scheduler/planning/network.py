"""The run network: every way a steriliser can be filled, as arcs between moments when it can change hands.

A run is an arc from the moment loading starts to the moment unloading ends. Of all load moments of one day that lead
to the same unload moment, the latest takes the steriliser for the shortest time and so serves at least as well as any
other; it is kept, and beside it the one with the cheapest electricity. Where the site's supply can bind, the moments
of an hourly grid are kept too, so that runs can be staggered.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import ceil

import numpy as np
from numpy.typing import NDArray

from models.farm import Bag, Farm, Programme, Recipe, Steriliser
from models.thermal.errors import ThermalError
from models.thermal.table import CycleRow, cycle_row
from scheduler.planning.shifts import Shifts
from scheduler.tariff import price_at

FINE_GRID_MIN = 60
COARSE_GRID_MIN = 60
QUARTER_MIN = 15
UNLOAD_SEARCH_DAYS = 6


@dataclass(frozen=True, slots=True)
class RunKind:
    """Bags that may share a run: strains of one programme; ``families`` are the kinds of bag among them."""

    programme: Programme
    strains: tuple[int, ...]
    families: tuple[tuple[Recipe, Bag], ...]


@dataclass(frozen=True, slots=True)
class Arc:
    """One possible run of one kind of steriliser (moments as in `models.plan.Run`, days as day indices)."""

    steriliser: int
    kind: int
    load_step: float
    bags: int
    mix_start: int
    load_start: int
    steam_on: int
    ready: int
    unload: int
    unloaded: int
    cooled: int
    load_day: int
    unload_day: int
    first_inoculation: int
    last_inoculation: int
    energy_kwh: float
    energy_cost: float
    kw_by_quarter: tuple[float, ...]

    @property
    def bag_group(self) -> tuple[int, int, int, int, int]:
        """Arcs whose bags behave alike from loading on share this key."""
        return (self.kind, self.load_day, self.unload_day, self.first_inoculation, self.last_inoculation)


def run_kinds(farm: Farm) -> tuple[RunKind, ...]:
    """Each kind of bag alone, and for each programme with several kinds all of them together."""
    kinds: list[RunKind] = []
    for programme in farm.programme:
        members: dict[tuple[str, str], list[int]] = {}
        for index, strain in enumerate(farm.strain):
            if strain.programme == programme.code:
                members.setdefault((strain.recipe, strain.bag), []).append(index)
        families = []
        for strains in members.values():
            example = farm.strain[strains[0]]
            family = (farm.recipe_of(example), farm.bag_of(example))
            families.append(family)
            kinds.append(RunKind(programme, tuple(strains), (family,)))
        if len(members) > 1:
            everyone = tuple(sorted(index for strains in members.values() for index in strains))
            kinds.append(RunKind(programme, everyone, tuple(families)))
    return tuple(kinds)


def supply_may_bind(farm: Farm) -> bool:
    """Whether all elements at full power together would pass the site's supply."""
    if farm.site.supply_kw is None:
        return False
    return farm.site.base_load_kw + sum(s.count * s.element_kw for s in farm.steriliser) > farm.site.supply_kw


@dataclass(frozen=True, slots=True)
class Template:
    """The times of a run, relative to midnight of its load day (moments [min], days as offsets)."""

    mix_start: int
    load_start: int
    steam_on: int
    ready: int
    unload: int
    unloaded: int
    cooled: int
    unload_day: int
    first_inoculation: int
    last_inoculation: int


class RunNetwork:
    """Builds the arcs of a farm for so many days.

    Weeks repeat, so the times of runs are worked out once for each pattern of shifts and reused on every day that
    has the same days ahead of it.
    """

    def __init__(self, farm: Farm, shifts: Shifts, days: int, kinds: tuple[RunKind, ...]) -> None:
        self.farm = farm
        self.shifts = shifts
        self.days = days
        self.kinds = kinds
        self._midnight = [shifts.clock.minute(shifts.clock.day(day), 0) for day in range(shifts.days + 1)]
        self._pattern = self._patterns()
        self._price = self._price_by_minute()
        self._templates: dict[tuple[int, int, int, int], tuple[Template, ...]] = {}

    def arcs(self) -> tuple[Arc, ...]:
        """All arcs worth having, in order of load moment."""
        every = supply_may_bind(self.farm)
        kept: list[Arc] = []
        for steriliser_index, steriliser in enumerate(self.farm.steriliser):
            for kind_index in range(len(self.kinds)):
                for load in steriliser.loads:
                    kept.extend(self._arcs_of(steriliser_index, steriliser, kind_index, load, every=every))
        return tuple(sorted(kept, key=lambda a: (a.load_start, a.steriliser, a.kind, a.load_step, a.unload)))

    def _patterns(self) -> list[int]:
        """A number for each day: the same where the shifts of the days ahead are the same, minute by minute."""
        ahead = UNLOAD_SEARCH_DAYS + 6 + ceil(self.farm.limits.cooled_to_inoculate_h / 24)
        known: dict[tuple[object, ...], int] = {}
        numbers = []
        shapes = [self._shape(day) for day in range(self.shifts.days)]
        for day in range(self.shifts.days):
            steps = tuple(
                self._midnight[k] - self._midnight[day] for k in range(day, min(day + ahead, self.shifts.days))
            )
            key = (steps, tuple(shapes[day : day + ahead]))
            numbers.append(known.setdefault(key, len(known)))
        return numbers

    def _shape(self, day: int) -> tuple[tuple[str, int, int], ...]:
        return tuple(
            (skill + shift.crew.code, shift.start - self._midnight[day], shift.end - self._midnight[day])
            for skill in ("mix", "steam", "inoculate")
            for shift in self.shifts.on(day, skill)
        )

    def _price_by_minute(self) -> NDArray[np.float64]:
        """Tariff price at each elapsed minute [currency/kWh]."""
        of_day = np.array([price_at(self.farm.tariff, minute) for minute in range(1440)])
        prices = np.empty(self._midnight[self.shifts.days])
        for day in range(self.shifts.days):
            start, end = self._midnight[day], self._midnight[day + 1]
            if end - start == 1440:
                prices[start:end] = of_day
            else:
                local = (self.shifts.clock.at(minute) for minute in range(start, end))
                prices[start:end] = [of_day[at.hour * 60 + at.minute] for at in local]
        return prices

    def _arcs_of(
        self, index: int, steriliser: Steriliser, kind_index: int, load: float, *, every: bool
    ) -> Iterator[Arc]:
        bags = steriliser.bags_at(load)
        months = {self.shifts.clock.day(day).month for day in range(self.days)}
        rows = {month: self._row(steriliser, kind_index, load, month) for month in months}
        for day in range(self.days):
            row = rows[self.shifts.clock.day(day).month]
            if row is None:
                continue
            quarters = QUARTER_MIN * np.arange(len(row.kwh_by_quarter))
            best: dict[int, tuple[Template, float]] = {}
            cheapest: dict[int, tuple[Template, float]] = {}
            chosen: list[tuple[Template, float]] = []
            for template in self._templates_of(day, bags, row):
                if day + max(template.unload_day, template.first_inoculation) >= self.days:
                    continue
                if self._closed(steriliser, day, day + template.unload_day):
                    continue
                moments = self._midnight[day] + template.steam_on + quarters
                pair = (template, float(self._price[moments] @ row.kwh_by_quarter))
                best[template.unload] = pair
                known = cheapest.get(template.unload)
                if known is None or pair[1] < known[1] * 0.99 - 1e-9:
                    cheapest[template.unload] = pair
                if every and template.load_start % COARSE_GRID_MIN == 0:
                    chosen.append(pair)
            for unload, pair in best.items():
                chosen.append(pair)
                if cheapest[unload][1] < pair[1] * 0.99 - 1e-9:
                    chosen.append(cheapest[unload])
            for template, cost in dict.fromkeys(chosen):
                yield self._arc(index, kind_index, load, bags, day, template, row, cost)

    def _row(self, steriliser: Steriliser, kind_index: int, load: float, month: int) -> CycleRow | None:
        kind = self.kinds[kind_index]
        try:
            return cycle_row(self.farm, steriliser, kind.programme, kind.families, load, month)
        except ThermalError:
            return None

    def _templates_of(self, day: int, bags: int, row: CycleRow) -> tuple[Template, ...]:
        key = (self._pattern[day], bags, row.ready_to_unload_min, row.cool_down_min)
        if key not in self._templates:
            found = (self._template(day, bags, row, start) for start in self._load_moments(day, bags))
            self._templates[key] = tuple(template for template in found if template is not None)
        return self._templates[key]

    def _load_moments(self, day: int, bags: int) -> list[int]:
        """Moments of a fine grid when loading may start, and the last moment it may in each *steam* shift [min]."""
        moments: set[int] = set()
        for shift in self.shifts.on(day, "steam"):
            last = shift.end - shift.minutes_for(bags, self.farm.rates.load_bags_h)
            moments.update(range(shift.start, last + 1, FINE_GRID_MIN))
            if last >= shift.start:
                moments.add(last)
        for mixing in self.shifts.on(day, "mix"):
            moments.add(mixing.start + mixing.minutes_for(bags, self.farm.rates.mix_bags_h))
        return sorted(moments)

    def _template(self, day: int, bags: int, row: CycleRow, start: int) -> Template | None:
        shifts, zero = self.shifts, self._midnight[day]
        steam_on = shifts.loading_end(start, day, bags)
        mix_start = shifts.mixing_start(start, day, bags)
        if steam_on is None or mix_start is None:
            return None
        if steam_on - mix_start > 60 * self.farm.limits.mix_to_steam_h:
            return None
        ready = steam_on + row.ready_to_unload_min
        span = shifts.unloading(ready, bags)
        if span is None:
            return None
        unload, unloaded = span
        cooled = unloaded + row.cool_down_min
        window = shifts.inoculation_days(cooled, bags)
        if window is None:
            return None
        return Template(
            mix_start - zero, start - zero, steam_on - zero, ready - zero, unload - zero, unloaded - zero,
            cooled - zero, shifts.clock.day_index(unload) - day, window[0] - day, window[1] - day,
        )  # fmt: skip

    def _closed(self, steriliser: Steriliser, first: int, last: int) -> bool:
        if not steriliser.closed:
            return False
        return any(self.shifts.clock.day(day) in steriliser.closed for day in range(first, last + 1))

    def _arc(
        self, index: int, kind: int, load: float, bags: int, day: int, t: Template, row: CycleRow, cost: float
    ) -> Arc:
        zero = self._midnight[day]
        return Arc(
            steriliser=index, kind=kind, load_step=load, bags=bags, mix_start=zero + t.mix_start,
            load_start=zero + t.load_start, steam_on=zero + t.steam_on, ready=zero + t.ready,
            unload=zero + t.unload, unloaded=zero + t.unloaded, cooled=zero + t.cooled, load_day=day,
            unload_day=day + t.unload_day, first_inoculation=day + t.first_inoculation,
            last_inoculation=min(day + t.last_inoculation, self.days - 1), energy_kwh=row.energy_kwh,
            energy_cost=cost, kw_by_quarter=row.kw_by_quarter,
        )  # fmt: skip


def half_hour_draw(arc: Arc) -> Iterator[tuple[int, float]]:
    """Half-hour slots since the first midnight that a run's element touches, with its highest power there [kW]."""
    slots: dict[int, float] = {}
    for quarter, kw in enumerate(arc.kw_by_quarter):
        start = arc.steam_on + QUARTER_MIN * quarter
        for slot in range(start // 30, ceil((start + QUARTER_MIN) / 30)):
            slots[slot] = max(slots.get(slot, 0.0), kw)
    yield from slots.items()
