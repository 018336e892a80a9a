"""Writes bags that were followed piece by piece out as a whole plan: losses, lots, sales, hours, money."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass, field
from datetime import date, timedelta
from math import floor

from models.calendar import Week
from models.farm import Room
from models.plan import (
    Account,
    CrewHours,
    Delivery,
    Discard,
    FlushPick,
    Holding,
    Inoculation,
    Lot,
    Opening,
    Plan,
    Run,
    SolveReport,
    Surplus,
)
from scheduler.planning.network import Arc
from scheduler.planning.problem import Problem
from scheduler.planning.unavoidable import unavoidable_kilograms
from tests.benchmarks.ledger import Ledger

DUST = 1e-9


@dataclass
class Load:
    """One run: when, which unit, bags by strain; ``code`` and ``number`` follow when all runs are known."""

    arc: Arc
    unit: int = 0
    bags: dict[int, int] = field(default_factory=dict)
    code: str = ""
    number: int = 0
    week: str = ""


@dataclass
class Exit:
    """Bags that leave an entry: opened into a room for so many flushes, or discarded unopened.

    ``ripe`` holds day, flush number and kilograms a bag.
    """

    kind: str
    day: int
    bags: int
    room: Room | None = None
    flushes: int = 0
    leave: int = 0
    ripe: tuple[tuple[int, int, float], ...] = ()


@dataclass
class Entry:
    """Bags of one lot that are inoculated together, or that stood in a room before the plan."""

    lot: Load | str
    strain: int
    day: int
    room: Room | None
    bags: int
    ready: int
    before: bool = False
    held: bool = False
    fruiting: bool = False
    losing: bool = False
    lost: int = 0
    exits: list[Exit] = field(default_factory=list)


class _Season:
    """A season on its way to a plan."""

    def __init__(self, problem: Problem, ledger: Ledger, loads: Sequence[Load], entries: Sequence[Entry]) -> None:
        self.problem, self.farm, self.ledger = problem, problem.farm, ledger
        self.loads, self.entries = loads, entries
        self.strains = problem.farm.strain
        self._number_runs()
        self._lose()

    def day(self, index: int) -> date:
        return self.problem.clock.first_day + timedelta(days=index)

    def _number_runs(self) -> None:
        numbers: dict[str, int] = defaultdict(int)
        sterilisers = self.farm.steriliser
        for load in sorted(self.loads, key=lambda x: (x.arc.load_start, sterilisers[x.arc.steriliser].code, x.unit)):
            load.week = Week.of(self.problem.clock.at(load.arc.load_start).date()).short
            numbers[load.week] += 1
            load.number = numbers[load.week]
            load.code = f"{load.week}-R{load.number}"

    def code(self, entry: Entry) -> str:
        """Lot code of an entry."""
        if isinstance(entry.lot, str):
            return entry.lot
        return f"{entry.lot.week}-{self.strains[entry.strain].code}-{entry.lot.number}"

    def _lose(self) -> None:
        """Whole losses: the running total by strain, rounded; the last to leave an entry are those that are lost."""
        total: dict[int, float] = defaultdict(float)
        taken: dict[int, int] = defaultdict(int)
        for entry in sorted(self.entries, key=lambda e: (e.ready, e.day, self.code(e))):
            if not entry.losing or not 0 <= entry.ready < self.problem.days:
                continue
            total[entry.strain] += entry.bags * self.strains[entry.strain].loss_pct / 100
            entry.lost = min(entry.bags, floor(total[entry.strain] + 0.5) - taken[entry.strain])
            taken[entry.strain] += entry.lost
            left = entry.lost
            for leaving in reversed(entry.exits):
                part = min(left, leaving.bags)
                leaving.bags -= part
                left -= part

    # --- sales ------------------------------------------------------------------------------------------------------

    def sell(self) -> tuple[list[Delivery], list[Surplus], dict[tuple[int, int], float]]:
        """Oldest ripe mushrooms to each day's orders by priority, what is left to the spot market."""
        problem, rate = self.problem, self.farm.rates.pick_kg_h
        ripe: dict[tuple[int, int], float] = defaultdict(float)
        for entry in self.entries:
            for leaving in entry.exits:
                for day, _, kg in leaving.ripe:
                    if problem.shifts.on(day, "pick"):
                        ripe[entry.strain, day] += leaving.bags * kg
        picked: dict[tuple[int, int], float] = defaultdict(float)

        def pick(strain: int, day: int, wanted: float) -> float:
            kg = min(wanted, ripe[strain, day] - picked[strain, day], self.ledger.hours_left("pick", day) * rate)
            if kg <= DUST or not self.ledger.work([("pick", day, kg / rate)]):
                return 0.0
            picked[strain, day] += kg
            return kg

        deliveries = []
        for item, lost in zip(problem.order_days, unavoidable_kilograms(problem), strict=True):
            given = 0.0
            for day in range(item.day - problem.selling_days(item.strain), item.day + 1):
                if day >= 0 and item.kg - given > DUST:
                    given += pick(item.strain, day, item.kg - given)
            order, short = problem.orders[item.order], item.kg - given
            deliveries.append(
                Delivery(
                    item.order,
                    order.customer,
                    order.strain,
                    self.day(item.day),
                    item.kg,
                    given,
                    short,
                    min(lost, short),
                )
            )
        surplus = []
        left: dict[int, float] = defaultdict(lambda: self.farm.market.spot_kg_week)
        for strain, day in sorted(ripe, key=lambda key: (key[1], -_spot_price(problem, key[0]), key[0])):
            if _spot_price(problem, strain) > 0:
                kg = pick(strain, day, left[day // 7])
                left[day // 7] -= kg
                if kg:
                    surplus.append(Surplus(self.strains[strain].code, self.day(day), kg, 0.0))
        return deliveries, surplus, picked

    # --- things -----------------------------------------------------------------------------------------------------

    def runs(self) -> list[Run]:
        """All runs, in order of load moment."""
        found = []
        for load in self.loads:
            arc = load.arc
            found.append(
                Run(
                    code=load.code,
                    steriliser=self.farm.steriliser[arc.steriliser].code,
                    unit=load.unit,
                    programme=self.problem.kinds[arc.kind].programme.code,
                    load_step=arc.load_step,
                    mix_start=arc.mix_start,
                    load_start=arc.load_start,
                    steam_on=arc.steam_on,
                    ready=arc.ready,
                    unload=arc.unload,
                    unloaded=arc.unloaded,
                    cooled=arc.cooled,
                    bags={self.strains[strain].code: bags for strain, bags in sorted(load.bags.items())},
                    energy_kwh=arc.energy_kwh,
                    energy_cost=arc.energy_cost,
                )
            )
        return sorted(found, key=lambda run: (run.load_start, run.steriliser, run.unit))

    def lots(self) -> list[Lot]:
        """A lot for each strain of each run, and those of the opening stock."""
        found = [
            Lot(f"{load.week}-{self.strains[strain].code}-{load.number}", self.strains[strain].code, bags, load.code)
            for load in self.loads
            for strain, bags in load.bags.items()
        ]
        return found + [Lot(lot.lot, lot.strain, lot.bags, "") for lot in self.problem.stock.lots]

    def entered(self) -> tuple[list[Inoculation], list[Holding]]:
        """Inoculations, and lots that stood in the cold before the plan."""
        inoculations, holdings = [], []
        for entry in self.entries:
            if entry.fruiting or entry.room is None:
                continue
            code, day, ready = self.code(entry), self.day(entry.day), self.day(entry.ready)
            if entry.held:
                holdings.append(Holding(code, day, "", ready, entry.room.code, entry.bags, before=True))
            else:
                inoculations.append(
                    Inoculation(code, day, entry.room.code, entry.bags, ready, entry.lost, before=entry.before)
                )
        return inoculations, holdings

    def left(self, picked: dict[tuple[int, int], float]) -> tuple[list[Opening], list[Discard]]:
        """Openings with their picks, and discards."""
        openings, discards = [], []
        rest = dict(picked)
        for entry in self.entries:
            code, ready = self.code(entry), self.day(entry.ready)
            for leaving in entry.exits:
                if not leaving.bags:
                    continue
                if leaving.kind == "discard":
                    room = entry.room.code if entry.room else ""
                    discards.append(Discard(code, self.day(leaving.day), room, ready if room else None, leaving.bags))
                    continue
                assert leaving.room is not None
                picks = []
                for day, flush, each in leaving.ripe:
                    kg = min(rest.get((entry.strain, day), 0.0), leaving.bags * each)
                    rest[entry.strain, day] = rest.get((entry.strain, day), 0.0) - kg
                    picks.append(FlushPick(self.day(day), flush, leaving.bags * each, kg))
                opened = self.day(leaving.day)
                if entry.fruiting:
                    opened = ready = next(lot.since for lot in self.problem.stock.lots if lot.lot == code)
                openings.append(
                    Opening(
                        lot=code,
                        day=opened,
                        from_room="" if entry.fruiting or entry.room is None else entry.room.code,
                        ready_day=ready,
                        held_day=self.day(entry.day) if entry.held else None,
                        room=leaving.room.code,
                        bags=leaving.bags,
                        flushes=leaving.flushes,
                        leave_day=self.day(leaving.leave),
                        picks=tuple(picks),
                        before=entry.fruiting,
                    )
                )
        return openings, discards

    def hours(self, openings: Sequence[Opening]) -> list[CrewHours]:
        """Booked hours; those of opening and discarding are booked for lost bags too and shrink to what is done."""
        done: dict[int, float] = defaultdict(float)
        rates, first = self.farm.rates, self.problem.clock.first_day
        for item in openings:
            if not item.before:
                done[(item.day - first).days] += item.bags / rates.open_bags_h
            done[(item.leave_day - first).days] += item.bags / rates.discard_bags_h
        found = []
        for (skill, day), crews in sorted(self.ledger.booked.items(), key=lambda item: (item[0][1], item[0][0])):
            booked = sum(crews.values())
            share = done[day] / booked if skill == "open" and booked > 0 else 1.0
            for crew, hours in crews.items():
                if hours * share > DUST:
                    found.append(CrewHours(self.day(day), crew, skill, hours * share))
        return found


def season_plan(problem: Problem, ledger: Ledger, loads: Sequence[Load], entries: Sequence[Entry]) -> Plan:
    """The plan of a season whose bags are booked; its bound is its own money, as nothing is proven about it."""
    season = _Season(problem, ledger, loads, entries)
    deliveries, surplus, picked = season.sell()
    openings, discards = season.left(picked)
    inoculations, holdings = season.entered()
    runs, labour = season.runs(), season.hours(openings)
    money = _account(problem, runs, inoculations, openings, deliveries, surplus, labour, season.lots())
    return Plan(
        first_week=problem.first_week,
        weeks=problem.weeks,
        look_ahead_weeks=problem.look_ahead_weeks,
        runs=tuple(runs),
        lots=tuple(season.lots()),
        inoculations=tuple(inoculations),
        holdings=tuple(holdings),
        openings=tuple(openings),
        discards=tuple(discards),
        deliveries=tuple(sorted(deliveries, key=lambda item: (item.day, item.order))),
        surplus=tuple(surplus),
        labour=tuple(labour),
        shortfalls=(),
        money=money,
        report=SolveReport(money.total, money.total, 0.0, "feasible", "whiteboard rule", 0.0, 0.0, 0, {}, {}, {}),
    )


def _account(
    problem: Problem,
    runs: Sequence[Run],
    inoculations: Sequence[Inoculation],
    openings: Sequence[Opening],
    deliveries: Sequence[Delivery],
    surplus: Sequence[Surplus],
    labour: Sequence[CrewHours],
    lots: Sequence[Lot],
) -> Account:
    """Money by line."""
    farm, orders = problem.farm, problem.orders
    cards = {card.code: card for card in farm.strain}
    strain_of = {lot.code: cards[lot.strain] for lot in lots}
    spot = {card.code: _spot_price(problem, k) for k, card in enumerate(farm.strain)}
    wage = {crew.code: crew.cost_per_h for crew in farm.crew}

    def material(code: str) -> float:
        bag = farm.bag_of(cards[code])
        return bag.wet_kg * farm.recipe_of(cards[code]).price_per_kg + bag.cost

    def spawn(event: Inoculation) -> float:
        card = strain_of[event.lot]
        return event.bags * farm.bag_of(card).wet_kg * card.spawn_rate_pct / 100 * card.spawn_cost_per_kg

    return Account(
        sales=sum(item.kg * orders[item.order].price_per_kg for item in deliveries),
        spot=sum(item.spot_kg * spot[item.strain] for item in surplus),
        shortage=-sum(
            (item.short_kg - item.unavoidable_kg) * farm.market.shortage_per_kg / orders[item.order].priority
            for item in deliveries
        ),
        materials=-sum(bags * material(code) for run in runs for code, bags in run.bags.items()),
        spawn=-sum(spawn(event) for event in inoculations if not event.before),
        energy=-sum(run.energy_cost for run in runs),
        labour=-sum(item.hours * wage[item.crew] for item in labour),
        spoilage=-sum(pick.ripe_kg - pick.kg for item in openings for pick in item.picks) * farm.market.spoilage_per_kg,
    )


def _spot_price(problem: Problem, strain: int) -> float:
    """What the spot market pays for a strain at its better price [currency/kg]."""
    return problem.farm.market.spot_price_share * problem.mean_price(strain)
