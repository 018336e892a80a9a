"""Follows whole bags through the rooms day by day: which room, which lot, opened when and for how many flushes.

Bags leave before others enter on a day, so a pool that has places always has a room that has them. Ready bags are
taken first in, first out.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from datetime import date, timedelta

from models.farm import Room
from models.plan import Discard, FlushPick, Holding, Inoculation, Opening
from scheduler.planning.engine import FloatArray
from scheduler.planning.lots import Batch, Made
from scheduler.planning.stock_and_flow import StockAndFlow


@dataclass
class Waiting:
    """Ready bags of one batch in one room, with the last day they may leave it (day indices)."""

    lot: str
    room: str
    ready: int
    held: int | None
    deadline: int
    bags: int


@dataclass
class Housed:
    """Every event of the bags from inoculation on, and the bags in each room by day (room code, day index)."""

    inoculations: list[Inoculation] = field(default_factory=list)
    holdings: list[Holding] = field(default_factory=list)
    openings: list[Opening] = field(default_factory=list)
    discards: list[Discard] = field(default_factory=list)
    occupancy: dict[str, list[int]] = field(default_factory=dict)


class House:
    """Walks the days of a plan and gives every bag a place."""

    def __init__(self, flow: StockAndFlow, values: FloatArray, made: Made) -> None:
        self.flow = flow
        self.problem = flow.problem
        self.values = values
        self.made = made
        self.housed = Housed()
        rooms = [room for room in self.problem.farm.room if room.kind != "cooling"]
        self.places = {room.code: room.places for room in rooms}
        self.standing = {room.code: 0 for room in rooms}
        self.housed.occupancy = {room.code: [0] * self.problem.days for room in rooms}
        self._frees: dict[int, list[tuple[str, int]]] = {}
        self._comes_ready: dict[int, list[tuple[Batch, str, int]]] = {}
        self._waiting: dict[tuple[int, int], list[Waiting]] = {}
        self._starts: dict[int, list[Batch]] = {}

    def run(self) -> Housed:
        """Walk all days."""
        self._place_stock()
        for batch in self.made.batches:
            if not batch.before:
                self._starts.setdefault(batch.inoculated, []).append(batch)
        moves = self._moves_by_day()
        for lot, day, bags in self.made.spoiled:
            self.housed.discards.append(Discard(lot, self._date(day), "", None, bags))
        for day in range(self.problem.days):
            self._release(day)
            self._ripen(day)
            for strain, source, kind, bags in moves.get(day, ()):
                if kind == "hold":
                    self._hold(day, strain, source, bags)
                elif kind == "drop":
                    self._drop(day, strain, source, bags)
            self._open_all(day)
            for batch in self._starts.get(day, ()):
                self._inoculate(day, batch)
            self._expire(day)
            for code, bags in self.standing.items():
                self.housed.occupancy[code][day] = bags
        return self.housed

    def _date(self, day: int) -> date:
        return self.problem.clock.first_day + timedelta(days=day)

    def _moves_by_day(self) -> dict[int, list[tuple[int, int, str, int]]]:
        moves: dict[int, list[tuple[int, int, str, int]]] = {}
        columns = self.flow.columns
        for kind, table in (("hold", columns.hold), ("drop", columns.drop_ready)):
            for (strain, source, day), column in table.items():
                bags = round(self.values[column])
                if bags > 0:
                    moves.setdefault(day, []).append((strain, source, kind, bags))
        return moves

    # --- opening stock --------------------------------------------------------------------------------------------

    def _place_stock(self) -> None:
        for batch in self.made.batches:
            if not batch.before:
                continue
            self.standing[batch.room] += batch.bags
            if batch.held:
                entered, ready = self._date(batch.inoculated), self._date(batch.ready)
                self.housed.holdings.append(Holding(batch.lot, entered, "", ready, batch.room, batch.bags, before=True))
                self._put(batch, batch.room, held=batch.inoculated)
            else:
                event = Inoculation(
                    batch.lot,
                    self._date(batch.inoculated),
                    batch.room,
                    batch.bags,
                    self._date(batch.ready),
                    batch.lost,
                    before=True,
                )
                self.housed.inoculations.append(event)
                self._comes_ready.setdefault(batch.arrival, []).append((batch, batch.room, batch.bags))
        for lot in self.problem.stock.fruiting:
            self.standing[lot.room.code] += lot.lot.bags
        self._keep_stock()

    def _keep_stock(self) -> None:
        clean = {room.code: room.clean_days for room in self.problem.farm.room}
        for (index, flushes), column in self.flow.columns.keep.items():
            bags = round(self.values[column])
            if bags <= 0:
                continue
            lot = self.problem.stock.fruiting[index]
            kept = flushes - lot.picked
            leave = self.flow.leave_day(lot.flush_days[kept - 1] if kept else 0)
            picks = tuple(
                FlushPick(self._date(lot.flush_days[k]), lot.picked + k + 1, bags * lot.flush_kg[k], 0.0)
                for k in range(kept)
            )
            self.housed.openings.append(
                Opening(
                    lot.lot.lot,
                    lot.lot.since,
                    "",
                    lot.lot.since,
                    None,
                    lot.room.code,
                    bags,
                    flushes,
                    self._date(leave),
                    picks,
                    before=True,
                )
            )
            self._frees.setdefault(leave + clean[lot.room.code], []).append((lot.room.code, bags))

    # --- a day ----------------------------------------------------------------------------------------------------

    def _release(self, day: int) -> None:
        for room, bags in self._frees.pop(day, ()):
            self.standing[room] -= bags

    def _ripen(self, day: int) -> None:
        for batch, room, bags in self._comes_ready.pop(day, ()):
            self.standing[room] -= batch.lost
            self._put(batch, room, bags=bags - batch.lost)

    def _put(self, batch: Batch, room: str, *, held: int | None = None, bags: int | None = None) -> None:
        entry = Waiting(batch.lot, room, batch.ready, held, batch.deadline, batch.bags if bags is None else bags)
        queue = self._waiting.setdefault((batch.strain, batch.pool), [])
        queue.append(entry)
        queue.sort(key=lambda item: (item.deadline, item.ready, item.lot))

    def _take(self, strain: int, source: int, bags: int) -> list[tuple[Waiting, int]]:
        taken = []
        for item in self._waiting.get((strain, source), ()):
            if bags and item.bags:
                count = min(bags, item.bags)
                item.bags -= count
                bags -= count
                self.standing[item.room] -= count
                taken.append((item, count))
        return taken

    def _hold(self, day: int, strain: int, source: int, bags: int) -> None:
        assert self.problem.cold_pool is not None  # noqa: S101  (hold columns exist only with a cold room)
        for item, count in self._take(strain, source, bags):
            for room, part in self._rooms_with_places(self.problem.cold_pool.rooms, count):
                self.housed.holdings.append(
                    Holding(item.lot, self._date(day), item.room, self._date(item.ready), room, part)
                )
                deadline = day + self.problem.strains[strain].cold_hold_days
                entry = Waiting(item.lot, room, item.ready, day, deadline, part)
                self._waiting.setdefault((strain, self.flow.cold), []).append(entry)
                self.standing[room] += part

    def _drop(self, day: int, strain: int, source: int, bags: int) -> None:
        for item, count in self._take(strain, source, bags):
            self._discard(day, item, count)

    def _discard(self, day: int, item: Waiting, count: int) -> None:
        self.housed.discards.append(Discard(item.lot, self._date(day), item.room, self._date(item.ready), count))

    def _expire(self, day: int) -> None:
        """Discard what must leave today and did not."""
        for queue in self._waiting.values():
            for item in queue:
                if item.bags and item.deadline <= day:
                    self.standing[item.room] -= item.bags
                    self._discard(day, item, item.bags)
                    item.bags = 0
            queue[:] = [item for item in queue if item.bags]

    def _inoculate(self, day: int, batch: Batch) -> None:
        rooms = self.problem.colony_pools[batch.pool].rooms
        lost = batch.lost
        for room, part in self._rooms_with_places(rooms, batch.bags):
            share = min(lost, part)
            lost -= share
            event = Inoculation(batch.lot, self._date(day), room, part, self._date(batch.ready), share)
            self.housed.inoculations.append(event)
            self.standing[room] += part
            piece = Batch(**{**vars(batch), "bags": part, "lost": share})
            self._comes_ready.setdefault(batch.arrival, []).append((piece, room, part))

    def _rooms_with_places(self, rooms: Sequence[Room], bags: int) -> Iterable[tuple[str, int]]:
        """Split bags over rooms with free places; what finds none goes to the last room."""
        for room in rooms:
            free = self.places[room.code] - self.standing[room.code]
            part = bags if room is rooms[-1] else min(bags, max(0, free))
            if part > 0:
                bags -= part
                yield room.code, part

    # --- opening --------------------------------------------------------------------------------------------------

    def _open_all(self, day: int) -> None:
        columns, cold = self.flow.columns, self.flow.cold
        for strain in self.flow.active:
            goals = []
            for pool in self.problem.fruit_pools_for(strain):
                for flushes in range(1, len(self.problem.strains[strain].flush_share) + 1):
                    column = columns.open.get((strain, pool, day, flushes))
                    bags = 0 if column is None else round(self.values[column])
                    if bags > 0:
                        goals.append((pool, flushes, bags))
            if not goals:
                continue
            ready = self._picked_from_sources(strain, day, sum(bags for _, _, bags in goals), cold)
            for pool, flushes, bags in goals:
                left = bags
                while left and ready:
                    item, count = ready[0]
                    part = min(left, count)
                    left -= part
                    ready[0] = (item, count - part)
                    if count == part:
                        ready.pop(0)
                    self._open(day, strain, pool, flushes, item, part)

    def _picked_from_sources(self, strain: int, day: int, bags: int, cold: int) -> list[tuple[Waiting, int]]:
        """Bags from each source as planned, rounded; the first source with bags makes up the difference."""
        sources = [*self.problem.colony_pools_for(strain), cold]
        planned = {}
        for source in sources:
            columns = self.flow.columns.leaving.get((strain, source, day))
            if columns is not None:
                planned[source] = min(round(sum(self.values[column] for column in columns)), bags)
        taken: list[tuple[Waiting, int]] = []
        for source, count in planned.items():
            taken += self._take(strain, source, min(count, bags - sum(n for _, n in taken)))
        for source in planned:
            missing = bags - sum(n for _, n in taken)
            if missing > 0:
                taken += self._take(strain, source, missing)
        return taken

    def _open(self, day: int, strain: int, pool: int, flushes: int, item: Waiting, bags: int) -> None:
        problem, rooms = self.problem, self.problem.fruit_pools[pool]
        kg = problem.flush_kg(strain)
        days = [day + problem.flush_day(strain, k, pool) for k in range(1, flushes + 1)]
        leave = self.flow.leave_day(days[-1])
        for room, part in self._rooms_with_places(rooms.rooms, bags):
            picks = tuple(FlushPick(self._date(d), k + 1, part * kg[k], 0.0) for k, d in enumerate(days))
            self.housed.openings.append(
                Opening(
                    item.lot,
                    self._date(day),
                    item.room,
                    self._date(item.ready),
                    None if item.held is None else self._date(item.held),
                    room,
                    part,
                    flushes,
                    self._date(leave),
                    picks,
                )
            )
            self.standing[room] += part
            self._frees.setdefault(leave + rooms.clean_days, []).append((room, part))
