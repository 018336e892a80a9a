"""Bags as stocks and flows by day: runs of the sterilisers, bags filled, cooled and inoculated.

A chain holds one state column a step (the stock at the end of that day); what may wait only so long is a windowed
sum: the stock at the end of a day is at most what entered recently enough to wait until the next step. The chain goes
on in `opening` (ready bags) and `places` (rooms).
"""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass, field

from scheduler.planning.columns import Columns, Group, GroupKey
from scheduler.planning.matrix import Matrix
from scheduler.planning.network import Arc
from scheduler.planning.problem import Problem


@dataclass(frozen=True, slots=True)
class Reserve:
    """A row with its bound, and what one bag adds to it at most."""

    row: int
    high: float
    per_bag: float


@dataclass
class StockAndFlow:
    """A matrix under construction with what its columns mean.

    ``sources`` of a strain's ready bags are its colonisation pools and, as the index after the last pool, the cold.
    ``ripe`` holds, by strain and day, the columns of bags that ripen then with their kilograms a bag; ``place_states``
    the columns of bags in rooms with their places; ``reserves`` the rows of which rounding keeps a little back: shifts,
    benches, a room's heat.
    """

    problem: Problem
    matrix: Matrix = field(default_factory=Matrix)
    columns: Columns = field(default_factory=Columns)
    groups: list[Group] = field(default_factory=list)
    arc_group: list[int] = field(default_factory=list)
    ripe: dict[tuple[int, int], list[tuple[int, float]]] = field(default_factory=dict)
    ready_rows: dict[tuple[int, int, int], int] = field(default_factory=dict)
    wait_rows: dict[tuple[int, int, int], int] = field(default_factory=dict)
    place_rows: dict[int, dict[int, int]] = field(default_factory=dict)
    place_states: list[tuple[int, float]] = field(default_factory=list)
    reserves: list[Reserve] = field(default_factory=list)
    _group_index: dict[GroupKey, int] = field(default_factory=dict)

    def __post_init__(self) -> None:
        days = self.problem.days
        shifts = self.problem.shifts
        self.inoculation_days = [day for day in range(days) if shifts.on(day, "inoculate")]
        self.open_days = [day for day in range(days) if shifts.on(day, "open")]
        self.cold = len(self.problem.colony_pools)
        wanted = {item.strain for item in self.problem.order_days}
        stocked = {lot.strain for lot in self.problem.stock.ready} | {lot.strain for lot in self.problem.stock.cooled}
        self.made = sorted(wanted)
        self.active = sorted(wanted | stocked)
        self.forced_until = self.problem.stock.last_forced_day if self.problem.stock else -1

    def leave_day(self, last_pick: int) -> int:
        """Day on which bags are discarded after their last pick: the first with an *open* shift."""
        return self.problem.shifts.next_day_with("open", last_pick)

    def discard_limit(self, day: int, *, stocked: bool) -> float:
        """Upper bound of a discard column: only bags of the opening stock may be dropped from the start."""
        return float("inf") if stocked and day <= self.forced_until else 0.0

    def loss_rows(self, strain: int, pool: int, ready: int, deadline: int) -> list[int]:
        """Rows whose bounds rise by one for each bag fewer lost among those ready on a day in a pool."""
        rows = []
        step = bisect_right(self.open_days, ready - 1)
        if step < len(self.open_days):
            rows.append(self.ready_rows[strain, pool, self.open_days[step]])
            last = bisect_right(self.open_days, deadline) - 1 if deadline < self.problem.days else len(self.open_days)
            rows += [self.wait_rows[strain, pool, self.open_days[k]] for k in range(step, last)]
        steps = sorted(self.place_rows.get(pool, ()))
        step = bisect_right(steps, ready - 1)
        if step < len(steps):
            rows.append(self.place_rows[pool][steps[step]])
        return rows

    def add_runs(self) -> None:
        """Run integers, and the balance of idle sterilisers over the moments when one can be loaded."""
        for arc in self.problem.arcs:
            count = self.problem.farm.steriliser[arc.steriliser].count
            column = self.matrix.column(gain=-arc.energy_cost, high=float(count), whole=True)
            self.columns.run.append(column)
            self.arc_group.append(self._group_of(arc))
        for index in range(len(self.problem.farm.steriliser)):
            self._add_steriliser(index)

    def _group_of(self, arc: Arc) -> int:
        key = arc.bag_group
        if key not in self._group_index:
            self._group_index[key] = len(self.groups)
            self.groups.append(Group(*key))
        return self._group_index[key]

    def _add_steriliser(self, index: int) -> None:
        steriliser = self.problem.farm.steriliser[index]
        own = [(arc, self.columns.run[k]) for k, arc in enumerate(self.problem.arcs) if arc.steriliser == index]
        moments = sorted({arc.load_start for arc, _ in own})
        leaving: dict[int, list[int]] = {}
        coming: dict[int, list[int]] = {}
        for arc, column in own:
            leaving.setdefault(arc.load_start, []).append(column)
            node = bisect_right(moments, arc.unloaded - 1)
            if node < len(moments):
                coming.setdefault(moments[node], []).append(column)
        before: int | None = None
        for moment in moments:
            idle = self.matrix.column(high=float(steriliser.count))
            terms = [(idle, 1.0)]
            terms += [(column, 1.0) for column in leaving.get(moment, ())]
            terms += [(column, -1.0) for column in coming.get(moment, ())]
            constant = float(steriliser.count) if before is None else 0.0
            if before is not None:
                terms.append((before, -1.0))
            self.matrix.row(f"steriliser {steriliser.code}", moment, terms, low=constant, high=constant)
            before = idle

    def add_filling(self) -> None:
        """Bags by strain in each group of runs, within the load steps of its runs."""
        problem, farm = self.problem, self.problem.farm
        capacity: list[list[tuple[int, float]]] = [[] for _ in self.groups]
        for k, arc in enumerate(problem.arcs):
            capacity[self.arc_group[k]].append((self.columns.run[k], -float(arc.bags)))
        for index, group in enumerate(self.groups):
            terms: list[tuple[int, float]] = []
            for strain in problem.kinds[group.kind].strains:
                if strain not in self.made:
                    continue
                card = problem.strains[strain]
                bag, recipe = farm.bag_of(card), farm.recipe_of(card)
                cost = bag.wet_kg * recipe.price_per_kg + bag.cost
                column = self.matrix.column(gain=-cost, whole=True)
                self.columns.fill[strain, index] = column
                terms.append((column, 1.0))
            self.matrix.row("load", group.load_day, terms + capacity[index], high=0.0)

    def add_inoculation(self) -> None:
        """Inoculated bags by strain, pool and day, and the cooled bags that wait for it."""
        for strain in self.active:
            self._add_cooled_chain(strain)

    def _add_cooled_chain(self, strain: int) -> None:
        card = self.problem.strains[strain]
        spawn = self.problem.farm.bag_of(card).wet_kg * card.spawn_rate_pct / 100 * card.spawn_cost_per_kg
        own = [(self.groups[g], column) for (s, g), column in self.columns.fill.items() if s == strain]
        stock = [lot for lot in self.problem.stock.cooled if lot.strain == strain and lot.last_day is not None]
        arriving: dict[int, list[int]] = {}
        waiting: dict[int, list[int]] = {}
        for group, column in own:
            arriving.setdefault(group.first, []).append(column)
            for day in range(group.first, group.last):
                waiting.setdefault(day, []).append(column)
        before: int | None = None
        for step, day in enumerate(self.inoculation_days):
            flows = []
            for pool in self.problem.colony_pools_for(strain):
                if self._can_be_opened(strain, day + self.problem.ready_days(strain, pool)):
                    column = self.matrix.column(gain=-spawn, whole=True)
                    self.columns.inoculate[strain, pool, day] = column
                    flows.append(column)
            drop = self.matrix.column(high=self.discard_limit(day, stocked=bool(stock)))
            self.columns.drop_cooled[strain, day] = drop
            state = self.matrix.column()
            self.columns.cooled[strain, day] = state
            terms = [(state, 1.0), (drop, 1.0), *((column, 1.0) for column in flows)]
            terms += [(column, -1.0) for column in arriving.get(day, ())]
            if before is not None:
                terms.append((before, -1.0))
            entering = float(sum(lot.lot.bags for lot in stock)) if step == 0 else 0.0
            self.matrix.row("cooled", day, terms, low=entering, high=entering)
            recent = [(column, -1.0) for column in waiting.get(day, ())]
            left = float(sum(lot.lot.bags for lot in stock if (lot.last_day or 0) > day))
            self.matrix.row("cooled wait", day, [(state, 1.0), *recent], high=left)
            before = state

    def _can_be_opened(self, strain: int, ready: int) -> bool:
        """Whether bags that are ready on a day meet an *open* shift before their wait runs out."""
        wait = self.problem.strains[strain].ready_wait_days
        return ready >= self.problem.days or self.problem.shifts.next_day_with("open", ready) <= ready + wait

    def add_fruiting_stock(self) -> None:
        """Opened bags of the opening stock: how many flushes of them are kept."""
        for index, lot in enumerate(self.problem.stock.fruiting):
            columns = []
            for kept in range(len(lot.flush_days) + 1):
                if kept and lot.flush_days[kept - 1] >= self.problem.days:
                    break
                column = self.matrix.column(whole=True)
                self.columns.keep[index, lot.picked + kept] = column
                columns.append(column)
                for flush in range(kept):
                    self.ripens(lot.strain, lot.flush_days[flush], column, lot.flush_kg[flush])
            bags = float(lot.lot.bags)
            self.matrix.row("kept", index, [(column, 1.0) for column in columns], low=bags, high=bags)

    def ripens(self, strain: int, day: int, column: int, kg: float) -> None:
        """Note that each bag of a column ripens so many kilograms on a day; without a *pick* shift they spoil."""
        if self.problem.shifts.on(day, "pick"):
            self.ripe.setdefault((strain, day), []).append((column, kg))
        else:
            self.matrix.gain[column] -= kg * self.problem.farm.market.spoilage_per_kg
