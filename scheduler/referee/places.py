"""Places: bags in every room on every night, cooling places by day."""

from __future__ import annotations

from collections import defaultdict
from datetime import date, timedelta

from scheduler.referee.case import Case


def check_places(case: Case) -> None:
    """Recount the rooms; what passes the places must be listed as a shortfall, to the bag."""
    nights = _nights(case)
    listed: dict[tuple[str, date], float] = defaultdict(float)
    for item in case.plan.shortfalls:
        if item.limit.startswith("places "):
            listed[item.limit.removeprefix("places "), item.day] += item.amount
    for room in case.farm.room:
        if room.kind == "cooling":
            continue
        standing = 0
        for offset in range(case.days):
            day = case.first + timedelta(days=offset)
            standing += nights[room.code, day]
            over = listed.pop((room.code, day), 0.0)
            case.at_most("places", f"{room.code} on {day}", standing - over, room.places, "bags", slack=0.0)
            if over:
                case.equal("places", f"{room.code} on {day}, shortfall", over, standing - room.places, "bags", 1e-6)
            case.expect("places", f"{room.code} on {day}", standing >= 0, standing, "at least 0", "bags")
    for (code, day), amount in listed.items():
        case.fail(
            "places", f"{code} on {day}", f"a shortfall of {amount:g}", "shortfalls of rooms and days of the plan"
        )
    _cooling(case)


def _nights(case: Case) -> dict[tuple[str, date], int]:
    """Change of the bags in each room by day; what stood there before counts on the first day."""
    change: dict[tuple[str, date], int] = defaultdict(int)

    def add(code: str, day: date, bags: int) -> None:
        if code and day <= case.last:
            change[code, max(day, case.first)] += bags

    for event in case.plan.inoculations:
        add(event.room, event.day, event.bags)
        add(event.room, event.ready_day, -event.lost)
    for holding in case.plan.holdings:
        add(holding.room, holding.day, holding.bags)
        if not holding.before:
            add(holding.from_room, holding.day, -holding.bags)
    for opening in case.plan.openings:
        clean = case.farm.room_called(opening.room).clean_days
        add(opening.room, opening.day, opening.bags)
        add(opening.room, opening.leave_day + timedelta(days=clean), -opening.bags)
        if not opening.before:
            add(opening.from_room, opening.day, -opening.bags)
    for discard in case.plan.discards:
        add(discard.room, discard.day, -discard.bags)
    return change


def _cooling(case: Case) -> None:
    rooms = case.farm.rooms_of("cooling")
    if not rooms:
        return
    places = sum(room.places for room in rooms)
    unloaded = {run.code: case.local(run.unload).date() for run in case.plan.runs}
    come: dict[date, int] = defaultdict(int)
    gone: dict[date, int] = defaultdict(int)
    for lot in case.plan.lots:
        if lot.run:
            come[unloaded[lot.run]] += lot.bags
        elif case.stock_lots[lot.code].stage == "cooled":
            come[case.first] += lot.bags
    for event in case.plan.inoculations:
        if not event.before:
            gone[event.day] += event.bags
    for discard in case.plan.discards:
        if not discard.room:
            gone[discard.day] += discard.bags
    standing = 0
    for offset in range(case.days):
        day = case.first + timedelta(days=offset)
        standing += come[day]
        if come[day]:
            case.at_most("cooling-places", f"on {day}", standing, places, "bags", slack=0.0)
        standing -= gone[day]
        case.expect("cooling-places", f"on {day}", standing >= 0, standing, "at least 0", "bags")
