"""What comes out: when each job is done, by whom, how good that is and which soft rules it breaks."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

from scheduler.timetable.core.job import Window

Status = Literal["optimal", "feasible", "infeasible", "unknown"]
Rule = Literal["lag", "window", "capacity"]


@dataclass(frozen=True, slots=True)
class Placed:
    """A job in its place.

    Attributes
    ----------
    start, end : int
        First slot, and the slot after the last.
    mode : int
        Number of its mode, from 0.
    pieces : tuple of (from, to)
        Stretches in which it is worked on [slots].
    units : tuple of (resource, units)
        For named resources: the numbers of the units, from 1.
    """

    job: str
    start: int
    end: int
    mode: int
    pieces: tuple[Window, ...]
    units: tuple[tuple[str, tuple[int, ...]], ...] = ()


@dataclass(frozen=True, slots=True)
class Held:
    """When a hold lasts [slots], and for named resources the numbers of its units, from 1."""

    hold: str
    start: int
    end: int
    units: tuple[int, ...] = ()


@dataclass(frozen=True, slots=True)
class Breach:
    """A soft rule that could not be kept.

    Attributes
    ----------
    rule : {"lag", "window", "capacity"}
        A longest time between jobs, the shifts of a job, the units of a resource.
    name : str
        The jobs, the job or the resource.
    begin, end : int
        When [slots].
    amount : int
        Slots too many; for a resource units times slots.
    minutes : int
        The same in minutes; for a resource in minutes of one unit [min].
    price : int
        What the breach costs.
    """

    rule: Rule
    name: str
    begin: int
    end: int
    amount: int
    minutes: int
    price: int

    def sentence(self) -> str:
        """Say it in one sentence.

        Examples
        --------
        >>> Breach("capacity", "crew", 96, 108, 12, 60, 24).sentence()
        'crew: 60 unit-minutes more than there are, from slot 96 to 108'
        """
        what = {
            "lag": "minutes longer than allowed",
            "window": "minutes outside its shifts",
            "capacity": "unit-minutes more than there are",
        }[self.rule]
        return f"{self.name}: {self.minutes} {what}, from slot {self.begin} to {self.end}"


@dataclass(frozen=True, slots=True)
class Schedule:
    """The best schedule found and what is proven about it.

    Attributes
    ----------
    placed : tuple of Placed
        In the order of the problem's jobs; empty where there is no schedule.
    objective, bound : int
        Price of the schedule, and a price that no schedule is below.
    gap : float
        (objective - bound) / max(1, abs(objective)) [-].
    status, stop : str
        ``optimal``, ``feasible``, ``infeasible`` or ``unknown``; and what ended the search: ``optimal``,
        ``infeasible``, ``gap reached``, ``deterministic limit``, ``time limit``, ``stopped`` or ``interrupted``.
    held : tuple of Held
        In the order of the problem's holds.
    terms : dict of str to int
        The objective by what it is made of.
    breaches : tuple of Breach
        Soft rules it breaks; only where they were relaxed.
    breach_bound : int
        No schedule breaks soft rules for a lower price than this, units being lent for whole cells of time (one slot
        up to a horizon of 400 slots, and as many more as it takes to have about 400 cells).
    seconds, deterministic : float
        Wall time [s] and the solver's own count of work.
    """

    placed: tuple[Placed, ...]
    objective: int
    bound: int
    gap: float
    status: Status
    stop: str
    held: tuple[Held, ...] = ()
    terms: dict[str, int] = field(default_factory=dict)
    breaches: tuple[Breach, ...] = ()
    breach_bound: int = 0
    seconds: float = 0.0
    deterministic: float = 0.0
    seed: int = 0

    def __getitem__(self, job: str) -> Placed:
        for placed in self.placed:
            if placed.job == job:
                return placed
        raise KeyError(job)


def gap_of(objective: int, bound: int) -> float:
    """Relative gap between a price and what no schedule is below [-]."""
    return max(0, objective - bound) / max(1, abs(objective))
