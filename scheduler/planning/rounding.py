"""Round running totals: bags stay conserved, and no bag is shifted by more than one."""

from __future__ import annotations

from math import floor

from scheduler.planning.dive import WHOLE_TOLERANCE
from scheduler.planning.engine import FloatArray
from scheduler.planning.stock_and_flow import StockAndFlow


def round_fills(flow: StockAndFlow, values: FloatArray) -> dict[int, float]:
    """Whole bags in each group of runs: each strain's running total is followed, each group's total is kept."""
    by_group: dict[int, list[tuple[int, int]]] = {}
    for (strain, group), column in flow.columns.fill.items():
        by_group.setdefault(group, []).append((strain, column))
    owed: dict[int, float] = {}
    fixed: dict[int, float] = {}
    for group in sorted(by_group, key=lambda g: (flow.groups[g].load_day, g)):
        members = by_group[group]
        total = floor(sum(max(0.0, float(values[c])) for _, c in members) + 1e-6)
        goals = {}
        for strain, column in members:
            value = max(0.0, float(values[column]))
            goals[column] = (value + owed.get(strain, 0.0) if value > WHOLE_TOLERANCE else 0.0, strain, value)
        whole = {column: float(max(0, floor(goal + 1e-6))) for column, (goal, _, _) in goals.items()}
        while sum(whole.values()) > total:
            most = max((c for c in whole if whole[c] > 0), key=lambda c: (whole[c] - goals[c][0], c))
            whole[most] -= 1
        for column in sorted(goals, key=lambda c: (whole[c] - goals[c][0], c)):
            if sum(whole.values()) < total and goals[column][2] > WHOLE_TOLERANCE:
                whole[column] += 1
        for column, (_, strain, value) in goals.items():
            owed[strain] = owed.get(strain, 0.0) + value - whole[column]
        fixed.update(whole)
    return fixed


def round_inoculations(flow: StockAndFlow, values: FloatArray, fills: dict[int, float]) -> dict[int, float]:
    """Whole inoculations: the running total by strain, within what is cool and before what would spoil."""
    fixed: dict[int, float] = {}
    for strain in flow.active:
        comes: dict[int, float] = {}
        spoils: dict[int, float] = {}
        for (s, group), column in flow.columns.fill.items():
            if s == strain and fills[column]:
                comes[flow.groups[group].first] = comes.get(flow.groups[group].first, 0.0) + fills[column]
                spoils[flow.groups[group].last] = spoils.get(flow.groups[group].last, 0.0) + fills[column]
        for lot in flow.problem.stock.cooled:
            if lot.strain == strain and lot.last_day is not None:
                comes[0] = comes.get(0, 0.0) + lot.lot.bags
                spoils[lot.last_day] = spoils.get(lot.last_day, 0.0) + lot.lot.bags
        planned = done = cool = due = 0.0
        pools = flow.problem.colony_pools_for(strain)
        carry = dict.fromkeys(pools, 0.0)
        for day in range(flow.problem.days):
            cool += comes.get(day, 0.0)
            due += spoils.get(day, 0.0)
            columns = {p: flow.columns.inoculate.get((strain, p, day)) for p in pools}
            open_pools = {p: c for p, c in columns.items() if c is not None}
            if not open_pools:
                continue
            share = {p: max(0.0, float(values[c])) for p, c in open_pools.items()}
            planned += sum(share.values())
            bags = max(floor(planned + 0.5), due) - done
            bags = max(0.0, min(bags, cool - done))
            done += bags
            fixed.update(split(open_pools, share, carry, bags))
    return fixed


def split(columns: dict[int, int], share: dict[int, float], carry: dict[int, float], bags: float) -> dict[int, float]:
    """Split whole bags over columns near their shares, carrying what each is owed."""
    whole = dict.fromkeys(columns, 0.0)
    for key in columns:
        carry[key] = carry.get(key, 0.0) + share[key]
    for _ in range(int(bags)):
        best = max(columns, key=lambda key: (share[key] > WHOLE_TOLERANCE, carry[key] - whole[key], -columns[key]))
        whole[best] += 1.0
    for key in columns:
        carry[key] -= whole[key]
    return {columns[key]: value for key, value in whole.items()}
