"""How to search, and when to stop."""

from __future__ import annotations

import threading
from collections.abc import Callable
from dataclasses import dataclass

from scheduler.timetable.core.job import require
from scheduler.timetable.core.schedule import Schedule

Progress = Callable[[float, float, float], None]
"""Told wall time [s], price and bound of each better schedule."""


@dataclass(frozen=True, slots=True)
class Options:
    """How to search, and when to stop.

    Attributes
    ----------
    seed : int
        Same problem, seed and limits: same schedule.
    workers : int
        Searches that take turns.
    max_deterministic_time : float
        Limit on the solver's own count of work; one unit took 5 to 15 s on two busy cores.
    seconds : float
        Safety net only: a search that it ends may give another schedule next time [s].
    gap : float
        Relative gap at which to stop [-].
    progress : callable, optional
        Told of each better schedule.
    stop : threading.Event, optional
        Ends the search when set; the best schedule so far is returned.
    start_from : Schedule, optional
        A schedule to begin with; kept if nothing better is found.
    """

    seed: int = 0
    workers: int = 2
    interleave_search: bool = True
    max_deterministic_time: float = 2.0
    seconds: float = 120.0
    gap: float = 0.0
    progress: Progress | None = None
    stop: threading.Event | None = None
    start_from: Schedule | None = None

    def __post_init__(self) -> None:
        require(self.workers >= 1, f"at least 1 worker was expected; found {self.workers}")
        require(self.gap >= 0, f"a gap of at least 0 was expected; found {self.gap}")
        limits = min(self.max_deterministic_time, self.seconds)
        require(limits > 0, f"limits above 0 were expected; found {limits}")
