"""Time between two jobs: at least, at most."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from scheduler.timetable.core.job import require

Kind = Literal["start-start", "start-end", "end-start", "end-end"]
KINDS = ("start-start", "start-end", "end-start", "end-end")


@dataclass(frozen=True, slots=True)
class Lag:
    """Time from a point of one job to a point of another.

    Attributes
    ----------
    kind : {"start-start", "start-end", "end-start", "end-end"}
        From which point of ``before`` to which point of ``after``.
    least, most : int or None
        Shortest and longest time between them, either may be below 0 or absent [slots].
    most_price : int
        Where soft rules are relaxed: price of each slot past ``most``; 0: it holds all the same.
    """

    before: str
    after: str
    kind: Kind = "end-start"
    least: int | None = 0
    most: int | None = None
    most_price: int = 0

    def __post_init__(self) -> None:
        require(self.kind in KINDS, f"{self.name}: one of {', '.join(KINDS)} was expected; found {self.kind!r}")
        require(self.before != self.after, f"{self.name}: two different jobs were expected")
        require(self.most_price >= 0, f"{self.name}: a price of at least 0 was expected; found {self.most_price}")
        if self.least is not None and self.most is not None:
            require(self.least <= self.most, f"{self.name}: least {self.least} is longer than most {self.most}")

    @property
    def name(self) -> str:
        """Both jobs, for messages."""
        return f"{self.before} -> {self.after}"

    def between(self, before: tuple[int, int], after: tuple[int, int]) -> int:
        """Time between the two points, given start and end of both jobs [slots]."""
        first, second = self.kind.split("-")
        return (after[0] if second == "start" else after[1]) - (before[0] if first == "start" else before[1])
