"""A working week that repeats for ever: no closed days, no clock changes. For capacities, not for plans."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import ceil

from models.farm import WEEKDAYS, Farm, Skill, Steriliser, span_minutes

DAY_MIN = 1440
SEARCH_DAYS = 21


@dataclass(frozen=True, slots=True)
class Shift:
    """One crew's shift on one day: minutes since the first Monday, and its people."""

    start: int
    end: int
    people: int


@dataclass(frozen=True, slots=True)
class Run:
    """One run of a steriliser in the repeating week: moments [min], and days a bag holds a cooling place [d]."""

    load: int
    steam_on: int
    ready: int
    unload: int
    unloaded: int
    cooling_days: int


class RepeatingWeek:
    """The shifts of a farm, week after week."""

    def __init__(self, farm: Farm) -> None:
        self.farm = farm

    def shifts(self, day: int, skill: Skill) -> list[Shift]:
        """Shifts of the crews with a skill on a day, counted from the first Monday."""
        name, zero = WEEKDAYS[day % 7], day * DAY_MIN
        return [
            Shift(zero + start, zero + end, crew.people)
            for crew in self.farm.crew
            if skill in crew.skills and name in crew.shift
            for start, end in [span_minutes(crew.shift[name])]
        ]

    def hours(self, skill: Skill) -> float:
        """Person-hours a week of the crews with a skill [h]."""
        return sum((one.end - one.start) * one.people for day in range(7) for one in self.shifts(day, skill)) / 60

    def days(self, skill: Skill) -> int:
        """Days a week with a shift of that skill."""
        return sum(bool(self.shifts(day, skill)) for day in range(7))

    def inoculation_hours(self, day: int, after: int = 0) -> float:
        """Hours of inoculation on a day after a moment [min], as crews and benches allow [h]."""
        shifts = self.shifts(day, "inoculate")
        hours = sum(max(0, one.end - max(one.start, after)) * one.people for one in shifts) / 60
        benches = self.farm.limits.inoculation_benches
        if benches is None or not shifts:
            return hours
        first, last = min(one.start for one in shifts), max(one.end for one in shifts)
        return min(hours, benches * max(0, last - max(first, after)) / 60)

    def inoculation_day(self, cooled: int, bags: int) -> int | None:
        """First day on which bags that are cool at a moment [min] can be inoculated in time; None if there is none."""
        day, needed = cooled // DAY_MIN, bags / self.farm.rates.inoculate_bags_h
        if self.inoculation_hours(day, cooled) < needed - 1e-9:
            day = next((d for d in range(day + 1, day + 9) if self.shifts(d, "inoculate")), day)
        ends = [one.end for one in self.shifts(day, "inoculate")]
        in_time = ends and max(ends) <= cooled + 60 * self.farm.limits.cooled_to_inoculate_h
        return day if in_time else None

    def runs(self, steriliser: Steriliser, ready_to_unload_min: int, cool_down_min: int, weeks: int) -> list[Run]:
        """Fill one steriliser again and again with full loads, each as early as it can be.

        Parameters
        ----------
        steriliser : Steriliser
            The steriliser.
        ready_to_unload_min, cool_down_min : int
            From steam on until the load may be taken out, and from unloaded until it is cool [min].
        weeks : int
            Weeks to look at; runs loaded in them are returned.

        Returns
        -------
        list of Run
            The runs in order; empty when no load can be mixed, loaded, unloaded and inoculated in time.
        """
        bags = steriliser.bags_at(steriliser.loads[-1])
        free = 0
        found: list[Run] = []
        while True:
            run = self._next_run(free, bags, ready_to_unload_min, cool_down_min)
            if run is None or run.load >= weeks * 7 * DAY_MIN:
                return found
            found.append(run)
            free = run.unloaded

    def _next_run(self, free: int, bags: int, ready_to_unload_min: int, cool_down_min: int) -> Run | None:
        for load, steam_on in self._loadings(free, bags):
            ready = steam_on + ready_to_unload_min
            unloading = self._unloading(ready, bags)
            if unloading is None:
                continue
            unload, unloaded = unloading
            day = self.inoculation_day(unloaded + cool_down_min, bags)
            if day is not None:
                return Run(load, steam_on, ready, unload, unloaded, day - unload // DAY_MIN + 1)
        return None

    def _loadings(self, free: int, bags: int) -> Iterator[tuple[int, int]]:
        """Earliest start and end of loading on each day from a moment on."""
        rates, limit = self.farm.rates, 60 * self.farm.limits.mix_to_steam_h
        for day in range(free // DAY_MIN, free // DAY_MIN + SEARCH_DAYS):
            found = []
            for mixer in self.shifts(day, "mix"):
                mix_min = _minutes(bags, rates.mix_bags_h, mixer.people)
                for loader in self.shifts(day, "steam"):
                    load_min = _minutes(bags, rates.load_bags_h, loader.people)
                    start = max(free, loader.start, mixer.start + mix_min)
                    if start <= mixer.end and start + load_min <= loader.end and mix_min + load_min <= limit:
                        found.append((start, start + load_min))
            if found:
                yield min(found)

    def _unloading(self, ready: int, bags: int) -> tuple[int, int] | None:
        for day in range(ready // DAY_MIN, ready // DAY_MIN + SEARCH_DAYS):
            spans = []
            for one in self.shifts(day, "steam"):
                start = max(ready, one.start)
                end = start + _minutes(bags, self.farm.rates.unload_bags_h, one.people)
                if end <= one.end:
                    spans.append((start, end))
            if spans:
                return min(spans)
        return None


def _minutes(bags: int, rate: float, people: int) -> int:
    return ceil(60 * bags / (rate * people) - 1e-9)


def clock(minute: int) -> str:
    """Write a moment as weekday and clock time.

    Examples
    --------
    >>> clock(450)
    'Mon 07:30'
    """
    return f"{WEEKDAYS[minute // DAY_MIN % 7].title()} {minute % DAY_MIN // 60:02d}:{minute % 60:02d}"
