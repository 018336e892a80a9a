"""Clock times with or without a date, as someone types them who wants to know when a load is ready."""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date
from math import floor
from zoneinfo import ZoneInfo

from models.calendar import FarmClock
from models.farm import clock_minutes
from scheduler.errors import UsageError

_DATED = re.compile(r"^(\d{4}-\d{2}-\d{2})[ T](\S+)$")


@dataclass(frozen=True, slots=True)
class Moment:
    """A moment on the farm.

    Attributes
    ----------
    minute : int
        Minutes since the first midnight [min]; elapsed ones where there is a date.
    clock : FarmClock, optional
        The farm's clock from that date on; None for a day of 24 hours without a date.
    """

    minute: int
    clock: FarmClock | None = None

    @classmethod
    def parse(cls, text: str, zone: ZoneInfo, option: str) -> Moment:
        """Read ``16:40`` or ``2027-01-12 16:40`` (or with a T).

        Raises
        ------
        UsageError
            The text is neither.
        """
        dated = _DATED.match(text.strip())
        try:
            if not dated:
                return cls(clock_minutes(text.strip()))
            day = date.fromisoformat(dated[1])
            clock = FarmClock(day, zone)
            return cls(clock.minute(day, clock_minutes(dated[2])), clock)
        except ValueError as error:
            raise UsageError(
                f'{option}: a clock time such as 16:40, or a date and one such as "2027-01-12 16:40", was expected;'
                f" found {text!r}"
            ) from error

    def plus(self, minutes: float) -> Moment:
        """The moment so many minutes later; earlier when negative; rounded down to a whole minute."""
        return Moment(floor(self.minute + minutes + 1e-9), self.clock)

    @property
    def of_day(self) -> int:
        """Minutes after local midnight [min]."""
        if self.clock is None:
            return self.minute % 1440
        local = self.clock.at(self.minute)
        return 60 * local.hour + local.minute

    @property
    def month(self) -> int | None:
        """Calendar month (1-12); None without a date."""
        return None if self.clock is None else self.clock.at(self.minute).month

    @property
    def words(self) -> str:
        """As people say it: ``16:40``, ``08:46 +1 d``, or ``Tue 12 Jan 16:40``."""
        if self.clock is not None:
            local = self.clock.at(self.minute)
            return f"{_DAYS[local.weekday()]} {local.day} {_MONTHS[local.month - 1]} {local:%H:%M}"
        days, text = self.minute // 1440, f"{self.of_day // 60:02d}:{self.of_day % 60:02d}"
        return f"{text} {days:+d} d" if days else text

    @property
    def iso(self) -> str:
        """ISO 8601 with offset where there is a date, else the clock time."""
        if self.clock is not None:
            return self.clock.at(self.minute).isoformat()
        return f"{self.of_day // 60:02d}:{self.of_day % 60:02d}"


_DAYS = ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun")
_MONTHS = ("Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec")
