"""Recomputes every rule of a schedule, slot by slot and without a solver.

It works from the problem alone, in a way of its own: a mistake in the model would have to be made here again to go
unseen. Soft rules may be broken where the schedule names exactly that breach.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise

from scheduler.timetable.core.job import Job, Mode
from scheduler.timetable.core.problem import Problem
from scheduler.timetable.core.resource import Resource
from scheduler.timetable.core.schedule import Breach, Placed, Schedule

_Named = list[Breach]


def check(problem: Problem, schedule: Schedule) -> list[str]:
    """Everything that is wrong with a schedule, one sentence each; empty when nothing is.

    Parameters
    ----------
    schedule : Schedule
        With a place for each job of the problem.
    """
    asked = [job.name for job in problem.jobs]
    given = [part.job for part in schedule.placed]
    if asked != given:
        return [f"a place for each of {len(asked)} jobs in their order was expected; found {len(given)} places"]
    if [held.hold for held in schedule.held] != [hold.name for hold in problem.holds]:
        return [f"{len(problem.holds)} holds in their order were expected; found {len(schedule.held)}"]
    named = list(schedule.breaches)
    faults: list[str] = []
    for job, part in zip(problem.jobs, schedule.placed, strict=True):
        if not 0 <= part.mode < len(job.modes):
            return [f"{job.name}: there is no mode {part.mode}"]
        faults += _place(problem, job, part)
        faults += _work(job, part, named, problem.slot_minutes)
    faults += _holds(problem, schedule)
    faults += _lags(problem, schedule, named)
    for resource in problem.resources:
        faults += _resource(problem, resource, schedule, named)
    faults += _price(problem, schedule)
    return faults + [f"breach not found: {breach.sentence()}" for breach in named]


def _excused(named: _Named, breach: Breach) -> bool:
    """Whether the schedule names this breach; each name excuses once."""
    if breach not in named:
        return False
    named.remove(breach)
    return True


def _place(problem: Problem, job: Job, part: Placed) -> Iterator[str]:
    if part.start < job.release:
        yield f"{job.name}: starts at {part.start}, released at {job.release}"
    if part.end > problem.horizon:
        yield f"{job.name}: ends at {part.end}, the horizon is {problem.horizon}"
    if job.latest_end is not None and part.end > job.latest_end:
        yield f"{job.name}: ends at {part.end}, must end by {job.latest_end}"
    if not part.pieces or part.pieces[0][0] != part.start or part.pieces[-1][1] != part.end:
        yield f"{job.name}: its pieces do not reach from {part.start} to {part.end}"
    done = sum(end - begin for begin, end in part.pieces)
    if done != job.modes[part.mode].duration:
        yield f"{job.name}: {done} slots are worked, {job.modes[part.mode].duration} are needed"


def _work(job: Job, part: Placed, named: _Named, slot_minutes: int) -> Iterator[str]:
    """Work in windows; breaks only where a window ends and until a later one opens."""
    mode = job.modes[part.mode]
    if len(part.pieces) > 1:
        yield from _breaks(job, mode, part)
    if not mode.windows:
        return
    if all(any(opens <= begin and end <= closes for opens, closes in mode.windows) for begin, end in part.pieces):
        return
    worked = [slot for begin, end in part.pieces for slot in range(begin, end)]
    outside = [slot for slot in worked if not any(opens <= slot < closes for opens, closes in mode.windows)]
    starts_inside = any(opens <= part.start < closes for opens, closes in mode.windows)
    soft = bool(outside) and starts_inside and len(part.pieces) == 1 and len(outside) <= mode.overtime
    if soft:
        amount = len(outside)
        price = amount * mode.overtime_price
        breach = Breach("window", job.name, outside[0], outside[-1] + 1, amount, amount * slot_minutes, price)
        soft = _excused(named, breach)
    if not soft:
        yield f"{job.name}: worked outside its windows, or across the end of one, in {part.pieces}"


def _breaks(job: Job, mode: Mode, part: Placed) -> Iterator[str]:
    longest = max((closes - opens for opens, closes in mode.windows), default=0)
    if mode.split == "never" or (mode.split == "too_long" and mode.duration <= longest):
        yield f"{job.name}: split into {len(part.pieces)} pieces, must be whole"
    if min(end - begin for begin, end in part.pieces) < mode.least_piece:
        yield f"{job.name}: a piece is shorter than {mode.least_piece}"
    useful = [window for window in mode.windows if window[1] - window[0] >= mode.least_piece]
    for number in range(len(part.pieces) - 1):
        stops, resumes = part.pieces[number][1], part.pieces[number + 1][0]
        borders = [(early[1], late[0]) for early, late in pairwise(useful)]
        if (stops, resumes) not in borders:
            yield f"{job.name}: breaks off at {stops} and goes on at {resumes}, which is not from window to window"


def _lags(problem: Problem, schedule: Schedule, named: _Named) -> Iterator[str]:
    places = {part.job: part for part in schedule.placed}
    for lag in problem.lags:
        first, second = lag.kind.split("-")
        begin = getattr(places[lag.before], first)
        end = getattr(places[lag.after], second)
        if lag.least is not None and end < begin + lag.least:
            yield f"{lag.name}: {end - begin} between {first} and {second}, at least {lag.least} was expected"
        if lag.most is not None and end > begin + lag.most:
            over = end - begin - lag.most
            minutes = over * problem.slot_minutes
            breach = Breach("lag", lag.name, end - over, end, over, minutes, over * lag.most_price)
            if not (lag.most_price and _excused(named, breach)):
                yield f"{lag.name}: {end - begin} between {first} and {second}, at most {lag.most} was expected"


def _holds(problem: Problem, schedule: Schedule) -> Iterator[str]:
    """Holds last from the start of their first to the end of their last job."""
    places = {part.job: part for part in schedule.placed}
    for hold, held in zip(problem.holds, schedule.held, strict=True):
        asked = (places[hold.first].start, places[hold.last].end)
        if (held.start, held.end) != asked or held.start > held.end:
            yield f"hold {hold.name}: {asked[0]} to {asked[1]} was expected; found {held.start} to {held.end}"


def _resource(problem: Problem, resource: Resource, schedule: Schedule, named: _Named) -> Iterator[str]:
    there = [resource.capacity] * problem.horizon
    for stretch in resource.calendar:
        for slot in range(min(stretch.begin, problem.horizon), min(stretch.end, problem.horizon)):
            there[slot] = stretch.capacity
    used = [0] * problem.horizon
    owner: dict[tuple[int, int], str] = {}
    for use in _uses(problem, resource, schedule):
        for slot in use.slots:
            if 0 <= slot < problem.horizon:
                used[slot] += use.amount
        if resource.named and use.slots:
            yield from _units(resource, use, owner)
    over = [slot for slot in range(problem.horizon) if used[slot] > there[slot]]
    for begin, end in _runs(over):
        amount = sum(used[slot] - there[slot] for slot in range(begin, end))
        lent = max(used[slot] - there[slot] for slot in range(begin, end)) <= resource.extra
        minutes = amount * problem.slot_minutes
        breach = Breach("capacity", resource.name, begin, end, amount, minutes, amount * resource.extra_price)
        if not (lent and _excused(named, breach)):
            yield f"{resource.name}: {amount} unit-slots more in use than there are, from {begin} to {end}"


@dataclass(frozen=True, slots=True)
class _Use:
    """Slots in which something has some units, and the numbers it is given."""

    name: str
    slots: list[int]
    amount: int
    units: tuple[int, ...]


def _uses(problem: Problem, resource: Resource, schedule: Schedule) -> Iterator[_Use]:
    for job, part in zip(problem.jobs, schedule.placed, strict=True):
        for demand in job.modes[part.mode].demands:
            if demand.resource == resource.name:
                stretches = part.pieces if demand.held == "work" else ((part.start, part.end),)
                slots = [slot for begin, end in stretches for slot in range(begin, end)]
                yield _Use(job.name, slots, demand.amount, dict(part.units).get(resource.name, ()))
    for hold, held in zip(problem.holds, schedule.held, strict=True):
        if hold.resource == resource.name:
            yield _Use(f"hold {hold.name}", list(range(held.start, held.end)), hold.amount, held.units)


def _units(resource: Resource, use: _Use, owner: dict[tuple[int, int], str]) -> Iterator[str]:
    if len(set(use.units)) != use.amount or not all(1 <= unit <= resource.capacity for unit in use.units):
        yield f"{use.name}: {use.amount} of {resource.name} by name were expected; found {use.units}"
    for unit in use.units:
        for slot in use.slots:
            other = owner.setdefault((unit, slot), use.name)
            if other != use.name:
                yield f"{resource.name} {unit}: has both {other} and {use.name} at {slot}"
                break


def _runs(slots: list[int]) -> list[tuple[int, int]]:
    """Slots in a row, joined to (from, to)."""
    runs: list[tuple[int, int]] = []
    for slot in slots:
        if runs and runs[-1][1] == slot:
            runs[-1] = (runs[-1][0], slot + 1)
        else:
            runs.append((slot, slot + 1))
    return runs


def _price(problem: Problem, schedule: Schedule) -> Iterator[str]:
    total = 0
    for job, part in zip(problem.jobs, schedule.placed, strict=True):
        total += (part.start - job.release) * job.start_price + job.modes[part.mode].price
        total += (len(part.pieces) - 1) * job.split_price
        if job.due is not None and part.end > job.due:
            total += (part.end - job.due) * job.late_price
        total += next((cost for slot, cost in reversed(job.start_costs) if slot <= part.start), 0)
    for evenness in problem.evenness:
        days = []
        for opens, closes in evenness.days:
            day = 0
            for job, part in zip(problem.jobs, schedule.placed, strict=True):
                for demand in job.modes[part.mode].demands:
                    if opens <= part.start < closes and demand.resource == evenness.resource:
                        worked = sum(end - begin for begin, end in part.pieces)
                        day += demand.amount * (worked if demand.held == "work" else part.end - part.start)
            days.append(day)
        total += evenness.price * max(days, default=0)
    total += problem.makespan_price * max((part.end for part in schedule.placed), default=0)
    if total != schedule.objective:
        yield f"the price is {total}, {schedule.objective} is given"
    if schedule.terms and sum(schedule.terms.values()) != total:
        yield f"the price is {total}, its terms add up to {sum(schedule.terms.values())}"
    if schedule.bound > schedule.objective:
        yield f"the bound {schedule.bound} is above the price {schedule.objective}"
