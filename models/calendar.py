"""ISO weeks, and the farm's own clock: elapsed minutes that know about daylight saving."""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import UTC, date, datetime, timedelta
from functools import total_ordering
from typing import Any
from zoneinfo import ZoneInfo

from pydantic import GetCoreSchemaHandler
from pydantic_core import CoreSchema, core_schema

_WEEK = re.compile(r"^(\d{4})-W(\d{2})$")


@total_ordering
@dataclass(frozen=True)
class Week:
    """An ISO 8601 week, Monday to Sunday, written ``2027-W03``."""

    year: int
    number: int

    def __post_init__(self) -> None:
        if not 1900 <= self.year <= 2999:
            raise ValueError(f"a year between 1900 and 2999 was expected; found {self.year}")
        try:
            date.fromisocalendar(self.year, self.number, 1)
        except ValueError as error:
            last = 53 if date(self.year, 12, 28).isocalendar().week == 53 else 52
            raise ValueError(
                f"a week between W01 and W{last} was expected in {self.year}; found W{self.number:02d}"
            ) from error

    @classmethod
    def parse(cls, text: str) -> Week:
        """Read ``2027-W03``; ValueError when it is not an ISO week.

        Examples
        --------
        >>> Week.parse("2026-W53").monday
        datetime.date(2026, 12, 28)
        """
        match = _WEEK.match(text.strip())
        if not match:
            raise ValueError(f"an ISO week such as 2027-W03 was expected; found {text!r}")
        return cls(int(match[1]), int(match[2]))

    @classmethod
    def of(cls, day: date) -> Week:
        """The ISO week a date lies in."""
        year, number, _ = day.isocalendar()
        return cls(year, number)

    @property
    def monday(self) -> date:
        """First day of the week."""
        return date.fromisocalendar(self.year, self.number, 1)

    def plus(self, weeks: int) -> Week:
        """The week so many weeks later (earlier when negative)."""
        return Week.of(self.monday + timedelta(weeks=weeks))

    @property
    def short(self) -> str:
        """Two-digit year and week, as lot codes open: ``27W03``."""
        return f"{self.year % 100:02d}W{self.number:02d}"

    def __str__(self) -> str:
        return f"{self.year}-W{self.number:02d}"

    def __lt__(self, other: Week) -> bool:
        return (self.year, self.number) < (other.year, other.number)

    @classmethod
    def __get_pydantic_core_schema__(cls, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        """Let pydantic read an ISO week from text and write it back as text."""

        def read(value: object) -> Week:
            if isinstance(value, Week):
                return value
            if isinstance(value, str):
                return cls.parse(value)
            raise ValueError(f"an ISO week such as 2027-W03 was expected; found {value!r}")

        return core_schema.no_info_plain_validator_function(
            read,
            serialization=core_schema.plain_serializer_function_ser_schema(str),
            json_schema_input_schema=core_schema.str_schema(pattern=r"^\d{4}-W\d{2}$"),
        )


@dataclass(frozen=True)
class FarmClock:
    """Turns local dates and clock times into elapsed minutes since the first local midnight, and back.

    Elapsed minutes are what steam and mycelium see: a night with a clock change has 23 or 25 hours of them.
    """

    first_day: date
    zone: ZoneInfo

    @property
    def _origin(self) -> datetime:
        return datetime(self.first_day.year, self.first_day.month, self.first_day.day, tzinfo=self.zone).astimezone(UTC)

    def minute(self, day: date, minutes_after_midnight: int) -> int:
        """Elapsed minutes [min] at a local clock time of a local date (1440 is the next midnight).

        A clock time that daylight saving skips counts as if the clock had not yet changed; one that comes twice
        counts as its first time.
        """
        day = day + timedelta(days=minutes_after_midnight // 1440)
        hours, minutes = divmod(minutes_after_midnight % 1440, 60)
        local = datetime(day.year, day.month, day.day, hours, minutes, tzinfo=self.zone)
        return round((local.astimezone(UTC) - self._origin).total_seconds() / 60)

    def at(self, minute: float) -> datetime:
        """Local date and time, with offset, so many elapsed minutes after the first midnight."""
        return (self._origin + timedelta(minutes=minute)).astimezone(self.zone)

    def day_index(self, minute: float) -> int:
        """Days between the first day and the local date of an elapsed minute."""
        return (self.at(minute).date() - self.first_day).days

    def day(self, index: int) -> date:
        """The date of a day index."""
        return self.first_day + timedelta(days=index)
