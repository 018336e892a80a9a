"""What a schedule costs, from its places alone."""

from __future__ import annotations

from scheduler.timetable.core.job import Job
from scheduler.timetable.core.problem import Evenness, Problem
from scheduler.timetable.core.schedule import Placed


def terms_of(problem: Problem, placed: tuple[Placed, ...]) -> dict[str, int]:
    """The objective by what it is made of."""
    jobs = {job.name: job for job in problem.jobs}
    terms = dict.fromkeys(("early", "start_costs", "late", "splits", "modes", "evenness", "makespan"), 0)
    for part in placed:
        job = jobs[part.job]
        terms["early"] += job.start_price * (part.start - job.release)
        terms["start_costs"] += job.cost_of_start(part.start)
        terms["splits"] += job.split_price * (len(part.pieces) - 1)
        terms["modes"] += job.modes[part.mode].price
        if job.due is not None:
            terms["late"] += job.late_price * max(0, part.end - job.due)
    for evenness in problem.evenness:
        terms["evenness"] += evenness.price * busiest(evenness, jobs, placed)
    terms["makespan"] = problem.makespan_price * max((part.end for part in placed), default=0)
    return terms


def busiest(evenness: Evenness, jobs: dict[str, Job], placed: tuple[Placed, ...]) -> int:
    """Work on the busiest day [units x slots]."""
    loads = [0] * len(evenness.days)
    for part in placed:
        mode = jobs[part.job].modes[part.mode]
        for demand in mode.demands:
            if demand.resource == evenness.resource:
                length = part.end - part.start if demand.held == "span" else mode.duration
                for number, (begin, end) in enumerate(evenness.days):
                    if begin <= part.start < end:
                        loads[number] += demand.amount * length
    return max(loads, default=0)


def floor_of(problem: Problem) -> int:
    """A price that no schedule is below, without any search: the cheapest mode and start of each job."""
    return sum(
        min(mode.price for mode in job.modes) + min([0, *(cost for _, cost in job.start_costs)]) for job in problem.jobs
    )
