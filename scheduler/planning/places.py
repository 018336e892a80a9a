"""Places: one occupancy state for each step at which bags may enter a room.

Bags hold a place from the day they enter to the day before they leave, so occupancy only needs a bound on days when
bags may enter. Cooling places are held from unloading to inoculation, both days included.
"""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass, field

from scheduler.planning.columns import SLACK_PLACE_PRICE
from scheduler.planning.opening import source_of
from scheduler.planning.problem import Pool
from scheduler.planning.stock_and_flow import StockAndFlow

Leaving = tuple[int, int, float]


@dataclass
class Standing:
    """Bags that stand in a pool of rooms on the first day, and losses among them still to leave: day, bags."""

    bags: float = 0.0
    losses: list[tuple[int, float]] = field(default_factory=list)


@dataclass
class Traffic:
    """What enters and leaves one pool of rooms: columns by day."""

    name: str
    source: int
    places: int
    enters: dict[int, list[int]]
    leaves: list[Leaving]
    standing: Standing


def add_places(flow: StockAndFlow) -> None:
    """Rows that keep every room within its places."""
    problem = flow.problem
    for index, pool in enumerate(problem.colony_pools):
        add_occupancy(flow, colony_traffic(flow, index, pool))
    if problem.cold_pool is not None:
        add_occupancy(flow, cold_traffic(flow, problem.cold_pool))
    for index, pool in enumerate(problem.fruit_pools):
        add_occupancy(flow, fruit_traffic(flow, index, pool))
    if problem.farm.rooms_of("cooling"):
        add_cooling(flow, float(sum(room.places for room in problem.farm.rooms_of("cooling"))))


def place_limit(pool: Pool) -> str:
    """Name of the limit on a pool's places."""
    return f"places {pool.rooms[0].code}"


def colony_traffic(flow: StockAndFlow, index: int, pool: Pool) -> Traffic:
    """Inoculated bags in; lost, opened, cold-held and dropped bags out."""
    columns, problem = flow.columns, flow.problem
    enters: dict[int, list[int]] = {day: [] for day in flow.inoculation_days}
    leaves: list[Leaving] = []
    for (strain, p, day), column in columns.inoculate.items():
        if p != index:
            continue
        enters[day].append(column)
        loss = problem.strains[strain].loss_pct / 100
        ready = day + problem.ready_days(strain, index)
        if loss and ready < problem.days:
            leaves.append((ready, column, loss))
    leaves += _opened_from(flow, index)
    for table in (columns.hold, columns.drop_ready):
        leaves += [(day, column, 1.0) for (_, source, day), column in table.items() if source == index]
    return Traffic(place_limit(pool), index, pool.places, enters, leaves, _waiting_stock(flow, index))


def cold_traffic(flow: StockAndFlow, pool: Pool) -> Traffic:
    """Bags moved to the cold in; opened and dropped bags out."""
    columns = flow.columns
    enters: dict[int, list[int]] = {day: [] for day in flow.open_days}
    for (_, _, day), column in columns.hold.items():
        enters[day].append(column)
    leaves = _opened_from(flow, flow.cold)
    leaves += [(day, column, 1.0) for (_, s, day), column in columns.drop_ready.items() if s == flow.cold]
    return Traffic(place_limit(pool), flow.cold, pool.places, enters, leaves, _waiting_stock(flow, flow.cold))


def _opened_from(flow: StockAndFlow, source: int) -> list[Leaving]:
    return [
        (day, column, 1.0) for (_, s, day), members in flow.columns.leaving.items() if s == source for column in members
    ]


