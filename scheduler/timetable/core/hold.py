"""What is held over several jobs: from the start of one to the end of another, whatever lies between."""

from __future__ import annotations

from dataclasses import dataclass

from scheduler.timetable.core.job import require


@dataclass(frozen=True, slots=True)
class Hold:
    """Units of a resource held from the start of ``first`` to the end of ``last``.

    Such as a vessel from the first thing put into it to the last taken out, however long it stands full.

    Attributes
    ----------
    amount : int
        Units held [units].
    """

    name: str
    resource: str
    first: str
    last: str
    amount: int = 1

    def __post_init__(self) -> None:
        require(self.amount >= 1, f"hold {self.name!r}: an amount of at least 1 was expected; found {self.amount}")
