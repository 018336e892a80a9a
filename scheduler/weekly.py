"""A plan by ISO week: bags made, runs, kilograms, places, hours and money."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from datetime import date, timedelta

from models.calendar import FarmClock, Week
from models.farm import Farm, Order
from models.plan import Plan


@dataclass
class WeekRow:
    """One week of a plan.

    Attributes
    ----------
    bags, kg : dict
        By strain code: bags loaded [bags] and kilograms picked [kg].
    runs : int
        Runs loaded.
    orders_kg, short_kg, unavoidable_kg : float
        Ordered, short, and short whatever is done [kg].
    room_peak : dict
        By room code: the most bags in it on any night; cooling rooms together, as ``cooling`` [bags].
    labour_h : float
        Hours worked [h].
    money : float
        Money booked in the week: sales and spot less all costs [currency].
    """

    week: Week
    bags: dict[str, int] = field(default_factory=dict)
    kg: dict[str, float] = field(default_factory=dict)
    runs: int = 0
    orders_kg: float = 0.0
    short_kg: float = 0.0
    unavoidable_kg: float = 0.0
    room_peak: dict[str, int] = field(default_factory=dict)
    labour_h: float = 0.0
    money: float = 0.0


def mean_prices(farm: Farm, orders: Sequence[Order]) -> dict[str, float]:
    """Mean order price by strain, weighted by kg; 0 without orders [currency/kg]."""
    prices = {}
    for strain in farm.strain:
        rows = [order for order in orders if order.strain == strain.code]
        kg = sum(order.kg for order in rows)
        prices[strain.code] = sum(order.kg * order.price_per_kg for order in rows) / kg if kg else 0.0
    return prices


def weekly(farm: Farm, orders: Sequence[Order], plan: Plan, clock: FarmClock) -> tuple[WeekRow, ...]:
    """Sum a plan up by week, look-ahead weeks included.

    Parameters
    ----------
    farm, orders
        What the plan was made for.
    plan : Plan
        The plan.
    clock : FarmClock
        Turns its moments into dates.
    """
    rows = {week: WeekRow(week, {s.code: 0 for s in farm.strain}, {s.code: 0.0 for s in farm.strain})
            for week in plan.all_weeks}  # fmt: skip
    _add_making(farm, plan, clock, rows)
    _add_selling(farm, orders, plan, rows)
    for code, nights in room_nights(farm, plan, clock).items():
        for index, week in enumerate(plan.all_weeks):
            rows[week].room_peak[code] = max(nights[7 * index : 7 * index + 7], default=0)
    return tuple(rows[week] for week in plan.all_weeks)


def _add_making(farm: Farm, plan: Plan, clock: FarmClock, rows: dict[Week, WeekRow]) -> None:
    """Runs, bags, spawn and hours, each on its own day."""
    strain_of = {lot.code: lot.strain for lot in plan.lots}
    for run in plan.runs:
        here = rows[Week.of(clock.at(run.load_start).date())]
        here.runs += 1
        here.money -= run.energy_cost
        for code, bags in run.bags.items():
            strain = farm.strain_called(code)
            bag = farm.bag_of(strain)
            here.bags[code] += bags
            here.money -= bags * (bag.wet_kg * farm.recipe_of(strain).price_per_kg + bag.cost)
    for event in plan.inoculations:
        if not event.before:
            strain = farm.strain_called(strain_of[event.lot])
            kg = event.bags * farm.bag_of(strain).wet_kg * strain.spawn_rate_pct / 100
            rows[Week.of(event.day)].money -= kg * strain.spawn_cost_per_kg
    wages = {crew.code: crew.cost_per_h for crew in farm.crew}
    for work in plan.labour:
        here = rows[Week.of(work.day)]
        here.labour_h += work.hours
        here.money -= work.hours * wages[work.crew]
    for short in plan.shortfalls:
        rows[Week.of(short.day)].money -= short.amount * {"h": 1000.0, "W": 0.0}.get(short.unit, 100.0)


def _add_selling(farm: Farm, orders: Sequence[Order], plan: Plan, rows: dict[Week, WeekRow]) -> None:
    """Picks, deliveries and the spot market, each on its own day."""
    strain_of = {lot.code: lot.strain for lot in plan.lots}
    market = farm.market
    for opening in plan.openings:
        for pick in opening.picks:
            here = rows[Week.of(pick.day)]
            here.kg[strain_of[opening.lot]] += pick.kg
            here.money -= (pick.ripe_kg - pick.kg) * market.spoilage_per_kg
    for item in plan.deliveries:
        here = rows[Week.of(item.day)]
        here.orders_kg += item.ordered_kg
        here.short_kg += item.short_kg
        here.unavoidable_kg += item.unavoidable_kg
        order = orders[item.order]
        other = sum(item.instead.values())
        here.money += (item.kg - (1 - market.substitute_price_share) * other) * order.price_per_kg
        here.money -= (item.short_kg - item.unavoidable_kg) * market.shortage_per_kg / order.priority
    prices = mean_prices(farm, orders)
    for sale in plan.surplus:
        share = market.spot_price_share * (sale.spot_kg - sale.cheap_kg) + market.spot_more_price_share * sale.cheap_kg
        rows[Week.of(sale.day)].money += share * prices[sale.strain] - sale.spoiled_kg * market.spoilage_per_kg


def room_nights(farm: Farm, plan: Plan, clock: FarmClock) -> dict[str, list[int]]:
    """Bags in each room by night; cooling rooms together, as ``cooling`` [bags, by day]."""
    days = 7 * len(plan.all_weeks)
    first = plan.first_day
    change: dict[str, list[int]] = {room.code: [0] * (days + 1) for room in farm.room if room.kind != "cooling"}
    clean = {room.code: room.clean_days for room in farm.room}

    def move(code: str, start: date, end: date, bags: int) -> None:
        a, b = (min(max((day - first).days, 0), days) for day in (start, end))
        if code and a < b:
            change[code][a] += bags
            change[code][b] -= bags

    def leave(code: str, day: date, bags: int) -> None:
        if code:
            change[code][min(max((day - first).days, 0), days)] -= bags

    last = first + timedelta(days=days)
    for event in plan.inoculations:
        move(event.room, event.day, last, event.bags)
        leave(event.room, event.ready_day, event.lost)
    for holding in plan.holdings:
        move(holding.room, holding.day, last, holding.bags)
        if not holding.before:
            leave(holding.from_room, holding.day, holding.bags)
    for opening in plan.openings:
        move(opening.room, opening.day, opening.leave_day + timedelta(days=clean[opening.room]), opening.bags)
        if not opening.before:
            leave(opening.from_room, opening.day, opening.bags)
    for discard in plan.discards:
        leave(discard.room, discard.day, discard.bags)
    nights = {code: _running(values[:days]) for code, values in change.items()}
    if farm.rooms_of("cooling"):
        nights["cooling"] = _cooling(plan, clock, days)
    return nights


def _running(values: Iterable[int]) -> list[int]:
    total, sums = 0, []
    for value in values:
        total += value
        sums.append(total)
    return sums


def _cooling(plan: Plan, clock: FarmClock, days: int) -> list[int]:
    """Bags that cool or wait cooled, from the day of unloading to the day of inoculation, both included."""
    change = [0] * (days + 2)
    run_of = {lot.code: lot.run for lot in plan.lots}
    unloaded = {run.code: clock.day_index(run.unload) for run in plan.runs}
    gone = [(event.lot, event.day, event.bags) for event in plan.inoculations if not event.before]
    gone += [(discard.lot, discard.day, discard.bags) for discard in plan.discards if not discard.room]
    for lot, day, bags in gone:
        change[unloaded.get(run_of[lot], 0)] += bags
        change[min((day - plan.first_day).days, days - 1) + 1] -= bags
    return _running(change[:days])