def fruit_traffic(flow: StockAndFlow, index: int, pool: Pool) -> Traffic:
    """Opened bags in; spent bags out, with the days of cleaning after them."""
    columns, problem = flow.columns, flow.problem
    codes = {room.code for room in pool.rooms}
    enters: dict[int, list[int]] = {day: [] for day in flow.open_days}
    leaves: list[Leaving] = []
    for (strain, p, day, flushes), column in columns.open.items():
        if p == index:
            enters[day].append(column)
            last = day + problem.flush_day(strain, flushes, index)
            leaves.append((flow.leave_day(last) + pool.clean_days, column, 1.0))
    standing = Standing()
    for lot in problem.stock.fruiting:
        if lot.room.code in codes:
            standing.bags += lot.lot.bags
    for (lot_index, kept), column in columns.keep.items():
        lot = problem.stock.fruiting[lot_index]
        if lot.room.code in codes:
            last = lot.flush_days[kept - lot.picked - 1] if kept > lot.picked else 0
            leaves.append((flow.leave_day(last) + pool.clean_days, column, 1.0))
    return Traffic(place_limit(pool), flow.cold + 1 + index, pool.places, enters, leaves, standing)


def _waiting_stock(flow: StockAndFlow, source: int) -> Standing:
    standing = Standing()
    for lot in flow.problem.stock.ready:
        if source_of(flow, lot.room.code, held=lot.held) == source:
            standing.bags += lot.lot.bags
            if lot.loss_pct:
                standing.losses.append((lot.ready, lot.lot.bags * lot.loss_pct / 100))
    return standing


def add_occupancy(flow: StockAndFlow, traffic: Traffic) -> None:
    """The chain of occupancy states of one pool; over its places only where the opening stock may force it."""
    matrix, standing = flow.matrix, traffic.standing
    steps = sorted({*traffic.enters, *([0] if standing.bags else [])})
    going: list[list[tuple[int, float]]] = [[] for _ in steps]
    for day, column, factor in traffic.leaves:
        step = bisect_right(steps, day - 1)
        if step < len(steps):
            going[step].append((column, factor))
    before: int | None = None
    for step, day in enumerate(steps):
        previous = steps[step - 1] if step else -1
        following = steps[step + 1] if step + 1 < len(steps) else flow.problem.days
        state = matrix.column(high=float(traffic.places))
        flow.place_states.append((state, float(traffic.places)))
        terms = [(state, 1.0), *((column, -1.0) for column in traffic.enters.get(day, ())), *going[step]]
        if before is not None:
            terms.append((before, -1.0))
        constant = standing.bags if step == 0 else 0.0
        constant -= sum(bags for when, bags in standing.losses if previous < when <= day)
        if standing.bags and day <= flow.forced_until:
            matrix.column_high[state] = float("inf")
            over = matrix.column(gain=-SLACK_PLACE_PRICE * (following - day))
            flow.columns.over[traffic.name, day] = over
            matrix.row(f"{traffic.name} limit", day, [(state, 1.0), (over, -1.0)], high=float(traffic.places))
        row = matrix.row(traffic.name, day, terms, low=constant, high=constant)
        flow.place_rows.setdefault(traffic.source, {})[day] = row
        before = state


def add_cooling(flow: StockAndFlow, places: float) -> None:
    """Bags in the cooling rooms: those carried over and those unloaded on a day need a place that day."""
    matrix, columns = flow.matrix, flow.columns
    entering: dict[int, list[int]] = {}
    for (_, group), column in columns.fill.items():
        entering.setdefault(flow.groups[group].unload_day, []).append(column)
    leaving: dict[int, list[int]] = {}
    for (_, _, day), column in columns.inoculate.items():
        leaving.setdefault(day, []).append(column)
    for (_, day), column in columns.drop_cooled.items():
        leaving.setdefault(day, []).append(column)
    standing = float(sum(lot.lot.bags for lot in flow.problem.stock.cooled if lot.last_day is not None))
    before: int | None = None
    for day in sorted({*entering, *leaving}):
        state = matrix.column()
        into = entering.get(day, [])
        terms = [(state, 1.0), *((column, -1.0) for column in into)]
        terms += [(column, 1.0) for column in leaving.get(day, ())]
        carried = [] if before is None else [(before, 1.0)]
        if into:
            high = max(0.0, places - (standing if before is None else 0.0))
            matrix.row("places cooling", day, [*((column, 1.0) for column in into), *carried], high=high)
        terms += [(column, -1.0) for column, _ in carried]
        constant = standing if before is None else 0.0
        matrix.row("cooling", day, terms, low=constant, high=constant)
        before = state
