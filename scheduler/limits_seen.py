"""What limits a plan, as far as its own use of places and hours shows it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from models.calendar import FarmClock
from models.farm import Farm
from models.plan import Plan
from scheduler.weekly import WeekRow

FULL = 0.95
HALF_DAY = 0.5


@dataclass(frozen=True, slots=True)
class Use:
    """How far one resource is used over the asked weeks: a share of what it could do [-]."""

    name: str
    share: float


def uses(farm: Farm, plan: Plan, rows: Sequence[WeekRow], clock: FarmClock) -> tuple[Use, ...]:
    """Use of every room (mean of weekly peaks), crew (hours) and steriliser (hours between load and empty).

    Parameters
    ----------
    rows : sequence of WeekRow
        The asked weeks.

    Returns
    -------
    tuple of Use
        Fullest first.
    """
    weeks = len(rows)
    found = []
    for room in farm.room:
        if room.kind != "cooling":
            mean = sum(row.room_peak.get(room.code, 0) for row in rows) / weeks
            found.append(Use(f"places in {room.code}", mean / room.places))
    cooling = farm.rooms_of("cooling")
    if cooling:
        mean = sum(row.room_peak.get("cooling", 0) for row in rows) / weeks
        found.append(Use("cooling places", mean / sum(room.places for room in cooling)))
    days = 7 * weeks
    worked: dict[str, float] = {}
    for work in plan.labour:
        if (work.day - plan.first_day).days < days:
            worked[work.crew] = worked.get(work.crew, 0.0) + work.hours
    for crew in farm.crew:
        spans = [crew.shift_on(clock.day(day)) for day in range(days)]
        hours = sum((span[1] - span[0]) / 60 * crew.people for span in spans if span)
        if hours:
            found.append(Use(f"hours of crew {crew.code}", worked.get(crew.code, 0.0) / hours))
    for steriliser in farm.steriliser:
        busy = sum(
            run.unloaded - run.load_start
            for run in plan.runs
            if run.steriliser == steriliser.code and run.load_start < 1440 * days
        )
        found.append(Use(f"time of steriliser {steriliser.code}", busy / (1440 * days * steriliser.count)))
    return tuple(sorted(found, key=lambda use: (-use.share, use.name)))


def limit_sentence(found: Sequence[Use], short_kg: float) -> str:
    """Say in one sentence what limits the plan; read from use, not from prices."""
    first = found[0]
    following = found[1] if len(found) > 1 else first
    ranking = f"{first.name} at {first.share:.0%}, then {following.name} at {following.share:.0%}"
    if short_kg <= 0.005 and first.share < FULL:
        return f"Orders bind: all that can be sold is made; fullest are {ranking}."
    if first.share >= FULL:
        return f"Most used: {ranking}. More of the first is the thing to try."
    return f"No single room or crew is full all the time; fullest are {ranking}."
