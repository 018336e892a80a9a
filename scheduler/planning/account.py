"""What a followed plan sells, works and earns."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import timedelta

from models.farm import Farm
from models.plan import (
    Account,
    CrewHours,
    Delivery,
    FlushPick,
    Inoculation,
    Opening,
    Run,
    Shortfall,
    Surplus,
)
from scheduler.planning.columns import SLACK_HOUR_PRICE, SLACK_PLACE_PRICE
from scheduler.planning.engine import FloatArray
from scheduler.planning.rooms import Housed
from scheduler.planning.seldom import heat_limit
from scheduler.planning.stock_and_flow import StockAndFlow

DUST = 1e-7


def picked_openings(
    flow: StockAndFlow, values: FloatArray, housed: Housed, lot_strain: dict[str, str]
) -> tuple[Opening, ...]:
    """Openings with the kilograms that are picked of each flush: by strain and day, the planned total, in order."""
    left = {
        key: max(0.0, float(sum(values[column] for column in members))) for key, members in flow.columns.picked.items()
    }
    codes = {strain.code: k for k, strain in enumerate(flow.problem.strains)}
    opened = []
    for opening in housed.openings:
        strain = codes[lot_strain[opening.lot]]
        picks: list[FlushPick] = []
        for pick in opening.picks:
            day = (pick.day - flow.problem.clock.first_day).days
            kg = min(pick.ripe_kg, left.get((strain, day), 0.0))
            kg = 0.0 if kg < DUST else kg
            if (strain, day) in left:
                left[strain, day] -= kg
            picks.append(replace(pick, kg=kg))
        opened.append(replace(opening, picks=tuple(picks)))
    return tuple(opened)


def hours_of(flow: StockAndFlow, values: FloatArray) -> tuple[CrewHours, ...]:
    """Hours by crew, skill and day."""
    first, crews = flow.problem.clock.first_day, flow.problem.farm.crew
    return tuple(
        CrewHours(first + timedelta(days=day), crews[crew].code, skill, float(values[column]))
        for (crew, skill, day), column in sorted(flow.columns.hours.items(), key=lambda item: (item[0][2], item[0]))
        if values[column] > DUST
    )


def shortfalls_of(flow: StockAndFlow, values: FloatArray, housed: Housed) -> tuple[Shortfall, ...]:
    """Limits that the opening stock breaks: bags over a room's places by day, heat, hours over the shifts."""
    first = flow.problem.clock.first_day
    found = []
    for room in flow.problem.farm.room:
        for day, bags in enumerate(housed.occupancy.get(room.code, ())):
            if bags > room.places:
                over = float(bags - room.places)
                found.append(Shortfall(f"places {room.code}", first + timedelta(days=day), over, "places"))
    for index, pool in enumerate(flow.problem.colony_pools):
        if pool.cooling_w is not None:
            for day, watts in enumerate(flow.problem.stock_heat(index)):
                if watts > pool.cooling_w + DUST:
                    over = watts - pool.cooling_w
                    found.append(Shortfall(heat_limit(pool), first + timedelta(days=day), over, "W"))
    for (name, day), column in flow.columns.over.items():
        if name.startswith("labour") and values[column] > DUST:
            found.append(Shortfall(name, first + timedelta(days=day), float(values[column]), "h"))
    return tuple(sorted(found, key=lambda s: (s.day, s.limit)))


def account_of(
    farm: Farm,
    flow: StockAndFlow,
    runs: Sequence[Run],
    inoculations: Sequence[Inoculation],
    openings: Sequence[Opening],
    deliveries: Sequence[Delivery],
    surplus: Sequence[Surplus],
    labour: Sequence[CrewHours],
    shortfalls: Sequence[Shortfall],
    lot_strain: dict[str, str],
) -> Account:
    """The money of a plan by line [currency]."""
    orders, market = flow.problem.orders, farm.market
    mean_price = {strain.code: flow.problem.mean_price(k) for k, strain in enumerate(farm.strain)}
    wage = {crew.code: crew.cost_per_h for crew in farm.crew}
    materials = spawn = 0.0
    for run in runs:
        for code, bags in run.bags.items():
            strain = farm.strain_called(code)
            bag = farm.bag_of(strain)
            materials += bags * (bag.wet_kg * farm.recipe_of(strain).price_per_kg + bag.cost)
    for event in inoculations:
        if not event.before:
            strain = farm.strain_called(lot_strain[event.lot])
            kg = event.bags * farm.bag_of(strain).wet_kg * strain.spawn_rate_pct / 100
            spawn += kg * strain.spawn_cost_per_kg
    left = sum(pick.ripe_kg - pick.kg for opening in openings for pick in opening.picks)
    spoiled = left + sum(item.spoiled_kg for item in surplus)
    shortage = sum(
        (item.short_kg - item.unavoidable_kg) * market.shortage_per_kg / orders[item.order].priority
        for item in deliveries
    )
    prices = {"h": SLACK_HOUR_PRICE, "places": SLACK_PLACE_PRICE, "W": 0.0}
    over = sum(item.amount * prices[item.unit] for item in shortfalls)
    return Account(
        sales=sum(
            (item.kg - (1 - market.substitute_price_share) * sum(item.instead.values()))
            * orders[item.order].price_per_kg
            for item in deliveries
        ),
        spot=sum(
            mean_price[item.strain]
            * ((item.spot_kg - item.cheap_kg) * market.spot_price_share + item.cheap_kg * market.spot_more_price_share)
            for item in surplus
        ),
        shortage=-shortage,
        materials=-materials,
        spawn=-spawn,
        energy=-sum(run.energy_cost for run in runs),
        labour=-sum(item.hours * wage[item.crew] for item in labour),
        spoilage=-spoiled * market.spoilage_per_kg,
        over_limits=-over,
    )
