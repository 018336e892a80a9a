"""Hands: hours by skill and day, shifts, benches."""

from __future__ import annotations

from collections import defaultdict
from datetime import date

from scheduler.referee.case import Case


def check_labour(case: Case) -> None:
    """Recount the hours of every day and hold them against those listed and the shifts."""
    needed = _needed(case)
    worked: dict[tuple[str, date], float] = defaultdict(float)
    by_crew: dict[tuple[str, date], float] = defaultdict(float)
    crews = {crew.code: crew for crew in case.farm.crew}
    for item in case.plan.labour:
        crew = crews[item.crew]
        where = f"{item.crew} on {item.day}, {item.skill}"
        case.expect("labour", where, item.skill in crew.skills, item.skill, f"one of {crew.skills}")
        case.expect("labour", where, item.hours >= 0 and case.inside(item.day), item.hours, "hours in the plan")
        worked[item.skill, item.day] += item.hours
        by_crew[item.crew, item.day] += item.hours
    over: dict[tuple[str, date], float] = defaultdict(float)
    for fall in case.plan.shortfalls:
        if fall.limit.startswith("labour "):
            over[fall.limit.removeprefix("labour "), fall.day] += fall.amount
    for key in {*needed, *worked, *over}:
        skill, day = key
        case.equal("labour", f"{skill} on {day}", worked[key] + over[key], needed[key], "h")
    for (code, day), hours in by_crew.items():
        span = crews[code].shift_on(day)
        shift = 0.0 if span is None else (case.moment(day, span[1]) - case.moment(day, span[0])) / 60
        case.at_most("labour", f"crew {code} on {day}", hours, shift * crews[code].people, "h")
    benches = case.farm.limits.inoculation_benches
    if benches is not None:
        for (skill, day), hours in needed.items():
            if skill == "inoculate":
                spans = case.shifts(day, "inoculate")
                length = max((end for _, _, end in spans), default=0) - min((start for _, start, _ in spans), default=0)
                case.at_most("benches", f"on {day}", hours - over[skill, day], benches * length / 60, "h")


def _needed(case: Case) -> dict[tuple[str, date], float]:
    rates, plan = case.farm.rates, case.plan
    hours: dict[tuple[str, date], float] = defaultdict(float)

    def add(skill: str, day: date, amount: float, rate: float) -> None:
        if amount and case.inside(day):
            hours[skill, day] += amount / rate

    for run in plan.runs:
        bags = sum(run.bags.values())
        loaded = case.local(run.load_start).date()
        add("mix", loaded, bags, rates.mix_bags_h)
        add("steam", loaded, bags, rates.load_bags_h)
        add("steam", case.local(run.unload).date(), bags, rates.unload_bags_h)
    for event in plan.inoculations:
        if not event.before:
            add("inoculate", event.day, event.bags, rates.inoculate_bags_h)
    for opening in plan.openings:
        if not opening.before:
            add("open", opening.day, opening.bags, rates.open_bags_h)
        add("open", opening.leave_day, opening.bags, rates.discard_bags_h)
        for pick in opening.picks:
            add("pick", pick.day, pick.kg, rates.pick_kg_h)
    return hours
