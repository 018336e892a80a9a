"""Puts the whole model of a problem together."""

from __future__ import annotations

from scheduler.planning.hands import add_hands
from scheduler.planning.opening import add_opening
from scheduler.planning.places import add_places
from scheduler.planning.problem import Problem
from scheduler.planning.sales import add_sales
from scheduler.planning.stock_and_flow import StockAndFlow
from scheduler.planning.unavoidable import unavoidable_kilograms


def build_model(problem: Problem) -> StockAndFlow:
    """Columns and rows for every decision and limit of a problem, except those of `seldom`.

    The site's supply and the heat of rooms take many rows that seldom bind; they are added where a solution breaks
    them.
    """
    flow = StockAndFlow(problem)
    flow.add_runs()
    flow.add_filling()
    flow.add_inoculation()
    add_opening(flow)
    flow.add_fruiting_stock()
    add_places(flow)
    add_sales(flow, unavoidable_kilograms(problem))
    add_hands(flow)
    return flow
