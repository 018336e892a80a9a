"""Where each decision of the weekly plan stands in the matrix."""

from __future__ import annotations

from dataclasses import dataclass, field

GroupKey = tuple[int, int, int, int, int]
SLACK_PLACE_PRICE = 100.0
SLACK_HOUR_PRICE = 1000.0


@dataclass(frozen=True, slots=True)
class Group:
    """Bags of runs that behave alike: kind of run, load day, unload day, first and last inoculation day."""

    kind: int
    load_day: int
    unload_day: int
    first: int
    last: int


@dataclass
class Columns:
    """Where each decision stands in the matrix."""

    run: list[int] = field(default_factory=list)
    fill: dict[tuple[int, int], int] = field(default_factory=dict)  # strain, group
    inoculate: dict[tuple[int, int, int], int] = field(default_factory=dict)  # strain, pool, day
    hold: dict[tuple[int, int, int], int] = field(default_factory=dict)  # strain, pool, day
    leaving: dict[tuple[int, int, int], list[int]] = field(default_factory=dict)  # strain, source, day: opened from it
    open: dict[tuple[int, int, int, int], int] = field(default_factory=dict)  # strain, fruit pool, day, flushes
    keep: dict[tuple[int, int], int] = field(default_factory=dict)  # fruiting stock lot, flushes in all
    cooled: dict[tuple[int, int], int] = field(default_factory=dict)  # strain, day: bags still to inoculate
    drop_cooled: dict[tuple[int, int], int] = field(default_factory=dict)  # strain, day
    drop_ready: dict[tuple[int, int, int], int] = field(default_factory=dict)  # strain, source, day
    serve: dict[tuple[int, int, int], int] = field(default_factory=dict)  # order day (index), strain, pick day
    filled: dict[int, int] = field(default_factory=dict)  # order day (index): 1 where all of it is delivered
    picked: dict[tuple[int, int], list[int]] = field(default_factory=dict)  # strain, day: all that is sold of it
    spot: dict[tuple[int, int, int, int], int] = field(default_factory=dict)  # strain, pick day, week of sale, step
    hours: dict[tuple[int, str, int], int] = field(default_factory=dict)  # crew, skill, day
    over: dict[tuple[str, int], int] = field(default_factory=dict)  # limit, day
