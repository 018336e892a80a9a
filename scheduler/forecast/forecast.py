"""The harvest forecast of a plan: weeks with their spread, the chance of each order, and what could still help."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date, timedelta

import numpy as np
from numpy.typing import NDArray

from models.calendar import Week
from models.farm import Farm, Order, StockLot
from models.growth.shelf_life import selling_days
from models.plan import Plan
from scheduler.forecast.harvest import draw_harvest
from scheduler.forecast.lots import lots_of
from scheduler.forecast.sharing import ENOUGH, Wanted, share
from scheduler.referee.case import Case
from scheduler.referee.earliest import first_ripe

DRAWS, SEED = 10_000, 1
BLOCK = 2_500
"""Seasons shared out at once, to keep memory small."""


@dataclass(frozen=True, slots=True)
class WeekRange:
    """Kilograms of a strain picked in a week: as planned, mean of all draws, percentiles, and what is ordered [kg]."""

    week: Week
    strain: str
    planned: float
    mean: float
    p10: float
    p50: float
    p90: float
    ordered: float


@dataclass(frozen=True, slots=True)
class OrderChance:
    """One delivery: what is ordered and planned [kg], what comes on average [kg], and the chance that it is filled [-].

    ``low_share`` is the share of the order that is reached in nine draws of ten [-].
    """

    order: int
    customer: str
    strain: str
    week: Week
    day: date
    kg: float
    planned_kg: float
    mean_kg: float
    chance: float
    low_share: float


@dataclass(frozen=True, slots=True)
class Forecast:
    """What the harvest may be over the asked weeks.

    ``helps_from`` is, by strain, the first week in which a bag that is not yet made can be picked.
    """

    draws: int
    seed: int
    weeks: tuple[WeekRange, ...]
    orders: tuple[OrderChance, ...]
    helps_from: dict[str, Week | None]
    assumptions: tuple[str, ...]


def forecast(
    farm: Farm,
    orders: Sequence[Order],
    stock: Sequence[StockLot],
    plan: Plan,
    *,
    draws: int = DRAWS,
    seed: int = SEED,
) -> Forecast:
    """Draw every lot of a plan and of the rooms many times.

    Parameters
    ----------
    farm, orders, stock
        What the plan was made for.
    plan : Plan
        The plan.
    draws, seed : int
        How many seasons are drawn, and from which seed; the same seed gives the same forecast.

    Returns
    -------
    Forecast
        Over the weeks asked for.

    Raises
    ------
    ValueError
        Fewer than 100 draws.
    """
    if draws < 100:
        raise ValueError(f"at least 100 draws were expected; found {draws}")
    case = Case(farm, tuple(orders), tuple(stock), plan)
    lots = lots_of(farm, tuple(stock), plan)
    next_pick = _next_pick(case)
    harvest = draw_harvest(farm, lots, next_pick, draws, seed)
    wanted = _wanted(farm, orders, plan)
    life = [selling_days(strain, farm.site.cold_store_c) for strain in farm.strain]
    given = [share(harvest.ripe[:, :, start : start + BLOCK], life, wanted) for start in range(0, draws, BLOCK)]
    filled = [np.concatenate([part[index] for part in given]) for index in range(len(wanted))]
    return Forecast(
        draws=draws,
        seed=seed,
        weeks=_weeks(farm, orders, plan, harvest.picked),
        orders=_orders(farm, orders, plan, wanted, filled),
        helps_from={strain.code: _helps(case, strain.code) for strain in farm.strain},
        assumptions=ASSUMPTIONS,
    )


ASSUMPTIONS = (
    "Bags are opened on the planned day, or when they are ready if that is later; they stay for their planned flushes.",
    "A flush that ripens on a day without a pick shift is picked on the next day with one.",
    "More may be picked for an order than planned, where more is ripe; hours of picking are not checked again.",
    "Times vary by lot, yields by farm, lot and bag, losses by lot; failed runs and closures are not in it.",
)


def _next_pick(case: Case) -> NDArray[np.int64]:
    days = np.full(case.days, case.days, dtype=np.int64)
    following = case.days
    for day in range(case.days - 1, -1, -1):
        if case.works(case.first + timedelta(days=day), "pick"):
            following = day
        days[day] = following
    return days


def _wanted(farm: Farm, orders: Sequence[Order], plan: Plan) -> list[Wanted]:
    codes = {strain.code: k for k, strain in enumerate(farm.strain)}
    found = []
    for row, order in enumerate(orders):
        for week in plan.all_weeks:
            day = order.day_in(week)
            if day is not None:
                accepts = tuple(codes[code] for code in order.accepts)
                number = (day - plan.first_day).days
                found.append(Wanted(row, codes[order.strain], number, order.kg, order.priority, accepts, order.part))
    return found


def _weeks(farm: Farm, orders: Sequence[Order], plan: Plan, picked: NDArray[np.float32]) -> tuple[WeekRange, ...]:
    strain_of = {lot.code: lot.strain for lot in plan.lots}
    planned: dict[tuple[str, Week], float] = {}
    for opening in plan.openings:
        for pick in opening.picks:
            key = (strain_of[opening.lot], Week.of(pick.day))
            planned[key] = planned.get(key, 0.0) + pick.kg
    found = []
    for number, week in enumerate(plan.asked_weeks):
        for k, strain in enumerate(farm.strain):
            kilograms = picked[k, number].astype(np.float64)
            ordered = sum(
                order.kg for order in orders if order.strain == strain.code and order.day_in(week) is not None
            )
            expected = planned.get((strain.code, week), 0.0)
            if expected <= 0 and ordered <= 0 and kilograms.max(initial=0.0) < 0.05:
                continue
            low, middle, high = np.percentile(kilograms, [10, 50, 90])
            found.append(
                WeekRange(
                    week,
                    strain.code,
                    expected,
                    float(kilograms.mean()),
                    float(low),
                    float(middle),
                    float(high),
                    ordered,
                )
            )
    return tuple(found)


def _orders(
    farm: Farm, orders: Sequence[Order], plan: Plan, wanted: Sequence[Wanted], filled: Sequence[NDArray[np.float32]]
) -> tuple[OrderChance, ...]:
    del farm
    planned = {(item.order, item.day): item.kg for item in plan.deliveries}
    last = plan.first_day + timedelta(weeks=plan.weeks)
    found = []
    for item, kilograms in zip(wanted, filled, strict=True):
        day = plan.first_day + timedelta(days=item.day)
        if day >= last:
            continue
        order = orders[item.order]
        got = kilograms.astype(np.float64)
        found.append(
            OrderChance(
                order=item.order,
                customer=order.customer,
                strain=order.strain,
                week=Week.of(day),
                day=day,
                kg=item.kg,
                planned_kg=planned.get((item.order, day), 0.0),
                mean_kg=float(got.mean()),
                chance=float((got >= ENOUGH * item.kg).mean()),
                low_share=float(np.percentile(got, 10) / item.kg),
            )
        )
    return tuple(sorted(found, key=lambda one: (one.day, one.order)))


def _helps(case: Case, code: str) -> Week | None:
    day = first_ripe(case, case.farm.strain_called(code))
    return Week.of(day) if day <= case.last else None
