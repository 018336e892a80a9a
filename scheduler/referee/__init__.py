"""The referee: walks a finished plan and recomputes every rule of ``docs/reference/plan-rules.md``.

It knows no solver and shares no code with the planner; only the physics of `models` is common ground.
"""

from __future__ import annotations

from collections.abc import Sequence

from models.farm import Farm, Order, StockLot
from models.plan import Plan
from scheduler.referee.bags import check_bags
from scheduler.referee.case import Case
from scheduler.referee.heat import check_heat
from scheduler.referee.labour import check_labour
from scheduler.referee.money import check_money
from scheduler.referee.places import check_places
from scheduler.referee.runs import check_runs
from scheduler.referee.sales import check_sales
from scheduler.referee.verdict import Verdict, Violation

__all__ = ["Verdict", "Violation", "referee"]


def referee(farm: Farm, orders: Sequence[Order], stock: Sequence[StockLot], plan: Plan) -> Verdict:
    """Recompute every rule of a plan.

    Parameters
    ----------
    farm, orders, stock
        The content of the farm folder that the plan was made for.
    plan : Plan
        The plan.

    Returns
    -------
    Verdict
        How many comparisons were made, and every violation. A malformed plan is a violation, never an exception.
    """
    case = Case(farm, tuple(orders), tuple(stock), plan)
    for check in (check_runs, check_bags, check_places, check_heat, check_labour, check_sales, check_money):
        try:
            check(case)
        except (KeyError, IndexError, ValueError, TypeError, AttributeError) as error:
            # The plan names something that does not exist; what it is stands in the error.
            case.fail(
                "malformed", check.__name__.removeprefix("check_"), f"{type(error).__name__}: {error}", "a sound plan"
            )
    return case.verdict()
