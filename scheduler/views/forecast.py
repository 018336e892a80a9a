"""How a forecast looks: weeks with their range against the orders, the chance of each order, what could still help."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from rich.console import Console

from models.farm import Farm
from scheduler.forecast import Forecast, OrderChance, WeekRange
from scheduler.views.screen import Screen

AT_RISK = 0.8
"""An order less likely to be filled than this is at risk [-]."""
MOST_SHOWN = 20
BAR = 28


def forecast_document(farm: Farm, found: Forecast) -> dict[str, Any]:
    """The forecast as one JSON document, ``bagweek/forecast/1``; kilograms, chances 0 to 1."""
    return {
        "schema": "bagweek/forecast/1",
        "farm": farm.site.name,
        "draws": found.draws,
        "seed": found.seed,
        "weeks": [
            {
                "week": str(one.week),
                "strain": one.strain,
                "planned": round(one.planned, 3),
                "mean": round(one.mean, 3),
                "p10": round(one.p10, 3),
                "p50": round(one.p50, 3),
                "p90": round(one.p90, 3),
                "ordered": round(one.ordered, 3),
            }
            for one in found.weeks
        ],
        "orders": [
            {
                "customer": one.customer,
                "strain": one.strain,
                "week": str(one.week),
                "day": one.day.isoformat(),
                "kg": round(one.kg, 3),
                "planned_kg": round(one.planned_kg, 3),
                "mean_kg": round(one.mean_kg, 3),
                "chance_filled": round(one.chance, 4),
            }
            for one in found.orders
        ],
        "helps_from": {code: None if week is None else str(week) for code, week in found.helps_from.items()},
        "assumptions": list(found.assumptions),
    }


def show_forecast(console: Console, farm: Farm, found: Forecast) -> None:
    """Print a forecast."""
    screen = Screen(console)
    weeks = list(dict.fromkeys(one.week for one in found.weeks))
    span = f"{weeks[0]} to {weeks[-1]}" if weeks else "no weeks"
    screen.title(f"{farm.site.name}: what the harvest may be, {span}")
    for strain in farm.strain:
        rows = [one for one in found.weeks if one.strain == strain.code]
        if rows:
            _strain(screen, strain.code, strain.name, rows)
    _orders(screen, found)
    screen.heading("How it was drawn")
    screen.wrapped(f"{found.draws:,} seasons from seed {found.seed}; the same seed gives the same forecast.")
    for note in found.assumptions:
        screen.wrapped(note, "- ", "dim")


def _strain(screen: Screen, code: str, name: str, rows: Sequence[WeekRange]) -> None:
    screen.heading(f"{code}{f', {name}' if name else ''}: kg picked a week")
    top = max(max(one.p90, one.ordered) for one in rows) or 1.0
    screen.line(f"{'week':<9}{'planned':>8}{'mean':>8}{'P10':>7}{'P50':>7}{'P90':>7}   P10 to P90, o ordered", "dim")
    for one in rows:
        screen.line(
            f"{one.week!s:<9}{one.planned:>8.1f}{one.mean:>8.1f}{one.p10:>7.1f}{one.p50:>7.1f}{one.p90:>7.1f}"
            f"   {_bar(screen, one, top)}"
        )


def _bar(screen: Screen, one: WeekRange, top: float) -> str:
    """The range from P10 to P90 as a bar with its middle, and the orders as a mark, on a scale to ``top``."""

    def place(kg: float) -> int:
        return min(BAR - 1, round(kg / top * (BAR - 1)))

    cells = [" "] * BAR
    line, middle = ("=", "#") if screen.ascii_only else ("━", "┃")
    for column in range(place(one.p10), place(one.p90) + 1):
        cells[column] = line
    cells[place(one.p50)] = middle
    if one.ordered > 0:
        cells[place(one.ordered)] = "o"
    return "".join(cells).rstrip()


def _orders(screen: Screen, found: Forecast) -> None:
    if not found.orders:
        return
    risky = sorted((one for one in found.orders if one.chance < AT_RISK), key=lambda one: (one.day, one.chance))
    filled = len(found.orders) - len(risky)
    screen.heading("Chance that each order is filled")
    screen.wrapped(
        f"{filled} of {len(found.orders)} deliveries are filled with a chance of {AT_RISK:.0%} or more."
        + (" At risk, the soonest first:" if risky else "")
    )
    if risky:
        screen.line(
            f"{'day':<12}{'customer':<24}{'strain':<8}{'ordered':>8}{'planned':>9}{'mean':>7}{'chance':>8}", "dim"
        )
    for one in risky[:MOST_SHOWN]:
        screen.line(
            f"{one.day!s:<12}{one.customer[:22]:<24}{one.strain:<8}{one.kg:>8.1f}{one.planned_kg:>9.1f}"
            f"{one.mean_kg:>7.1f}{one.chance:>8.0%}",
            "yellow" if one.chance < 0.5 else "",
        )
    if len(risky) > MOST_SHOWN:
        screen.line(f"and {len(risky) - MOST_SHOWN} more; --json has them all", "dim")
    if risky:
        _help(screen, found, risky)


def _help(screen: Screen, found: Forecast, risky: Sequence[OrderChance]) -> None:
    screen.heading("What could still be changed")
    for code in dict.fromkeys(one.strain for one in risky):
        mine = [one for one in risky if one.strain == code]
        first = found.helps_from[code]
        if first is None:
            screen.wrapped(f"{code}: nothing started now can be picked within the plan.", "- ")
            continue
        late = [one for one in mine if one.week >= first]
        early = [one for one in mine if one.week < first]
        words = f"{code}: a bag made from now on is picked in {first} at the earliest."
        if early:
            words += (
                f" Before that only what stands in the rooms can fill {len(early)} of these: keep a flush longer, open"
                " sooner, agree on another strain or a smaller delivery, or buy in."
            )
        if late:
            words += f" For {len(late)} of them more bags still help; bagweek plan --sure 0.9 says how many."
        screen.wrapped(words, "- ")
