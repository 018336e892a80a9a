"""Picks into deliveries within shelf life, spot sales, and the money they bring."""

from __future__ import annotations

from collections.abc import Sequence

from scheduler.planning.stock_and_flow import StockAndFlow


def add_sales(flow: StockAndFlow, unavoidable: Sequence[float]) -> None:
    """Columns for picked, delivered and spot kilograms; rows for what is ripe, fresh and wanted.

    With the whole season known, only what is sold is picked: the rest is left on the bag and counts as spoiled.
    """
    problem, matrix, columns = flow.problem, flow.matrix, flow.columns
    market = problem.farm.market
    delivered: dict[tuple[int, int], list[int]] = {}
    for item, lost in zip(problem.order_days, unavoidable, strict=True):
        within = matrix.column(gain=item.price + item.penalty, high=max(0.0, item.kg - lost))
        beyond = matrix.column(gain=item.price, high=min(item.kg, lost))
        columns.deliver.append((within, beyond))
        delivered.setdefault((item.strain, item.day), []).extend((within, beyond))
        matrix.constant -= item.penalty * max(0.0, item.kg - lost)
    spot_weeks: dict[int, list[tuple[int, float]]] = {}
    for strain in sorted({s for s, _ in flow.ripe} | {item.strain for item in problem.order_days}):
        price = problem.spot_price(strain) if market.spot_kg_week > 0 else 0.0
        ripe_days = {day for s, day in flow.ripe if s == strain}
        days = sorted(ripe_days | {day for s, day in delivered if s == strain})
        before: int | None = None
        for day in days:
            state = matrix.column()
            terms = [(state, 1.0), *((column, 1.0) for column in delivered.get((strain, day), ()))]
            if day in ripe_days:
                pick = matrix.column(gain=market.spoilage_per_kg)
                columns.pick[strain, day] = pick
                ripe = flow.ripe[strain, day]
                matrix.row("ripe", day, [(pick, 1.0), *((column, -kg) for column, kg in ripe)], high=0.0)
                for column, kg in ripe:
                    matrix.gain[column] -= kg * market.spoilage_per_kg
                terms.append((pick, -1.0))
                if price > 0:
                    spot = matrix.column(gain=price)
                    columns.spot[strain, day] = spot
                    spot_weeks.setdefault(day // 7, []).append((spot, 1.0))
                    terms.append((spot, 1.0))
            if before is not None:
                terms.append((before, -1.0))
            matrix.row("picked", day, terms, low=0.0, high=0.0)
            _add_freshness(flow, strain, day, days, state)
            before = state
    for week, terms in sorted(spot_weeks.items()):
        matrix.row("spot", week * 7, terms, high=market.spot_kg_week)


def _add_freshness(flow: StockAndFlow, strain: int, day: int, days: Sequence[int], state: int) -> None:
    """What is kept past a day was picked recently enough to be sold on the next day that matters."""
    life = flow.problem.strains[strain].shelf_life_days
    following = next((other for other in days if other > day), flow.problem.days)
    recent = [
        (flow.columns.pick[strain, earlier], -1.0)
        for earlier in range(max(0, following - life), day + 1)
        if (strain, earlier) in flow.columns.pick
    ]
    flow.matrix.row("fresh", day, [(state, 1.0), *recent], high=0.0)
