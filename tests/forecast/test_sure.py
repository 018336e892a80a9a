"""Planning for a chance ends when it is told to, with the best so far."""

from __future__ import annotations

from dataclasses import replace

import pytest

from models.calendar import Week
from models.plan import Plan
from scheduler.errors import NoPlanError
from scheduler.forecast import Forecast, forecast
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.sure import Margins, plan_surely
from tests.planning.tiny import friday, strain, tiny

FARM, ORDERS = tiny(strain=[strain(yield_cv=0.4)]), [friday(8.0)]


def make(margins: Margins) -> Plan:
    limits = SolveLimits(gap=0.01, seconds=20)
    return plan_weeks(FARM, ORDERS, [], Week.parse("2027-W03"), 4, limits=limits, margins=margins)


def draw(plan: Plan) -> Forecast:
    return forecast(FARM, ORDERS, [], plan, draws=500)


def test_an_interrupted_plan_is_the_last() -> None:
    calls = []

    def interrupted(margins: Margins) -> Plan:
        calls.append(margins)
        plan = make(margins)
        return replace(plan, report=replace(plan.report, stop="interrupted"))

    found = plan_surely(0.95, interrupted, draw)
    assert (len(calls), found.rounds) == (1, 1)


@pytest.mark.parametrize("error", [KeyboardInterrupt, NoPlanError])
def test_a_later_plan_that_fails_keeps_the_best(error: type[BaseException]) -> None:
    plans = []

    def failing(margins: Margins) -> Plan:
        if plans:
            raise error
        plans.append(make(margins))
        return plans[0]

    found = plan_surely(0.95, failing, draw)
    assert found.plan is plans[0]
    assert found.cost == 0


def test_margins_never_make_the_orders_less_sure() -> None:
    found = plan_surely(0.9, make, draw)
    lacking = [
        sum(max(0.0, 0.9 - one.chance) for one in each.orders) for each in (found.plain_forecast, found.forecast)
    ]
    assert lacking[1] <= lacking[0]
