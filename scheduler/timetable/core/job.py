"""What is to be done: a job, the ways to do it, and what each way needs."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from typing import Literal

Window = tuple[int, int]
"""A stretch of time from a slot up to, and without, another slot."""

Held = Literal["work", "span"]
Split = Literal["never", "too_long", "priced"]


def require(sound: bool, message: str) -> None:
    """Raise ValueError with the message unless something holds."""
    if not sound:
        raise ValueError(message)


def check_windows(windows: tuple[Window, ...], owner: str) -> None:
    """Raise ValueError unless windows are in order, do not overlap and none is empty."""
    for begin, end in windows:
        require(0 <= begin < end, f"{owner}: a window with 0 <= from < to was expected; found {begin} to {end}")
    for (_, end), (begin, _) in pairwise(windows):
        require(end <= begin, f"{owner}: windows in order were expected; one ends at {end}, the next opens at {begin}")


@dataclass(frozen=True, slots=True)
class Demand:
    """What a job takes of a resource.

    Attributes
    ----------
    amount : int
        Units of the resource [units].
    held : {"work", "span"}
        Only while the job is worked on, or from its start to its end, breaks included.
    """

    resource: str
    amount: int = 1
    held: Held = "work"

    def __post_init__(self) -> None:
        require(self.amount >= 1, f"{self.resource}: a demand of at least 1 was expected; found {self.amount}")
        require(self.held in {"work", "span"}, f"{self.resource}: 'work' or 'span' was expected; found {self.held!r}")


@dataclass(frozen=True, slots=True)
class Mode:
    """One way of doing a job.

    Attributes
    ----------
    duration : int
        Work to be done [slots].
    windows : tuple of (from, to)
        Shifts in which it must be done [slots]; empty: at any time, through the night too.
    split : {"never", "too_long", "priced"}
        Whether it may break off at the end of a window and go on with the next: never, only if it is longer than
        every window, or wherever that is worth the job's ``split_price``.
    least_piece : int
        Shortest piece of a split job [slots].
    overtime, overtime_price : int
        Where soft rules are relaxed: most work outside the windows [slots], and its price [per slot].
    price : int
        Price of doing it this way.
    name : str
        Such as the crew that does it.
    """

    duration: int
    demands: tuple[Demand, ...] = ()
    windows: tuple[Window, ...] = ()
    split: Split = "never"
    least_piece: int = 1
    overtime: int = 0
    overtime_price: int = 1
    price: int = 0
    name: str = ""

    def __post_init__(self) -> None:
        where = f"mode {self.name!r}"
        require(self.duration >= 0, f"{where}: a duration of at least 0 was expected; found {self.duration}")
        require(self.split in {"never", "too_long", "priced"}, f"{where}: found split {self.split!r}")
        require(self.least_piece >= 1, f"{where}: pieces of at least 1 were expected; found {self.least_piece}")
        require(self.overtime >= 0, f"{where}: overtime of at least 0 was expected; found {self.overtime}")
        require(self.overtime_price >= 1, f"{where}: an overtime price of 1 or more was expected")
        names = [demand.resource for demand in self.demands]
        require(len(set(names)) == len(names), f"{where}: one demand for each resource was expected; found {names}")
        check_windows(self.windows, where)


@dataclass(frozen=True, slots=True)
class Job:
    """Something to be done once, in one of its modes.

    Attributes
    ----------
    release, latest_end : int
        Earliest start and, where there is one, latest end; both are kept [slot].
    due, late_price : int
        When it should have ended [slot], and the price of each slot later.
    start_price : int
        Price of each slot that it starts after its release.
    start_costs : tuple of (from, cost)
        Price by time of start: each holds from its slot to that of the next; before the first it is 0.
    split_price : int
        Price of each break in it.
    """

    name: str
    modes: tuple[Mode, ...]
    release: int = 0
    latest_end: int | None = None
    due: int | None = None
    late_price: int = 0
    start_price: int = 0
    start_costs: tuple[tuple[int, int], ...] = ()
    split_price: int = 0

    def __post_init__(self) -> None:
        require(bool(self.modes), f"job {self.name!r}: at least one mode was expected")
        require(self.release >= 0, f"job {self.name!r}: a release of at least 0 was expected; found {self.release}")
        prices = (self.late_price, self.start_price, self.split_price)
        require(min(prices) >= 0, f"job {self.name!r}: prices of at least 0 were expected; found {min(prices)}")
        slots = [slot for slot, _ in self.start_costs]
        require(sorted(set(slots)) == slots, f"job {self.name!r}: start costs in order of time were expected")

    @classmethod
    def single(
        cls, name: str, duration: int, demands: tuple[Demand, ...] = (), windows: tuple[Window, ...] = (), **rest: int
    ) -> Job:
        """A job that can be done in one way only, and never in pieces.

        Parameters
        ----------
        duration : int
            Work to be done [slots].
        **rest
            Whole numbers for other attributes of the job, such as ``due`` [slot].

        Examples
        --------
        >>> Job.single("sweep", 6, due=20).modes[0].duration
        6
        """
        return cls(name, (Mode(duration, demands, windows),), **rest)  # type: ignore[arg-type]

    def cost_of_start(self, start: int) -> int:
        """Price by table of starting in a slot."""
        cost = 0
        for slot, price in self.start_costs:
            if slot > start:
                break
            cost = price
        return cost
