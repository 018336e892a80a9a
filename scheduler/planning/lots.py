"""From counts to things: runs with their bags, lots, and which lots are inoculated on which day.

Bags are taken first in, first out; expected losses become whole bags by rounding their running total.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from math import ceil, floor

from models.calendar import Week
from models.plan import Lot, Run
from scheduler.planning.dive import WHOLE_TOLERANCE
from scheduler.planning.engine import FloatArray
from scheduler.planning.network import Arc
from scheduler.planning.stock_and_flow import StockAndFlow


@dataclass
class Batch:
    """Bags of one lot that move together from inoculation on (days as day indices).

    ``pool`` is the colonisation pool, or the cold for a held stock lot; ``before`` marks the opening stock.
    """

    lot: str
    strain: int
    pool: int
    inoculated: int
    ready: int
    arrival: int
    deadline: int
    bags: int
    loss_pct: float
    lost: int = 0
    before: bool = False
    held: bool = False
    room: str = ""


@dataclass
class Made:
    """What the runs of a plan make: runs, lots, batches by inoculation, and cooled bags that spoil (lot, day, bags)."""

    runs: list[Run] = field(default_factory=list)
    lots: list[Lot] = field(default_factory=list)
    batches: list[Batch] = field(default_factory=list)
    spoiled: list[tuple[str, int, int]] = field(default_factory=list)


@dataclass
class _Cooled:
    lot: str
    first: int
    last: int
    moment: int
    bags: int


def make_lots(flow: StockAndFlow, values: FloatArray) -> Made:
    """Name runs and lots, and follow their bags up to inoculation.

    Parameters
    ----------
    flow : StockAndFlow
        The model.
    values : FloatArray
        Column values; run, fill and inoculation columns are whole.
    """
    made = Made()
    waiting: dict[int, list[_Cooled]] = {}
    for arc, bags in _filled_runs(flow, values):
        _name_run(flow, made, arc, bags)
    _number_runs(flow, made, waiting)
    for lot in flow.problem.stock.lots:
        made.lots.append(Lot(lot.lot, lot.strain, lot.bags, ""))
    for cooled in flow.problem.stock.cooled:
        if cooled.last_day is None:
            made.spoiled.append((cooled.lot.lot, 0, cooled.lot.bags))
        else:
            entry = _Cooled(cooled.lot.lot, 0, cooled.last_day, -1, cooled.lot.bags)
            waiting.setdefault(cooled.strain, []).append(entry)
    _inoculate(flow, values, made, waiting)
    _ready_stock(flow, made)
    spread_losses(flow, made)
    return made


def _filled_runs(flow: StockAndFlow, values: FloatArray) -> list[tuple[Arc, dict[int, int]]]:
    """Each single run with its bags by strain; the bags of a group fill its runs one after the other."""
    by_group: dict[int, list[Arc]] = {}
    for k, arc in enumerate(flow.problem.arcs):
        by_group.setdefault(flow.arc_group[k], []).extend([arc] * round(values[flow.columns.run[k]]))
    fills: dict[int, list[tuple[int, int]]] = {}
    for (strain, group), column in flow.columns.fill.items():
        bags = round(values[column])
        if bags:
            fills.setdefault(group, []).append((strain, bags))
    filled = []
    for group, wanted in fills.items():
        runs = sorted(by_group.get(group, ()), key=lambda arc: (-arc.bags, arc.load_start, arc.steriliser))
        rest = sorted(wanted)
        for arc in runs:
            room = arc.bags
            load: dict[int, int] = {}
            while rest and room:
                strain, bags = rest[0]
                taken = min(bags, room)
                load[strain] = load.get(strain, 0) + taken
                room -= taken
                rest = ([(strain, bags - taken)] if bags > taken else []) + rest[1:]
            if load:
                filled.append((arc, load))
    return sorted(filled, key=lambda item: (item[0].load_start, item[0].steriliser, item[0].kind, -item[0].bags))


def _name_run(flow: StockAndFlow, made: Made, arc: Arc, bags: dict[int, int]) -> None:
    problem = flow.problem
    steriliser = problem.farm.steriliser[arc.steriliser]
    busy = [run.unit for run in made.runs if run.steriliser == steriliser.code and run.unloaded > arc.load_start]
    unit = next(unit for unit in range(1, steriliser.count + 1) if unit not in busy)
    made.runs.append(
        Run(
            code="",
            steriliser=steriliser.code,
            unit=unit,
            programme=problem.kinds[arc.kind].programme.code,
            load_step=arc.load_step,
            mix_start=arc.mix_start,
            load_start=arc.load_start,
            steam_on=arc.steam_on,
            ready=arc.ready,
            unload=arc.unload,
            unloaded=arc.unloaded,
            cooled=arc.cooled,
            bags={problem.strains[strain].code: count for strain, count in sorted(bags.items())},
            energy_kwh=arc.energy_kwh,
            energy_cost=arc.energy_cost,
        )
    )


def _number_runs(flow: StockAndFlow, made: Made, waiting: dict[int, list[_Cooled]]) -> None:
    """Number the runs of each week in order of load moment, and give every strain in a run its lot."""
    problem = flow.problem
    numbers: dict[Week, int] = {}
    strains = {strain.code: k for k, strain in enumerate(problem.strains)}
    numbered = []
    for run in sorted(made.runs, key=lambda r: (r.load_start, r.steriliser, r.unit)):
        week = Week.of(problem.clock.at(run.load_start).date())
        numbers[week] = number = numbers.get(week, 0) + 1
        named = replace(run, code=f"{week.short}-R{number}")
        numbered.append(named)
        bags_in_step = problem.farm.steriliser_called(run.steriliser).bags_at(run.load_step)
        window = problem.shifts.inoculation_days(run.cooled, bags_in_step)
        assert window is not None  # noqa: S101  (the network holds no other runs)
        for code, bags in run.bags.items():
            lot = Lot(f"{week.short}-{code}-{number}", code, bags, named.code)
            made.lots.append(lot)
            entry = _Cooled(lot.code, window[0], min(window[1], problem.days - 1), run.cooled, bags)
            waiting.setdefault(strains[code], []).append(entry)
    made.runs = numbered


def _inoculate(flow: StockAndFlow, values: FloatArray, made: Made, waiting: dict[int, list[_Cooled]]) -> None:
    by_strain: dict[int, list[tuple[int, int, int]]] = {}
    for (strain, pool, day), column in flow.columns.inoculate.items():
        bags = round(values[column])
        if bags:
            by_strain.setdefault(strain, []).append((day, pool, bags))
    for strain, queue in waiting.items():
        queue.sort(key=lambda item: (item.last, item.first, item.moment, item.lot))
        planned, dropped = 0.0, 0
        inoculated = sorted(by_strain.get(strain, ()))
        for day in flow.inoculation_days:
            while inoculated and inoculated[0][0] == day:
                _, pool, bags = inoculated.pop(0)
                _take(flow, made, queue, strain, pool, day, bags)
            # Bags that the model drops hold no cooling place from the next day on.
            planned += float(values[flow.columns.drop_cooled[strain, day]])
            dropped += _drop(made, queue, day, ceil(planned - WHOLE_TOLERANCE) - dropped)
        for left in queue:
            if left.bags:
                made.spoiled.append((left.lot, min(left.last, flow.problem.days - 1), left.bags))


def _drop(made: Made, queue: Sequence[_Cooled], day: int, bags: int) -> int:
    """Drop cooled bags, those first that would spoil first; how many there were to drop."""
    gone = 0
    for item in queue:
        count = min(item.bags, bags - gone) if item.first <= day <= item.last else 0
        if count > 0:
            item.bags -= count
            gone += count
            made.spoiled.append((item.lot, day, count))
    return gone


def _take(
    flow: StockAndFlow, made: Made, queue: Sequence[_Cooled], strain: int, pool: int, day: int, bags: int
) -> None:
    card = flow.problem.strains[strain]
    ready = day + flow.problem.ready_days(strain, pool)
    for item in queue:
        if not bags:
            return
        if item.bags and item.first <= day <= item.last:
            taken = min(item.bags, bags)
            item.bags -= taken
            bags -= taken
            made.batches.append(
                Batch(item.lot, strain, pool, day, ready, ready, ready + card.ready_wait_days, taken, card.loss_pct)
            )


def _ready_stock(flow: StockAndFlow, made: Made) -> None:
    for item in flow.problem.stock.ready:
        pool = (
            flow.cold
            if item.held
            else next(
                k for k, p in enumerate(flow.problem.colony_pools) if item.room.code in {room.code for room in p.rooms}
            )
        )
        since = (item.lot.since - flow.problem.clock.first_day).days
        made.batches.append(
            Batch(
                item.lot.lot,
                item.strain,
                pool,
                since,
                item.ready,
                item.arrival,
                item.deadline,
                item.lot.bags,
                item.loss_pct,
                before=True,
                held=item.held,
                room=item.room.code,
            )
        )


def spread_losses(flow: StockAndFlow, made: Made) -> None:
    """Turn expected losses into whole bags: the running total by strain, rounded, in order of ready day."""
    expected: dict[int, float] = {}
    taken: dict[int, int] = {}
    for batch in sorted(made.batches, key=lambda b: (b.ready, b.inoculated, b.lot, b.pool)):
        if batch.held or batch.loss_pct == 0.0 or not 0 <= batch.ready < flow.problem.days:
            continue
        expected[batch.strain] = expected.get(batch.strain, 0.0) + batch.bags * batch.loss_pct / 100
        total = floor(expected[batch.strain] + 0.5)
        batch.lost = min(batch.bags, total - taken.get(batch.strain, 0))
        taken[batch.strain] = taken.get(batch.strain, 0) + batch.lost
