"""Working time: who is on shift when, and the moments at which mixing, loading and unloading can happen."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from math import ceil

from models.calendar import FarmClock
from models.farm import Crew, Farm


@dataclass(frozen=True, slots=True)
class Shift:
    """One crew's shift on one day, as elapsed minutes [min]."""

    crew: Crew
    start: int
    end: int

    @property
    def hours(self) -> float:
        """Person-hours in the shift [h]."""
        return (self.end - self.start) * self.crew.people / 60

    def minutes_for(self, bags: int, rate: float) -> int:
        """Minutes the whole crew takes for so many bags at a rate for one person [bags/h]; rounded up."""
        return ceil(60 * bags / (rate * self.crew.people) - 1e-9)


@dataclass(frozen=True)
class Shifts:
    """All shifts of a farm from the first day on, by day index and skill."""

    farm: Farm
    clock: FarmClock
    days: int

    @cached_property
    def _by_day_and_skill(self) -> list[dict[str, tuple[Shift, ...]]]:
        table: list[dict[str, tuple[Shift, ...]]] = []
        for index in range(self.days):
            day = self.clock.day(index)
            by_skill: dict[str, tuple[Shift, ...]] = {}
            for crew in self.farm.crew:
                span = crew.shift_on(day)
                if span is None:
                    continue
                shift = Shift(crew, self.clock.minute(day, span[0]), self.clock.minute(day, span[1]))
                for skill in crew.skills:
                    by_skill[skill] = (*by_skill.get(skill, ()), shift)
            table.append(by_skill)
        return table

    def on(self, day: int, skill: str) -> tuple[Shift, ...]:
        """Shifts of crews with a skill on a day index; empty outside the table."""
        if not 0 <= day < self.days:
            return ()
        return self._by_day_and_skill[day].get(skill, ())

    def next_day_with(self, skill: str, day: int) -> int:
        """First day index from ``day`` on with a shift of that skill; the end of the table when there is none."""
        while day < self.days and not self.on(day, skill):
            day += 1
        return day

    def loading_end(self, start: int, day: int, bags: int) -> int | None:
        """When loading that starts at a moment ends; None if no *steam* crew can do it within its shift [min]."""
        ends = [
            start + shift.minutes_for(bags, self.farm.rates.load_bags_h)
            for shift in self.on(day, "steam")
            if shift.start <= start and start + shift.minutes_for(bags, self.farm.rates.load_bags_h) <= shift.end
        ]
        return min(ends, default=None)

    def mixing_start(self, load_start: int, day: int, bags: int) -> int | None:
        """When mixing must start to end as loading starts; None if no *mix* crew can do it within its shift [min]."""
        starts = []
        for shift in self.on(day, "mix"):
            start = load_start - shift.minutes_for(bags, self.farm.rates.mix_bags_h)
            if shift.start <= start and load_start <= shift.end:
                starts.append(start)
        return max(starts, default=None)

    def unloading(self, ready: int, bags: int, search_days: int = 6) -> tuple[int, int] | None:
        """First moment at or after ready when the load can be taken out within one shift, and when that ends [min]."""
        day = self.clock.day_index(ready)
        for index in range(day, min(day + search_days, self.days)):
            spans = []
            for shift in self.on(index, "steam"):
                start = max(ready, shift.start)
                end = start + shift.minutes_for(bags, self.farm.rates.unload_bags_h)
                if end <= shift.end:
                    spans.append((start, end))
            if spans:
                return min(spans)
        return None

    def inoculation_hours_left(self, day: int, moment: int) -> float:
        """Person-hours of inoculation on a day after a moment, as crews and benches allow [h]."""
        shifts = self.on(day, "inoculate")
        people_hours = sum(max(0, shift.end - max(shift.start, moment)) * shift.crew.people / 60 for shift in shifts)
        benches = self.farm.limits.inoculation_benches
        if benches is None or not shifts:
            return people_hours
        first, last = min(s.start for s in shifts), max(s.end for s in shifts)
        return min(people_hours, benches * max(0, last - max(first, moment)) / 60)

    def bench_hours(self, day: int) -> float | None:
        """Bench-hours of a day's inoculation shifts [h]; None when benches are not limited."""
        shifts = self.on(day, "inoculate")
        benches = self.farm.limits.inoculation_benches
        if benches is None or not shifts:
            return None
        return benches * (max(s.end for s in shifts) - min(s.start for s in shifts)) / 60

    def inoculation_days(self, cooled: float, bags: int) -> tuple[int, int] | None:
        """First and last day index on which bags that are cool at a moment may be inoculated; None if there is none."""
        first = self.clock.day_index(cooled)
        needed = bags / self.farm.rates.inoculate_bags_h
        if not self.on(first, "inoculate") or self.inoculation_hours_left(first, int(cooled)) < needed - 1e-9:
            first = self.next_day_with("inoculate", first + 1)
        deadline = cooled + 60 * self.farm.limits.cooled_to_inoculate_h
        last = self._last_inoculation_day(deadline)
        return (first, last) if last is not None and first <= last else None

    def _last_inoculation_day(self, deadline: float) -> int | None:
        day = self.clock.day_index(deadline)
        for index in range(min(day, self.days - 1), max(day - 60, -1), -1):
            shifts = self.on(index, "inoculate")
            if shifts and max(shift.end for shift in shifts) <= deadline:
                return index
        return None
