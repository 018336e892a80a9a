"""From a farm folder's content to a plan: relax, dive to whole runs, make bags whole, improve until the gap is met."""

from __future__ import annotations

import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from importlib.metadata import version

import numpy as np

from models.calendar import Week
from models.farm import Farm, Order, StockLot
from models.plan import Plan, SolveReport
from scheduler.errors import NoPlanError
from scheduler.planning.account import (
    account_of,
    deliveries_of,
    hours_of,
    picked_openings,
    shortfalls_of,
    surplus_of,
)
from scheduler.planning.bold import bold_plan
from scheduler.planning.build import build_model
from scheduler.planning.dive import Dead, Style, dive
from scheduler.planning.engine import SEED, Answer, FloatArray, Relaxation, branch
from scheduler.planning.lots import Made, make_lots
from scheduler.planning.problem import Problem, state_problem
from scheduler.planning.rooms import House
from scheduler.planning.supply import Supply, relax_within_supply
from scheduler.planning.whole import bounds_of, run_candidates, whole_bags

Progress = Callable[[str, float | None, float | None, float | None], None]
RUN_WINDOWS = (10, 3, 5, 7, 14)
RESERVES = (1.0, 2.0, 4.0)
EXACT_COLUMNS = 900
EXACT_NODES = 20_000


@dataclass(frozen=True, slots=True)
class SolveLimits:
    """When to stop: relative gap [-] and wall time [s]."""

    gap: float = 0.005
    seconds: float = 60.0


@dataclass
class _Search:
    """The best plan so far and what is proven about it."""

    bound: float
    plan: Plan | None = None
    stop: str = "gap reached"

    @property
    def gap(self) -> float:
        return float("inf") if self.plan is None else gap_of(self.bound, self.plan.money.total, self.plan.money.sales)


def gap_of(bound: float, objective: float, sales: float) -> float:
    """Relative gap (bound - objective) / max(abs(bound), sales), 0 where nothing is at stake [-]."""
    scale = max(abs(bound), sales)
    return max(0.0, bound - objective) / scale if scale > 0 else 0.0


