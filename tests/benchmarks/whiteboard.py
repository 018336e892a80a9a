"""The whiteboard rule: bags = order / yield, lead time back from each delivery, runs filled in due order.

What a grower does with a pen. Each flush count is fixed for the whole season; each delivery asks for the bags whose
kept flushes add up to its kilograms, losses included; pins, colonisation and cooling are counted back to the days on
which they may be loaded. At each moment at which a steriliser is free, what is due first goes in, with all strains of
one programme mixed; it is steamed when the load is full or when something in it cannot wait. Bags that would break a
limit of the farm are left out. Oldest mushrooms go to the day's orders first, the rest to the spot market.

The facts come from `scheduler.planning.problem`: calendar, order days, opening stock by stage and the runs that can be
(so that load moments are the planner's own), and from `models` what grows when; so does the shortage that nothing
could avoid. No decision and no sum of the planner is used.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Sequence
from dataclasses import dataclass, field
from math import ceil

from models.calendar import Week
from models.farm import Farm, Order, Room, StockLot, Strain
from models.growth.colonisation import days_to_ready
from models.growth.flush import expected_flush_kg, flush_days
from models.plan import Plan
from scheduler.planning.network import Arc
from scheduler.planning.problem import Problem, state_problem
from tests.benchmarks.ledger import COOLING, Ledger, Need
from tests.benchmarks.season import Entry, Exit, Load, season_plan

MARGIN_DAYS = 1
"""Days before their last chance at which bags are steamed even if they do not fill a load."""
LEAST_FILL = 1 / 3


@dataclass
class Demand:
    """Bags of one strain for one delivery: days they may be opened, and first and last day to inoculate them."""

    strain: int
    due: int
    bags: int
    opens: tuple[int, ...]
    first: int
    last: int


@dataclass(frozen=True)
class Lead:
    """How one strain is grown under the rule: rooms, days from inoculation to ready, flushes kept and their days."""

    card: Strain
    shelves: tuple[Room, ...]
    fruiting: tuple[Room, ...]
    span: int
    flushes: int
    flush_days: tuple[int, ...]
    kg: tuple[float, ...]


@dataclass
class Whiteboard:
    """One season drawn up by the rule, with a fixed flush count."""

    problem: Problem
    flushes: int
    loads: list[Load] = field(default_factory=list)
    entries: list[Entry] = field(default_factory=list)

    def __post_init__(self) -> None:
        self.farm = self.problem.farm
        self.ledger = Ledger(self.problem)
        self._chances = self._first_inoculations()
        self.leads = {k: self._lead(card) for k, card in enumerate(self.farm.strain)}

    def _lead(self, card: Strain) -> Lead:
        """The first rooms in the farm file that suit, and others alike; as many flushes as the rule keeps."""
        shelves = [room for room in self.farm.rooms_of("colonisation") if card.grows_in(room.temp_c)]
        low, high = card.fruiting_temp_c
        fruiting = [room for room in self.farm.rooms_of("fruiting") if low <= room.temp_c <= high]
        span, days = days_to_ready(card, shelves[0].temp_c), flush_days(card, fruiting[0].temp_c)
        kept = min(self.flushes, len(card.flush_share))
        kg = expected_flush_kg(card, self.farm.recipe_of(card), self.farm.bag_of(card))
        return Lead(
            card,
            tuple(room for room in shelves if days_to_ready(card, room.temp_c) == span),
            tuple(room for room in fruiting if flush_days(card, room.temp_c) == days),
            span,
            kept,
            days[:kept],
            kg[:kept],
        )

    def _first_inoculations(self) -> dict[int, list[tuple[int, int]]]:
        """By kind of run: load days, and the earliest day on which what is loaded then can be inoculated."""
        first: dict[int, dict[int, int]] = {}
        for arc in self.problem.arcs:
            days = first.setdefault(arc.kind, {})
            days[arc.load_day] = min(arc.first_inoculation, days.get(arc.load_day, arc.first_inoculation))
        return {kind: sorted(days.items()) for kind, days in first.items()}

    def _next_chance(self, arc: Arc) -> int:
        """Earliest day on which bags loaded on the next load day of a kind can be inoculated."""
        days = self._chances[arc.kind]
        step = bisect_right(days, (arc.load_day, self.problem.days))
        return days[step][1] if step < len(days) else self.problem.days

    def draw_up(self) -> Plan:
        """Book the opening stock, fill the runs, and write the season out as a plan."""
        for lot in self.problem.stock.fruiting:
            self._keep(lot.lot.lot, lot.strain, lot.room, lot.lot.bags, lot.picked, lot.flush_days, lot.flush_kg)
        for ready in self.problem.stock.ready:
            since = (ready.lot.since - self.problem.clock.first_day).days
            entry = Entry(ready.lot.lot, ready.strain, since, ready.room, ready.lot.bags, ready.ready, before=True)
            entry.held, entry.losing = ready.held, ready.loss_pct > 0
            if ready.lot.stage == "colonising":
                self.ledger.warm(self.farm.strain[ready.strain], ready.room, since, ready.lot.bags)
            self._open_stock(entry, ready.arrival, ready.deadline)
        for cooled in self.problem.stock.cooled:
            self._inoculate_stock(cooled.lot.lot, cooled.strain, cooled.lot.bags, cooled.last_day)
        self._fill_runs(self._demands())
        return season_plan(self.problem, self.ledger, self.loads, self.entries)

    # --- opening stock ----------------------------------------------------------------------------------------------

    def _keep(
        self, lot: str, strain: int, room: Room, bags: int, picked: int, days: Sequence[int], kg: Sequence[float]
    ) -> None:
        """Keep bags that fruit already for as many flushes as the rule keeps."""
        entry = Entry(lot, strain, 0, room, bags, 0, before=True, fruiting=True)
        wanted = max(0, self.leads[strain].flushes - picked)
        wanted = min(wanted, sum(day < self.problem.days for day in days))
        for kept in sorted(range(len(days) + 1), key=lambda count: abs(count - wanted)):
            leave = self.problem.shifts.next_day_with("open", days[kept - 1] if kept else 0)
            needs = [("open", leave, bags / self.farm.rates.discard_bags_h)]
            if self.ledger.work(needs) or (kept == len(days) and self.ledger.work(needs, force=True)):
                ripe = tuple((day, picked + k + 1, kg[k]) for k, day in enumerate(days[:kept]))
                entry.exits.append(Exit("open", 0, bags, room, picked + kept, leave, ripe))
                self.ledger.stand(room.code, 0, leave + room.clean_days, bags)
                break
        self.entries.append(entry)

    def _open_stock(self, entry: Entry, arrival: int, deadline: int) -> None:
        """Open bags that are ready, or soon will be, as early as there are places; the rest is thrown away."""
        left = entry.bags
        for day in range(arrival, min(deadline, self.problem.days - 1) + 1):
            left -= self._open(entry, day, left)
            if not left:
                break
        if left and deadline < self.problem.days:
            entry.exits.append(Exit("discard", deadline, left))
            self.ledger.stand(entry.room.code, 0, deadline, left)
        elif left:
            self.ledger.stand(entry.room.code, 0, self.problem.days, left)
        self.entries.append(entry)

    def _open(self, entry: Entry, day: int, bags: int) -> int:
        """Open up to so many bags of an entry on a day; how many it came to."""
        lead = self.leads[entry.strain]
        if day + lead.flush_days[-1] >= self.problem.days or not self.problem.shifts.on(day, "open"):
            return 0
        opened = 0
        leave = self._leave(lead, day)
        for room in lead.fruiting:
            part = min(bags - opened, self.ledger.places(room.code, day, leave + room.clean_days))
            part = self.ledger.hands(self._opening_hours(day, leave, 1), part)
            while part > 0 and not self.ledger.work(self._opening_hours(day, leave, part)):
                part = part * 3 // 4
            if part > 0:
                self._put_out(entry, lead, day, room, part)
                self.ledger.stand(entry.room.code, 0, day, part)
                opened += part
        return opened

    def _inoculate_stock(self, lot: str, strain: int, bags: int, last_day: int | None) -> None:
        lead = self.leads[strain]
        left = bags
        for day in range(0 if last_day is None else last_day + 1):
            if not left or not self.problem.shifts.on(day, "inoculate"):
                continue
            opens = tuple(range(day + lead.span, day + lead.span + lead.card.ready_wait_days + 1))
            demand = Demand(strain, self.problem.days, left, opens, day, day)
            done = self._place(lot, demand, (day, day), left, [])
            self.ledger.stand(COOLING, 0, day + 1, done)
            left -= done
        if left:
            self.entries.append(Entry(lot, strain, 0, None, left, 0, exits=[Exit("discard", 0, left)]))

    # --- new bags ---------------------------------------------------------------------------------------------------

    def _demands(self) -> list[Demand]:
        """Bags for every delivery, and the days that follow from it; what is due before it can be is left out."""
        shifts, found = self.problem.shifts, []
        for item in self.problem.order_days:
            lead = self.leads[item.strain]
            life = self.problem.selling_days(item.strain)
            picks = [day for day in range(item.day, item.day - life - 1, -1) if shifts.on(day, "pick")]
            opens = [day - lead.flush_days[0] for day in picks]
            opens = [day for day in opens if day >= 0 and shifts.on(day, "open")]
            if opens:
                bags = ceil(item.kg / (sum(lead.kg) * (1 - lead.card.loss_pct / 100)) - 1e-9)
                first = min(opens) - lead.card.ready_wait_days - lead.span
                found.append(Demand(item.strain, item.day, bags, tuple(opens), first, max(opens) - lead.span))
        return found

    def _fill_runs(self, demands: list[Demand]) -> None:
        moments: dict[tuple[int, int], list[Arc]] = {}
        for arc in self.problem.arcs:
            moments.setdefault((arc.load_start, arc.steriliser), []).append(arc)
        free = [[0] * steriliser.count for steriliser in self.farm.steriliser]
        for (moment, index), arcs in sorted(moments.items()):
            demands = [item for item in demands if item.bags and item.last >= arcs[0].unload_day]
            for unit, since in enumerate(free[index]):
                if since <= moment:
                    load = self._fill(arcs, demands)
                    if load is None:
                        break
                    load.unit = unit + 1
                    free[index][unit] = load.arc.unloaded

    def _fill(self, arcs: Sequence[Arc], demands: Sequence[Demand]) -> Load | None:
        """One run of what is due first, if it fills a load or cannot wait."""
        best: tuple[int, int, Arc, list[Demand]] | None = None
        for kind in sorted({arc.kind for arc in arcs}):
            own = sorted((arc for arc in arcs if arc.kind == kind), key=lambda arc: arc.bags)
            full, strains = own[-1], self.problem.kinds[kind].strains
            due = [
                item
                for item in demands
                if item.strain in strains
                and item.first <= full.last_inoculation
                and item.last >= full.first_inoculation
            ]
            waiting = sum(item.bags for item in due)
            pressing = any(item.last < self._next_chance(full) + MARGIN_DAYS for item in due)
            if waiting < LEAST_FILL * own[0].bags or not (pressing or waiting >= full.bags):
                continue
            arc = next((arc for arc in own if arc.bags >= waiting), full)
            due.sort(key=lambda item: item.due)
            if best is None or (due[0].due, -min(waiting, arc.bags)) < best[:2]:
                best = (due[0].due, -min(waiting, arc.bags), arc, due)
        if best is None or not self.ledger.draw(best[2]):
            return None
        _, _, arc, due = best
        load = Load(arc)
        for item in due:
            wanted = min(item.bags, arc.bags - sum(load.bags.values()))
            rates = self.farm.rates
            lead_in = [("mix", arc.load_day, 1 / rates.mix_bags_h), ("steam", arc.load_day, 1 / rates.load_bags_h)]
            lead_in.append(("steam", arc.unload_day, 1 / rates.unload_bags_h))
            window = (arc.first_inoculation, arc.last_inoculation)
            done = self._place(load, item, window, wanted, lead_in, arc.unload_day)
            if done:
                item.bags -= done
                load.bags[item.strain] = load.bags.get(item.strain, 0) + done
        if not load.bags:
            return None
        self.loads.append(load)
        return load

    def _place(
        self, lot: Load | str, item: Demand, window: tuple[int, int], bags: int, lead_in: list[Need], since: int = 0
    ) -> int:
        """Book bags from their run to the day they are spent, as many as fit; how many it came to."""
        lead, left = self.leads[item.strain], bags
        for day in range(max(window[0], item.first), min(window[1], item.last) + 1):
            if not self.problem.shifts.on(day, "inoculate"):
                continue
            ready = day + lead.span
            for opened in item.opens:
                works = opened < self.problem.days and self.problem.shifts.on(opened, "open")
                inside = works and opened + lead.flush_days[0] < self.problem.days
                if left and inside and ready <= opened <= ready + lead.card.ready_wait_days:
                    left -= self._book(lot, item.strain, day, opened, left, lead_in, since)
        return bags - left

    def _book(
        self, lot: Load | str, strain: int, day: int, opened: int, bags: int, lead_in: list[Need], since: int
    ) -> int:
        lead, ledger = self.leads[strain], self.ledger
        leave = self._leave(lead, opened)
        done = 0
        for shelf in lead.shelves:
            for wet in lead.fruiting:
                part = min(
                    bags - done,
                    ledger.places(shelf.code, day, opened),
                    ledger.places(wet.code, opened, leave + wet.clean_days),
                    ledger.cool_bags(lead.card, shelf, day),
                )
                if isinstance(lot, Load):
                    part = min(part, ledger.places(COOLING, since, day + 1))
                part = ledger.hands(self._hours(lead_in, day, opened, leave, 1), part)
                while part > 0 and not ledger.work(self._hours(lead_in, day, opened, leave, part)):
                    part = part * 3 // 4
                if part <= 0:
                    continue
                done += part
                if isinstance(lot, Load):
                    ledger.stand(COOLING, since, day + 1, part)
                ledger.stand(shelf.code, day, opened, part)
                ledger.warm(lead.card, shelf, day, part)
                entry = Entry(lot, strain, day, shelf, part, day + lead.span, losing=lead.card.loss_pct > 0)
                self._put_out(entry, lead, opened, wet, part)
                self.entries.append(entry)
        return done

    def _put_out(self, entry: Entry, lead: Lead, day: int, room: Room, bags: int) -> None:
        """Note that bags of an entry are opened into a room on a day, and book their places there."""
        leave = self._leave(lead, day)
        ripe = tuple(
            (day + after, k + 1, lead.kg[k])
            for k, after in enumerate(lead.flush_days)
            if day + after < self.problem.days
        )
        entry.exits.append(Exit("open", day, bags, room, lead.flushes, leave, ripe))
        self.ledger.stand(room.code, day, leave + room.clean_days, bags)

    def _leave(self, lead: Lead, opened: int) -> int:
        return self.problem.shifts.next_day_with("open", opened + lead.flush_days[-1])

    def _opening_hours(self, opened: int, leave: int, bags: int) -> list[Need]:
        rates = self.farm.rates
        return [("open", opened, bags / rates.open_bags_h), ("open", leave, bags / rates.discard_bags_h)]

    def _hours(self, lead_in: list[Need], day: int, opened: int, leave: int, bags: int) -> list[Need]:
        needs = [(skill, when, bags * hours) for skill, when, hours in lead_in]
        needs.append(("inoculate", day, bags / self.farm.rates.inoculate_bags_h))
        return needs + self._opening_hours(opened, leave, bags)


def whiteboard_plan(
    farm: Farm, orders: Sequence[Order], stock: Sequence[StockLot], first_week: Week, weeks: int
) -> Plan:
    """The best plan that the whiteboard rule gives with one, two or three flushes kept throughout."""
    problem = state_problem(farm, orders, stock, first_week, weeks)
    most = max(len(strain.flush_share) for strain in farm.strain)
    plans = [Whiteboard(problem, flushes).draw_up() for flushes in range(1, min(3, most) + 1)]
    return max(plans, key=lambda plan: plan.money.total)
