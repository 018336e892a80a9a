"""A plan as arrays to draw from: lots, the openings of their bags, and the flushes of these."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from models.farm import Farm, StockLot
from models.growth.colonisation import colonisation_days
from models.growth.flush import flush_days
from models.plan import Plan

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


@dataclass(frozen=True)
class Lots:
    """What is drawn.

    Attributes
    ----------
    strain, bags, planned, loss : ndarray
        By lot: index of its strain, bags that may still be lost, bags expected to be left of them, and the share lost.
    open_lot, open_day, open_bags, run_days, open_slack : ndarray
        By opening: its lot, day [d from the first day], bags, days its bags still take or took to colonise
        (0: colonised before the first day), and days between colonised and opened as planned [d].
    pick_open, pick_day, pick_kg, ripe_kg, pick_spans : ndarray
        By flush: its opening, planned day [d], kilograms planned to be picked and to ripen [kg]; and how many days of
        pinning and of resting it takes from the opening, or from the first day where it stands open already [d].
    """

    strain: Ints
    bags: Floats
    planned: Floats
    loss: Floats
    open_lot: Ints
    open_day: Ints
    open_bags: Floats
    run_days: Floats
    open_slack: Floats
    pick_open: Ints
    pick_day: Ints
    pick_kg: Floats
    ripe_kg: Floats
    pick_spans: Floats


@dataclass
class _Opening:
    lot: int
    day: int
    bags: float
    run_days: float
    slack: float
    picks: dict[int, list[float]]


def lots_of(farm: Farm, stock: tuple[StockLot, ...], plan: Plan) -> Lots:
    """Read a plan, with what stands in the rooms, as arrays; openings that are alike are joined."""
    codes = {strain.code: k for k, strain in enumerate(farm.strain)}
    index = {lot.code: k for k, lot in enumerate(plan.lots)}
    strain = np.array([codes[lot.strain] for lot in plan.lots], dtype=np.int64)
    stages = {lot.lot: lot.stage for lot in stock}
    bags, lost, runs = np.zeros(len(index)), np.zeros(len(index)), np.zeros(len(index))
    ready: dict[int, int] = {}
    first = plan.first_day
    for event in plan.inoculations:
        k = index[event.lot]
        if not event.before or (stages[event.lot] == "colonising" and event.ready_day >= first):
            bags[k] += event.bags
            lost[k] += event.lost
            card = farm.strain_called(plan.lots[k].strain)
            runs[k] = colonisation_days(card, farm.room_called(event.room).temp_c)
            ready[k] = min(ready.get(k, 10**6), (event.ready_day - first).days)
    loss = np.array([farm.strain[s].loss_pct / 100 for s in strain]) * (bags > 0)
    openings: dict[tuple[int, int, str, int, bool], _Opening] = {}
    for item in plan.openings:
        k, day = index[item.lot], (item.day - first).days
        key = (k, day, item.room, item.flushes, item.before)
        found = openings.setdefault(key, _Opening(k, day, 0.0, float(runs[k]), float(day - ready.get(k, day)), {}))
        found.bags += item.bags
        for pick in item.picks:
            kilograms = found.picks.setdefault((pick.day - first).days * 10 + pick.flush, [0.0, 0.0])
            kilograms[0] += pick.kg
            kilograms[1] += pick.ripe_kg
    return _arrays(farm, strain, (bags, bags - lost, loss), openings)


def _arrays(
    farm: Farm, strain: Ints, counts: tuple[Floats, Floats, Floats],
    openings: dict[tuple[int, int, str, int, bool], _Opening],
) -> Lots:  # fmt: skip
    flushes: list[tuple[int, int, float, float, float, float]] = []
    for number, ((lot, _, room, _, before), item) in enumerate(openings.items()):
        card = farm.strain[strain[lot]]
        days = flush_days(card, farm.room_called(room).temp_c)
        for place, (kg, ripe) in sorted(item.picks.items()):
            when, flush = divmod(place, 10)
            # Of bags that stand open already, only the days still to come vary.
            spans = (0.0, float(max(0, when))) if before else (float(days[0]), float(days[flush - 1] - days[0]))
            flushes.append((number, when, kg, ripe, *spans))
    table = np.array(flushes, dtype=np.float64).reshape(-1, 6)
    values = list(openings.values())
    return Lots(
        strain, *counts,
        open_lot=np.array([item.lot for item in values], dtype=np.int64),
        open_day=np.array([item.day for item in values], dtype=np.int64),
        open_bags=np.array([item.bags for item in values], dtype=np.float64),
        run_days=np.array([item.run_days for item in values], dtype=np.float64),
        open_slack=np.array([max(0.0, item.slack) for item in values], dtype=np.float64),
        pick_open=table[:, 0].astype(np.int64),
        pick_day=table[:, 1].astype(np.int64),
        pick_kg=table[:, 2],
        ripe_kg=table[:, 3],
        pick_spans=table[:, 4:6],
    )  # fmt: skip
