"""Which of several alike units each job has: the solver only counts them, names are given afterwards."""

from __future__ import annotations

from dataclasses import replace

from scheduler.timetable.core.problem import Problem
from scheduler.timetable.core.resource import Resource
from scheduler.timetable.core.schedule import Placed


def name_units(problem: Problem, placed: tuple[Placed, ...]) -> tuple[Placed, ...]:
    """Give each job the units of named resources that have been free the longest; no unit has two jobs at once.

    Notes
    -----
    Taken in order of start, intervals that never need more than n units at once need no more than n names.
    """
    found: dict[str, list[tuple[str, tuple[int, ...]]]] = {part.job: [] for part in placed}
    for resource in problem.resources:
        if resource.named:
            for job, units in _units(problem, resource, placed).items():
                found[job].append((resource.name, units))
    return tuple(replace(part, units=tuple(found[part.job])) for part in placed)


def _units(problem: Problem, resource: Resource, placed: tuple[Placed, ...]) -> dict[str, tuple[int, ...]]:
    jobs = {job.name: job for job in problem.jobs}
    waiting = [
        (part.start, part.end, part.job, demand.amount)
        for part in placed
        for demand in jobs[part.job].modes[part.mode].demands
        if demand.resource == resource.name and part.start < part.end
    ]
    waiting += [
        (stretch.begin, stretch.end, "", resource.capacity - stretch.capacity)
        for stretch in resource.calendar
        if stretch.capacity < resource.capacity
    ]
    free_from = dict.fromkeys(range(1, resource.capacity + 1), 0)
    given: dict[str, tuple[int, ...]] = {}
    for start, end, job, amount in sorted(waiting):
        free = sorted((unit for unit in free_from if free_from[unit] <= start), key=lambda u: (free_from[u], u))
        units = tuple(sorted(free[:amount]))
        for unit in units:
            free_from[unit] = end
        if job:
            given[job] = units
    return given
