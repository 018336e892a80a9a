"""What is still free on a farm, day by day: places, hours, benches, heat and power; booked piece by piece.

A ledger on paper: bookings only go up, and what is booked once stays booked. Bags that will be lost are booked as if
they stayed, so that nothing booked here can be too much later.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from math import ceil, floor

import numpy as np

from models.farm import SKILLS, Room, Strain
from models.growth.colonisation import colonisation_days
from models.growth.heat import heat_curve
from scheduler.planning.network import Arc
from scheduler.planning.problem import Problem

COOLING = "cooling rooms together"
QUARTER_MIN = 15
DUST = 1e-9
Need = tuple[str, int, float]
"""Skill, day index, hours [h]."""


class Ledger:
    """Free places, hours, heat and power of a farm on each day of a plan."""

    def __init__(self, problem: Problem) -> None:
        farm = problem.farm
        self.problem = problem
        self.days = problem.days
        self.free = {room.code: np.full(self.days, room.places) for room in farm.room if room.kind != "cooling"}
        cooling = farm.rooms_of("cooling")
        self.free[COOLING] = np.full(self.days, sum(room.places for room in cooling) if cooling else 10**9)
        self.watts = {
            room.code: np.full(self.days, room.cooling_w)
            for room in farm.rooms_of("colonisation")
            if room.cooling_w is not None
        }
        self.booked: dict[tuple[str, int], dict[str, float]] = defaultdict(lambda: defaultdict(float))
        self._hours: dict[tuple[str, int], float] = {}
        self._bench: dict[int, float] = {}
        able = {skill: [crew for crew in farm.crew if skill in crew.skills] for skill in SKILLS}
        self._able = {
            skill: [crew.code for crew in sorted(crews, key=lambda crew: len(crew.skills))]
            for skill, crews in able.items()
        }
        self._power: dict[int, float] = defaultdict(float)
        for crew in farm.crew:
            for day in range(self.days):
                span = crew.shift_on(problem.clock.day(day))
                if span is not None:
                    start, end = (problem.clock.minute(problem.clock.day(day), at) for at in span)
                    self._hours[crew.code, day] = (end - start) / 60 * crew.people
        if farm.limits.inoculation_benches is not None:
            for day in range(self.days):
                shifts = problem.shifts.on(day, "inoculate")
                if shifts:
                    length = max(s.end for s in shifts) - min(s.start for s in shifts)
                    self._bench[day] = farm.limits.inoculation_benches * length / 60

    # --- places -----------------------------------------------------------------------------------------------------

    def places(self, room: str, first: int, until: int) -> int:
        """Places free in a room on every day from one day to the day before another [bags]."""
        span = self.free[room][max(0, first) : max(first + 1, min(until, self.days))]
        return max(0, int(span.min())) if len(span) else 10**9

    def stand(self, room: str, first: int, until: int, bags: int) -> None:
        """Book places from one day to the day before another."""
        self.free[room][max(0, first) : max(0, min(until, self.days))] -= bags

    def split(self, rooms: Sequence[Room], first: int, until: int, bags: int) -> list[tuple[Room, int]]:
        """Bags over rooms in order, as far as there are places."""
        parts = []
        for room in rooms:
            part = min(bags, self.places(room.code, first, until))
            if part > 0:
                parts.append((room, part))
                bags -= part
        return parts

    # --- heat -------------------------------------------------------------------------------------------------------

    def cool_bags(self, strain: Strain, room: Room, day: int) -> int:
        """Bags of a strain whose heat a room can still carry off when they are set in on a day [bags]."""
        if room.code not in self.watts:
            return 10**9
        left = self.watts[room.code]
        fits = [
            floor(left[day + after] / watts + DUST)
            for after, watts in enumerate(self._curve(strain, room))
            if watts > 0 and 0 <= day + after < self.days
        ]
        return max(0, min(fits, default=10**9))

    def warm(self, strain: Strain, room: Room, day: int, bags: int) -> None:
        """Book the heat of bags set into a room on a day."""
        if room.code in self.watts:
            for after, watts in enumerate(self._curve(strain, room)):
                if 0 <= day + after < self.days:
                    self.watts[room.code][day + after] -= bags * watts

    def _curve(self, strain: Strain, room: Room) -> list[float]:
        wet_kg = self.problem.farm.bag_of(strain).wet_kg
        return [wet_kg * heat for heat in heat_curve(strain, colonisation_days(strain, room.temp_c))]

    # --- hours ------------------------------------------------------------------------------------------------------

    def hours_left(self, skill: str, day: int) -> float:
        """Person-hours that crews with a skill still have on a day [h]."""
        hours = sum(self._hours.get((crew, day), 0.0) for crew in self._crews(skill))
        return max(0.0, min(hours, self._bench.get(day, hours)) if skill == "inoculate" else hours)

    def hands(self, needs: Sequence[Need], bags: int) -> int:
        """At most how many bags the hours left allow, for the needs of one; shared crews may allow fewer."""
        for skill, day, hours in needs:
            if day < self.days and bags:
                bags = min(bags, floor(self.hours_left(skill, day) / hours + DUST))
        return bags

    def work(self, needs: Sequence[Need], *, force: bool = False) -> bool:
        """Book hours, all of them or (False) none; ``force`` books them even where nobody has them."""
        done: list[tuple[str, str, int, float]] = []
        for skill, day, hours in needs:
            if day >= self.days:
                continue
            left = hours
            if skill == "inoculate" and day in self._bench and self._bench[day] < hours - DUST and not force:
                left = -1.0
            for crew in self._crews(skill):
                part = min(left, self._hours.get((crew, day), 0.0))
                if part > 0:
                    self._book(skill, crew, day, part)
                    done.append((skill, crew, day, part))
                    left -= part
            if left < 0 or (left > DUST and not force):
                for undo in done:
                    self._book(*undo[:3], -undo[3])
                return False
        return True

    def _book(self, skill: str, crew: str, day: int, hours: float) -> None:
        self._hours[crew, day] -= hours
        self.booked[skill, day][crew] += hours
        if skill == "inoculate" and day in self._bench:
            self._bench[day] -= hours

    def _crews(self, skill: str) -> list[str]:
        """Crews with a skill, those with the fewest skills first."""
        return self._able[skill]

    # --- power ------------------------------------------------------------------------------------------------------

    def draw(self, arc: Arc) -> bool:
        """Book the power of a run, if the site's supply allows it."""
        site = self.problem.farm.site
        if site.supply_kw is None:
            return True
        spare = site.supply_kw - site.base_load_kw
        slots: dict[int, float] = {}
        for quarter, kw in enumerate(arc.kw_by_quarter):
            start = arc.steam_on + QUARTER_MIN * quarter
            for slot in range(start // QUARTER_MIN, ceil((start + QUARTER_MIN) / QUARTER_MIN)):
                slots[slot] = max(slots.get(slot, 0.0), kw)
        if any(self._power[slot] + kw > spare + DUST for slot, kw in slots.items()):
            return False
        for slot, kw in slots.items():
            self._power[slot] += kw
        return True
