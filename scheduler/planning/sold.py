"""Who gets what: deliveries, split fairly where they come short, and what goes to the spot market."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import timedelta

from models.plan import Delivery, Surplus
from scheduler.planning.engine import FloatArray
from scheduler.planning.problem import OrderDay
from scheduler.planning.stock_and_flow import StockAndFlow
from scheduler.planning.unavoidable import unavoidable_kilograms

DUST = 1e-7


def deliveries_of(flow: StockAndFlow, values: FloatArray) -> tuple[Delivery, ...]:
    """What every order line gets on every delivery day, in order of day and row."""
    problem = flow.problem
    unavoidable = unavoidable_kilograms(problem)
    served: dict[int, dict[int, float]] = {}
    for (index, strain, _), column in flow.columns.serve.items():
        parts = served.setdefault(index, {})
        parts[strain] = parts.get(strain, 0.0) + max(0.0, float(values[column]))
    _split_fairly(problem.order_days, unavoidable, served)
    found = []
    for index, (item, lost) in enumerate(zip(problem.order_days, unavoidable, strict=True)):
        parts = {strain: kg for strain, kg in served.get(index, {}).items() if kg >= DUST}
        kg = sum(parts.values())
        kg = item.kg if kg > item.kg - DUST * len(parts) - DUST else kg
        short = item.kg - kg
        order = problem.orders[item.order]
        instead = {problem.strains[strain].code: part for strain, part in parts.items() if strain != item.strain}
        day = problem.clock.first_day + timedelta(days=item.day)
        found.append(
            Delivery(item.order, order.customer, order.strain, day, item.kg, kg, short, min(lost, short), instead)
        )
    return tuple(sorted(found, key=lambda d: (d.day, d.order)))


def _split_fairly(items: Sequence[OrderDay], lost: Sequence[float], served: dict[int, dict[int, float]]) -> None:
    """Share what comes short between customers who are alike: same strain, day, price and priority, parts taken.

    Each gets the same share of what it ordered; money and kilograms stay.
    """
    alike: dict[tuple[object, ...], list[int]] = {}
    for index, item in enumerate(items):
        if item.part and not item.accepts and lost[index] <= DUST:
            alike.setdefault((item.strain, item.day, item.price, item.penalty), []).append(index)
    for (strain, *_), members in alike.items():
        assert isinstance(strain, int)  # noqa: S101  (the key begins with it)
        given = sum(served.get(index, {}).get(strain, 0.0) for index in members)
        wanted = sum(items[index].kg for index in members)
        if len(members) > 1 and DUST < given < wanted - DUST:
            for index in members:
                served[index] = {strain: given * items[index].kg / wanted}


def surplus_of(flow: StockAndFlow, values: FloatArray) -> tuple[Surplus, ...]:
    """Spot sales by strain and day, at both prices."""
    first = flow.problem.clock.first_day
    sold: dict[tuple[int, int], list[float]] = {}
    for (strain, day, week, step), column in flow.columns.spot.items():
        if values[column] > DUST:
            kilograms = sold.setdefault((max(day, 7 * week), strain), [0.0, 0.0])
            kilograms[0] += float(values[column])
            kilograms[1] += float(values[column]) if step == 1 else 0.0
    return tuple(
        Surplus(flow.problem.strains[strain].code, first + timedelta(days=day), kg, 0.0, lower)
        for (day, strain), (kg, lower) in sorted(sold.items())
    )
