"""Which of several alike units each job has: the solver only counts them, names are given afterwards."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace

from scheduler.timetable.core.problem import Problem
from scheduler.timetable.core.resource import Resource
from scheduler.timetable.core.schedule import Held, Placed


@dataclass(frozen=True, slots=True, order=True)
class _Need:
    """Some units over a time, by a job, a hold, or (nameless) by not being there."""

    start: int
    end: int
    hold: bool
    name: str
    amount: int


def name_units(problem: Problem, placed: tuple[Placed, ...]) -> tuple[tuple[Placed, ...], tuple[Held, ...]]:
    """Give jobs and holds the units of named resources free the longest; no unit is given twice at once.

    Notes
    -----
    Taken in order of start, intervals that never need more than n units at once need no more than n names.
    """
    at = {part.job: part for part in placed}
    held = tuple(Held(hold.name, at[hold.first].start, at[hold.last].end) for hold in problem.holds)
    given = {resource.name: _give(resource, _needs(problem, resource, placed, held))
             for resource in problem.resources if resource.named}  # fmt: skip
    jobs = tuple(
        replace(part, units=tuple((name, units[False, part.job]) for name, units in given.items()
                                  if (False, part.job) in units))
        for part in placed
    )  # fmt: skip
    holds = tuple(
        replace(part, units=given.get(hold.resource, {}).get((True, part.hold), ()))
        for hold, part in zip(problem.holds, held, strict=True)
    )
    return jobs, holds


def _needs(problem: Problem, resource: Resource, placed: tuple[Placed, ...], held: tuple[Held, ...]) -> Iterator[_Need]:
    for job, part in zip(problem.jobs, placed, strict=True):
        for demand in job.modes[part.mode].demands:
            if demand.resource == resource.name:
                yield _Need(part.start, part.end, hold=False, name=job.name, amount=demand.amount)
    for hold, time in zip(problem.holds, held, strict=True):
        if hold.resource == resource.name:
            yield _Need(time.start, time.end, hold=True, name=hold.name, amount=hold.amount)
    for stretch in resource.calendar:
        missing = resource.capacity - stretch.capacity
        if missing:
            yield _Need(stretch.begin, stretch.end, hold=False, name="", amount=missing)


def _give(resource: Resource, needs: Iterator[_Need]) -> dict[tuple[bool, str], tuple[int, ...]]:
    free_from = dict.fromkeys(range(1, resource.capacity + 1), 0)
    given: dict[tuple[bool, str], tuple[int, ...]] = {}
    for need in sorted(need for need in needs if need.start < need.end):
        free = sorted((unit for unit in free_from if free_from[unit] <= need.start), key=lambda u: (free_from[u], u))
        units = tuple(sorted(free[: need.amount]))
        for unit in units:
            free_from[unit] = need.end
        if need.name:
            given[need.hold, need.name] = units
    return given
