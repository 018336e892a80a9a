"""What a plan is: runs, what happens to their bags, picks, deliveries, money. No solver type appears here.

The rules that a plan keeps stand in ``docs/reference/plan-rules.md``; the planner obeys them and the referee
recomputes them, each with code of its own. Days are dates; moments are elapsed minutes since local midnight of the
first day (see `models.calendar.FarmClock`).
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date

from models.calendar import Week


@dataclass(frozen=True, slots=True)
class Run:
    """One filling of one steriliser.

    Attributes
    ----------
    code : str
        ``27W03-R2``: the second run loaded in that week.
    unit : int
        Which of the ``count`` identical sterilisers, from 1.
    load_step : float
        Share of the places that the cycle is worked out for [0-1].
    mix_start, load_start, steam_on, ready, unload, unloaded, cooled : int
        Moments [min]: mixing begins, loading begins, steam on, the load may be taken out, unloading begins and
        ends, the coldest core is cool enough to inoculate.
    bags : dict[str, int]
        Whole bags by strain code.
    energy_kwh, energy_cost : float
        Electricity from steam on to the end of the hold [kWh], and its price by tariff [currency].
    """

    code: str
    steriliser: str
    unit: int
    programme: str
    load_step: float
    mix_start: int
    load_start: int
    steam_on: int
    ready: int
    unload: int
    unloaded: int
    cooled: int
    bags: dict[str, int]
    energy_kwh: float
    energy_cost: float


@dataclass(frozen=True, slots=True)
class Lot:
    """The bags of one strain from one run, or a lot of the opening stock (``run`` empty)."""

    code: str
    strain: str
    bags: int
    run: str


@dataclass(frozen=True, slots=True)
class Inoculation:
    """Bags of a lot inoculated on a day and set in a colonisation room.

    ``lost`` of them are expected to be spoiled and leave on ``ready_day``. A stock lot that already colonises, or is
    ready, has one entry with ``before=True``: it costs nothing any more; ``day`` is then when it was inoculated, or
    for a ready stock lot the day it became ready.
    """

    lot: str
    day: date
    room: str
    bags: int
    ready_day: date
    lost: int
    before: bool = False


@dataclass(frozen=True, slots=True)
class Holding:
    """Ready bags moved from a colonisation room into a cold-hold room (``before`` as for `Inoculation`)."""

    lot: str
    day: date
    from_room: str
    ready_day: date
    room: str
    bags: int
    before: bool = False


@dataclass(frozen=True, slots=True)
class FlushPick:
    """One flush of an opening: kilograms that ripen that day, and those picked."""

    day: date
    flush: int
    ripe_kg: float
    kg: float


@dataclass(frozen=True, slots=True)
class Opening:
    """Ready bags moved to a fruiting room, cut, and kept until flush number ``flushes`` is picked.

    ``from_room`` is the colonisation or cold-hold room they came from; ``held_day`` the day they entered the cold, if
    they did. ``leave_day`` is the day they are discarded; their places are free again ``clean_days`` later. A fruiting
    stock lot has ``before=True`` and may stand several times, once for each flush count.
    """

    lot: str
    day: date
    from_room: str
    ready_day: date
    held_day: date | None
    room: str
    bags: int
    flushes: int
    leave_day: date
    picks: tuple[FlushPick, ...]
    before: bool = False


@dataclass(frozen=True, slots=True)
class Discard:
    """Bags thrown away unopened: cooled and never inoculated (``room`` empty), or ready and never opened."""

    lot: str
    day: date
    room: str
    ready_day: date | None
    bags: int


@dataclass(frozen=True, slots=True)
class Delivery:
    """What one order line gets on one delivery day; ``instead`` is the part of ``kg`` in other strains [kg, by code].

    Attributes
    ----------
    order : int
        Row of the order in the order book, from 0.
    ordered_kg, kg, short_kg, unavoidable_kg : float
        Ordered, delivered, short and the part of the shortage that no plan could have avoided [kg].
    """

    order: int
    customer: str
    strain: str
    day: date
    ordered_kg: float
    kg: float
    short_kg: float
    unavoidable_kg: float
    instead: dict[str, float] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Margin:
    """What a plan keeps ready for a delivery beyond what is expected to be enough.

    Attributes
    ----------
    share : float
        Ripe kilograms set aside beyond each kilogram delivered [-].
    days : int
        How long before the delivery they are to be picked at the latest [d].
    """

    share: float = 0.0
    days: int = 0


@dataclass(frozen=True, slots=True)
class Surplus:
    """Kilograms of one strain that left on one day other than by order: sold on the spot, or spoiled after picking.

    ``cheap_kg`` is the part of ``spot_kg`` that went at the lower of the two prices [kg].
    """

    strain: str
    day: date
    spot_kg: float
    spoiled_kg: float
    cheap_kg: float = 0.0


@dataclass(frozen=True, slots=True)
class CrewHours:
    """Hours of one skill worked by one crew on one day [h]."""

    day: date
    crew: str
    skill: str
    hours: float


@dataclass(frozen=True, slots=True)
class Shortfall:
    """A limit that what already stands in the rooms forces the plan to break, and by how much on which day."""

    limit: str
    day: date
    amount: float
    unit: str


MONEY_LINES = ("sales", "spot", "shortage", "materials", "spawn", "energy", "labour", "spoilage", "over_limits")
"""The lines of the account; costs are negative, so that the lines add up to the objective."""


@dataclass(frozen=True, slots=True)
class Account:
    """Money by line [currency]; costs are negative."""

    sales: float = 0.0
    spot: float = 0.0
    shortage: float = 0.0
    materials: float = 0.0
    spawn: float = 0.0
    energy: float = 0.0
    labour: float = 0.0
    spoilage: float = 0.0
    over_limits: float = 0.0

    @property
    def total(self) -> float:
        """Sum of all lines [currency]."""
        return float(sum(getattr(self, line) for line in MONEY_LINES))


@dataclass(frozen=True, slots=True)
class SolveReport:
    """How a plan was found.

    Attributes
    ----------
    objective, bound : float
        Money of the plan and the proven upper bound on any plan, over the asked and the look-ahead weeks [currency].
    gap : float
        (bound - objective) / max(|bound|, sales) [-].
    status, stop : str
        ``optimal`` or ``feasible``; which limit ended the search.
    seconds, relaxation_seconds : float
        Wall time of the whole solve and of one LP relaxation in it [s].
    size : dict[str, int]
        Rows, columns, run integers of the model.
    """

    objective: float
    bound: float
    gap: float
    status: str
    stop: str
    seconds: float
    relaxation_seconds: float
    seed: int
    versions: dict[str, str]
    limits: dict[str, float]
    size: dict[str, int]


@dataclass(frozen=True, slots=True)
class Plan:
    """A whole plan over the asked weeks and the look-ahead weeks behind them."""

    first_week: Week
    weeks: int
    look_ahead_weeks: int
    runs: tuple[Run, ...]
    lots: tuple[Lot, ...]
    inoculations: tuple[Inoculation, ...]
    holdings: tuple[Holding, ...]
    openings: tuple[Opening, ...]
    discards: tuple[Discard, ...]
    deliveries: tuple[Delivery, ...]
    surplus: tuple[Surplus, ...]
    labour: tuple[CrewHours, ...]
    shortfalls: tuple[Shortfall, ...]
    money: Account
    report: SolveReport
    assumptions: tuple[str, ...] = field(default=())

    @property
    def first_day(self) -> date:
        """Monday of the first week."""
        return self.first_week.monday

    @property
    def all_weeks(self) -> tuple[Week, ...]:
        """Every week of the plan, look-ahead included."""
        return tuple(self.first_week.plus(k) for k in range(self.weeks + self.look_ahead_weeks))

    @property
    def asked_weeks(self) -> tuple[Week, ...]:
        """The weeks that were asked for."""
        return self.all_weeks[: self.weeks]
