"""Resources as solver rows: no overlap for one unit, a sum for more, fixed absences for what is not there."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from scheduler.timetable.core.job import Demand, Window
from scheduler.timetable.core.model import JobVariables, Model
from scheduler.timetable.core.resource import Resource

MOST_CELLS = 400
"""A relaxed resource lends units by cells of time; no more than about so many."""


@dataclass(frozen=True)
class _Use:
    """An interval on a resource and how much it takes."""

    interval: Any
    amount: Any


def add_resources(model: Model) -> None:
    """Add every resource of the problem with the jobs that use it."""
    uses: dict[str, list[_Use]] = {resource.name: [] for resource in model.problem.resources}
    for variables in model.jobs.values():
        for number, mode in enumerate(variables.job.modes):
            for demand in mode.demands:
                if mode.duration:
                    uses[demand.resource] += _uses(model, variables, number, demand)
    for hold in model.problem.holds:
        first, last = model.jobs[hold.first], model.jobs[hold.last]
        size = model.integer(0, model.problem.horizon, f"hold {hold.name}")
        uses[hold.resource].append(_Use(_flexible(model, first.start, size, last.end, None), hold.amount))
    for resource in model.problem.resources:
        if uses[resource.name]:
            _add_resource(model, resource, uses[resource.name])


def _uses(model: Model, variables: JobVariables, mode: int, demand: Demand) -> list[_Use]:
    """Intervals of one demand: over the span, or one for each piece of each choice."""
    own = [number for number, choice in enumerate(variables.choices) if choice.mode == mode]
    if demand.held == "span" and len(own) > 1:
        return [_Use(_span(model, variables, own), demand.amount)]
    found = []
    for number in own:
        choice, literal = variables.choices[number], variables.taken[number]
        if demand.held == "span" or not choice.breaks:
            interval = _fixed(model, variables.start, choice.elapsed, literal)
            found.append(_Use(interval, demand.amount))
            continue
        edges = [edge for part in choice.breaks for edge in part]
        first = model.integer(1, choice.elapsed, "piece")
        last = model.integer(1, choice.elapsed, "piece")
        found.append(_Use(_flexible(model, variables.start, first, edges[0], literal), demand.amount))
        for begin, end in zip(edges[1:-1:2], edges[2:-1:2], strict=True):
            found.append(_Use(_fixed(model, begin, end - begin, literal), demand.amount))
        found.append(_Use(_flexible(model, edges[-1], last, variables.end, literal), demand.amount))
    return found


def _span(model: Model, variables: JobVariables, own: list[int]) -> Any:
    lengths = [variables.choices[number].elapsed for number in own]
    literals = [variables.taken[number] for number in own]
    present = None
    if len(own) < len(variables.choices):
        present = model.cp.new_bool_var(f"mode {variables.job.name}")
        model.cp.add(sum(literals) == present)
    if len(set(lengths)) == 1:
        return _fixed(model, variables.start, lengths[0], present)
    size = model.integer(min(lengths), max(lengths), f"span {variables.job.name}")
    return _flexible(model, variables.start, size, variables.end, present)


def _fixed(model: Model, start: Any, size: int, literal: Any) -> Any:
    if literal is None:
        return model.cp.new_fixed_size_interval_var(start, size, "")
    return model.cp.new_optional_fixed_size_interval_var(start, size, literal, "")


def _flexible(model: Model, start: Any, size: Any, end: Any, literal: Any) -> Any:
    if literal is None:
        return model.cp.new_interval_var(start, size, end, "")
    return model.cp.new_optional_interval_var(start, size, end, literal, "")


def _add_resource(model: Model, resource: Resource, uses: list[_Use]) -> None:
    lent = resource.extra if model.relaxed else 0
    head = resource.capacity + lent
    absent = []
    for part in resource.stretches(model.problem.horizon):
        missing = head - part.capacity
        cells = _cells(model, (part.begin, part.end)) if lent else [(part.begin, part.end)]
        for begin, end in cells if missing else []:
            extra: Any = 0
            if lent:
                extra = model.integer(0, lent, f"extra {resource.name}")
                model.slack.append(resource.extra_price * (end - begin) * extra)
            absent.append(_Use(_fixed(model, begin, end - begin, None), missing - extra))
    everything = absent + uses
    if head == 1 and not lent and all(use.amount == 1 for use in uses):
        model.cp.add_no_overlap([use.interval for use in everything])
    else:
        model.cp.add_cumulative([use.interval for use in everything], [use.amount for use in everything], head)


def _cells(model: Model, part: Window) -> list[Window]:
    length = -(-model.problem.horizon // MOST_CELLS)
    return [(begin, min(begin + length, part[1])) for begin in range(part[0], part[1], length)]
