"""The jobs as solver variables: a start, an end, and one literal for each choice of a job that has several."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

from ortools.sat.python import cp_model

from scheduler.timetable.core.choices import Choice, choices
from scheduler.timetable.core.job import Job, Window
from scheduler.timetable.core.lag import Lag
from scheduler.timetable.core.problem import Problem
from scheduler.timetable.core.schedule import Placed

Expression = Any
"""A linear expression of the solver, whose types are not published."""


def domain_of(ranges: tuple[Window, ...]) -> Any:
    """The solver's domain of ranges with their last values included."""
    return cp_model.Domain.from_intervals([list(part) for part in ranges])


@dataclass
class JobVariables:
    """A job's start and end, and which of its choices is taken (``None``: there is only one)."""

    job: Job
    choices: tuple[Choice, ...]
    start: Any
    end: Expression
    taken: tuple[Any, ...]

    def literals(self, wanted: list[bool]) -> Expression:
        """Number of taken choices among the wanted, 0 or 1, as an expression."""
        if len(self.choices) == 1:
            return int(wanted[0])
        return sum(literal for literal, want in zip(self.taken, wanted, strict=True) if want)

    def total(self, amounts: list[int]) -> Expression:
        """The amount that goes with the taken choice, as an expression."""
        if len(set(amounts)) == 1:
            return amounts[0]
        return sum(amount * literal for amount, literal in zip(amounts, self.taken, strict=True))


@dataclass
class Model:
    """A problem in solver variables.

    Attributes
    ----------
    relaxed : bool
        Whether soft rules may be broken.
    slack : list
        Price of broken soft rules, as expressions.
    """

    problem: Problem
    relaxed: bool
    cp: Any = field(default_factory=cp_model.CpModel)
    jobs: dict[str, JobVariables] = field(default_factory=dict)
    slack: list[Expression] = field(default_factory=list)
    impossible: bool = False

    def __post_init__(self) -> None:
        for job in self.problem.jobs:
            self._add_job(job)
        if not self.impossible:
            for lag in self.problem.lags:
                self._add_lag(lag)
            self._order_twins()

    @property
    def watched(self) -> list[Any]:
        """The variables that make a schedule."""
        found = []
        for variables in self.jobs.values():
            found += [variables.start, *(literal for literal in variables.taken if literal is not None)]
        return found

    def integer(self, low: int, high: int, name: str) -> Any:
        """A new whole variable."""
        return self.cp.new_int_var(low, high, name)

    def _add_job(self, job: Job) -> None:
        found = choices(job, self.problem.horizon, relaxed=self.relaxed)
        if not found:
            self.impossible = True
            return
        everywhere = tuple(part for choice in found for part in choice.starts)
        start = self.cp.new_int_var_from_domain(domain_of(everywhere), f"start {job.name}")
        taken: tuple[Any, ...] = (None,)
        if len(found) > 1:
            taken = tuple(self.cp.new_bool_var(f"choice {job.name} {number}") for number in range(len(found)))
            self.cp.add_exactly_one(taken)
            for choice, literal in zip(found, taken, strict=True):
                if choice.starts != everywhere:
                    self.cp.add_linear_expression_in_domain(start, domain_of(choice.starts)).only_enforce_if(literal)
        variables = JobVariables(job, found, start, start + found[0].elapsed, taken)
        if len({choice.elapsed for choice in found}) > 1:
            earliest = min(low + choice.elapsed for choice in found for low, _ in choice.starts)
            latest = max(high + choice.elapsed for choice in found for _, high in choice.starts)
            variables.end = self.integer(earliest, latest, f"end {job.name}")
            self.cp.add(variables.end == start + variables.total([choice.elapsed for choice in found]))
        self.jobs[job.name] = variables
        if self.relaxed:
            self._add_overtime(variables)

    def _add_overtime(self, variables: JobVariables) -> None:
        for choice, literal in zip(variables.choices, variables.taken, strict=True):
            if choice.over_after is None:
                continue
            mode = variables.job.modes[choice.mode]
            over = self.integer(0, mode.overtime, f"overtime {variables.job.name}")
            row = self.cp.add(over >= variables.end - choice.over_after + choice.over)
            least = self.cp.add(over >= choice.over)
            if literal is not None:
                row.only_enforce_if(literal)
                least.only_enforce_if(literal)
            self.slack.append(mode.overtime_price * over)

    def _add_lag(self, lag: Lag) -> None:
        before, after = self.jobs[lag.before], self.jobs[lag.after]
        first, second = lag.kind.split("-")
        origin = before.start if first == "start" else before.end
        target = after.start if second == "start" else after.end
        if lag.least is not None:
            self.cp.add(target - origin >= lag.least)
        if lag.most is None:
            return
        if self.relaxed and lag.most_price:
            over = self.integer(0, self.problem.horizon, f"over lag {lag.name}")
            self.cp.add(target - origin <= lag.most + over)
            self.slack.append(lag.most_price * over)
        else:
            self.cp.add(target - origin <= lag.most)

    def _order_twins(self) -> None:
        """Jobs that differ in name only start in the order in which they stand."""
        links: dict[str, list[tuple[str, ...]]] = {job.name: [] for job in self.problem.jobs}
        for lag in self.problem.lags:
            rest = (lag.kind, str(lag.least), str(lag.most), str(lag.most_price))
            links[lag.before].append(("before", lag.after, *rest))
            links[lag.after].append(("after", lag.before, *rest))
        last: dict[tuple[object, ...], Any] = {}
        for job in self.problem.jobs:
            alike = (
                job.modes, job.release, job.latest_end, job.due, job.late_price, job.start_price, job.start_costs,
                job.split_price, tuple(sorted(links[job.name])),
            )  # fmt: skip
            start = self.jobs[job.name].start
            if alike in last:
                self.cp.add(last[alike] <= start)
            last[alike] = start

    def placed(self, values: dict[int, int]) -> tuple[Placed, ...]:
        """The jobs in their places, from the values of the watched variables by index."""
        found = []
        for name, variables in self.jobs.items():
            start = values[variables.start.index]
            number = next(
                (k for k, literal in enumerate(variables.taken) if literal is None or values[literal.index]), 0
            )
            choice = variables.choices[number]
            found.append(Placed(name, start, start + choice.elapsed, choice.mode, choice.pieces(start)))
        return tuple(found)