class Planner:
    """One planning problem on its way to a plan."""

    def __init__(self, problem: Problem, limits: SolveLimits, progress: Progress | None) -> None:
        self.problem = problem
        self.limits = limits
        self.started = time.perf_counter()
        self._progress = progress
        self.relaxation_seconds = 0.0
        self._tell("building the model", None)
        self.flow = build_model(problem)
        self.supply = Supply(self.flow)

    def run(self) -> Plan:
        """Search until the gap is met or the time is over; the best plan found."""
        search = _Search(bound=float("inf"))
        try:
            self._search(search)
        except KeyboardInterrupt:
            search.stop = "interrupted"
        if search.plan is None:
            raise NoPlanError(f"no plan was found before the search ended ({search.stop}); allow more --seconds")
        return self._signed(search)

    def _search(self, search: _Search) -> None:
        started = time.perf_counter()
        self._tell("solving the relaxation", search)
        relaxation, values, search.bound = relax_within_supply(self.flow, self.supply)
        self.relaxation_seconds = (time.perf_counter() - started) / max(1, relaxation.solves)
        if relaxation.large:
            self._round_boldly(search, relaxation, values)
            return
        base = Answer(values, search.bound, search.bound, "optimal")
        for number, window in enumerate(RUN_WINDOWS):
            if number:
                relaxation = self._fresh(relaxation)
            self._dive(search, relaxation, base, window)
            if search.gap <= self.limits.gap:
                return
            if self._time_left() <= 0 and search.plan is not None:
                search.stop = "time limit"
                return
            if number == 0 and sum(self.flow.matrix.whole) <= EXACT_COLUMNS:
                self._exact(search)
                if search.gap <= self.limits.gap:
                    return
        search.stop = "every search style tried"

    def _time_left(self) -> float:
        return self.limits.seconds - (time.perf_counter() - self.started)

    def _fresh(self, relaxation: Relaxation) -> Relaxation:
        """The relaxation with all bounds as at the start."""
        matrix = self.flow.matrix
        for column in range(matrix.columns):
            relaxation.bound(column, matrix.column_low[column], matrix.column_high[column])
        for row in range(matrix.rows):
            relaxation.bound_row(row, matrix.row_low[row], matrix.row_high[row])
        return relaxation

    def _dive(self, search: _Search, relaxation: Relaxation, base: Answer, window: int) -> None:
        low, high = bounds_of(self.flow.matrix)
        try:
            self._tell("choosing runs", search)
            style = Style(window_days=window, sparse=True)
            answer = dive(relaxation, base, run_candidates(self.flow), style, low, high, lambda _: None)
            if answer.values is None or self.supply.broken(answer.values):
                return
            self._tell("making bags whole", search)
            answer, made = whole_bags(self.flow, relaxation, answer, low, high, lambda _: None)
        except Dead:
            return
        if answer.values is not None:
            self._offer(search, answer.values, made)

    def _round_boldly(self, search: _Search, relaxation: Relaxation, values: FloatArray) -> None:
        """Large farms: one rounding a stage."""
        for number, reserve in enumerate(RESERVES):
            if number:
                relaxation = self._fresh(relaxation)
            low, high = bounds_of(self.flow.matrix)
            self._tell("rounding runs and bags", search)
            try:
                answer, made = bold_plan(self.flow, relaxation, values, low, high, reserve)
            except Dead:
                search.stop = "rounding found no plan"
                continue
            if answer.values is not None:
                self._offer(search, answer.values, made)
            search.stop = "gap reached" if search.gap <= self.limits.gap else "one rounding done"
            return

    def _exact(self, search: _Search) -> None:
        """On small farms, search all whole numbers at once; it also lowers the bound."""
        matrix = self.flow.matrix
        low, high = bounds_of(matrix)
        answer = branch(
            matrix, low, high, np.array(matrix.whole), gap=min(self.limits.gap, 1e-4), seconds=self._time_left(),
            nodes=EXACT_NODES, listener=lambda _, bound: self._tell("searching whole numbers", search, bound),
        )  # fmt: skip
        search.bound = min(search.bound, answer.bound)
        if answer.values is not None and not self.supply.broken(answer.values):
            self._offer(search, answer.values, make_lots(self.flow, answer.values))

    def _offer(self, search: _Search, values: FloatArray, made: Made) -> None:
        plan = self._plan(values, made)
        if search.plan is None or plan.money.total > search.plan.money.total + 1e-9:
            search.plan = plan
        self._tell("plan found", search)

    def _plan(self, values: FloatArray, made: Made) -> Plan:
        flow, problem = self.flow, self.problem
        housed = House(flow, values, made).run()
        lot_strain = {lot.code: lot.strain for lot in made.lots}
        openings = picked_openings(flow, values, housed, lot_strain)
        deliveries, surplus = deliveries_of(flow, values), surplus_of(flow, values)
        labour, shortfalls = hours_of(flow, values), shortfalls_of(flow, values, housed)
        money = account_of(
            problem.farm, flow, made.runs, housed.inoculations, openings, deliveries, surplus, labour, shortfalls,
            lot_strain,
        )  # fmt: skip
        return Plan(
            first_week=problem.first_week,
            weeks=problem.weeks,
            look_ahead_weeks=problem.look_ahead_weeks,
            runs=tuple(made.runs),
            lots=tuple(made.lots),
            inoculations=tuple(housed.inoculations),
            holdings=tuple(housed.holdings),
            openings=openings,
            discards=tuple(housed.discards),
            deliveries=deliveries,
            surplus=surplus,
            labour=labour,
            shortfalls=shortfalls,
            money=money,
            report=self._report(money.total, 0.0, money.sales, ""),
            assumptions=assumptions_of(problem),
        )

    def _signed(self, search: _Search) -> Plan:
        assert search.plan is not None  # noqa: S101  (the caller has checked)
        money = search.plan.money
        bound = max(search.bound, money.total)
        return replace(search.plan, report=self._report(money.total, bound, money.sales, search.stop))

    def _report(self, objective: float, bound: float, sales: float, stop: str) -> SolveReport:
        gap = gap_of(bound, objective, sales)
        matrix = self.flow.matrix
        return SolveReport(
            objective=objective,
            bound=bound,
            gap=gap,
            status="optimal" if gap <= 1e-6 else "feasible",
            stop=stop,
            seconds=time.perf_counter() - self.started,
            relaxation_seconds=self.relaxation_seconds,
            seed=SEED,
            versions={name: version(name) for name in ("bagweek", "ortools", "numpy")},
            limits={"gap": self.limits.gap, "seconds": self.limits.seconds},
            size={"rows": matrix.rows, "columns": matrix.columns, "runs": len(self.flow.columns.run)},
        )

    def _tell(self, stage: str, search: _Search | None, bound: float | None = None) -> None:
        if self._progress is None:
            return
        if search is None or not np.isfinite(search.bound):
            self._progress(stage, None, None, None)
            return
        best = None if search.plan is None else search.plan.money.total
        proven = search.bound if bound is None or not np.isfinite(bound) else min(bound, search.bound)
        self._progress(stage, best, proven, None if search.plan is None else search.gap)


def assumptions_of(problem: Problem) -> tuple[str, ...]:
    """What the plan takes for granted where the farm file is silent."""
    notes = [
        "The order of work within a day is not fixed here: hours are balanced by day and skill.",
        "Growth, yields and losses are expected values.",
    ]
    if not problem.farm.rooms_of("cooling"):
        notes.append("No cooling room is named: bags cool at the month's ambient temperature, places not limited.")
    if problem.farm.site.supply_kw is None:
        notes.append("No supply_kw is given: electrical power is not limited.")
    return tuple(notes)


def plan_weeks(
    farm: Farm,
    orders: Sequence[Order],
    stock: Sequence[StockLot],
    first_week: Week,
    weeks: int,
    *,
    limits: SolveLimits | None = None,
    progress: Progress | None = None,
) -> Plan:
    """Plan the weekly bag production of a farm.

    Parameters
    ----------
    farm, orders, stock
        The content of a farm folder.
    first_week : Week
        The plan starts on its Monday.
    weeks : int
        Weeks asked for; look-ahead weeks are added behind them.
    limits : SolveLimits
        When to stop.
    progress : callable, optional
        Called with the stage and, where known, best money, bound and gap.

    Returns
    -------
    Plan
        The best plan found, with whole bags, its bound and why the search stopped.

    Raises
    ------
    NoPlanError
        The search was interrupted, or ran out of time, before a first plan.
    """
    limits = limits or SolveLimits()
    problem = state_problem(farm, orders, stock, first_week, weeks)
    return Planner(problem, limits, progress).run()
