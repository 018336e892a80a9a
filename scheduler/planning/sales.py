"""Ripe kilograms to order days within shelf life, to the spot market, or left on the bag.

Each order day is served straight from the pick days whose mushrooms are still good, so that freshness needs no stock
to be followed. With the whole season known, only what is sold is picked; the rest spoils unpicked.
"""

from __future__ import annotations

from collections.abc import Sequence

from scheduler.planning.stock_and_flow import StockAndFlow

Sold = dict[tuple[int, int], list[tuple[int, float]]]
"""By strain and pick day: columns that sell of it, with the ripe kilograms that each kilogram takes [-]."""


def add_sales(flow: StockAndFlow, unavoidable: Sequence[float]) -> None:
    """Columns for kilograms from each pick day to each order day and to the spot; rows for what is ripe and wanted."""
    matrix, columns = flow.matrix, flow.columns
    spoilage = flow.problem.farm.market.spoilage_per_kg
    sold: Sold = {key: [] for key in flow.ripe}
    for index, lost in enumerate(unavoidable):
        _add_order_day(flow, index, lost, sold)
    _add_spot(flow, sold)
    for (strain, day), ripe in sorted(flow.ripe.items()):
        terms = sold[strain, day]
        if terms:
            columns.picked[strain, day] = [column for column, _ in terms]
            matrix.row("ripe", day, terms + [(column, -kg) for column, kg in ripe], high=0.0)
        for column, kg in ripe:
            matrix.gain[column] -= kg * spoilage


def _add_order_day(flow: StockAndFlow, index: int, lost: float, sold: Sold) -> None:
    """What may serve an order day: its own strain, or one that the customer takes instead at a lower price."""
    problem, matrix, columns = flow.problem, flow.matrix, flow.columns
    market, item = problem.farm.market, problem.order_days[index]
    wanted = max(0.0, item.kg - lost)
    matrix.constant -= item.penalty * wanted
    served = []
    for strain in (item.strain, *item.accepts):
        price = item.price * (1.0 if strain == item.strain else market.substitute_price_share)
        margin = problem.margin(strain, item.day)
        for day in range(item.day - problem.selling_days(strain), item.day + 1 - margin.days):
            if (strain, day) in sold:
                column = matrix.column(gain=price + item.penalty + market.spoilage_per_kg)
                columns.serve[index, strain, day] = column
                sold[strain, day].append((column, 1.0 + margin.share))
                served.append((column, 1.0))
    if not served:
        return
    if not item.part:
        # Where some of it cannot be avoided to be short, none of it is delivered.
        filled = matrix.column(high=0.0 if lost > 0 else 1.0, whole=True)
        columns.filled[index] = filled
        matrix.row("order", index, [*served, (filled, -item.kg)], low=0.0, high=0.0)
        return
    if lost > 0:
        # What goes beyond the avoidable earns its price, but saves no shortage.
        served.append((matrix.column(gain=-item.penalty, high=min(item.kg, lost)), -1.0))
    matrix.row("order", index, served, high=wanted)


def _add_spot(flow: StockAndFlow, sold: Sold) -> None:
    """The spot market takes so much a week at one price, and so much more at a lower one."""
    problem, matrix = flow.problem, flow.matrix
    market = problem.farm.market
    weeks: dict[tuple[int, int], list[tuple[int, float]]] = {}
    for strain, day in sorted(flow.ripe):
        last = min(day + problem.selling_days(strain), problem.days - 1)
        for step, (share, most) in enumerate(market.spot_steps):
            price = share * problem.mean_price(strain) if most > 0 else 0.0
            for week in range(day // 7, last // 7 + 1) if price > 0 else ():
                spot = matrix.column(gain=price + market.spoilage_per_kg)
                flow.columns.spot[strain, day, week, step] = spot
                sold[strain, day].append((spot, 1.0))
                weeks.setdefault((week, step), []).append((spot, 1.0))
    for (week, step), terms in sorted(weeks.items()):
        matrix.row("spot, cheap" if step else "spot", week * 7, terms, high=market.spot_steps[step][1])
