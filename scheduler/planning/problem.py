"""The planning problem as plain data: days, pools of places, run arcs, order days and opening stock."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from functools import cached_property
from math import ceil
from zoneinfo import ZoneInfo

from models.calendar import FarmClock, Week
from models.farm import Farm, Order, Room, StockLot, Strain
from models.growth.colonisation import colonisation_days, days_to_ready
from models.growth.flush import expected_flush_kg, flush_days
from models.growth.heat import heat_curve
from models.growth.shelf_life import selling_days
from models.plan import Margin
from scheduler.planning.network import Arc, RunKind, RunNetwork, run_kinds
from scheduler.planning.opening_stock import OpeningStock, read_stock
from scheduler.planning.shifts import Shifts

DAYS_FROM_LOAD_TO_SHELF = 4
MARGIN_DAYS = 40


@dataclass(frozen=True, slots=True)
class Pool:
    """Rooms of one kind whose places are interchangeable."""

    rooms: tuple[Room, ...]

    @property
    def places(self) -> int:
        """Places of all rooms together [bags]."""
        return sum(room.places for room in self.rooms)

    @property
    def temp_c(self) -> float:
        """Their temperature [°C]."""
        return self.rooms[0].temp_c

    @property
    def cooling_w(self) -> float | None:
        """Heat it can carry off [W]; None: not limited. A pool with such a limit holds one room."""
        return self.rooms[0].cooling_w

    @property
    def clean_days(self) -> int:
        """Days a place stays empty after its bags left [d]."""
        return self.rooms[0].clean_days


@dataclass(frozen=True, slots=True)
class OrderDay:
    """One delivery of one order line."""

    order: int
    strain: int
    day: int
    kg: float
    price: float
    penalty: float
    priority: int
    accepts: tuple[int, ...] = ()
    part: bool = True


@dataclass(frozen=True)
class Problem:
    """Everything the weekly plan decides about, ready for the model."""

    farm: Farm
    orders: tuple[Order, ...]
    first_week: Week
    weeks: int
    look_ahead_weeks: int
    clock: FarmClock
    shifts: Shifts
    kinds: tuple[RunKind, ...]
    arcs: tuple[Arc, ...]
    colony_pools: tuple[Pool, ...]
    fruit_pools: tuple[Pool, ...]
    cold_pool: Pool | None
    order_days: tuple[OrderDay, ...]
    stock: OpeningStock
    margins: Mapping[tuple[str, Week], Margin]

    def margin(self, strain: int, day: int) -> Margin:
        """What is kept ready for deliveries of a strain on a day."""
        return self.margins.get((self.strains[strain].code, self.first_week.plus(day // 7)), Margin())

    @property
    def days(self) -> int:
        """Days of the plan, look-ahead included [d]."""
        return 7 * (self.weeks + self.look_ahead_weeks)

    @property
    def strains(self) -> tuple[Strain, ...]:
        """The farm's strains; everywhere in the planner a strain is its index here."""
        return self.farm.strain

    def ready_days(self, strain: int, pool: int) -> int:
        """Days from inoculation to the ready day in a colonisation pool [d]."""
        return days_to_ready(self.strains[strain], self.colony_pools[pool].temp_c)

    def colony_pools_for(self, strain: int) -> tuple[int, ...]:
        """Colonisation pools in which a strain grows."""
        card = self.strains[strain]
        return tuple(k for k, pool in enumerate(self.colony_pools) if card.grows_in(pool.temp_c))

    def bag_heat(self, strain: int, pool: int) -> tuple[float, ...]:
        """Heat of a bag on each day after its inoculation into a pool [W]."""
        card, temp_c = self.strains[strain], self.colony_pools[pool].temp_c
        wet_kg = self.farm.bag_of(card).wet_kg
        return tuple(wet_kg * heat for heat in heat_curve(card, colonisation_days(card, temp_c)))

    def stock_heat(self, pool: int) -> tuple[float, ...]:
        """Heat that the colonising bags of the opening stock give off in a pool on each day of the plan [W]."""
        total = [0.0] * self.days
        codes = {room.code for room in self.colony_pools[pool].rooms}
        for lot in self.stock.ready:
            if lot.lot.stage != "colonising" or lot.room.code not in codes:
                continue
            since = (lot.lot.since - self.clock.first_day).days
            for after, watts in enumerate(self.bag_heat(lot.strain, pool)):
                if 0 <= since + after < self.days:
                    total[since + after] += lot.lot.bags * watts
        return tuple(total)

    def fruit_pools_for(self, strain: int) -> tuple[int, ...]:
        """Fruiting pools whose climate suits a strain."""
        low, high = self.strains[strain].fruiting_temp_c
        return tuple(k for k, pool in enumerate(self.fruit_pools) if low <= pool.temp_c <= high)

    def flush_kg(self, strain: int) -> tuple[float, ...]:
        """Kilograms to be expected of an opened bag in each flush [kg]."""
        card = self.strains[strain]
        return expected_flush_kg(card, self.farm.recipe_of(card), self.farm.bag_of(card))

    def flush_day(self, strain: int, flush: int, pool: int) -> int:
        """Days from opening in a fruiting pool to flush number ``flush`` (from 1) [d]."""
        return self._flush_days[strain][pool][flush - 1]

    @cached_property
    def _flush_days(self) -> tuple[tuple[tuple[int, ...], ...], ...]:
        return tuple(tuple(flush_days(card, pool.temp_c) for pool in self.fruit_pools) for card in self.strains)

    def quickest_flush_day(self, strain: int, flush: int) -> int:
        """Days from opening to flush number ``flush`` (from 1) in the quickest fruiting pool [d]."""
        return min(self.flush_day(strain, flush, pool) for pool in self.fruit_pools_for(strain))

    def selling_days(self, strain: int) -> int:
        """Days after its pick on which a strain can still be sold [d]."""
        return selling_days(self.strains[strain], self.farm.site.cold_store_c)

    def mean_price(self, strain: int) -> float:
        """Mean order price of a strain, weighted by kg; 0 without orders [currency/kg]."""
        code = self.strains[strain].code
        rows = [order for order in self.orders if order.strain == code]
        if not rows:
            return 0.0
        return sum(order.kg * order.price_per_kg for order in rows) / sum(order.kg for order in rows)


