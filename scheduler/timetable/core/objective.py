"""What a schedule costs, as a solver expression: early starts, tariff, lateness, breaks, modes, even days, the end."""

from __future__ import annotations

from typing import Any

from scheduler.timetable.core.job import Window
from scheduler.timetable.core.model import Expression, JobVariables, Model, domain_of
from scheduler.timetable.core.problem import Evenness


def objective(model: Model) -> Expression:
    """Price of the schedule; adds the variables that it needs."""
    terms: list[Expression] = []
    for variables in model.jobs.values():
        terms += _job_terms(model, variables)
    terms += [_busiest(model, part) for part in model.problem.evenness]
    if model.problem.makespan_price and model.jobs:
        last = model.integer(0, model.problem.horizon, "makespan")
        for variables in model.jobs.values():
            model.cp.add(last >= variables.end)
        terms.append(model.problem.makespan_price * last)
    return sum(terms)


def _job_terms(model: Model, variables: JobVariables) -> list[Expression]:
    job = variables.job
    terms: list[Expression] = [
        variables.total([job.modes[choice.mode].price for choice in variables.choices]),
        job.split_price * variables.total([len(choice.breaks) for choice in variables.choices]),
    ]
    if job.start_price:
        terms.append(job.start_price * (variables.start - job.release))
    if job.due is not None and job.late_price:
        late = model.integer(0, max(0, model.problem.horizon - job.due), f"late {job.name}")
        model.cp.add(late >= variables.end - job.due)
        terms.append(job.late_price * late)
    if job.start_costs:
        terms.append(_by_start(model, variables))
    return terms


def _by_start(model: Model, variables: JobVariables) -> Expression:
    """Price by table: one literal for each price, with all the starts that have it."""
    job = variables.job
    slots = [0, *(slot for slot, _ in job.start_costs), model.problem.horizon + 1]
    prices = [0, *(cost for _, cost in job.start_costs)]
    starts: dict[int, list[Window]] = {}
    for price, begin, following in zip(prices, slots, slots[1:], strict=False):
        last = min(following - 1, model.problem.horizon)
        if max(0, begin) <= last:
            starts.setdefault(price, []).append((max(0, begin), last))
    if len(starts) == 1:
        return next(iter(starts))
    literals = [model.cp.new_bool_var(f"price {job.name} {price}") for price in starts]
    model.cp.add_exactly_one(literals)
    for literal, ranges in zip(literals, starts.values(), strict=True):
        model.cp.add_linear_expression_in_domain(variables.start, domain_of(tuple(ranges))).only_enforce_if(literal)
    return sum(price * literal for price, literal in zip(starts, literals, strict=True))


def _busiest(model: Model, part: Evenness) -> Expression:
    """Price of the busiest day: work of each job counts for the day in which it starts."""
    loads: list[list[Expression]] = [[] for _ in part.days]
    for variables in model.jobs.values():
        work = []
        for choice in variables.choices:
            mode = variables.job.modes[choice.mode]
            held = [demand for demand in mode.demands if demand.resource == part.resource]
            work.append(sum(d.amount * (choice.elapsed if d.held == "span" else mode.duration) for d in held))
        if any(work):
            for load, day in zip(loads, _days(model, variables, part.days), strict=True):
                load.append(_product(model, variables, work, day))
    most = model.integer(0, _largest(model, part.resource), f"busiest {part.resource}")
    for load in loads:
        model.cp.add(most >= sum(load))
    return part.price * most


def _days(model: Model, variables: JobVariables, days: tuple[Window, ...]) -> list[Any]:
    """A literal for each day: whether the job starts in it."""
    literals = [model.cp.new_bool_var(f"day {variables.job.name}") for _ in days]
    outside = model.cp.new_bool_var(f"no day {variables.job.name}")
    model.cp.add_exactly_one([*literals, outside])
    for literal, (begin, end) in zip(literals, days, strict=True):
        model.cp.add_linear_expression_in_domain(variables.start, domain_of(((begin, end - 1),))).only_enforce_if(
            literal
        )
    inside = domain_of(tuple((begin, end - 1) for begin, end in days))
    model.cp.add_linear_expression_in_domain(variables.start, inside.complement()).only_enforce_if(outside)
    return literals


def _product(model: Model, variables: JobVariables, work: list[int], day: Any) -> Expression:
    """Work of the taken choice if the job starts on the day, else 0."""
    if len(set(work)) == 1:
        return work[0] * day
    load = model.integer(0, max(work), f"load {variables.job.name}")
    model.cp.add(load >= variables.total(work)).only_enforce_if(day)
    return load


def _largest(model: Model, resource: str) -> int:
    """No day can have more work of a resource than all jobs over the whole time."""
    return sum(
        max(
            (d.amount for mode in variables.job.modes for d in mode.demands if d.resource == resource),
            default=0,
        )
        * max(choice.elapsed for choice in variables.choices)
        for variables in model.jobs.values()
    )
