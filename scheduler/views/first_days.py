"""The first two weeks of a plan by day: runs, inoculation, opening, picking, discarding."""

from __future__ import annotations

from datetime import date, timedelta

from models.calendar import FarmClock
from models.farm import Farm
from models.plan import Plan, Run
from scheduler.views.screen import Screen

DAYS = 14


def show_first_days(screen: Screen, farm: Farm, plan: Plan, clock: FarmClock) -> None:
    """Print what is to be done on each of the first days; days without work are left out."""
    screen.heading("The first two weeks, day by day")
    for offset in range(min(DAYS, 7 * plan.weeks)):
        day = plan.first_day + timedelta(days=offset)
        notes = [*_runs(farm, plan, clock, day), *_bags(plan, day)]
        if not notes:
            continue
        screen.line(f"{day:%a} {day.day} {day:%b}", "bold")
        for note in notes:
            screen.wrapped(note, "    ")


def _runs(farm: Farm, plan: Plan, clock: FarmClock, day: date) -> list[str]:
    notes = []
    for run in plan.runs:
        unit = f"{run.steriliser} {run.unit}" if farm.steriliser_called(run.steriliser).count > 1 else run.steriliser
        if clock.at(run.unload).date() == day:
            notes.append(f"{_clock(clock, run.unload)} unload {run.code} from {unit}; cool {_when(clock, run, day)}")
        if clock.at(run.load_start).date() == day:
            notes.append(
                f"{_clock(clock, run.mix_start)} mix, {_clock(clock, run.load_start)} load {run.code} into {unit}:"
                f" {_counts(run.bags)}; steam on {_clock(clock, run.steam_on)}, {run.programme},"
                f" ready {clock.at(run.ready):%a %H:%M}"
            )
    return notes


def _when(clock: FarmClock, run: Run, day: date) -> str:
    cooled = clock.at(run.cooled)
    return f"by {cooled:%H:%M}" if cooled.date() == day else f"by {cooled:%a %H:%M}"


def _clock(clock: FarmClock, minute: int) -> str:
    return f"{clock.at(minute):%H:%M}"


def _counts(bags: dict[str, int]) -> str:
    return ", ".join(f"{count} {code}" for code, count in bags.items())


def _bags(plan: Plan, day: date) -> list[str]:
    strain_of = {lot.code: lot.strain for lot in plan.lots}
    notes = []
    started: dict[str, int] = {}
    for event in plan.inoculations:
        if event.day == day and not event.before:
            started[f"{event.lot} into {event.room}"] = started.get(f"{event.lot} into {event.room}", 0) + event.bags
    notes += [f"inoculate {bags} of {what}" for what, bags in started.items()]
    notes += [
        f"move {holding.bags} of {holding.lot} to {holding.room}"
        for holding in plan.holdings
        if holding.day == day and not holding.before
    ]
    opened: dict[tuple[str, str, int], int] = {}
    kg: dict[str, float] = {}
    spent: dict[str, int] = {}
    for opening in plan.openings:
        if opening.day == day and not opening.before:
            key = (opening.lot, opening.room, opening.flushes)
            opened[key] = opened.get(key, 0) + opening.bags
        for pick in opening.picks:
            if pick.day == day and pick.kg > 0.05:
                code = strain_of[opening.lot]
                kg[code] = kg.get(code, 0.0) + pick.kg
        if opening.leave_day == day:
            spent[opening.room] = spent.get(opening.room, 0) + opening.bags
    notes += [
        f"open {bags} of {lot} in {room}, for {flushes} flush{'es' * (flushes > 1)}"
        for (lot, room, flushes), bags in opened.items()
    ]
    if kg:
        notes.append("pick " + ", ".join(f"{value:.1f} kg {code}" for code, value in sorted(kg.items())))
    notes += [f"discard {bags} spent bags from {room}" for room, bags in spent.items()]
    notes += [f"discard {item.bags} of {item.lot} unopened" for item in plan.discards if item.day == day]
    return notes
