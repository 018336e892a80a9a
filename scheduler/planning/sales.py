"""Ripe kilograms to order days within shelf life, to the spot market, or left on the bag.

Each order day is served straight from the pick days whose mushrooms are still good, so that freshness needs no stock
to be followed. With the whole season known, only what is sold is picked; the rest spoils unpicked.
"""

from __future__ import annotations

from collections.abc import Sequence

from scheduler.planning.stock_and_flow import StockAndFlow


def add_sales(flow: StockAndFlow, unavoidable: Sequence[float]) -> None:
    """Columns for kilograms from each pick day to each order day and to the spot; rows for what is ripe and wanted."""
    problem, matrix, columns = flow.problem, flow.matrix, flow.columns
    market = problem.farm.market
    sold: dict[tuple[int, int], list[int]] = {key: [] for key in flow.ripe}
    for index, (item, lost) in enumerate(zip(problem.order_days, unavoidable, strict=True)):
        wanted = max(0.0, item.kg - lost)
        matrix.constant -= item.penalty * wanted
        life = problem.selling_days(item.strain)
        served = []
        for day in range(item.day - life, item.day + 1):
            if (item.strain, day) in sold:
                column = matrix.column(gain=item.price + item.penalty + market.spoilage_per_kg)
                columns.serve[index, day] = column
                sold[item.strain, day].append(column)
                served.append(column)
        if served:
            terms = [(column, 1.0) for column in served]
            if lost > 0:
                # What goes beyond the avoidable earns its price, but saves no shortage.
                beyond = matrix.column(gain=-item.penalty, high=min(item.kg, lost))
                terms.append((beyond, -1.0))
            matrix.row("order", index, terms, high=wanted)
    spot_weeks: dict[int, list[tuple[int, float]]] = {}
    for (strain, day), ripe in sorted(flow.ripe.items()):
        price = problem.spot_price(strain) if market.spot_kg_week > 0 else 0.0
        last = min(day + problem.selling_days(strain), problem.days - 1)
        for week in range(day // 7, last // 7 + 1) if price > 0 else ():
            spot = matrix.column(gain=price + market.spoilage_per_kg)
            columns.spot[strain, day, week] = spot
            sold[strain, day].append(spot)
            spot_weeks.setdefault(week, []).append((spot, 1.0))
        terms = [(column, 1.0) for column in sold[strain, day]]
        if terms:
            columns.picked[strain, day] = sold[strain, day]
            matrix.row("ripe", day, terms + [(column, -kg) for column, kg in ripe], high=0.0)
        for column, kg in ripe:
            matrix.gain[column] -= kg * market.spoilage_per_kg
    for week, terms in sorted(spot_weeks.items()):
        matrix.row("spot", week * 7, terms, high=market.spot_kg_week)
