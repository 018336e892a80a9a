"""A scheduling problem: jobs, lags, resources, and what is to be kept low."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass

from scheduler.timetable.core.hold import Hold
from scheduler.timetable.core.job import Job, Mode, Window, check_windows, require
from scheduler.timetable.core.lag import Lag
from scheduler.timetable.core.resource import Resource

MOST_PRICE = 1_000_000
"""Prices are whole and small, so that sums of them stay exact in the solver."""


@dataclass(frozen=True, slots=True)
class Evenness:
    """A price on the busiest day of a resource.

    Attributes
    ----------
    days : tuple of (from, to)
        Days to be compared [slots]; all work of a job counts for the day in which it starts.
    price : int
        Price of each unit held over a slot on the busiest day.
    """

    resource: str
    days: tuple[Window, ...]
    price: int

    def __post_init__(self) -> None:
        require(self.price >= 1, f"evenness of {self.resource!r}: a price of at least 1 was expected")
        check_windows(self.days, f"evenness of {self.resource!r}")


@dataclass(frozen=True, slots=True)
class Problem:
    """Jobs to be put into the slots from 0 to the horizon.

    Attributes
    ----------
    horizon : int
        No job ends later [slot].
    slot_minutes : int
        Length of a slot [min].
    makespan_price : int
        Price of each slot until the last job has ended.

    Raises
    ------
    ValueError
        If names stand twice or are not known, or a job asks for more than there can ever be.
    """

    horizon: int
    jobs: tuple[Job, ...]
    lags: tuple[Lag, ...] = ()
    resources: tuple[Resource, ...] = ()
    holds: tuple[Hold, ...] = ()
    evenness: tuple[Evenness, ...] = ()
    makespan_price: int = 0
    slot_minutes: int = 5

    def __post_init__(self) -> None:
        require(self.horizon >= 1, f"a horizon of at least 1 slot was expected; found {self.horizon}")
        _once((job.name for job in self.jobs), "job")
        _once((resource.name for resource in self.resources), "resource")
        _once((hold.name for hold in self.holds), "hold")
        self._check_names()
        prices = [self.makespan_price, *(part.price for part in self.evenness), *(lag.most_price for lag in self.lags)]
        prices += [resource.extra_price for resource in self.resources]
        for job in self.jobs:
            prices += [job.late_price, job.start_price, job.split_price, *(abs(cost) for _, cost in job.start_costs)]
            prices += [price for mode in job.modes for price in (mode.price, mode.overtime_price)]
        require(max(prices) <= MOST_PRICE, f"prices up to {MOST_PRICE} were expected; found {max(prices)}")

    def _check_names(self) -> None:
        names = {job.name for job in self.jobs}
        resources = {resource.name: resource for resource in self.resources}
        for lag in self.lags:
            for name in (lag.before, lag.after):
                require(name in names, f"lag {lag.name}: there is no job {name!r}")
        for hold in self.holds:
            for name in (hold.first, hold.last):
                require(name in names, f"hold {hold.name!r}: there is no job {name!r}")
            _check_amount(f"hold {hold.name!r}", hold.resource, hold.amount, resources)
        for part in self.evenness:
            require(part.resource in resources, f"evenness: there is no resource {part.resource!r}")
        for job in self.jobs:
            for mode in job.modes:
                _check_demands(job, mode, resources)

    @property
    def makespan_only(self) -> bool:
        """Whether nothing but the end of the last job has a price."""
        priced = any(
            job.late_price or job.start_price or job.start_costs or job.split_price or any(m.price for m in job.modes)
            for job in self.jobs
        )
        return self.makespan_price > 0 and not priced and not self.evenness

    def job(self, name: str) -> Job:
        """The job of a name; KeyError when there is none."""
        for job in self.jobs:
            if job.name == name:
                return job
        raise KeyError(name)


def _check_demands(job: Job, mode: Mode, resources: dict[str, Resource]) -> None:
    for demand in mode.demands:
        where = f"job {job.name!r}"
        _check_amount(where, demand.resource, demand.amount, resources)
        resource = resources[demand.resource]
        held = demand.held == "span" or mode.split == "never"
        require(held or not resource.named, f"{where}: named {resource.name!r} must be held over the whole span")


def _check_amount(where: str, name: str, amount: int, resources: dict[str, Resource]) -> None:
    require(name in resources, f"{where}: there is no resource {name!r}")
    most = resources[name].capacity + resources[name].extra
    require(amount <= most, f"{where}: {amount} of {name!r} asked, there are {most}")


def _once(names: Iterable[str], what: str) -> None:
    twice = [name for name, count in Counter(names).items() if count > 1]
    require(not twice, f"each {what} once was expected; found twice: {', '.join(twice)}")
