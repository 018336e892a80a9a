"""Whole numbers for large farms: one rounding a stage, with a few places and minutes kept back for it.

On a large farm a relaxation takes seconds and one bag is a thousandth of a day, so each stage is rounded at once:
runs by a small network problem near the relaxation, then bags by rounding running totals, which conserves them and
shifts none by more than one.
"""

from __future__ import annotations

from math import floor

import numpy as np

from scheduler.planning.dive import WHOLE_TOLERANCE, dive, fraction
from scheduler.planning.engine import Answer, Dead, FloatArray, Relaxation, branch
from scheduler.planning.lots import Made, make_lots
from scheduler.planning.matrix import Matrix
from scheduler.planning.rounding import round_fills, round_inoculations, split
from scheduler.planning.stock_and_flow import StockAndFlow
from scheduler.planning.whole import (
    FILLED_STYLE,
    allow_discards,
    filled_candidates,
    fix,
    whole_losses,
)

ROUNDING_SECONDS = 60.0
"""A net only: the count of nodes is to end the rounding, so that it ends at the same place every time."""
ROUNDING_NODES = 150


def bold_plan(
    flow: StockAndFlow,
    relaxation: Relaxation,
    base: FloatArray,
    low: FloatArray,
    high: FloatArray,
    reserve: float = 1.0,
) -> tuple[Answer, Made]:
    """Round runs, fillings, inoculations and openings one after the other.

    ``reserve`` scales what is kept back for rounding [-].

    Raises
    ------
    Dead
        A stage has no solution after the rounding before it.
    """
    fix(relaxation, low, high, round_runs(flow, base))
    keep_back(flow, relaxation, reserve)
    allow_discards(flow, relaxation, high)
    answer = _solved(relaxation)
    assert answer.values is not None  # noqa: S101  (_solved raises otherwise)
    fills = round_fills(flow, answer.values)
    fix(relaxation, low, high, fills)
    fix(relaxation, low, high, round_inoculations(flow, answer.values, fills))
    whole = answer.values.copy()
    for column in range(len(whole)):
        if low[column] == high[column]:
            whole[column] = low[column]
    made = make_lots(flow, whole)
    whole_losses(flow, made, relaxation)
    keep_back(flow, relaxation, reserve / 2)
    answer = _solved(relaxation)
    assert answer.values is not None  # noqa: S101
    fix(relaxation, low, high, round_openings(flow, answer.values))
    give_back(flow, relaxation)
    return dive(relaxation, _solved(relaxation), filled_candidates(flow), FILLED_STYLE, low, high), made


def _solved(relaxation: Relaxation) -> Answer:
    answer = relaxation.solve()
    if answer.values is None:
        raise Dead
    return answer


def keep_back(flow: StockAndFlow, relaxation: Relaxation, part: float = 1.0) -> None:
    """Keep a few places and minutes free, so that rounding up does not pass a limit.

    Fills and inoculations may use one half of them (`part` is what stays), openings the other.
    """
    bags = 2.0 * len(flow.active)
    for column, places in flow.place_states:
        if flow.matrix.column_high[column] == places:
            relaxation.bound(column, 0.0, places - part * min(bags, 0.02 * places))
    for kept in flow.reserves:
        relaxation.bound_row(kept.row, -np.inf, kept.high - part * min(bags * kept.per_bag, 0.05 * kept.high))


def give_back(flow: StockAndFlow, relaxation: Relaxation) -> None:
    """Undo `keep_back`."""
    for column, places in flow.place_states:
        if flow.matrix.column_high[column] == places:
            relaxation.bound(column, 0.0, places)
    for kept in flow.reserves:
        relaxation.bound_row(kept.row, -np.inf, kept.high)


