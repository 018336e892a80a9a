"""Shortages that no plan can avoid: ordered before the first kilogram can be ripe."""

from __future__ import annotations

from scheduler.planning.problem import Problem


def first_kilogram_day(problem: Problem, strain: int) -> int:
    """Earliest day index on which a bag that is not yet made could be picked; the end of the plan if never."""
    rooms = problem.colony_pools_for(strain)
    inoculations = [arc.first_inoculation for arc in problem.arcs if strain in problem.kinds[arc.kind].strains]
    if not rooms or not inoculations:
        return problem.days
    ready = min(inoculations) + min(problem.ready_days(strain, pool) for pool in rooms)
    opened = problem.shifts.next_day_with("open", ready)
    return problem.shifts.next_day_with("pick", opened + problem.quickest_flush_day(strain, 1))


def stock_kilograms(problem: Problem, strain: int) -> list[tuple[int, float]]:
    """The most the opening stock can give: day index from which, and kilograms, in order of day."""
    kg = problem.flush_kg(strain)
    found: list[tuple[int, float]] = []
    for held in problem.stock.ready:
        if held.strain == strain:
            opened = problem.shifts.next_day_with("open", held.arrival)
            bags = held.lot.bags * (1 - held.loss_pct / 100) + (1 if held.loss_pct else 0)
            found += [(opened + problem.quickest_flush_day(strain, k + 1), bags * share) for k, share in enumerate(kg)]
    for open_lot in problem.stock.fruiting:
        if open_lot.strain == strain:
            pairs = zip(open_lot.flush_days, open_lot.flush_kg, strict=True)
            found += [(day, open_lot.lot.bags * share) for day, share in pairs]
    pools = problem.colony_pools_for(strain)
    if pools:
        quickest = min(problem.ready_days(strain, pool) for pool in pools)
        for waiting in problem.stock.cooled:
            if waiting.strain == strain and waiting.last_day is not None:
                start = problem.shifts.next_day_with("inoculate", 0)
                opened = problem.shifts.next_day_with("open", start + quickest)
                found += [
                    (opened + problem.quickest_flush_day(strain, k + 1), waiting.lot.bags * share)
                    for k, share in enumerate(kg)
                ]
    return sorted(found)


def unavoidable_kilograms(problem: Problem) -> tuple[float, ...]:
    """For each order day, the kilograms that cannot be delivered whatever is done [kg].

    All kilograms the stock can give by a day, whatever was sold of them before, serve the earliest orders first and the
    better priority first on one day. An order that is taken whole or not at all gets none where they do not suffice.
    From an order that accepts other strains, all that the stock could give of these is taken off.
    """
    short = [0.0] * len(problem.order_days)
    strains = range(len(problem.strains))
    first = [first_kilogram_day(problem, strain) for strain in strains]
    supply = [stock_kilograms(problem, strain) for strain in strains]
    given = [0.0 for _ in strains]
    for index, item in enumerate(problem.order_days):
        if item.day >= min(first[strain] for strain in (item.strain, *item.accepts)):
            continue
        served = min(item.kg, max(0.0, _ripe(supply[item.strain], item.day) - given[item.strain]))
        if not item.part and served < item.kg:
            served = 0.0
        given[item.strain] += served
        other = sum(_ripe(supply[strain], item.day) for strain in item.accepts)
        lost = max(0.0, item.kg - served - other)
        short[index] = lost if item.part or lost == item.kg else 0.0
    return tuple(short)


def _ripe(supply: list[tuple[int, float]], until: int) -> float:
    return sum(kg for day, kg in supply if day <= until)
