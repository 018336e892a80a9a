"""A lot as its rows tell it: strain, dates, bags, and its flushes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date


@dataclass(frozen=True, slots=True)
class Flush:
    """One flush of a lot.

    Attributes
    ----------
    number : int
        1 for the first.
    first, last : date
        First and last day it was picked.
    bags : int
        Bags that stood on the first of these days [bags].
    kg : float
        Fresh mushrooms of all its days [kg].
    """

    number: int
    first: date
    last: date
    bags: int
    kg: float


@dataclass(frozen=True, slots=True)
class PickedLot:
    """A lot that was picked, or lost.

    Attributes
    ----------
    code, strain : str
        Lot code and strain code.
    flushes : tuple of Flush
        In order; empty for a lot that was lost before its first flush.
    inoculated, ready, opened : date or None
        Where they were written down.
    bags_inoculated : int or None
        Bags inoculated, where it was written down [bags].
    gone : date or None
        Day on which no bag was left, where a row says so.
    """

    code: str
    strain: str
    flushes: tuple[Flush, ...]
    inoculated: date | None = None
    ready: date | None = None
    opened: date | None = None
    bags_inoculated: int | None = None
    gone: date | None = None

    @property
    def first_day(self) -> date:
        """Day of its first pick, or the day it was gone."""
        day = self.flushes[0].first if self.flushes else self.gone
        if day is None:
            raise ValueError(f"lot {self.code} has neither a flush nor a day on which it was gone")
        return day

    @property
    def kept_flushes(self) -> tuple[Flush, ...]:
        """Flushes that follow each other without one left out, from the first."""
        return tuple(one for place, one in enumerate(self.flushes, start=1) if one.number == place)


@dataclass(frozen=True, slots=True)
class DayPick:
    """What one day gave: the day, the bags that stood, the kilograms, and the flush where it was written down."""

    day: date
    bags: int
    kg: float
    flush: int | None


def flushes_of(picks: Sequence[DayPick], rest_days: int) -> tuple[Flush, ...]:
    """Put the days of a lot together to flushes.

    Parameters
    ----------
    picks : sequence of DayPick
        In the order of their days, with bags; all of them with a flush, or none.
    rest_days : int
        Days from one flush to the next, as the card has it [d]. Without flush numbers, more than half of it between
        two picks starts a new flush.

    Examples
    --------
    >>> days = [DayPick(date(2027, 3, day), 100, 8.0, None) for day in (1, 3, 13, 14)]
    >>> [(one.number, one.first.day, one.kg) for one in flushes_of(days, rest_days=12)]
    [(1, 1, 16.0), (2, 13, 16.0)]
    """
    groups: list[list[DayPick]] = []
    for pick in picks:
        before = groups[-1][-1] if groups else None
        if before is None:
            fresh = True
        elif pick.flush is not None:
            fresh = pick.flush != before.flush
        else:
            fresh = (pick.day - before.day).days > rest_days / 2
        if fresh:
            groups.append([pick])
        else:
            groups[-1].append(pick)
    return tuple(
        Flush(group[0].flush or place, group[0].day, group[-1].day, group[0].bags, sum(one.kg for one in group))
        for place, group in enumerate(groups, start=1)
    )
