"""Which soft rules a schedule breaks: who, which resource, when, how much."""

from __future__ import annotations

from collections.abc import Iterator

from scheduler.timetable.core.job import Window
from scheduler.timetable.core.problem import Problem
from scheduler.timetable.core.resource import Resource
from scheduler.timetable.core.schedule import Breach, Placed


def breaches_of(problem: Problem, placed: tuple[Placed, ...]) -> tuple[Breach, ...]:
    """Every soft rule that the places break, in order of time."""
    found = [*_lags(problem, placed), *_windows(problem, placed)]
    for resource in problem.resources:
        if resource.extra:
            found += _capacity(problem, resource, placed)
    return tuple(sorted(found, key=lambda breach: (breach.begin, breach.end, breach.rule, breach.name)))


def _lags(problem: Problem, placed: tuple[Placed, ...]) -> Iterator[Breach]:
    places = {part.job: part for part in placed}
    for lag in problem.lags:
        if lag.most is None or not lag.most_price:
            continue
        before, after = places[lag.before], places[lag.after]
        over = lag.between((before.start, before.end), (after.start, after.end)) - lag.most
        if over > 0:
            target = after.start if lag.kind.endswith("start") else after.end
            minutes = over * problem.slot_minutes
            yield Breach("lag", lag.name, target - over, target, over, minutes, over * lag.most_price)


def _windows(problem: Problem, placed: tuple[Placed, ...]) -> Iterator[Breach]:
    jobs = {job.name: job for job in problem.jobs}
    for part in placed:
        mode = jobs[part.job].modes[part.mode]
        if not (mode.windows and mode.overtime):
            continue
        outside = [gap for piece in part.pieces for gap in _outside(piece, mode.windows)]
        if outside:
            amount = sum(end - begin for begin, end in outside)
            minutes, price = amount * problem.slot_minutes, amount * mode.overtime_price
            yield Breach("window", part.job, outside[0][0], outside[-1][1], amount, minutes, price)


def _outside(piece: Window, windows: tuple[Window, ...]) -> Iterator[Window]:
    clock = piece[0]
    for begin, end in (*windows, (piece[1], piece[1])):
        if clock < min(begin, piece[1]):
            yield clock, min(begin, piece[1])
        clock = max(clock, end)


def _capacity(problem: Problem, resource: Resource, placed: tuple[Placed, ...]) -> Iterator[Breach]:
    """Stretches with more units in use than there are, joined where they touch."""
    jobs = {job.name: job for job in problem.jobs}
    steps = [(part.begin, -part.capacity) for part in resource.stretches(problem.horizon)]
    steps += [(part.end, part.capacity) for part in resource.stretches(problem.horizon)]
    for part in placed:
        for demand in jobs[part.job].modes[part.mode].demands:
            if demand.resource == resource.name:
                for begin, end in part.pieces if demand.held == "work" else ((part.start, part.end),):
                    steps += [(begin, demand.amount), (end, -demand.amount)]
    places = {part.job: part for part in placed}
    for hold in problem.holds:
        if hold.resource == resource.name:
            steps += [(places[hold.first].start, hold.amount), (places[hold.last].end, -hold.amount)]
    moments = sorted({moment for moment, _ in steps})
    changes = dict.fromkeys(moments, 0)
    for moment, change in steps:
        changes[moment] += change
    over, opened, amount = 0, 0, 0
    for moment, following in zip(moments, [*moments[1:], moments[-1]], strict=True):
        was = over
        over += changes[moment]
        if over > 0 >= was:
            opened, amount = moment, 0
        if over <= 0 < was:
            minutes, price = amount * problem.slot_minutes, amount * resource.extra_price
            yield Breach("capacity", resource.name, opened, moment, amount, minutes, price)
        amount += max(0, over) * (following - moment)
