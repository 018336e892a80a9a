"""Farms small enough to enumerate: the plan earns what the best of all plans earns.

The tiny farm with two strains in one drum of three places. AAA stays 7 nights on the colonisation shelf and 7 in
fruiting, BBB 14 and 7, so a load of week k sells AAA in week k + 2 and BBB in week k + 3; three shelf places tie the
weeks together. Runs of N weeks are enumerated as every split (a, b) with a + b <= 3 in every week; fruiting places,
hours and cooling are wide.
"""

from __future__ import annotations

import itertools
import random

import pytest

from models.calendar import Week
from models.farm import Farm, Order
from scheduler.planning import SolveLimits, plan_weeks
from tests.planning.tiny import strain, tiny

START = Week.parse("2027-W03")
PLACES = 3
SPLITS = [(a, b) for a in range(PLACES + 1) for b in range(PLACES + 1 - a)]


def farm_of(shelf: int, costs: tuple[float, float]) -> Farm:
    rooms = [
        {"code": "cool", "kind": "cooling", "places": 50, "temp_c": 15},
        {"code": "shelf", "kind": "colonisation", "places": shelf, "temp_c": 22},
        {"code": "wet", "kind": "fruiting", "places": 50, "temp_c": 15},
    ]
    drum = {
        "code": "drum", "places": PLACES, "element_kw": 4, "loads": [1.0], "unload_below_c": 70, "vent_min": 0,
        "generator_water_kg": 10, "loss_w_per_k": 2,
    }  # fmt: skip
    strains = [
        strain("AAA", spawn_cost_per_kg=costs[0]),
        strain("BBB", spawn_cost_per_kg=costs[1], colonise_days=14),
    ]
    return tiny(
        room=rooms, steriliser=[drum], strain=strains, market={"shortage_per_kg": 2, "spot_kg_week": 0},
    )  # fmt: skip


def best_by_enumeration(
    weeks: int, shelf: int, costs: tuple[float, float], orders: dict[tuple[str, int], tuple[float, float]]
) -> float:
    """Money of the best plan of so many weeks (asked and look-ahead): dynamic programming over all splits.

    The state is the number of BBB bags of the week before, which still stand on the shelf.
    """

    def sold(code: str, week: int, kg: float) -> float:
        ordered, price = orders.get((code, week), (0.0, 0.0))
        first = {"AAA": 2, "BBB": 3}[code]
        given = min(kg, ordered)
        # A shortage before the first kilogram can be ripe is unavoidable and costs nothing.
        penalty = 2.0 * (ordered - given) if week >= first else 0.0
        return given * price - penalty

    bag_cost = [1.0 + 0.1 * cost for cost in costs]  # 2 kg x 0.50; spawn 5 % of 2 kg
    states = {0: 0.0}
    for week in range(weeks):
        following: dict[int, float] = {}
        for (a, b), (before, money) in itertools.product(SPLITS, states.items()):
            # Wednesday night of this week: this week's bags and the BBB of the week before.
            if a + b + before > shelf:
                continue
            if (a and week + 2 >= weeks) or (b and week + 3 >= weeks):
                continue
            earned = money - a * bag_cost[0] - b * bag_cost[1]
            earned += sold("AAA", week + 2, a) if week + 2 < weeks else 0.0
            earned += sold("BBB", week + 3, b) if week + 3 < weeks else 0.0
            following[b] = max(following.get(b, float("-inf")), earned)
        states = following
    early = sum(sold("AAA", week, 0.0) for week in range(2)) + sum(sold("BBB", week, 0.0) for week in range(3))
    return max(states.values()) + early


@pytest.mark.parametrize("seed", range(50))
def test_plan_earns_what_enumeration_finds(seed: int) -> None:
    chance = random.Random(seed)  # noqa: S311  (test data)
    shelf = chance.choice([3, 4, 5])
    costs = (chance.choice([0.0, 10.0, 40.0]), chance.choice([0.0, 10.0, 40.0]))
    asked = 3
    book: list[Order] = []
    orders: dict[tuple[str, int], tuple[float, float]] = {}
    for code, week in itertools.product(("AAA", "BBB"), range(2, 9)):
        kg, price = float(chance.choice([0, 1, 1, 2, 3])), float(chance.choice([3, 5, 8, 13]))
        if kg:
            orders[code, week] = (kg, price)
            only = START.plus(week)
            row = {"customer": "Inn", "strain": code, "weekday": "fri", "kg": kg, "price_per_kg": price}
            book.append(Order.model_validate(row | {"first_week": only, "last_week": only}))
    plan = plan_weeks(farm_of(shelf, costs), book, [], START, asked, limits=SolveLimits(gap=1e-7, seconds=30))
    best = best_by_enumeration(len(plan.all_weeks), shelf, costs, orders)
    scale = max(abs(plan.report.bound), plan.money.sales)
    assert plan.report.objective <= best + 1e-6
    assert plan.report.objective >= best - plan.report.gap * scale - 1e-4
    assert plan.report.bound >= best - 1e-4
    assert plan.report.gap <= 1e-4