def pools_of(rooms: Sequence[Room]) -> tuple[Pool, ...]:
    """Group rooms whose temperature and cleaning are the same; a room whose heat is limited stands by itself."""
    groups: dict[tuple[float, int, str], list[Room]] = {}
    for room in rooms:
        alone = "" if room.cooling_w is None or room.kind != "colonisation" else room.code
        groups.setdefault((room.temp_c, room.clean_days, alone), []).append(room)
    return tuple(Pool(tuple(members)) for members in groups.values())


def longest_life_days(farm: Farm, orders: Sequence[Order]) -> int:
    """Days from loading a bag to the last day its last flush can be sold, for the slowest strain in use [d]."""
    wanted = {order.strain for order in orders}
    lives = [0]
    for strain in farm.strain:
        if strain.code not in wanted:
            continue
        rooms = [room for room in farm.rooms_of("colonisation") if strain.grows_in(room.temp_c)]
        slowest = max((days_to_ready(strain, room.temp_c) for room in rooms), default=0)
        low, high = strain.fruiting_temp_c
        fruiting = [room.temp_c for room in farm.rooms_of("fruiting") if low <= room.temp_c <= high]
        last_flush = max((flush_days(strain, temp)[-1] for temp in fruiting), default=flush_days(strain)[-1])
        lives.append(DAYS_FROM_LOAD_TO_SHELF + slowest + last_flush + selling_days(strain, farm.site.cold_store_c))
    return max(lives)


def order_days_of(farm: Farm, orders: Sequence[Order], weeks: Sequence[Week], first_day: date) -> tuple[OrderDay, ...]:
    """Every delivery that the order book asks for in these weeks."""
    index = {strain.code: k for k, strain in enumerate(farm.strain)}
    found = []
    for row, order in enumerate(orders):
        for week in weeks:
            day = order.day_in(week)
            if day is not None:
                penalty = farm.market.shortage_per_kg / order.priority
                found.append(
                    OrderDay(
                        row,
                        index[order.strain],
                        (day - first_day).days,
                        order.kg,
                        order.price_per_kg,
                        penalty,
                        order.priority,
                        tuple(index[code] for code in order.accepts),
                        order.part,
                    )
                )
    return tuple(sorted(found, key=lambda item: (item.day, item.strain, item.priority, item.order)))


def state_problem(
    farm: Farm,
    orders: Sequence[Order],
    stock: Sequence[StockLot],
    first_week: Week,
    weeks: int,
    margins: Mapping[tuple[str, Week], Margin] | None = None,
) -> Problem:
    """Put the planning problem together.

    Parameters
    ----------
    farm, orders, stock
        The farm folder's content.
    first_week : Week
        The plan starts on its Monday.
    weeks : int
        Weeks asked for; look-ahead weeks are added behind them.
    margins : mapping, optional
        What is kept ready, by strain code and week of delivery.
    """
    look_ahead = ceil(longest_life_days(farm, orders) / 7)
    days = 7 * (weeks + look_ahead)
    clock = FarmClock(first_week.monday, ZoneInfo(farm.site.timezone))
    wait_days = ceil(farm.limits.cooled_to_inoculate_h / 24)
    shifts = Shifts(farm, clock, days + MARGIN_DAYS + wait_days)
    kinds = run_kinds(farm)
    colony = pools_of(farm.rooms_of("colonisation"))
    fruit = pools_of(farm.rooms_of("fruiting"))
    cold_rooms = farm.rooms_of("cold-hold")
    all_weeks = [first_week.plus(k) for k in range(weeks + look_ahead)]
    return Problem(
        farm=farm,
        orders=tuple(orders),
        first_week=first_week,
        weeks=weeks,
        look_ahead_weeks=look_ahead,
        clock=clock,
        shifts=shifts,
        kinds=kinds,
        arcs=RunNetwork(farm, shifts, days, kinds).arcs(),
        colony_pools=colony,
        fruit_pools=fruit,
        cold_pool=Pool(cold_rooms) if cold_rooms else None,
        order_days=order_days_of(farm, orders, all_weeks, first_week.monday),
        stock=read_stock(farm, stock, shifts),
        margins=dict(margins or {}),
    )
