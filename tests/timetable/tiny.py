"""The best schedule of a tiny problem by trying everything; written apart from the planner and its checker."""

from __future__ import annotations

from itertools import product

from scheduler.timetable.core import Job, Mode, Problem


def best_by_trying(problem: Problem) -> int | None:
    """Lowest price of all schedules that keep every rule; None where none does."""
    best = None
    for places in product(*(list(all_places(job, problem.horizon)) for job in problem.jobs)):
        if sound(problem, places):
            price = price_of(problem, places)
            best = price if best is None else min(best, price)
    return best


def all_places(job: Job, horizon: int):
    """Each mode and each set of slots worked in, as (mode, slots, breaks)."""
    last = min(horizon, horizon if job.latest_end is None else job.latest_end)
    for mode in job.modes:
        for start in range(job.release, last + 1):
            for slots, breaks in worked(mode, start):
                end = slots[-1] + 1 if slots else start
                if end <= last:
                    yield mode, start, end, slots, breaks


def worked(mode: Mode, start: int):
    """The slots that are worked in from a start: at a stretch, and in pieces where that is allowed."""
    straight = list(range(start, start + mode.duration))
    windows = mode.windows
    if not windows:
        yield straight, 0
        return
    if any(begin <= start and start + mode.duration <= end for begin, end in windows):
        yield straight, 0
        return
    longest = max(end - begin for begin, end in windows)
    if mode.split == "never" or (mode.split == "too_long" and mode.duration <= longest):
        return
    left, slots, pieces = mode.duration, [], []
    for begin, end in windows:
        if end <= start or end - begin < mode.least_piece:
            continue
        first = max(start, begin)
        if not slots and first != start:
            return
        piece = list(range(first, min(end, first + left)))
        slots, left = slots + piece, left - len(piece)
        pieces.append(len(piece))
        if not left:
            break
    if not left and slots and min(pieces) >= mode.least_piece:
        yield slots, len(pieces) - 1


def sound(problem: Problem, places) -> bool:
    """Whether lags and capacities hold."""
    at = {job.name: place for job, place in zip(problem.jobs, places, strict=True)}
    for lag in problem.lags:
        first, second = lag.kind.split("-")
        between = at[lag.after][1 if second == "start" else 2] - at[lag.before][1 if first == "start" else 2]
        if lag.least is not None and between < lag.least:
            return False
        if lag.most is not None and between > lag.most:
            return False
    if any(at[hold.first][1] > at[hold.last][2] for hold in problem.holds):
        return False
    for resource in problem.resources:
        for slot in range(problem.horizon):
            there = next((s.capacity for s in resource.calendar if s.begin <= slot < s.end), resource.capacity)
            for mode, start, end, slots, _ in places:
                for demand in mode.demands:
                    if demand.resource == resource.name:
                        holds = slot in slots if demand.held == "work" else start <= slot < end
                        there -= demand.amount * holds
            for hold in problem.holds:
                if hold.resource == resource.name:
                    there -= hold.amount * (at[hold.first][1] <= slot < at[hold.last][2])
            if there < 0:
                return False
    return True


def price_of(problem: Problem, places) -> int:
    """Price of all places."""
    total = problem.makespan_price * max(end for _, _, end, _, _ in places)
    for job, (mode, start, end, _, breaks) in zip(problem.jobs, places, strict=True):
        total += mode.price + job.start_price * (start - job.release) + job.split_price * breaks
        total += job.late_price * max(0, end - job.due) if job.due is not None else 0
        costs = [cost for slot, cost in job.start_costs if slot <= start]
        total += costs[-1] if costs else 0
    for even in problem.evenness:
        total += even.price * max(
            sum(
                demand.amount * (mode.duration if demand.held == "work" else end - start)
                for mode, start, end, _, _ in places
                for demand in mode.demands
                if demand.resource == even.resource and first <= start < last
            )
            for first, last in even.days
        )
    return total
