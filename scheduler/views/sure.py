"""How planning for a chance looks: what is kept ready, what it costs, and which orders it cannot make sure."""

from __future__ import annotations

from typing import Any

from rich.console import Console

from models.farm import Farm
from scheduler.sure import SurePlan
from scheduler.views.screen import Screen

MOST_SHOWN = 15


def sure_document(safety: SurePlan) -> dict[str, Any]:
    """What planning for a chance found, as a part of ``bagweek/plan/1``."""
    before = {(one.order, one.day): one.chance for one in safety.plain_forecast.orders}
    return {
        "chance": safety.wanted,
        "rounds": safety.rounds,
        "cost": round(safety.cost, 2) + 0.0,
        "margins": [
            {"strain": code, "week": str(week), "share": round(margin.share, 4), "days": margin.days}
            for (code, week), margin in sorted(safety.margins.items())
        ],
        "orders": [
            {"customer": one.customer, "strain": one.strain, "week": str(one.week), "day": one.day.isoformat(),
             "kg": round(one.kg, 3), "chance_before": round(before[one.order, one.day], 4),
             "chance_filled": round(one.chance, 4)}
            for one in safety.forecast.orders
        ],
        "unreachable": len(safety.unreachable),
    }  # fmt: skip


def show_sure(console: Console, farm: Farm, safety: SurePlan) -> None:
    """Print what the safety is and costs."""
    screen = Screen(console)
    orders, before = safety.forecast.orders, {(o.order, o.day): o.chance for o in safety.plain_forecast.orders}
    screen.heading(f"Planned for a chance of {safety.wanted:.0%}")
    good = sum(one.chance >= safety.wanted for one in orders)
    was = sum(chance >= safety.wanted for chance in before.values())
    screen.wrapped(
        f"{good} of {len(orders)} deliveries have it, {was} without the safety. It costs {safety.cost:,.2f}"
        f" {farm.site.currency}, bags that are made for the bad seasons; {safety.rounds} plans were made."
    )
    for code in dict.fromkeys(code for code, _ in sorted(safety.margins)):
        mine = [margin for (strain, _), margin in safety.margins.items() if strain == code]
        shares, days = [one.share for one in mine], max(one.days for one in mine)
        weeks = f"{len(mine)} week{'s' * (len(mine) != 1)}"
        words = f"{code}: in {weeks} {min(shares):.0%} to {max(shares):.0%} more is kept ready than delivered"
        screen.wrapped(f"{words}, picked up to {days} days ahead." if days else f"{words}.", "- ")
    if not safety.unreachable:
        return
    screen.line()
    screen.wrapped(
        "These stay below it. Where a new bag comes too late, no plan can help; elsewhere rooms, hands and whole loads"
        " allow no more:"
    )
    screen.line(f"{'day':<12}{'customer':<24}{'strain':<8}{'kg':>7}{'before':>9}{'now':>7}   a new bag from", "dim")
    for one in safety.unreachable[:MOST_SHOWN]:
        first = safety.forecast.helps_from[one.strain]
        screen.line(
            f"{one.day!s:<12}{one.customer[:22]:<24}{one.strain:<8}{one.kg:>7.1f}"
            f"{before[one.order, one.day]:>9.0%}{one.chance:>7.0%}   {first or 'never'}"
        )
    if len(safety.unreachable) > MOST_SHOWN:
        screen.line(f"and {len(safety.unreachable) - MOST_SHOWN} more; --json has them all", "dim")
