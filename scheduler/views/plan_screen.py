"""How a plan looks in the terminal: weeks, strains, rooms, the first days, money, what limits.

Everything fits 80 columns; rules are quiet, numbers are aligned, colour only marks what comes short.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from zoneinfo import ZoneInfo

from rich.console import Console

from models.calendar import FarmClock
from models.farm import Farm, Order
from models.plan import MONEY_LINES, Plan
from scheduler.limits_seen import limit_sentence, uses
from scheduler.referee import Verdict
from scheduler.views.first_days import show_first_days
from scheduler.views.screen import Screen
from scheduler.weekly import WeekRow, weekly

STRAINS_A_BLOCK = 8
ROOMS_A_BLOCK = 4
MONEY_NAMES = {
    "sales": "sales to order",
    "spot": "spot sales",
    "shortage": "shortage",
    "materials": "substrate and bags",
    "spawn": "spawn",
    "energy": "steam electricity",
    "labour": "labour",
    "spoilage": "spoilage",
    "over_limits": "limits broken",
}


def show_plan(console: Console, farm: Farm, orders: Sequence[Order], plan: Plan, verdict: Verdict) -> None:
    """Print a plan.

    Parameters
    ----------
    console : Console
        Where to print.
    farm, orders
        What was planned for.
    plan : Plan
        The plan.
    verdict : Verdict
        What the referee found; a plan with violations is shown as unusable.
    """
    screen = Screen(console)
    clock = FarmClock(plan.first_day, ZoneInfo(farm.site.timezone))
    every = weekly(farm, orders, plan, clock)
    rows = every[: plan.weeks]
    screen.title(f"{farm.site.name}: {plan.weeks} week{'s' * (plan.weeks != 1)} from {plan.first_week}")
    if verdict.violations:
        _show_violations(screen, verdict)
    _show_weeks(screen, rows, farm.site.currency)
    _show_strains(screen, rows, farm)
    _show_rooms(screen, rows, farm)
    show_first_days(screen, farm, plan, clock)
    _show_short(screen, plan, rows)
    _show_instead(screen, plan, rows)
    _show_money(screen, farm, plan, rows)
    short = sum(row.short_kg - row.unavoidable_kg for row in rows)
    screen.heading("What limits")
    screen.wrapped(limit_sentence(uses(farm, plan, rows, clock), short))
    _show_proof(screen, plan, verdict)


def _show_violations(screen: Screen, verdict: Verdict) -> None:
    """Say that a plan must not be used, and why."""
    screen.line()
    screen.line(f"This plan breaks {len(verdict.violations)} rules and must not be used:", "bold red")
    for violation in verdict.violations[:20]:
        screen.wrapped(violation.sentence(), "  ", "red")


def blocks(items: Sequence[str], size: int) -> Iterable[Sequence[str]]:
    """Items in groups of a size."""
    for start in range(0, len(items), size):
        yield items[start : start + size]


def _show_weeks(screen: Screen, rows: Sequence[WeekRow], currency: str) -> None:
    screen.heading("Week by week")
    screen.line(
        f"{'week':<9}{'bags':>7}{'runs':>6}{'kg':>9}{'ordered':>9}{'short':>8}{'of it*':>8}{'hours':>9}"
        f"{'money ' + currency:>15}",
        "dim",
    )
    for row in rows:
        avoidable = row.short_kg - row.unavoidable_kg
        screen.line(_week_line(row), "yellow" if avoidable > 0.05 else "")
    total = WeekRow(rows[0].week)
    for row in rows:
        total.runs += row.runs
        total.orders_kg += row.orders_kg
        total.short_kg += row.short_kg
        total.unavoidable_kg += row.unavoidable_kg
        total.labour_h += row.labour_h
        total.money += row.money
    bags, kg = sum(sum(row.bags.values()) for row in rows), sum(sum(row.kg.values()) for row in rows)
    screen.line(_numbers("in all", bags, total, kg), "bold")
    if total.unavoidable_kg > 0.05:
        screen.line("* ordered before the first kilogram could be ripe: no plan could help", "dim")


def _week_line(row: WeekRow) -> str:
    return _numbers(str(row.week), sum(row.bags.values()), row, sum(row.kg.values()))


def _numbers(name: str, bags: int, row: WeekRow, kg: float) -> str:
    short = f"{row.short_kg:,.1f}" if row.short_kg > 0.05 else "-"
    unavoidable = f"{row.unavoidable_kg:,.1f}" if row.unavoidable_kg > 0.05 else "-"
    return (
        f"{name:<9}{bags:>7,}{row.runs:>6,}{kg:>9,.1f}{row.orders_kg:>9,.1f}{short:>8}{unavoidable:>8}"
        f"{row.labour_h:>9,.1f}{row.money:>15,.0f}"
    )


def _show_strains(screen: Screen, rows: Sequence[WeekRow], farm: Farm) -> None:
    used = [strain.code for strain in farm.strain if any(row.bags[strain.code] or row.kg[strain.code] for row in rows)]
    for codes in blocks(used, STRAINS_A_BLOCK):
        screen.heading("Bags to make, by strain" + (f" ({codes[0]} to {codes[-1]})" if len(used) > len(codes) else ""))
        screen.line(f"{'week':<9}" + "".join(f"{code:>8}" for code in codes), "dim")
        for row in rows:
            screen.line(f"{row.week!s:<9}" + "".join(_cell(row.bags[code]) for code in codes))


def _cell(bags: int) -> str:
    return f"{bags:>8,}" if bags else f"{'-':>8}"


def _show_rooms(screen: Screen, rows: Sequence[WeekRow], farm: Farm) -> None:
    places = {room.code: room.places for room in farm.room if room.kind != "cooling"}
    cooling = farm.rooms_of("cooling")
    if cooling:
        places["cooling"] = sum(room.places for room in cooling)
    for codes in blocks(list(places), ROOMS_A_BLOCK):
        screen.heading("Fullest night of each week, bags and share of places")
        screen.line(f"{'week':<9}" + "".join(f"{code:>7} of {places[code]:<7}" for code in codes), "dim")
        for row in rows:
            cells = []
            for code in codes:
                bags = row.room_peak.get(code, 0)
                filled = min(8, round(8 * bags / places[code]))
                cells.append(f"{bags:>7} {screen.full * filled + screen.empty * (8 - filled)} ")
            screen.line(f"{row.week!s:<9}" + "".join(cells))


def _show_short(screen: Screen, plan: Plan, rows: Sequence[WeekRow]) -> None:
    weeks = {row.week for row in rows}
    last = max(week.plus(1).monday for week in weeks)
    short = [item for item in plan.deliveries if item.short_kg > 0.05 and item.day < last]
    if not short and not plan.shortfalls:
        return
    screen.heading("What comes short")
    for item in short:
        could = item.short_kg - item.unavoidable_kg
        why = "ordered before the first kilogram could be ripe" if could <= 0.05 else "not worth, or not possible, more"
        screen.line(f"{item.day}  {item.customer[:22]:<22} {item.strain:<6} {item.short_kg:>7.1f} of "
                    f"{item.ordered_kg:.1f} kg")  # fmt: skip
        screen.line(f"            {why}", "dim")
    for fall in plan.shortfalls:
        screen.line(f"{fall.day}  {fall.limit}: over by {fall.amount:,.1f} {fall.unit}", "yellow")


def _show_instead(screen: Screen, plan: Plan, rows: Sequence[WeekRow]) -> None:
    last = rows[-1].week.plus(1).monday
    found = [item for item in plan.deliveries if sum(item.instead.values()) > 0.05 and item.day < last]
    if found:
        screen.heading("Given instead of what was ordered")
    for item in found:
        others = ", ".join(f"{kg:.1f} kg {code}" for code, kg in item.instead.items())
        screen.line(f"{item.day}  {item.customer[:22]:<22} {item.strain:<6} {others}")


def _show_money(screen: Screen, farm: Farm, plan: Plan, rows: Sequence[WeekRow]) -> None:
    screen.heading(f"Money, {farm.site.currency}")
    for line in MONEY_LINES:
        value = getattr(plan.money, line)
        if abs(value) >= 0.005:
            screen.line(f"  {MONEY_NAMES[line]:<30}{value:>16,.2f}")
    ahead = plan.look_ahead_weeks
    screen.line(f"  {'over ' + str(plan.weeks + ahead) + ' weeks':<30}{plan.money.total:>16,.2f}", "bold")
    screen.line(f"  {'booked in the ' + str(plan.weeks) + ' weeks':<30}{sum(row.money for row in rows):>16,.2f}")
    screen.wrapped(
        f"The {ahead} weeks behind those asked for are planned too, so that bags made late are sold.", "  ", "dim"
    )


def _show_proof(screen: Screen, plan: Plan, verdict: Verdict) -> None:
    report = plan.report
    screen.heading("How good it is")
    screen.wrapped(
        f"Within {100 * report.gap:.2f} % of the best possible: {report.objective:,.2f} earned, no plan can earn"
        f" more than {report.bound:,.2f}. Stopped: {report.stop}, after {report.seconds:.1f} s."
    )
    broken = "no rule broken" if not verdict.violations else f"{len(verdict.violations)} rules broken"
    screen.wrapped(f"Recomputed by the referee: {verdict.checked:,} checks, {broken}.")
    for note in plan.assumptions:
        screen.wrapped("Assumed: " + note, "", "dim")
    screen.wrapped(
        "A plan is no safety control and no sterilisation record: steam, pressure and mains power need a competent"
        " person, the maker's instructions and the local codes.", "", "dim",
    )  # fmt: skip
