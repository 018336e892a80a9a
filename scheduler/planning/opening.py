"""Ready bags: how long they wait, which go to the cold, when they are opened and for how many flushes."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass

from scheduler.planning.stock_and_flow import StockAndFlow


@dataclass(frozen=True, slots=True)
class Arrival:
    """Bags that enter a waiting stock: day, last day they may leave, column, bags per unit of the column."""

    day: int
    deadline: int
    column: int
    bags: float


def add_opening(flow: StockAndFlow) -> None:
    """Ready bags by source, moves to the cold, and openings by fruiting pool and flushes kept."""
    for strain in flow.active:
        card = flow.problem.strains[strain]
        cold = flow.problem.cold_pool is not None and card.cold_hold_days > 0
        sources = list(flow.problem.colony_pools_for(strain))
        for pool in sources:
            _add_waiting(flow, strain, pool, _ready_arrivals(flow, strain, pool), to_cold=cold)
        if cold:
            held = [
                Arrival(day, day + card.cold_hold_days, column, 1.0)
                for (s, _, day), column in flow.columns.hold.items()
                if s == strain
            ]
            _add_waiting(flow, strain, flow.cold, held, to_cold=False)
            sources.append(flow.cold)
        _add_openings(flow, strain, sources)


def source_of(flow: StockAndFlow, room: str, *, held: bool) -> int:
    """The source index that a stock lot's room belongs to."""
    if held:
        return flow.cold
    return next(k for k, pool in enumerate(flow.problem.colony_pools) if room in {r.code for r in pool.rooms})


def _ready_arrivals(flow: StockAndFlow, strain: int, pool: int) -> list[Arrival]:
    card = flow.problem.strains[strain]
    survive = 1 - card.loss_pct / 100
    span = flow.problem.ready_days(strain, pool)
    return [
        Arrival(day + span, day + span + card.ready_wait_days, column, survive)
        for (s, p, day), column in flow.columns.inoculate.items()
        if s == strain and p == pool and day + span < flow.problem.days
    ]


def _add_waiting(flow: StockAndFlow, strain: int, source: int, arrivals: list[Arrival], *, to_cold: bool) -> None:
    matrix, open_days, days = flow.matrix, flow.open_days, flow.problem.days
    stock = [
        (lot.arrival, lot.deadline, lot.lot.bags * (1 - lot.loss_pct / 100))
        for lot in flow.problem.stock.ready
        if lot.strain == strain and source_of(flow, lot.room.code, held=lot.held) == source
    ]
    coming: list[list[tuple[int, float]]] = [[] for _ in open_days]
    until: list[list[tuple[int, float]]] = [[] for _ in open_days]
    for item in arrivals:
        step = bisect_right(open_days, item.day - 1)
        if step == len(open_days):
            continue
        coming[step].append((item.column, -item.bags))
        last = bisect_right(open_days, item.deadline) - 1 if item.deadline < days else len(open_days)
        for k in range(step, last):
            until[k].append((item.column, -item.bags))
    before: int | None = None
    for step, day in enumerate(open_days):
        drop = matrix.column(high=flow.discard_limit(day, stocked=bool(stock)))
        flow.columns.drop_ready[strain, source, day] = drop
        state = matrix.column()
        terms = [(state, 1.0), (drop, 1.0), *coming[step]]
        if to_cold:
            hold = matrix.column(whole=True)
            flow.columns.hold[strain, source, day] = hold
            terms.append((hold, 1.0))
        if before is not None:
            terms.append((before, -1.0))
        previous = open_days[step - 1] if step else -1
        following = open_days[step + 1] if step + 1 < len(open_days) else days
        entering = sum(bags for arrival, _, bags in stock if previous < arrival <= day)
        flow.ready_rows[strain, source, day] = matrix.row("ready", day, terms, low=entering, high=entering)
        waiting = sum(bags for arrival, deadline, bags in stock if arrival <= day and deadline >= following)
        row = matrix.row("ready wait", day, [(state, 1.0), *until[step]], high=waiting)
        flow.wait_rows[strain, source, day] = row
        before = state


def _add_openings(flow: StockAndFlow, strain: int, sources: list[int]) -> None:
    problem = flow.problem
    kg = problem.flush_kg(strain)
    for day in flow.open_days:
        columns = []
        for pool in problem.fruit_pools_for(strain):
            for flushes in range(1, len(kg) + 1):
                if day + problem.flush_day(strain, flushes, pool) >= problem.days:
                    break
                column = flow.matrix.column(whole=True)
                flow.columns.open[strain, pool, day, flushes] = column
                columns.append(column)
                for flush in range(1, flushes + 1):
                    flow.ripens(strain, day + problem.flush_day(strain, flush, pool), column, kg[flush - 1])
        if len(sources) == 1:
            # What is opened comes straight out of the only source; no column and row are needed in between.
            row = flow.matrix.entries[flow.ready_rows[strain, sources[0], day]]
            row.update(dict.fromkeys(columns, 1.0))
            flow.columns.leaving[strain, sources[0], day] = columns
            continue
        terms = [(column, 1.0) for column in columns]
        for source in sources:
            leave = flow.matrix.column()
            flow.matrix.entries[flow.ready_rows[strain, source, day]][leave] = 1.0
            flow.columns.leaving[strain, source, day] = [leave]
            terms.append((leave, -1.0))
        flow.matrix.row("opened", day, terms, low=0.0, high=0.0)
