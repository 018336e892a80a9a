"""A plan against the whiteboard rule: it must earn at least as much, and the rule's plan must be sound to compare."""

from __future__ import annotations

import pytest

from models.calendar import Week
from models.farm import Farm, Order
from models.plan import MONEY_LINES
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.referee import referee
from tests.benchmarks.farms import FIRST_WEEK, random_farm, random_shape
from tests.benchmarks.whiteboard import whiteboard_plan
from tests.planning.tiny import every_day, friday, strain, tiny

START = Week.parse("2027-W03")
WEEKS = 4


def sentences(farm, orders, stock, plan):
    return [item.sentence() for item in referee(farm, orders, stock, plan).violations]


def paper() -> tuple[Farm, list[Order]]:
    """One flush, 1 kg a bag, nothing lost: what the rule does can be counted by hand."""
    return tiny(strain=[strain()]), [friday(8.0, first_week=START.plus(2))]


def two_strains() -> tuple[Farm, list[Order]]:
    """A drum for two strains that lose bags, with more ordered than it can steam."""
    crews = [
        {"code": "yard", "people": 1, "skills": ["mix", "steam"], "shift": every_day(), "cost_per_h": 12},
        {"code": "lab", "people": 1, "skills": ["inoculate", "open", "pick"], "shift": every_day(), "cost_per_h": 12},
    ]
    cards = [
        strain(loss_pct=5, ready_wait_days=3, flush_share=[0.7, 0.3]),
        strain("BBB", loss_pct=10, ready_wait_days=3, colonise_days=12),
    ]
    farm = tiny(strain=cards, crew=crews, market={"shortage_per_kg": 2, "spot_kg_week": 5})
    return farm, [friday(15.0, first_week=START.plus(3)), friday(20.0, 12.0, "BBB", first_week=START.plus(4))]


@pytest.mark.parametrize("make", [paper, two_strains])
def test_a_plan_earns_at_least_what_the_whiteboard_does(make) -> None:
    farm, orders = make()
    board = whiteboard_plan(farm, orders, [], START, WEEKS)
    assert not sentences(farm, orders, [], board)
    assert board.runs
    plan = plan_weeks(farm, orders, [], START, WEEKS, limits=SolveLimits(gap=0.02, seconds=8))
    # The bound holds for both plans; what the plan may lack of it is its gap.
    assert plan.report.bound >= board.money.total - 0.01
    slack = plan.report.gap * max(abs(plan.report.bound), plan.money.sales)
    assert plan.money.total >= board.money.total - slack - 0.01


@pytest.mark.parametrize("seed", [14, 29])
def test_the_referee_accepts_the_whiteboard(seed: int) -> None:
    farm, orders, stock = random_farm(seed)
    board = whiteboard_plan(farm, orders, stock, FIRST_WEEK, random_shape(seed).weeks)
    assert not sentences(farm, orders, stock, board)
    assert board.money.sales > 0


def test_the_whiteboard_on_paper() -> None:
    """8 kg each Friday from week 3 on are 8 bags, loaded on the Monday two weeks before; week 3 is the first it can."""
    farm, orders = paper()
    board = whiteboard_plan(farm, orders, [], START, 4)
    assert not sentences(farm, orders, [], board)
    assert {tuple(run.bags.items()) for run in board.runs} == {(("AAA", 8),)}
    assert [item.kg for item in board.deliveries] == pytest.approx([8.0] * len(board.deliveries))
    assert board.money.shortage == 0.0
    assert sum(getattr(board.money, line) for line in MONEY_LINES) == pytest.approx(board.money.total)
