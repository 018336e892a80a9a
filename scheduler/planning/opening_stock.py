"""Lots that stand in the rooms on the first day, as arrivals into the stages of the plan."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import timedelta

from models.farm import Farm, Room, RoomKind, StockLot, Strain
from models.growth.colonisation import days_to_ready
from models.growth.flush import expected_flush_kg, flush_days
from scheduler.planning.shifts import Shifts


@dataclass(frozen=True, slots=True)
class CooledStock:
    """Cooled bags that wait for inoculation until a last day (before the plan: too late)."""

    lot: StockLot
    strain: int
    last_day: int | None


@dataclass(frozen=True, slots=True)
class ReadyStock:
    """Bags that become, or are, ready: in a colonisation room, or (``held``) in the cold.

    ``arrival`` is the day index from which they may be opened, ``deadline`` the last; ``ready`` the true ready day
    index (it may lie before the plan). ``loss_pct`` is the loss still to come.
    """

    lot: StockLot
    strain: int
    room: Room
    held: bool
    ready: int
    arrival: int
    deadline: int
    loss_pct: float


@dataclass(frozen=True, slots=True)
class FruitingStock:
    """Opened bags; ``flush_days`` and ``flush_kg`` are day index and kg a bag of the flushes still to come."""

    lot: StockLot
    strain: int
    room: Room
    picked: int
    flush_days: tuple[int, ...]
    flush_kg: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class OpeningStock:
    """All lots of the opening stock, by what can still be decided about them."""

    lots: tuple[StockLot, ...]
    cooled: tuple[CooledStock, ...]
    ready: tuple[ReadyStock, ...]
    fruiting: tuple[FruitingStock, ...]

    def __bool__(self) -> bool:
        return bool(self.lots)

    @property
    def last_forced_day(self) -> int:
        """The last day on which what stands in the rooms can force a limit to break."""
        days = [0]
        days += [lot.deadline for lot in self.ready]
        days += [max(lot.flush_days, default=0) + 14 for lot in self.fruiting]
        return max(days)


def room_for(farm: Farm, lot: StockLot, strain: Strain, kind: RoomKind) -> Room:
    """The room a stock lot stands in: as given, else the first of the right kind that suits the strain."""
    if lot.room:
        return farm.room_called(lot.room)
    rooms = farm.rooms_of(kind)
    for room in rooms:
        if kind == "colonisation" and strain.grows_in(room.temp_c):
            return room
        if kind == "fruiting" and strain.fruiting_temp_c[0] <= room.temp_c <= strain.fruiting_temp_c[1]:
            return room
        if kind == "cold-hold":
            return room
    return rooms[0]


def read_stock(farm: Farm, stock: Sequence[StockLot], shifts: Shifts) -> OpeningStock:
    """Sort the opening stock into its stages, with days counted from the first day of the plan."""
    index = {strain.code: k for k, strain in enumerate(farm.strain)}
    cooled, ready, fruiting = [], [], []
    for lot in stock:
        strain = index[lot.strain]
        if lot.stage == "cooled":
            cooled.append(_cooled(farm, lot, strain, shifts))
        elif lot.stage == "fruiting":
            fruiting.append(_fruiting(farm, lot, strain, shifts))
        else:
            ready.append(_ready(farm, lot, strain, shifts))
    return OpeningStock(tuple(stock), tuple(cooled), tuple(ready), tuple(fruiting))


def _cooled(farm: Farm, lot: StockLot, strain: int, shifts: Shifts) -> CooledStock:
    moment = shifts.clock.minute(lot.since + timedelta(days=1), 0)
    deadline = moment + 60 * farm.limits.cooled_to_inoculate_h
    days = [
        day
        for day in range(shifts.days)
        if (shift := shifts.on(day, "inoculate")) and moment <= max(s.end for s in shift) <= deadline
    ]
    return CooledStock(lot, strain, max(days, default=None))


def _ready(farm: Farm, lot: StockLot, strain: int, shifts: Shifts) -> ReadyStock:
    card = farm.strain[strain]
    since = (lot.since - shifts.clock.first_day).days
    held = lot.stage == "cold-held"
    room = room_for(farm, lot, card, "cold-hold" if held else "colonisation")
    ready = since + days_to_ready(card, room.temp_c) if lot.stage == "colonising" else since
    wait = card.cold_hold_days if held else card.ready_wait_days
    arrival = max(0, ready)
    deadline = max(ready + wait, shifts.next_day_with("open", 0) if ready + wait < arrival else 0)
    loss = card.loss_pct if lot.stage == "colonising" and ready >= 0 else 0.0
    return ReadyStock(lot, strain, room, held, ready, arrival, deadline, loss)


def _fruiting(farm: Farm, lot: StockLot, strain: int, shifts: Shifts) -> FruitingStock:
    card = farm.strain[strain]
    opened = (lot.since - shifts.clock.first_day).days
    room = room_for(farm, lot, card, "fruiting")
    after = flush_days(card, room.temp_c)
    days = [opened + day for day in after]
    picked = sum(day < 0 for day in days) if lot.flushes_picked is None else lot.flushes_picked
    picked = min(picked, len(days))
    if days[picked:] and days[picked] < 0:
        days[picked:] = [day - after[picked] for day in after[picked:]]
    kg = expected_flush_kg(card, farm.recipe_of(card), farm.bag_of(card), picked)
    return FruitingStock(lot, strain, room, picked, tuple(days[picked:]), kg)
