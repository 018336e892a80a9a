"""Who and what does the work: a number of alike units, and when fewer of them are there."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from scheduler.timetable.core.job import check_windows, require


@dataclass(frozen=True, slots=True)
class Stretch:
    """From a slot up to another a resource has another capacity [units]."""

    begin: int
    end: int
    capacity: int


@dataclass(frozen=True, slots=True)
class Resource:
    """A number of alike units.

    Attributes
    ----------
    capacity : int
        Units when all are there [units].
    calendar : tuple of Stretch
        When fewer are there, in order of time; outside it all are.
    named : bool
        Whether each job is told which units, from 1, are its own; such units are held over the job's whole span.
    extra, extra_price : int
        Where soft rules are relaxed: most units more than there are [units], and the price of one over a slot.
    """

    name: str
    capacity: int
    calendar: tuple[Stretch, ...] = ()
    named: bool = False
    extra: int = 0
    extra_price: int = 1

    def __post_init__(self) -> None:
        owner = f"resource {self.name!r}"
        require(self.capacity >= 0, f"{owner}: a capacity of at least 0 was expected; found {self.capacity}")
        require(self.extra >= 0, f"{owner}: extra units of at least 0 were expected; found {self.extra}")
        require(self.extra_price >= 1, f"{owner}: an extra price of 1 or more was expected; found {self.extra_price}")
        require(not (self.named and self.extra), f"{owner}: named units cannot be lent; set extra to 0")
        check_windows(tuple((part.begin, part.end) for part in self.calendar), owner)
        for part in self.calendar:
            require(
                0 <= part.capacity <= self.capacity,
                f"{owner}: 0 to {self.capacity} units were expected from slot {part.begin}; found {part.capacity}",
            )

    @classmethod
    def on_shift(
        cls, name: str, shifts: Sequence[tuple[int, int, int]], horizon: int, extra: int = 0, extra_price: int = 1
    ) -> Resource:
        """A resource that is there in its shifts only.

        Parameters
        ----------
        shifts : sequence of (from, to, capacity)
            In order of time [slot, slot, units].
        horizon : int
            End of the time that is looked at [slot].

        Examples
        --------
        >>> Resource.on_shift("crew", [(8, 12, 2), (13, 17, 1)], 24).calendar[1]
        Stretch(begin=12, end=13, capacity=0)
        """
        capacity = max((units for _, _, units in shifts), default=0)
        parts: list[Stretch] = []
        clock = 0
        for begin, end, units in (*shifts, (horizon, horizon, capacity)):
            if begin > clock:
                parts.append(Stretch(clock, begin, 0))
            if units < capacity:
                parts.append(Stretch(begin, end, units))
            clock = max(clock, end)
        return cls(name, capacity, tuple(parts), extra=extra, extra_price=extra_price)

    def stretches(self, horizon: int) -> tuple[Stretch, ...]:
        """Capacity from slot 0 to the horizon without a hole."""
        parts: list[Stretch] = []
        clock = 0
        for part in self.calendar:
            begin, end = min(part.begin, horizon), min(part.end, horizon)
            if clock < begin:
                parts.append(Stretch(clock, begin, self.capacity))
            if begin < end:
                parts.append(Stretch(begin, end, part.capacity))
            clock = max(clock, end)
        if clock < horizon:
            parts.append(Stretch(clock, horizon, self.capacity))
        return tuple(parts)