def round_runs(flow: StockAndFlow, values: FloatArray) -> dict[int, float]:
    """Whole runs near the relaxation's: places steamed by the end of each week stay near, sterilisers keep their turn.

    A small whole-number problem of its own: each run column may go to the whole number below or above.
    """
    small = Matrix()
    arcs = flow.problem.arcs
    index: dict[int, int] = {}
    for column in flow.columns.run:
        value = float(values[column])
        below = floor(value + WHOLE_TOLERANCE)
        above = below + (1 if fraction(value) else 0)
        index[column] = small.column(gain=1e-3 * (value - below - 0.5), low=below, high=above, whole=True)
    for row, (name, _) in enumerate(flow.matrix.row_name):
        if name.startswith(("steriliser ", "supply")):
            terms = []
            for column, factor in flow.matrix.entries[row].items():
                if column not in index:
                    index[column] = small.column(high=flow.matrix.column_high[column])
                terms.append((index[column], factor))
            small.row(name, row, terms, low=flow.matrix.row_low[row], high=flow.matrix.row_high[row])
    lanes: dict[tuple[int, int], dict[int, list[int]]] = {}
    for k, arc in enumerate(arcs):
        lanes.setdefault((arc.steriliser, arc.kind), {}).setdefault(arc.load_day // 7, []).append(k)
    for (_, _), weeks in sorted(lanes.items()):
        wanted, before = 0.0, None
        for week in sorted(weeks):
            here = [(index[flow.columns.run[k]], float(arcs[k].bags)) for k in weeks[week]]
            wanted += sum(float(values[flow.columns.run[k]]) * arcs[k].bags for k in weeks[week])
            total = small.column()
            terms = [(total, 1.0), *((column, -bags) for column, bags in here)]
            if before is not None:
                terms.append((before, -1.0))
            small.row("steamed", week, terms, low=0.0, high=0.0)
            over, under = small.column(gain=-1.0 / arcs[0].bags), small.column(gain=-1.0 / arcs[0].bags)
            small.row("near", week, [(total, 1.0), (over, -1.0), (under, 1.0)], low=wanted, high=wanted)
            before = total
    answer = branch(
        small, np.array(small.column_low), np.array(small.column_high), np.array(small.whole), gap=0.02,
        seconds=ROUNDING_SECONDS, nodes=ROUNDING_NODES,
    )  # fmt: skip
    if answer.values is None:
        raise Dead
    return {column: float(round(answer.values[index[column]])) for column in flow.columns.run}


def round_openings(flow: StockAndFlow, values: FloatArray) -> dict[int, float]:
    """Whole moves of ready bags: running totals by strain for the cold, and by strain, pool and flushes for opening."""
    fixed: dict[int, float] = {}
    totals: dict[tuple[int, ...], tuple[float, float]] = {}

    def follow(key: tuple[int, ...], column: int) -> None:
        planned, done = totals.get(key, (0.0, 0.0))
        planned += max(0.0, float(values[column]))
        bags = max(0.0, floor(planned + 0.5) - done)
        totals[key] = (planned, done + bags)
        fixed[column] = float(bags)

    for (strain, source, _), column in sorted(flow.columns.hold.items(), key=lambda item: (item[0][2], item[0])):
        follow((0, strain, source), column)
    by_day: dict[tuple[int, int], list[tuple[int, int, int]]] = {}
    for (strain, pool, day, flushes), column in flow.columns.open.items():
        by_day.setdefault((day, strain), []).append((pool, flushes, column))
    owed: dict[int, dict[int, float]] = {}
    for (_, strain), members in sorted(by_day.items()):
        planned, done = totals.get((1, strain), (0.0, 0.0))
        share = {k: max(0.0, float(values[column])) for k, (_, _, column) in enumerate(members)}
        planned += sum(share.values())
        bags = max(0.0, floor(planned + 0.5) - done)
        totals[1, strain] = (planned, done + bags)
        columns = {pool * 100 + flushes: column for pool, flushes, column in members}
        shares = {pool * 100 + flushes: share[k] for k, (pool, flushes, _) in enumerate(members)}
        fixed.update(split(columns, shares, owed.setdefault(strain, {}), bags))
    for index, lot in enumerate(flow.problem.stock.fruiting):
        columns = {kept: column for (i, kept), column in flow.columns.keep.items() if i == index}
        shares = {kept: max(0.0, float(values[column])) for kept, column in columns.items()}
        fixed.update(split(columns, shares, {}, float(lot.lot.bags)))
    return fixed
